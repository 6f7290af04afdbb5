import type { Submission, SubmittedLine, SubmittedValue } from '../marking/types.ts';
import { isotopologue as isotopologueNamed, isotopologuesOf } from '../molecule/index.ts';
import { readQuantity } from '../units/index.ts';
import { decimalSignOf } from './decimal-sign.ts';
import { quantityKeys, type QuantityKey } from '../units/types.ts';
import { isSummary, repeatsHeader } from './odd-rows.ts';
import type { Cell, ColumnRole, RawTable, ReadSubmissionsResult, TableUnderstanding } from './types.ts';
import { understandHeader } from './understand-header.ts';

export interface ReadSubmissionsOptions {
  /** Unit that the scheme asks for, where neither column nor cell has one. */
  readonly schemeUnitOf?: (key: QuantityKey) => string | null;
  /** Lines that the students handed in, by student key. */
  readonly linesByStudent?: ReadonlyMap<string, readonly SubmittedLine[]>;
}

interface Row {
  /** 1-based, as in the file. */
  readonly number: number;
  readonly cells: readonly Cell[];
  /** Decimal sign of this writer, where the row or the whole table shows it. */
  readonly decimalSign: '.' | ',' | null;
}

/**
 * Submissions of a table, wide (a row each) or long (a row per value). Rows that cannot be used are told, with their number.
 *
 * A row without a key goes by its name, else by its group; a second row of the same student, isotopologue and no attempt column is the next attempt.
 */
export function readSubmissions(
  table: RawTable,
  understanding: TableUnderstanding,
  options: ReadSubmissionsOptions = {},
): ReadSubmissionsResult {
  const commas = table.rows.slice(understanding.headerRow + 1).map(decimalSignOf);
  // One writer's point in a table of commas settles nothing for the others.
  const tableSign = commas.includes(',') && !commas.includes('.') ? ',' : null;
  const rows = table.rows
    .map((cells, i): Row => ({ number: i + 1, cells, decimalSign: decimalSignOf(cells) ?? tableSign }))
    .slice(understanding.headerRow + 1)
    .filter((row) => row.cells.some((c) => c.text !== ''));
  const problems: { row: number; text: string }[] = [];
  const long = understanding.kind === 'submissions-long';
  const drafts: Submission[] = [];
  for (const row of rows) {
    const text = (role: ColumnRole['role']): string => cellOf(row, understanding, role);
    const student = text('student') || namesOf(row, understanding) || text('group');
    if (repeatsHeader(row.cells, understanding)) continue;
    if (isSummary(student)) {
      problems.push({
        row: row.number,
        text: `Row ${row.number} (“${student}”) is a summary, no submission; it is left out.`,
      });
      continue;
    }
    if (student === '') {
      problems.push({
        row: row.number,
        text: `Row ${row.number} has no student key; give it one, or leave the row out.`,
      });
      continue;
    }
    const isotopologue = isotopologueOf(text('isotopologue'), row.number, problems);
    const values = long
      ? longValue(row, understanding, isotopologue, options, problems)
      : wideValues(row, understanding, isotopologue, options);
    const attempt = attemptOf(text('attempt'));
    const same = long
      ? drafts.findIndex(
          (d) => d.student === student && d.isotopologue === isotopologue && d.attempt === attempt,
        )
      : -1;
    if (
      same >= 0 &&
      values.some(
        (v) =>
          v.value !== null &&
          drafts[same]!.values.some((w) => w.quantity === v.quantity && w.isotopologue === v.isotopologue),
      )
    )
      problems.push({
        row: row.number,
        text: `Row ${row.number} gives ${values[0]!.quantity} of ${student} a second time without an attempt; the first stays.`,
      });
    else if (same >= 0) drafts[same] = { ...drafts[same]!, values: [...drafts[same]!.values, ...values] };
    else drafts.push(draft(student, isotopologue, values, row, understanding, options));
  }
  return { submissions: numbered(drafts, understanding), problems };
}

function draft(
  student: string,
  isotopologue: string | null,
  values: readonly SubmittedValue[],
  row: Row,
  understanding: TableUnderstanding,
  options: ReadSubmissionsOptions,
): Submission {
  const text = (role: ColumnRole['role']): string => cellOf(row, understanding, role);
  const lineCount = Number.parseInt(text('line-count'), 10);
  return {
    student,
    name: namesOf(row, understanding) || null,
    group: text('group') || null,
    attempt: attemptOf(text('attempt')),
    received: text('received') || null,
    isotopologue,
    spectra: understanding.columns
      .filter((c) => c.role.role === 'spectrum')
      .flatMap((c) => (row.cells[c.index]?.text ?? '').split(/[;\n|]/))
      .map((s) => s.trim())
      .filter((s) => s !== ''),
    values,
    lines: (options.linesByStudent?.get(student) ?? []).filter(
      (l) => l.isotopologue === null || isotopologue === null || l.isotopologue === isotopologue,
    ),
    lineCount: Number.isFinite(lineCount) && lineCount > 0 ? lineCount : null,
  };
}

/** Attempts that the table does not number follow the order of its rows. */
function numbered(drafts: readonly Submission[], understanding: TableUnderstanding): Submission[] {
  const counts = new Map<string, number>();
  const hasColumn = understanding.columns.some((c) => c.role.role === 'attempt');
  return drafts.map((d) => {
    const key = `${d.student}\u0000${d.isotopologue ?? ''}`;
    const count = (counts.get(key) ?? 0) + 1;
    counts.set(key, count);
    return { ...d, attempt: d.attempt > 0 && hasColumn ? d.attempt : count };
  });
}

const attemptOf = (text: string): number => {
  const attempt = Number.parseInt(text.replace(/^\D+/, ''), 10);
  return Number.isFinite(attempt) && attempt > 0 ? attempt : 0;
};

/** First and family name from one column or two; a family name that comes first goes behind. */
function namesOf(row: Row, understanding: TableUnderstanding): string {
  const columns = understanding.columns.filter((c) => c.role.role === 'name');
  const isFirst = (header: string): boolean => /first|given|vorname|pr[ée]nom/i.test(header);
  return [...columns.filter((c) => isFirst(c.header)), ...columns.filter((c) => !isFirst(c.header))]
    .map((c) => row.cells[c.index]?.text ?? '')
    .filter((t) => t !== '')
    .join(' ');
}

function cellOf(row: Row, understanding: TableUnderstanding, role: ColumnRole['role']): string {
  const column = understanding.columns.find((c) => c.role.role === role);
  return column === undefined ? '' : (row.cells[column.index]?.text ?? '');
}

/** "HCl" means its main isotopologue; several in one cell leave the choice to the columns. */
function isotopologueOf(text: string, row: number, problems: { row: number; text: string }[]): string | null {
  if (text === '' || /[,;+&]|and/.test(text)) return null;
  const header = understandHeader(`Be ${text}`).role;
  const named = header?.role === 'quantity' ? header.isotopologue : null;
  const found = named ?? isotopologueNamed(text)?.name ?? isotopologuesOf(text)[0]?.name ?? null;
  if (found === null)
    problems.push({
      row,
      text: `Row ${row}: “${text}” is no isotopologue that is known here; write it as H35Cl.`,
    });
  return found;
}

function wideValues(
  row: Row,
  understanding: TableUnderstanding,
  isotopologue: string | null,
  options: ReadSubmissionsOptions,
): SubmittedValue[] {
  return understanding.columns.flatMap((column) => {
    if (column.role.role !== 'quantity') return [];
    const { quantity, unit } = column.role;
    const cell = row.cells[column.index] ?? { text: '', storedAsNumber: false };
    const value = valueOf(row, cell, quantity, unit, column.role.isotopologue ?? isotopologue, options);
    return [
      withUncertaintyColumn(value, uncertaintyCell(row, understanding, column.index, value), unit, row),
    ];
  });
}

/** The cell of the uncertainty column that names this quantity, or that stands unnamed to the right of it. */
function uncertaintyCell(
  row: Row,
  understanding: TableUnderstanding,
  index: number,
  value: SubmittedValue,
): Cell | null {
  const columns = understanding.columns.filter((c) => c.role.role === 'uncertainty');
  const role = understanding.columns[index]!.role;
  const own = role.role === 'quantity' ? role.isotopologue : null;
  const named = columns.find((c) => {
    const { beside } = understandHeader(c.header);
    return beside?.quantity === value.quantity && beside.isotopologue === own;
  });
  const next = columns.find((c) => c.index === index + 1 && understandHeader(c.header).beside === null);
  const column = named ?? next;
  return column === undefined ? null : (row.cells[column.index] ?? null);
}

function withUncertaintyColumn(
  value: SubmittedValue,
  cell: Cell | null,
  unit: string | null,
  row: Row,
): SubmittedValue {
  if (cell === null || value.value === null || value.uncertainty !== null) return value;
  const read = readQuantity(cell.text.replace(/^\s*(±|\+\s*\/?\s*-)\s*/, ''), value.quantity, {
    headerUnit: unit ?? value.unit,
    decimalSign: row.decimalSign,
  });
  return read.value === null || read.value <= 0 ? value : { ...value, uncertainty: read.value };
}

function longValue(
  row: Row,
  understanding: TableUnderstanding,
  isotopologue: string | null,
  options: ReadSubmissionsOptions,
  problems: { row: number; text: string }[],
): SubmittedValue[] {
  const word = cellOf(row, understanding, 'quantity-name');
  const reading = quantityKeys.find((k) => k === word) ?? null;
  const header = understandHeader(word).role;
  const key = reading ?? (header?.role === 'quantity' ? header.quantity : null);
  if (key === null) {
    problems.push({
      row: row.number,
      text: `Row ${row.number}: “${word}” is no quantity that is known here.`,
    });
    return [];
  }
  const own = header?.role === 'quantity' ? header.isotopologue : null;
  const column = understanding.columns.find((c) => c.role.role === 'value');
  const cell = (column === undefined ? undefined : row.cells[column.index]) ?? {
    text: '',
    storedAsNumber: false,
  };
  const unit = cellOf(row, understanding, 'unit') || (header?.role === 'quantity' ? header.unit : null);
  const value = valueOf(row, cell, key, unit, own ?? isotopologue, options);
  const beside = understanding.columns.find((c) => c.role.role === 'uncertainty');
  return [
    withUncertaintyColumn(value, beside === undefined ? null : (row.cells[beside.index] ?? null), unit, row),
  ];
}

function valueOf(
  row: Row,
  cell: Cell,
  quantity: QuantityKey,
  headerUnit: string | null,
  isotopologue: string | null,
  options: ReadSubmissionsOptions,
): SubmittedValue {
  const read = readQuantity(cell.text, quantity, {
    headerUnit,
    schemeUnit: options.schemeUnitOf?.(quantity) ?? null,
    storedAsNumber: cell.storedAsNumber,
    decimalSign: row.decimalSign,
  });
  const { text, value, uncertainty, figures, halfLastDigit, unit, standardUnit, unreadableBecause } = read;
  return {
    isotopologue,
    quantity,
    text,
    value,
    uncertainty,
    figures,
    halfLastDigit,
    unit,
    standardUnit,
    unreadableBecause,
  };
}
