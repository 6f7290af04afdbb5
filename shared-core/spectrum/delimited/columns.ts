import type { Reason } from '../../units/types.ts';
import { refuse } from '../refusal.ts';
import { abscissaOf, ordinateOf } from '../words.ts';
import { blanks, textCells } from './cells.ts';
import { abscissaFromHeader, ordinateFromHeader } from './header-words.ts';
import type { NumberTable } from './table.ts';

/** One spectrum of a table: which column is its abscissa, which its ordinate, and what stands above them. */
export interface ColumnPair {
  readonly abscissa: number;
  readonly ordinate: number;
  readonly abscissaLabel: string;
  readonly ordinateLabel: string;
  readonly title: string | null;
}

const uncertaintyName = /\b(?:error|err|sigma|std|stdev|s\.?d\.?|uncertainty|fehler|weight|flag|quality)\b/i;

/** Share of steps in the more frequent direction; 1 for an ordered column. */
function orderliness(column: Float64Array): number {
  let rises = 0;
  let falls = 0;
  let last = NaN;
  for (const value of column) {
    if (Number.isNaN(value)) continue;
    if (value > last) rises++;
    else if (value < last) falls++;
    last = value;
  }
  return rises + falls === 0 ? 0 : Math.max(rises, falls) / (rises + falls);
}

function isEmpty(column: Float64Array): boolean {
  return column.every((value) => Number.isNaN(value));
}

function isConstant(column: Float64Array): boolean {
  const first = column.find((value) => !Number.isNaN(value));
  return column.every((value) => Number.isNaN(value) || value === first);
}

/** 0, 1, 2, … or 1, 2, 3, …: a column of row numbers. */
function countsRows(column: Float64Array): boolean {
  const first = column[0]!;
  return (first === 0 || first === 1) && column.every((value, i) => value === first + i);
}

/** The last header line that has a cell above every column. */
function namesAbove(table: NumberTable): string[] | null {
  const width = table.columns.length;
  for (let i = table.header.length - 1; i >= 0 && i >= table.header.length - 6; i--) {
    const line = table.header[i]!.replace(/^\s*(?:#|%(?!\s*T)|!|\/\/)+/, '');
    if (line.trim() === '') continue;
    const cells = textCells(line, table.layout);
    while (cells.length > width && cells.at(-1) === '') cells.pop();
    if (cells.length === width && cells.some((cell) => /\p{L}|%/u.test(cell))) return cells;
    if (table.layout.delimiter === blanks && width === 2 && cells.length === 1) {
      const words = line.trim().split(/\s+/);
      if (words.length === 2) return words;
    }
  }
  return null;
}

/** A unit line below the names ("cm-1", "%") adds to them. */
function labelsOf(table: NumberTable): string[] {
  const width = table.columns.length;
  const names = namesAbove(table) ?? Array.from({ length: width }, () => '');
  const at = table.header.findLastIndex((line) => line.trim() !== '');
  if (at < 1) return names;
  const above = textCells(table.header[at - 1]!, table.layout);
  if (above.length !== width || !above.every((cell) => /\p{L}|%/u.test(cell))) return names;
  const below = textCells(table.header[at]!, table.layout);
  return below.length === width && below.join() === names.join()
    ? names.map((name, i) => (name === '' ? above[i]! : `${above[i]!} ${name}`))
    : names;
}

function chooseAbscissa(
  table: NumberTable,
  candidates: readonly number[],
  labels: readonly string[],
): number {
  const named = candidates.find((k) => abscissaOf(labels[k]!) !== null);
  if (named !== undefined) return named;
  const first = candidates[0]!;
  if (orderliness(table.columns[first]!) > 0.9) return first;
  return candidates.find((k) => orderliness(table.columns[k]!) > 0.999) ?? first;
}

function sharesRange(a: Float64Array, b: Float64Array): boolean {
  const range = (column: Float64Array): [number, number] => {
    let least = Infinity;
    let greatest = -Infinity;
    for (const value of column) {
      if (value < least) least = value;
      if (value > greatest) greatest = value;
    }
    return [least, greatest];
  };
  const [leastA, greatestA] = range(a);
  const [leastB, greatestB] = range(b);
  const overlap = Math.min(greatestA, greatestB) - Math.max(leastA, leastB);
  return overlap > 0.3 * Math.max(greatestA - leastA, greatestB - leastB);
}

/** x y x y …: every odd column an abscissa like the first. */
function arePairs(table: NumberTable, used: readonly number[], abscissa: number): boolean {
  if (used.length < 4 || used.length % 2 === 1 || used[0] !== abscissa) return false;
  return used.every(
    (k, i) =>
      i % 2 === 1 ||
      (orderliness(table.columns[k]!) > 0.999 && sharesRange(table.columns[abscissa]!, table.columns[k]!)),
  );
}

function isNumericTitle(text: string): boolean {
  return /^[-+\d.,eE\s]*$/.test(text);
}

/** Which columns make spectra; those passed over are named in the notes. */
export function chooseColumns(table: NumberTable): { pairs: ColumnPair[]; notes: Reason[] } {
  const labels = labelsOf(table);
  const notes: Reason[] = [];
  const used = table.columns.map((_, k) => k).filter((k) => !isEmpty(table.columns[k]!));
  const counting = used[0];
  if (counting !== undefined && used.length >= 3 && countsRows(table.columns[counting]!)) {
    used.shift();
    notes.push({
      code: 'column-counts-rows',
      text: `Column ${counting + 1} only counts the rows and was left out.`,
    });
  }
  if (used.length < 2) {
    refuse('one-column', 'The file has numbers in one column only, so the wavenumbers are missing: export the spectrum with both columns.', table.lineOfRow[0] ?? null); // prettier-ignore
  }
  const abscissa = chooseAbscissa(table, used, labels);
  const named = namesAbove(table) !== null;
  const header = table.header.slice(-400).filter((line) => line.trim() !== '');
  const ownLabel = labels[abscissa]!;
  const abscissaLabel = abscissaOf(ownLabel) === null ? abscissaFromHeader(header) || ownLabel : ownLabel;
  const spoken = ordinateFromHeader(header);
  if (arePairs(table, used, abscissa)) {
    const pairs = used.flatMap((k, i) =>
      i % 2 === 1
        ? []
        : [pairOf(k, used[i + 1]!, labels[k]! || abscissaLabel, labels[used[i + 1]!]! || spoken)],
    );
    return { pairs, notes };
  }
  const pairs: ColumnPair[] = [];
  for (const k of used) {
    if (k === abscissa) continue;
    const label = labels[k]!;
    const passedOver = uncertaintyName.test(label)
      ? `(${label}) holds uncertainties or flags`
      : used.length > 2 && isConstant(table.columns[k]!)
        ? 'holds one value throughout'
        : null;
    if (passedOver)
      notes.push({ code: 'column-left-out', text: `Column ${k + 1} ${passedOver} and was left out.` });
    else
      pairs.push(
        pairOf(
          abscissa,
          k,
          abscissaLabel,
          ordinateOf(label) === null && spoken ? `${label} ${spoken}` : label,
        ),
      );
  }
  if (named && abscissa !== used[0]) {
    notes.push({ code: 'abscissa-column', text: `Column ${abscissa + 1} was taken as the abscissa.` });
  }
  return { pairs, notes };
}

function pairOf(
  abscissa: number,
  ordinate: number,
  abscissaLabel: string,
  ordinateLabel: string,
): ColumnPair {
  const title = ordinateLabel.trim();
  return { abscissa, ordinate, abscissaLabel, ordinateLabel, title: isNumericTitle(title) ? null : title };
}
