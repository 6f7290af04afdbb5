import { writtenNumber } from '../text/written-number.ts';

/** How the cells of a row are set apart and how decimals are marked. */
export interface Layout {
  /** Character code of the delimiter; 32 stands for any run of blanks and tabs. */
  readonly delimiter: number;
  readonly decimalMark: 44 | 46;
}

export const blanks = 32;
const tab = 9;
const quote = 34;

/** Words that instruments and spreadsheets write where they have no number. */
const missingWords = /^(?:nan|n\/?a|#n\/a|#num!|#value!|null|none|inf|-inf|\+inf|-+|\?|\*+|\.|#+)$/i;

/** Reused between rows: cell values of the row read last (NaN: no number there). */
export class Row {
  readonly values = new Float64Array(1024);
  count = 0;
  /** Cells that hold a number. */
  numbers = 0;
  /** Cells that are blank or say that there is no number. */
  missing = 0;
  /** Index of the first cell that is neither, -1 for none. */
  firstText = -1;
  /** Whether the last cells are blank, and how many. */
  trailingBlanks = 0;
}

function isBlank(code: number): boolean {
  return code === 32 || code === tab || code === 0xa0 || code === 0x202f || code === 0xfeff;
}

function takeCell(text: string, start: number, end: number, decimalMark: number, row: Row): void {
  while (start < end && isBlank(text.charCodeAt(start))) start++;
  while (end > start && isBlank(text.charCodeAt(end - 1))) end--;
  if (end - start >= 2 && text.charCodeAt(start) === quote && text.charCodeAt(end - 1) === quote) {
    takeCell(text, start + 1, end - 1, decimalMark, row);
    return;
  }
  const at = row.count++;
  if (at >= row.values.length) return;
  row.values[at] = NaN;
  if (start === end) {
    row.missing++;
    row.trailingBlanks++;
    return;
  }
  row.trailingBlanks = 0;
  const value = writtenNumber(text, start, end, decimalMark);
  if (!Number.isNaN(value)) {
    row.values[at] = value;
    row.numbers++;
  } else if (end - start < 12 && missingWords.test(text.slice(start, end))) row.missing++;
  else if (row.firstText < 0) row.firstText = at;
}

/** Reads the cells of one line into `row`. */
export function readRow(text: string, layout: Layout, row: Row): void {
  row.count = 0;
  row.numbers = 0;
  row.missing = 0;
  row.firstText = -1;
  row.trailingBlanks = 0;
  const { delimiter, decimalMark } = layout;
  const length = text.length;
  if (delimiter === blanks) {
    let at = 0;
    while (at < length) {
      while (at < length && isBlank(text.charCodeAt(at))) at++;
      if (at === length) break;
      const start = at;
      while (at < length && !isBlank(text.charCodeAt(at))) at++;
      takeCell(text, start, at, decimalMark, row);
    }
    return;
  }
  let start = 0;
  let quoted = false;
  for (let at = 0; at < length; at++) {
    const code = text.charCodeAt(at);
    if (code === quote) quoted = !quoted;
    else if (code === delimiter && !quoted) {
      takeCell(text, start, at, decimalMark, row);
      start = at + 1;
    }
  }
  takeCell(text, start, length, decimalMark, row);
}

/** Whether the row last read consists of numbers (and missing ones) only, with two cells or more. */
export function isNumeric(row: Row): boolean {
  return row.firstText < 0 && row.numbers >= 1 && row.count - row.trailingBlanks >= 2;
}

/** The cells of a header line as text. */
export function textCells(text: string, layout: Layout): string[] {
  const separator = layout.delimiter === blanks ? /\t+| {2,}/ : String.fromCharCode(layout.delimiter);
  return text
    .trim()
    .split(separator)
    .map((cell) => cell.trim().replace(/^"(.*)"$/, '$1').trim()); // prettier-ignore
}
