/** Fewer rows than this are no spectrum of their own. */
const leastRows = 40;
const mostSections = 24;

interface Section {
  readonly from: number;
  readonly to: number;
}

/** Stretches of one direction; an isolated step the other way (a point out of order) does not end one. */
function runsOf(x: Float64Array): Section[] {
  let [least, greatest] = [Infinity, -Infinity];
  for (const value of x) {
    if (value < least) least = value;
    if (value > greatest) greatest = value;
  }
  const jump = 0.3 * (greatest - least);
  const runs: Section[] = [];
  let from = 0;
  let direction = 0;
  for (let i = 1; i < x.length; i++) {
    const step = x[i]! - x[i - 1]!;
    const turned = i - from > leastRows && direction !== 0 && step * direction <= 0 && turns(x, i, direction);
    if (Math.abs(step) > jump || turned) {
      runs.push({ from, to: i });
      from = i;
      direction = 0;
    } else if (direction === 0 && i - from > 5) direction = Math.sign(x[i]! - x[from]!);
  }
  runs.push({ from, to: x.length });
  return runs;
}

/** Whether the twenty points from here on run the other way. */
function turns(x: Float64Array, at: number, direction: number): boolean {
  const end = Math.min(x.length - 1, at + 20);
  let other = 0;
  for (let i = at + 1; i <= end; i++) if ((x[i]! - x[i - 1]!) * direction < 0) other++;
  return other > 0.9 * (end - at);
}

function rangeOf(x: Float64Array, { from, to }: Section): [number, number] {
  let [least, greatest] = [Infinity, -Infinity];
  for (let i = from; i < to; i++) {
    if (x[i]! < least) least = x[i]!;
    if (x[i]! > greatest) greatest = x[i]!;
  }
  return [least, greatest];
}

function overlap(a: readonly [number, number], b: readonly [number, number]): number {
  const shared = Math.min(a[1], b[1]) - Math.max(a[0], b[0]);
  return shared / Math.max(a[1] - a[0], b[1] - b[0]);
}

/**
 * Rows of several spectra that stand one below the other: the abscissa starts anew and covers the same range again.
 * Pieces of one spectrum in any order, and points out of order, are no sections.
 * @param x the abscissa column in file order
 * @returns first row and end of each section; one section where there is a single spectrum
 */
export function sectionsOf(x: Float64Array): readonly Section[] {
  const whole = [{ from: 0, to: x.length }];
  const runs = runsOf(x);
  if (runs.length < 2 || runs.length > mostSections) return whole;
  if (runs.some(({ from, to }) => to - from < leastRows)) return whole;
  const ranges = runs.map((run) => rangeOf(x, run));
  const first = ranges[0]!;
  return ranges.every((range) => overlap(range, first) > 0.5) ? runs : whole;
}
