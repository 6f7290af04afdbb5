import { quantities, readNumber, unitFactor } from '../units/index.ts';
import type { QuantityKey } from '../units/types.ts';
import type { ColumnRole, ColumnUnderstanding, RawTable, TableKind, TableUnderstanding } from './types.ts';
import { understandHeader } from './understand-header.ts';

export interface UnderstandOptions {
  /** Roles that a person gave to headers before, by header text. */
  readonly remembered?: Readonly<Record<string, ColumnRole>>;
}

/** Rows at the top among which the header is looked for. */
const headerRows = 12;
const shownValues = 4;

/**
 * Understands a table: which row is the header, what every column holds and why, what kind of table it is. What is not certain is
 * marked as ambiguous, with the other readings, for a person to say.
 */
export function understandTable(table: RawTable, options: UnderstandOptions = {}): TableUnderstanding {
  const width = Math.max(0, ...table.rows.map((r) => r.length));
  const header = bestHeader(table);
  const body = table.rows.slice(header + 1).filter((row) => row.some((c) => c.text !== ''));
  const columns = Array.from({ length: width }, (_, index): ColumnUnderstanding => {
    const text = header < 0 ? '' : headerText(table, header, index);
    const cells = body.map((r) => r[index]?.text ?? '');
    return understandColumn(text, index, cells, options.remembered?.[text]);
  });
  const kind = kindOf(columns);
  return {
    kind: kind.kind,
    reason: kind.reason,
    headerRow: header,
    columns: settleKind(columns, kind.kind),
    notes: [],
  };
}

/** A merged cell above a header ("H35Cl" over "B0", "Be") belongs to it. */
function headerText(table: RawTable, header: number, index: number): string {
  const own = table.rows[header]![index]?.text ?? '';
  const above = header > 0 ? table.rows[header - 1]! : [];
  // A title row holds one cell; a row of merged headings several, with blanks between.
  if (above.filter((c) => c.text !== '').length < 2) return own;
  for (let i = index; i >= 0; i--) {
    const text = above[i]?.text ?? '';
    if (text !== '') return understandHeader(own).role?.role === 'quantity' ? `${own} ${text}` : own;
  }
  return own;
}

function bestHeader(table: RawTable): number {
  let best = -1;
  let most = 1;
  table.rows.slice(0, headerRows).forEach((row, i) => {
    const known = row.filter((c) => c.text !== '' && understandHeader(c.text).role !== null).length;
    if (known > most) {
      most = known;
      best = i;
    }
  });
  return best;
}

function understandColumn(
  header: string,
  index: number,
  cells: readonly string[],
  remembered: ColumnRole | undefined,
): ColumnUnderstanding {
  const firstValues = cells.filter((c) => c !== '').slice(0, shownValues);
  const base = { index, header, firstValues };
  if (remembered !== undefined) {
    return { ...base, role: remembered, reason: 'as set by hand before', ambiguous: false, alternatives: [] };
  }
  const reading = understandHeader(header);
  if (reading.role === null) {
    return { ...base, role: { role: 'ignore' }, reason: reading.reason, ambiguous: false, alternatives: [] };
  }
  if (reading.role.role !== 'quantity')
    return { ...base, role: reading.role, reason: reading.reason, ambiguous: false, alternatives: [] };
  return quantityColumn(base, reading.role, reading.reason, reading.alternatives, cells);
}

/** A column of values: the sizes settle between readings, and stand in for a unit that is not written. */
function quantityColumn(
  base: { index: number; header: string; firstValues: readonly string[] },
  role: Extract<ColumnRole, { role: 'quantity' }>,
  reason: string,
  alternatives: readonly ColumnRole[],
  cells: readonly string[],
): ColumnUnderstanding {
  const readings = [role, ...alternatives.filter((a) => a.role === 'quantity')];
  const fitting = readings.filter((r) => shareFitting(cells, r.quantity, r.unit) > 0.5);
  // Two readings of the same size (Be or B_0) cannot be told apart by size: that is asked.
  const chosen = fitting[0] ?? role;
  const ambiguous = fitting.length > 1;
  if (chosen.unit !== null || cellsCarryUnits(cells)) {
    return { ...base, role: chosen, reason, ambiguous, alternatives: readings.filter((r) => r !== chosen) };
  }
  const units = unitsBySize(cells, chosen.quantity);
  if (units.length === 1) {
    const withUnit: ColumnRole = { ...chosen, unit: units[0]! };
    return {
      ...base,
      role: withUnit,
      reason: `${reason}; no unit is written, the sizes fit ${units[0]!} only`,
      ambiguous,
      alternatives: readings.filter((r) => r !== chosen),
    };
  }
  const standard = quantities[chosen.quantity].standardUnit;
  return {
    ...base,
    role: { ...chosen, unit: null },
    reason: `${reason}; no unit is written and the sizes do not settle it`,
    ambiguous: cells.some((c) => c !== ''),
    alternatives: [...readings.filter((r) => r !== chosen), { ...chosen, unit: standard }],
  };
}

const cellsCarryUnits = (cells: readonly string[]): boolean => {
  const read = cells.map((c) => readNumber(c)).filter((r) => r.state === 'number');
  return read.length > 0 && read.filter((r) => r.number.rest !== '').length > 0.5 * read.length;
};

function shareFitting(cells: readonly string[], key: QuantityKey, unit: string | null): number {
  const { usual, standardUnit } = quantities[key];
  const units = unit === null ? candidateUnits[standardUnit] : [unit];
  const values = cells
    .map((c) => readNumber(c))
    .flatMap((r) => (r.state === 'number' ? [Math.abs(r.number.value)] : []));
  if (values.length === 0) return 1;
  const fits = (v: number): boolean =>
    units.some(
      (u) =>
        v * unitFactor(u, standardUnit)! >= usual[0] / 3 && v * unitFactor(u, standardUnit)! <= usual[1] * 3,
    );
  return values.filter(fits).length / values.length;
}

const candidateUnits = { 'cm-1': ['cm-1', 'GHz', 'm-1'], pm: ['pm', 'Å', 'nm', 'm'], 'N/m': ['N/m', 'dyn/cm', 'mdyn/Å'], 'kg m2': ['kg m2', 'g cm2'], u: ['u', 'kg'] } as const; // prettier-ignore

/** Units in which most values have a usual size. */
function unitsBySize(cells: readonly string[], key: QuantityKey): string[] {
  const { usual, standardUnit } = quantities[key];
  const values = cells
    .map((c) => readNumber(c))
    .flatMap((r) => (r.state === 'number' ? [Math.abs(r.number.value)] : []));
  if (values.length === 0) return [];
  return candidateUnits[standardUnit].filter((unit) => {
    const factor = unitFactor(unit, standardUnit)!;
    const inside = values.filter((v) => v * factor >= usual[0] && v * factor <= usual[1]).length;
    return inside > 0.6 * values.length;
  });
}

function kindOf(columns: readonly ColumnUnderstanding[]): { kind: TableKind; reason: string } {
  const has = (role: ColumnRole['role']): boolean => columns.some((c) => c.role.role === role);
  const lineColumns = has('wavenumber') && (has('m') || has('J'));
  if (lineColumns) return { kind: 'lines', reason: 'it has wavenumbers with m or J' };
  if (has('quantity-name') && has('value'))
    return { kind: 'submissions-long', reason: 'it has a column of quantities and one of values' };
  if (has('quantity') && (has('student') || has('name') || has('spectrum'))) {
    return { kind: 'submissions-wide', reason: 'it has a row per submission with columns of quantities' };
  }
  if (has('student') && (has('name') || has('group')))
    return { kind: 'roster', reason: 'it names students and no quantity' };
  return { kind: 'unknown', reason: 'neither quantities nor lines nor students can be told in it' };
}

/** In a table of submissions a lone "m" or "J" column is no line column. */
function settleKind(columns: readonly ColumnUnderstanding[], kind: TableKind): ColumnUnderstanding[] {
  if (kind === 'lines') return [...columns];
  return columns.map((c) =>
    ['branch', 'J', 'm', 'wavenumber'].includes(c.role.role)
      ? { ...c, role: { role: 'ignore' }, reason: `${c.reason}, but this is no table of lines` }
      : c,
  );
}
