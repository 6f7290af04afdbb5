/** An even grid that explains rounded abscissas: value = first + step * index. */
export interface EvenGrid {
  readonly first: number;
  readonly step: number;
  /** Index of every value; grows by more than one at gaps. */
  readonly indices: Int32Array;
  /** Largest deviation of a value from its grid point, in units of the value. */
  readonly largestDeviation: number;
}

/** Decimals to which values are written, found from the values themselves (0-8); null where they have more. */
export function decimalsOf(values: Float64Array): number | null {
  const stride = Math.max(1, Math.floor(values.length / 1500));
  for (let decimals = 0; decimals <= 8; decimals++) {
    const scale = 10 ** decimals;
    let all = true;
    for (let i = 0; i < values.length && all; i += stride) {
      const scaled = values[i]! * scale;
      all = Math.abs(scaled - Math.round(scaled)) < 1e-6 + Math.abs(scaled) * 4e-16;
    }
    if (all) return decimals;
  }
  return null;
}

function median(values: number[]): number {
  values.sort((a, b) => a - b);
  return values[values.length >> 1]!;
}

/** Step over long, gap-free stretches: a mean over many rounded steps is far finer than one of them. */
function roughStep(x: Float64Array, unit: number): number {
  const steps: number[] = [];
  const stride = Math.max(1, Math.floor(x.length / 2000));
  for (let i = 0; i + 1 < x.length; i += stride) steps.push(x[i + 1]! - x[i]!);
  const typical = median(steps);
  let sum = 0;
  let count = 0;
  for (let i = 0; i + 1 < x.length; i++) {
    const step = x[i + 1]! - x[i]!;
    if (Math.abs(step - typical) <= 1.01 * unit) {
      sum += step;
      count++;
    }
  }
  return count === 0 ? typical : sum / count;
}

function fitLine(indices: Int32Array, x: Float64Array): { first: number; step: number } {
  const n = x.length;
  let meanIndex = 0;
  let meanX = 0;
  for (let i = 0; i < n; i++) {
    meanIndex += indices[i]! / n;
    meanX += (x[i]! - x[0]!) / n;
  }
  let square = 0;
  let product = 0;
  for (let i = 0; i < n; i++) {
    const offset = indices[i]! - meanIndex;
    square += offset * offset;
    product += offset * (x[i]! - x[0]! - meanX);
  }
  const step = product / square;
  return { first: x[0]! + meanX - step * meanIndex, step };
}

/** Largest deviation from the grid; stops at the first that exceeds `limit`. */
function largestDeviation(
  indices: Int32Array,
  x: Float64Array,
  first: number,
  step: number,
  limit: number,
): number {
  let largest = 0;
  for (let i = 0; i < x.length && largest <= limit; i++) {
    const deviation = Math.abs(x[i]! - first - step * indices[i]!);
    if (deviation > largest) largest = deviation;
  }
  return largest;
}

/** The grid with the roundest numbers that still explains every value, else the fitted one. */
function roundest(grid: EvenGrid, x: Float64Array, allowed: number, unit: number): EvenGrid {
  // Standard error of a step fitted to n values rounded to a unit: unit n^-3/2. A rounder step must stay near it.
  const near = (2 * unit) / x.length ** 1.5;
  for (let decimals = 1; decimals <= 9; decimals++) {
    const scale = 10 ** decimals;
    const step = Math.round(grid.step * scale) / scale;
    if (Math.abs(step - grid.step) > near + 1e-12 * grid.step) continue;
    const span = grid.indices.at(-1)! - grid.indices[0]!;
    const middle = grid.first + ((grid.step - step) * span) / 2;
    for (let more = 0; more <= 4; more++) {
      const first = Math.round(middle * 10 ** more) / 10 ** more;
      const deviation = largestDeviation(grid.indices, x, first, step, allowed);
      if (deviation <= allowed) return { ...grid, first, step, largestDeviation: deviation };
    }
  }
  return grid;
}

/**
 * The even grid that ascending values come from by rounding to `unit`, or null where none explains them all.
 * Gaps are allowed; every value must lie within half a unit (and a little) of its grid point.
 */
export function findEvenGrid(x: Float64Array, unit: number): EvenGrid | null {
  const n = x.length;
  if (n < 20) return null;
  const rough = roughStep(x, unit);
  if (!(rough > 1.5 * unit)) return null;
  const indices = new Int32Array(n);
  for (let i = 1; i < n; i++) {
    const steps = Math.round((x[i]! - x[i - 1]!) / rough);
    if (steps < 1 || steps > 1e8) return null;
    indices[i] = indices[i - 1]! + steps;
  }
  const { first, step } = fitLine(indices, x);
  const slack = 1e-9 * Math.abs(x[n - 1]!);
  const deviation = largestDeviation(indices, x, first, step, 0.6 * unit + slack);
  if (deviation > 0.6 * unit + slack) return null;
  const fitted = { first, step, indices, largestDeviation: deviation };
  return roundest(fitted, x, 0.5 * unit + slack, unit);
}

/** Whether the steps of ascending values differ by more than a thousandth of a step: a sign of rounding or unevenness. */
export function hasUnevenSteps(x: Float64Array): boolean {
  let least = Infinity;
  let greatest = 0;
  for (let i = 1; i < x.length; i++) {
    const step = x[i]! - x[i - 1]!;
    if (step < least) least = step;
    if (step > greatest) greatest = step;
  }
  return greatest - least > 1e-3 * greatest;
}
