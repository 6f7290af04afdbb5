import { commonUnits, quantities, readNumber, unitFactor, unitsThatFit } from '../units/index.ts';
import type { QuantityKey } from '../units/types.ts';
import type { ColumnRole, ColumnUnderstanding, RawTable, TableKind, TableUnderstanding } from './types.ts';
import { findHeader } from './header-rows.ts';
import { settleColumns } from './settle-columns.ts';
import { understandHeader } from './understand-header.ts';

export interface UnderstandOptions {
  /** Roles that a person gave to headers before, by header text. */
  readonly remembered?: Readonly<Record<string, ColumnRole>>;
}

const shownValues = 4;

/**
 * Understands a table: which row is the header, what every column holds and why, what kind of table it is. What is not certain is
 * marked as ambiguous, with the other readings, for a person to say.
 */
export function understandTable(table: RawTable, options: UnderstandOptions = {}): TableUnderstanding {
  const width = Math.max(0, ...table.rows.map((r) => r.length));
  const header = findHeader(table, width);
  const body = table.rows.slice(header.last + 1).filter((row) => row.some((c) => c.text !== ''));
  const columns = header.texts.map((text, index) => {
    const cells = body.map((r) => r[index]?.text ?? '');
    return understandColumn(text, index, cells, options.remembered?.[text]);
  });
  const kind = kindOf(columns);
  const isSet = (c: ColumnUnderstanding): boolean => options.remembered?.[c.header] !== undefined;
  return {
    kind: kind.kind,
    reason: kind.reason,
    headerRow: header.last,
    columns: settleColumns(settleKind(columns, kind.kind), kind.kind, isSet),
    notes: [],
  };
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
  const { reason, alternatives } = reading;
  if (reading.role === null)
    return { ...base, role: { role: 'ignore' }, reason, ...askedIfNumeric(header, cells, alternatives) };
  if (reading.role.role !== 'quantity')
    return { ...base, role: reading.role, reason, ambiguous: false, alternatives };
  return quantityColumn(base, reading.role, reason, alternatives, cells);
}

/** A column that nobody can name but that holds numbers is asked about where its unit, or a missing header, may hide a value. */
function askedIfNumeric(
  header: string,
  cells: readonly string[],
  alternatives: readonly ColumnRole[],
): { ambiguous: boolean; alternatives: readonly ColumnRole[] } {
  const filled = cells.filter((c) => c !== '');
  const numbers = filled
    .map((c) => readNumber(c))
    .flatMap((r) => (r.state === 'number' ? [r.number.value] : []));
  const most = numbers.length > 0 && numbers.length > 0.5 * filled.length;
  const rowNumbers = numbers.length > 1 && numbers.every((n, i) => i === 0 || n === numbers[i - 1]! + 1);
  if (header === '') return { ambiguous: most && !rowNumbers, alternatives };
  const fitting = alternatives.filter(
    (a) => a.role !== 'quantity' || shareFitting(cells, a.quantity, a.unit) > 0.5,
  );
  return { ambiguous: most && fitting.length > 0, alternatives: fitting };
}

/** A column of values: the sizes settle between readings, and stand in for a unit that is not written. */
function quantityColumn(
  base: { index: number; header: string; firstValues: readonly string[] },
  role: Extract<ColumnRole, { role: 'quantity' }>,
  headerReason: string,
  alternatives: readonly ColumnRole[],
  cells: readonly string[],
): ColumnUnderstanding {
  let reason = headerReason;
  const readings = [role, ...alternatives.filter((a) => a.role === 'quantity')];
  const fitting = readings.filter((r) => shareFitting(cells, r.quantity, r.unit) > 0.5);
  // Two readings of the same size (Be or B_0) cannot be told apart by size: that is asked.
  const chosen = fitting[0] ?? role;
  // A whole class outside any usual size: the columns may stand in each other's place.
  const odd =
    cells.filter((c) => c !== '').length >= 4 &&
    fitting.length === 0 &&
    shareFitting(cells, role.quantity, role.unit) === 0;
  const ambiguous = fitting.length > 1 || odd;
  if (odd) reason += '; but none of its values has a usual size for that';
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
  const units = unit === null ? commonUnits[standardUnit] : [unit];
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

/** Units in which most values have a usual size. */
function unitsBySize(cells: readonly string[], key: QuantityKey): string[] {
  const values = cells
    .map((c) => readNumber(c))
    .flatMap((r) => (r.state === 'number' ? [Math.abs(r.number.value)] : []));
  if (values.length === 0) return [];
  const fits = commonUnits[quantities[key].standardUnit].filter(
    (unit) => values.filter((v) => unitsThatFit(v, key).includes(unit)).length > 0.6 * values.length,
  );
  return fits;
}

function kindOf(columns: readonly ColumnUnderstanding[]): { kind: TableKind; reason: string } {
  const has = (role: ColumnRole['role']): boolean => columns.some((c) => c.role.role === role);
  const lineColumns = has('wavenumber') && (has('m') || has('J'));
  if (lineColumns) return { kind: 'lines', reason: 'it has wavenumbers with m or J' };
  if (has('quantity-name') && has('value'))
    return { kind: 'submissions-long', reason: 'it has a column of quantities and one of values' };
  if (has('quantity') && (has('student') || has('name') || has('group') || has('spectrum'))) {
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
