import { comma, point } from '../text/written-number.ts';
import { blanks, isNumeric, readRow, Row, type Layout } from './cells.ts';

const semicolon = 59;
const tab = 9;

/** In the order in which they are preferred where several read the same rows. */
const candidates: readonly Layout[] = [
  { delimiter: tab, decimalMark: point },
  { delimiter: tab, decimalMark: comma },
  { delimiter: semicolon, decimalMark: point },
  { delimiter: semicolon, decimalMark: comma },
  { delimiter: comma, decimalMark: point },
  { delimiter: blanks, decimalMark: point },
  { delimiter: blanks, decimalMark: comma },
  { delimiter: comma, decimalMark: comma },
];

export interface FoundLayout extends Layout {
  /** Cells of a row, trailing blank ones not counted. */
  readonly columns: number;
  /** Fewest cells of a row, trailing blank ones counted: what nearly all rows of the sample have. */
  readonly leastCells: number;
  /** Rows of the sample that are numbers with this many cells. */
  readonly rows: number;
}

/** Indices of lines to look at: the first few hundred and as many spread over the rest. */
function sampleOf(lines: readonly string[]): number[] {
  const first = Math.min(lines.length, 300);
  const indices = Array.from({ length: first }, (_, i) => i);
  const rest = lines.length - first;
  const more = Math.min(rest, 500);
  for (let i = 0; i < more; i++) indices.push(first + Math.floor((rest * (i + 0.5)) / more));
  return indices;
}

function tryLayout(lines: readonly string[], sample: readonly number[], layout: Layout): FoundLayout {
  const row = new Row();
  const byColumns = new Map<number, number>();
  const byCells = new Map<number, number>();
  for (const i of sample) {
    const text = lines[i]!;
    if (text.length === 0 || text.length > 20_000) continue;
    readRow(text, layout, row);
    if (!isNumeric(row)) continue;
    // A blank last cell may be a missing ordinate as well as a trailing delimiter: the mode decides.
    const columns = row.count - row.trailingBlanks;
    byColumns.set(columns, (byColumns.get(columns) ?? 0) + 1);
    byCells.set(row.count, (byCells.get(row.count) ?? 0) + 1);
  }
  let best = { columns: 0, rows: 0 };
  for (const [columns, rows] of byColumns) if (rows > best.rows) best = { columns, rows };
  // With a trailing delimiter in nearly every row, a row without one has lost a cell.
  const [cells] = [...byCells].find(([, rows]) => rows > 0.9 * best.rows) ?? [best.columns];
  return { ...layout, ...best, leastCells: Math.max(cells, best.columns) };
}

/** The layout that reads most of the sampled lines as rows of numbers of one length; null where none does. */
export function findLayout(lines: readonly string[]): FoundLayout | null {
  const sample = sampleOf(lines);
  let best: FoundLayout | null = null;
  for (const candidate of candidates) {
    const found = tryLayout(lines, sample, candidate);
    if (found.rows > (best?.rows ?? 0)) best = found;
  }
  return best;
}
