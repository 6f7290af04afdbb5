import type { Reason } from '../../units/types.ts';
import { counted, quoted, refuse } from '../refusal.ts';
import { comma } from '../text/written-number.ts';
import { blanks, readRow, Row, textCells, type Layout } from './cells.ts';
import { findLayout, type FoundLayout } from './layout.ts';

export interface NumberTable {
  readonly layout: Layout;
  /** One array per column, all of the same length; NaN where the cell holds no number. */
  readonly columns: readonly Float64Array[];
  /** Lines above the numbers. */
  readonly header: readonly string[];
  /** Line number (from 1) of each row. */
  readonly lineOfRow: Int32Array;
  readonly notes: readonly Reason[];
}

const comment = /^\s*(?:#|%(?!\s*T)|!|\/\/|'|\$\$|\*|--)/;
const mostCells = 20_000_000;

function isSkipped(text: string, layout: Layout): boolean {
  if (comment.test(text)) return true;
  return layout.delimiter !== 59 && text.trimStart().startsWith(';');
}

function isDataRow(row: Row, layout: FoundLayout): boolean {
  const filled = row.count - row.trailingBlanks;
  return row.firstText < 0 && row.numbers >= 1 && row.count >= layout.leastCells && filled <= layout.columns;
}

function hasContent(text: string): boolean {
  return text.trim() !== '' && !/^[\s,;"]*$/.test(text);
}

/** First line from which five lines in a row (or all that are left) are data. */
function findStart(lines: readonly string[], layout: FoundLayout, row: Row): number {
  let run = 0;
  let runStart = -1;
  for (let i = 0; i < lines.length; i++) {
    const text = lines[i]!;
    if (!hasContent(text) || isSkipped(text, layout)) continue;
    readRow(text, layout, row);
    if (isDataRow(row, layout)) {
      if (run === 0) runStart = i;
      if (++run === 5) return runStart;
    } else run = 0;
  }
  return run > 0 ? runStart : -1;
}

/** A last header line that turns into the point before the first one when a stray character is taken out of it. */
function refuseDamagedFirstRow(
  lines: readonly string[],
  start: number,
  first: number,
  step: number,
  layout: FoundLayout,
  row: Row,
): void {
  const at = lines.slice(0, start).findLastIndex(hasContent);
  if (at < 0 || isSkipped(lines[at]!, layout)) return;
  const text = lines[at]!.trim();
  const cell = (layout.delimiter === blanks ? text.split(/\s+/)[0] : textCells(text, layout)[0]) ?? '';
  const digits = cell.replace(layout.decimalMark === comma ? /[^\d,]/g : /[^\d.]/g, '').replace(',', '.');
  const back = (first - Number(digits)) / step;
  if (digits.length >= 0.6 * cell.length && back > 0.5 && back < 2.5) refuseRow(lines[at]!, at, layout, row);
}

function liesAmong(value: number, column: Float64Array): boolean {
  let [least, greatest] = [Infinity, -Infinity];
  for (const each of column) {
    if (each < least) least = each;
    if (each > greatest) greatest = each;
  }
  const slack = (8 * (greatest - least)) / column.length;
  return value >= least - slack && value <= greatest + slack;
}

/** Rows above the start whose numbers lie among those of the data belong to it: then the line between is damage. */
function refuseDamagedStart(
  lines: readonly string[],
  start: number,
  columns: readonly Float64Array[],
  layout: FoundLayout,
  row: Row,
): void {
  const [x] = columns;
  const steps = Math.min(5, x!.length - 1);
  const step = (x![steps]! - x![0]!) / steps;
  if (Math.abs(step) > 0) refuseDamagedFirstRow(lines, start, x![0]!, step, layout, row);
  let bad = -1;
  for (let i = start - 1; i >= Math.max(0, start - 200); i--) {
    const text = lines[i]!;
    if (!hasContent(text) || isSkipped(text, layout)) continue;
    readRow(text, layout, row);
    if (!isDataRow(row, layout)) bad = i;
    else if (bad >= 0 && columns.every((column, k) => liesAmong(row.values[k]!, column))) {
      refuseRow(lines[bad]!, bad, layout, row);
    }
  }
}

/** Names what is wrong with a line among the rows of numbers. */
function refuseRow(text: string, index: number, layout: FoundLayout, row: Row): never {
  const line = index + 1;
  readRow(text, layout, row);
  if (layout.delimiter === comma && row.firstText < 0 && row.count !== layout.columns) {
    refuse(
      'wrong-column-count',
      `Line ${line} has ${counted(row.count, 'column')} where the other rows have ${layout.columns}; if the file marks decimals by commas, columns must be separated by semicolons or tabs: mend the line or export the file again.`,
      line,
    );
  }
  if (row.firstText < 0) {
    refuse(
      'wrong-column-count',
      `Line ${line} (${quoted(text)}) has ${counted(row.count - row.trailingBlanks, 'column')} where the other rows have ${layout.columns}: mend the line or export the file again.`,
      line,
    );
  }
  refuse(
    'row-not-numeric',
    `Line ${line} (${quoted(text)}) stands among the rows of numbers and is none: mend the line or export the file again.`,
    line,
  );
}

/** Text below the last row is left out with a note, but never a line that begins with a number. */
function checkFooter(lines: readonly string[], from: number, layout: FoundLayout, row: Row): Reason[] {
  let count = 0;
  for (let i = from; i < lines.length; i++) {
    const text = lines[i]!;
    if (!hasContent(text) || isSkipped(text, layout)) continue;
    readRow(text, layout, row);
    if (isDataRow(row, layout) || !Number.isNaN(row.values[0]!) || count > 200) {
      refuseRow(lines[from]!, from, layout, row);
    }
    count++;
  }
  return [
    {
      code: 'text-below-data',
      text: `${counted(count, 'line')} of text below the numbers left out (from line ${from + 1}).`,
    },
  ];
}

/** Comma-separated cells that are in truth two halves of numbers with decimal commas: 2650,12,0,0251. */
function refuseSplitDecimals(
  columns: readonly Float64Array[],
  layout: FoundLayout,
  lineOfRow: Int32Array,
): void {
  if (layout.delimiter !== comma || (columns.length !== 4 && columns.length !== 2)) return;
  const x = columns[0]!;
  const rows = x.length;
  let repeats = 0;
  for (let i = 0; i < rows; i++) {
    if (columns.some((column) => !Number.isInteger(column[i]!))) return;
    if (i > 0 && x[i] === x[i - 1]) repeats++;
  }
  if (repeats < 0.3 * rows) return;
  refuse(
    'decimal-comma-ambiguous',
    `The commas of this file (as on line ${lineOfRow[0]!}) both separate columns and mark decimals, so the numbers cannot be told apart: export it with decimal points, or with semicolons between the columns.`,
    lineOfRow[0],
  );
}

/** Lines of numbers among the header lines, which are no part of the spectrum but must not vanish without a word. */
function numbersAbove(lines: readonly string[], start: number, layout: FoundLayout, row: Row): Reason[] {
  let count = 0;
  for (let i = 0; i < start; i++) {
    if (!hasContent(lines[i]!) || isSkipped(lines[i]!, layout)) continue;
    readRow(lines[i]!, layout, row);
    if (row.firstText < 0 && row.numbers > 0) count++;
  }
  if (count === 0) return [];
  const text = `${counted(count, 'line')} of numbers above line ${start + 1} belong to the header and were left out.`;
  return [{ code: 'numbers-in-header', text }];
}

/**
 * The block of numbers in a text: header lines of any number above it, comments and blank lines within it, text below.
 * @throws RefusedFile where there is none, or with the line number where a row is damaged
 */
export function readNumberTable(lines: readonly string[]): NumberTable {
  const layout = findLayout(lines);
  const row = new Row();
  const start = layout ? findStart(lines, layout, row) : -1;
  if (!layout || start < 0 || layout.columns > row.values.length) {
    refuse(
      'text-without-numbers',
      'The file is text without a table of numbers (two columns: wavenumber and absorbance or transmittance): check that this is the spectrum file, or export it again.',
    );
  }
  const most = lines.length - start;
  if (most * layout.columns > mostCells) {
    refuse(
      'too-large',
      `The table has ${most} lines of ${layout.columns} columns, too many to read: export fewer spectra per file.`,
    );
  }
  const columns = Array.from({ length: layout.columns }, () => new Float64Array(most));
  const lineOfRow = new Int32Array(most);
  let count = 0;
  const notes = numbersAbove(lines, start, layout, row);
  for (let i = start; i < lines.length; i++) {
    const text = lines[i]!;
    readRow(text, layout, row);
    if (!isDataRow(row, layout) || (layout.delimiter !== blanks && row.numbers === 0)) {
      if (!hasContent(text) || isSkipped(text, layout)) continue;
      notes.push(...checkFooter(lines, i, layout, row));
      break;
    }
    for (let k = 0; k < layout.columns; k++) columns[k]![count] = row.values[k]!;
    lineOfRow[count++] = i + 1;
  }
  const table = columns.map((column) => column.subarray(0, count));
  refuseDamagedStart(lines, start, table, layout, row);
  refuseSplitDecimals(table, layout, lineOfRow.subarray(0, count));
  return {
    layout,
    columns: table,
    header: lines.slice(Math.max(0, start - 2000), start),
    lineOfRow: lineOfRow.subarray(0, count),
    notes,
  };
}
