import type { Reason } from '../../units/types.ts';
import { refuse } from '../refusal.ts';
import { headerNumber, refuseContradiction, type HeaderNumber } from './header-number.ts';
import { decodeOrdinates, type OrdinateTable } from './ordinates.ts';
import { decodePairs } from './pairs.ts';
import { recordOf, type JcampBlock, type JcampRecord } from './records.ts';

/** The points of one block in file order, in the units of the file. */
export interface JcampPoints {
  readonly title: string;
  /** Upper case, as in the file; empty where the record is missing. */
  readonly dataType: string;
  readonly xUnits: string;
  readonly yUnits: string;
  readonly x: Float64Array;
  /** NaN where the file says that there is no value ("?"). */
  readonly y: Float64Array;
  readonly notes: readonly Reason[];
  /** Line of the record that holds the data. */
  readonly line: number;
}

interface Header {
  readonly firstX: HeaderNumber | null;
  readonly lastX: HeaderNumber | null;
  readonly deltaX: HeaderNumber | null;
  readonly pointCount: HeaderNumber | null;
  readonly xFactor: HeaderNumber | null;
  readonly yFactor: HeaderNumber | null;
  readonly firstY: HeaderNumber | null;
  readonly maxY: HeaderNumber | null;
  readonly minY: HeaderNumber | null;
  readonly maxX: HeaderNumber | null;
  readonly minX: HeaderNumber | null;
}

function headerOf(block: JcampBlock, lines: readonly string[]): Header {
  const number = (label: string): HeaderNumber | null => headerNumber(block, label, lines);
  return {
    firstX: number('FIRSTX'),
    lastX: number('LASTX'),
    deltaX: number('DELTAX'),
    pointCount: number('NPOINTS'),
    xFactor: number('XFACTOR'),
    yFactor: number('YFACTOR'),
    firstY: number('FIRSTY'),
    maxY: number('MAXY'),
    minY: number('MINY'),
    maxX: number('MAXX'),
    minX: number('MINX'),
  };
}

function checkCount(header: Header, found: number, record: JcampRecord): void {
  if (found < 2) {
    refuse(
      'jcamp-no-points',
      `##${record.label}= on line ${record.line} holds ${found === 0 ? 'no points' : 'a single point'}: the data is missing, export the file again.`,
      record.line,
    );
  }
  const stated = header.pointCount;
  if (stated && stated.value !== found) {
    refuseContradiction('jcamp-npoints', 'NPOINTS', stated, found, 'the number of points in the file is');
  }
}

function near(a: number, b: number, tolerance: number): boolean {
  return Math.abs(a - b) <= tolerance;
}

/** A stated value of the header and the one found in the data, in turn scaled and as written (both are in use). */
function checkOrdinate(
  label: string,
  stated: HeaderNumber | null,
  found: number,
  yFactor: number,
  span: number,
): void {
  if (!stated || !Number.isFinite(found)) return;
  const tolerance = 1.01 * Math.abs(yFactor) + 0.6 * stated.unit + 2e-6 * Math.max(Math.abs(found), span);
  if (near(stated.value, found, tolerance)) return;
  const raw = found / yFactor;
  if (near(stated.value, raw, 1.01 + 2e-6 * Math.abs(raw))) return;
  refuseContradiction(`jcamp-${label.toLowerCase()}`, label, stated, found, 'the points give');
}

function extremes(values: Float64Array): { least: number; greatest: number } {
  let least = Infinity;
  let greatest = -Infinity;
  for (const value of values) {
    if (value < least) least = value;
    if (value > greatest) greatest = value;
  }
  return { least, greatest };
}

/** FIRSTY, MAXY, MINY; and a missing YFACTOR is taken as 1 only where one of them bears it out. */
function checkOrdinates(header: Header, y: Float64Array, yFactor: number, record: JcampRecord): void {
  const { least, greatest } = extremes(y);
  const span = greatest - least;
  checkOrdinate('FIRSTY', header.firstY, y[0]!, yFactor, span);
  checkOrdinate('MAXY', header.maxY, greatest, yFactor, span);
  checkOrdinate('MINY', header.minY, least, yFactor, span);
  if (!header.yFactor && !header.firstY && !header.maxY && !header.minY && record.label === 'XYDATA') {
    refuse(
      'jcamp-yfactor-missing',
      'The header has no ##YFACTOR=, so the scale of the ordinate is unknown: export the file again.',
      record.line,
    );
  }
}

function checkAbscissaLimits(header: Header, x: Float64Array, slack: number): void {
  const { least, greatest } = extremes(x);
  for (const [label, stated, found] of [
    ['MAXX', header.maxX, greatest],
    ['MINX', header.minX, least],
  ] as const) {
    if (stated && !near(stated.value, found, slack + 0.6 * stated.unit + 1e-6 * Math.abs(found))) {
      refuseContradiction(`jcamp-${label.toLowerCase()}`, label, stated, found, 'the abscissa reaches');
    }
  }
}

interface Grid {
  readonly first: number;
  readonly step: number;
}

function factorOf(header: Header): number {
  const xFactor = header.xFactor?.value ?? 1;
  if (xFactor === 0 || header.yFactor?.value === 0) {
    refuse('jcamp-factor', 'XFACTOR or YFACTOR is zero in the header: export the file again.', (header.xFactor ?? header.yFactor)?.line ?? null); // prettier-ignore
  }
  return xFactor;
}

/** The even grid of X++(Y..Y): from FIRSTX and LASTX, else from FIRSTX and DELTAX; the three must agree. */
function gridOf(header: Header, table: OrdinateTable, record: JcampRecord): Grid {
  const count = table.ordinates.length;
  const first = header.firstX?.value ?? table.lines[0]!.abscissa * factorOf(header);
  const { lastX, deltaX, pointCount } = header;
  if (!lastX && !(deltaX && pointCount)) {
    refuse(
      'jcamp-grid-missing',
      'The header lacks ##LASTX= (or ##DELTAX= with ##NPOINTS=), so the abscissa cannot be checked: export the file again.',
      record.line,
    );
  }
  const step = lastX ? (lastX.value - first) / (count - 1) : deltaX!.value;
  if (step === 0 || !Number.isFinite(step)) {
    refuse('jcamp-grid', 'FIRSTX and LASTX of the header are equal: export the file again.', record.line);
  }
  if (deltaX && lastX) {
    // DELTAX is often written without its sign.
    const slack =
      0.6 * deltaX.unit + (lastX.unit + (header.firstX?.unit ?? 0)) / (count - 1) + 1e-5 * Math.abs(step);
    if (!near(Math.abs(deltaX.value), Math.abs(step), slack)) {
      refuseContradiction('jcamp-deltax', 'DELTAX', deltaX, step, 'FIRSTX, LASTX and the number of points give'); // prettier-ignore
    }
  }
  return { first, step };
}

/**
 * The X-check: the abscissa at the head of each line against the grid. On lines that begin with a repeated ordinate it
 * belongs to that ordinate (the standard), in some files to the one after it: then in all lines of the file.
 */
function checkAbscissas(header: Header, table: OrdinateTable, grid: Grid): number {
  const xFactor = factorOf(header);
  const decimals = Math.max(
    ...[0],
    table.lines.reduce((most, each) => Math.max(most, each.decimals), 0),
  );
  const tolerance = Math.min(
    1.01 * Math.abs(xFactor) * 10 ** -decimals +
      (header.firstX?.unit ?? 0) +
      (header.lastX?.unit ?? 0) +
      0.02 * Math.abs(grid.step) +
      1e-6 * Math.abs(grid.first),
    0.6 * Math.abs(grid.step) + Math.abs(xFactor) * 10 ** -decimals,
  );
  const misses = (shift: number): (typeof table.lines)[number] | undefined =>
    table.lines.find((each) => {
      const index = each.index + (each.repeatsLast ? shift : 0);
      return !near(each.abscissa * xFactor, grid.first + index * grid.step, tolerance);
    });
  const missed = misses(0);
  if (missed && misses(1)) {
    const expected = (grid.first + missed.index * grid.step) / xFactor;
    refuse(
      'jcamp-x-check',
      `Line ${missed.line} begins at abscissa ${missed.abscissa}, but by the points before it should begin at ${Number(expected.toPrecision(9))}: points are missing or altered there, export the file again.`,
      missed.line,
    );
  }
  return tolerance;
}

function decodeTable(
  header: Header,
  record: JcampRecord,
  lines: readonly string[],
): { x: Float64Array; y: Float64Array; slack: number } {
  const table = decodeOrdinates(lines, record.bodyStart, record.bodyEnd);
  checkCount(header, table.ordinates.length, record);
  const grid = gridOf(header, table, record);
  const slack = checkAbscissas(header, table, grid);
  const x = Float64Array.from(table.ordinates, (_, i) => grid.first + i * grid.step);
  if (header.lastX) x[x.length - 1] = header.lastX.value;
  const yFactor = header.yFactor?.value ?? 1;
  return { x, y: table.ordinates.map((value) => value * yFactor), slack };
}

function decodePoints(
  header: Header,
  record: JcampRecord,
  lines: readonly string[],
): { x: Float64Array; y: Float64Array; slack: number } {
  const { abscissas, ordinates } = decodePairs(lines, record.bodyStart, record.bodyEnd);
  checkCount(header, abscissas.length, record);
  const xFactor = factorOf(header);
  const yFactor = header.yFactor?.value ?? 1;
  const x = abscissas.map((value) => value * xFactor);
  for (const [label, stated, found] of [
    ['FIRSTX', header.firstX, x[0]!],
    ['LASTX', header.lastX, x[x.length - 1]!],
  ] as const) {
    if (stated && !near(stated.value, found, 2 * stated.unit + 1e-6 * Math.abs(found))) {
      refuseContradiction(`jcamp-${label.toLowerCase()}`, label, stated, found, 'the points give');
    }
  }
  return { x, y: ordinates.map((value) => value * yFactor), slack: 0 };
}

/** The record of a block that holds its data, null where there is none. */
export function dataRecord(block: JcampBlock): JcampRecord | null {
  return recordOf(block, 'XYDATA') ?? recordOf(block, 'XYPOINTS');
}

function textOf(block: JcampBlock, label: string): string {
  return recordOf(block, label)?.value ?? '';
}

/**
 * Decodes one block strictly: any technique, any units. Y-checks, X-checks, NPOINTS, FIRSTX, LASTX, DELTAX, FIRSTY,
 * MAXY and MINY must hold.
 * @param lines all lines of the file
 * @throws RefusedFile with code and line where one of them does not, or the form is not one of XYDATA and XYPOINTS
 */
export function decodeBlock(block: JcampBlock, lines: readonly string[]): JcampPoints {
  const record = dataRecord(block);
  if (!record) {
    refuse(
      'jcamp-no-data',
      `The JCAMP-DX block on line ${block.line} has no ##XYDATA= and no ##XYPOINTS=: export the spectrum as XYDATA.`,
      block.line,
    );
  }
  const header = headerOf(block, lines);
  const form = record.value.replace(/\s/g, '').toUpperCase();
  const isTable = form === '(X++(Y..Y))';
  if (!isTable && form !== '(XY..XY)') {
    refuse(
      'jcamp-form',
      `Line ${record.line} announces data of the form ${record.value || '(none)'}, which is neither (X++(Y..Y)) nor (XY..XY): export the spectrum as XYDATA.`,
      record.line,
    );
  }
  const { x, y, slack } = isTable ? decodeTable(header, record, lines) : decodePoints(header, record, lines);
  checkOrdinates(header, y, header.yFactor?.value ?? 1, record);
  checkAbscissaLimits(header, x, slack);
  const notes: Reason[] = [];
  if (!header.pointCount) {
    notes.push({
      code: 'jcamp-npoints-missing',
      text: 'The header has no ##NPOINTS=, so the number of points could not be checked.',
    });
  }
  return {
    title: textOf(block, 'TITLE'),
    dataType: textOf(block, 'DATATYPE').toUpperCase(),
    xUnits: textOf(block, 'XUNITS'),
    yUnits: textOf(block, 'YUNITS'),
    x,
    y,
    notes,
    line: record.line,
  };
}
