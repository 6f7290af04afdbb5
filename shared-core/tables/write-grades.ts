import { stringify } from 'csv-stringify/browser/esm/sync';
import type { MarkedSubmission, MarkedValue, MarkingScheme } from '../marking/types.ts';

export interface GradesOptions {
  readonly separator?: ',' | ';' | '\t';
  readonly decimalSign?: '.' | ',';
  /** Places of points; null: as they are. */
  readonly places?: number | null;
  readonly names?: boolean;
  /** Points of each value, or the total alone. */
  readonly perValue?: boolean;
  /** Names of columns to write, in order; absent: all. */
  readonly columns?: readonly string[];
}

/** A row of the grades file: a marked submission with what a person added. */
export interface GradesRow {
  readonly marked: MarkedSubmission;
  /** Points decided by a person, by `isotopologue/quantity`; they stand in place of the automatic ones. */
  readonly decided?: Readonly<Record<string, number | null>>;
  readonly handPoints?: Readonly<Record<string, number | null>>;
  readonly comment?: string;
  readonly lateness?: number;
  readonly adjustment?: number;
}

/**
 * The grades file: UTF-8, CRLF, RFC 4180; a column of points for every quantity asked, points, of, open, comment. Points of open values
 * are empty, and so is a total with an open part. Cells that a spreadsheet would run as a formula begin with an apostrophe.
 */
export function writeGrades(
  rows: readonly GradesRow[],
  scheme: MarkingScheme,
  options: GradesOptions = {},
): string {
  const table = gradesTable(rows, scheme, options);
  return stringify(table, { delimiter: options.separator ?? ',', record_delimiter: '\r\n' });
}

/** Header and rows of the grades file as texts, for a preview. */
export function gradesTable(
  rows: readonly GradesRow[],
  scheme: MarkingScheme,
  options: GradesOptions = {},
): string[][] {
  const keys = valueKeys(rows, scheme);
  const number = numberWriter(options);
  const columns = allColumns(keys, scheme, options, number).filter(
    (c) => options.columns?.includes(c.name) ?? true,
  );
  const ordered =
    options.columns === undefined
      ? columns
      : options.columns.flatMap((n) => columns.filter((c) => c.name === n));
  return [
    ordered.map((c) => harmless(c.name)),
    ...rows.map((row) => ordered.map((c) => harmless(c.cell(row), c.isText))),
  ];
}

interface Column {
  readonly name: string;
  readonly isText: boolean;
  readonly cell: (row: GradesRow) => string;
}

function allColumns(
  keys: readonly ValueKey[],
  scheme: MarkingScheme,
  options: GradesOptions,
  number: (v: number | null) => string,
): Column[] {
  const text = (name: string, cell: (row: GradesRow) => string): Column => ({ name, isText: true, cell });
  const figure = (name: string, cell: (row: GradesRow) => number | null): Column => ({
    name,
    isText: false,
    cell: (row) => number(cell(row)),
  });
  const head = [
    text('student', (r) => r.marked.submission.student),
    ...(options.names === false ? [] : [text('name', (r) => r.marked.submission.name ?? '')]),
    text('group', (r) => r.marked.submission.group ?? ''),
    figure('attempt', (r) => r.marked.submission.attempt),
  ];
  const perValue =
    options.perValue === false ? [] : keys.map((key) => figure(key.title, (r) => pointsOf(r, key)));
  const hand =
    options.perValue === false
      ? []
      : scheme.handItems.map((item) => figure(item.title, (r) => r.handPoints?.[item.title] ?? null));
  const tail = [
    figure('points', (r) => totalOf(r, keys, scheme)),
    figure('of', (r) => r.marked.of + scheme.handItems.reduce((sum, i) => sum + i.points, 0)),
    figure('open', (r) => openOf(r, keys, scheme)),
    text('comment', (r) => r.comment ?? ''),
  ];
  return [...head, ...perValue, ...hand, ...tail];
}

interface ValueKey {
  readonly isotopologue: string | null;
  readonly quantity: string;
  readonly title: string;
}

/** One column for each quantity asked; with several isotopologues asked of one submission each has its own, named. */
function valueKeys(rows: readonly GradesRow[], scheme: MarkingScheme): ValueKey[] {
  const several = rows.some((r) => new Set(r.marked.values.map((v) => v.isotopologue)).size > 1);
  const quantities = [...new Set(scheme.quantities.map((q) => q.key))];
  if (!several) return quantities.map((quantity) => ({ isotopologue: null, quantity, title: quantity }));
  const isotopologues = [
    ...new Set([...scheme.isotopologues, ...rows.flatMap((r) => r.marked.values.map((v) => v.isotopologue))]),
  ];
  return isotopologues.flatMap((isotopologue) =>
    quantities
      .filter((q) =>
        rows.some((r) => r.marked.values.some((v) => v.isotopologue === isotopologue && v.quantity === q)),
      )
      .map((quantity) => ({ isotopologue, quantity, title: `${quantity} ${isotopologue}` })),
  );
}

const valueFor = (row: GradesRow, key: ValueKey): MarkedValue | undefined =>
  row.marked.values.find(
    (v) => v.quantity === key.quantity && (key.isotopologue === null || v.isotopologue === key.isotopologue),
  );

function pointsOf(row: GradesRow, key: ValueKey): number | null {
  const value = valueFor(row, key);
  if (value === undefined) return null;
  const decided = row.decided?.[`${value.isotopologue}/${value.quantity}`];
  return decided !== undefined ? decided : value.points;
}

function openOf(row: GradesRow, keys: readonly ValueKey[], scheme: MarkingScheme): number {
  const values = keys.filter((k) => valueFor(row, k) !== undefined && pointsOf(row, k) === null).length;
  const hand = scheme.handItems.filter((i) => (row.handPoints?.[i.title] ?? null) === null).length;
  return values + hand;
}

function totalOf(row: GradesRow, keys: readonly ValueKey[], scheme: MarkingScheme): number | null {
  if (openOf(row, keys, scheme) > 0) return null;
  const values = keys.reduce(
    (sum, k) => sum + (valueFor(row, k) === undefined ? 0 : (pointsOf(row, k) ?? 0)),
    0,
  );
  const hand = scheme.handItems.reduce((sum, i) => sum + (row.handPoints?.[i.title] ?? 0), 0);
  return Math.max(0, values + hand + (row.adjustment ?? 0) - (row.lateness ?? 0));
}

function numberWriter(options: GradesOptions): (v: number | null) => string {
  return (v) => {
    if (v === null) return '';
    const text = options.places == null ? String(Number(v.toFixed(6))) : v.toFixed(options.places);
    return options.decimalSign === ',' ? text.replace('.', ',') : text;
  };
}

/** A text that begins with a sign of a formula (= + - @ tab CR) gets an apostrophe; numbers of our own stay numbers. */
export function harmless(text: string, isText = true): string {
  return isText && /^[=+\-@\t\r]/.test(text) ? `'${text}` : text;
}
