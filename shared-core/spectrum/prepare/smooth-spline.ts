/** A cubic spline on even knots: coefficient k belongs to the B-spline that starts at knot k - 3. */
export interface SmoothSpline {
  readonly intervals: number;
  /** intervals + 3 coefficients. */
  readonly coefficients: Float64Array;
}

const half = 3;

/** Solves the symmetric band system in place (rows hold the diagonal and three elements below it), by LDLt. */
function solveBand(band: Float64Array[], right: Float64Array): Float64Array {
  const n = right.length;
  for (let i = 0; i < n; i++) {
    for (let k = Math.max(0, i - half); k < i; k++) {
      // band[d][i] is the element of row i, column i - d; after elimination L with the pivots on d = 0.
      let sum = band[i - k]![i]!;
      for (let j = Math.max(0, i - half); j < k; j++)
        sum -= band[i - j]![i]! * band[k - j]![k]! * band[0]![j]!;
      band[i - k]![i] = sum / band[0]![k]!;
    }
    let pivot = band[0]![i]!;
    for (let j = Math.max(0, i - half); j < i; j++) pivot -= band[i - j]![i]! ** 2 * band[0]![j]!;
    band[0]![i] = pivot;
  }
  const z = right.slice();
  for (let i = 0; i < n; i++) {
    for (let j = Math.max(0, i - half); j < i; j++) z[i] = z[i]! - band[i - j]![i]! * z[j]!;
  }
  for (let i = 0; i < n; i++) z[i] = z[i]! / band[0]![i]!;
  for (let i = n - 1; i >= 0; i--) {
    for (let j = i + 1; j <= Math.min(n - 1, i + half); j++) z[i] = z[i]! - band[j - i]![j]! * z[j]!;
  }
  return z;
}

function basis(u: number, into: Float64Array): void {
  const v = 1 - u;
  into[0] = (v * v * v) / 6;
  into[1] = (3 * u * u * u - 6 * u * u + 4) / 6;
  into[2] = (3 * v * v * v - 6 * v * v + 4) / 6;
  into[3] = (u * u * u) / 6;
}

/**
 * Weighted least squares of a cubic spline through y at even places, with a penalty on the third differences of its
 * coefficients (P. H. C. Eilers and B. D. Marx, Statist. Sci. 11 (1996) 89): a parabola costs nothing, so neither the
 * ends nor a stretch without weight bend on their own.
 * @param stiffness penalty relative to the mean weight per coefficient
 */
export function fitSmoothSpline(
  y: Float64Array,
  weights: Float64Array,
  intervals: number,
  stiffness: number,
): SmoothSpline {
  const count = intervals + half;
  const band = Array.from({ length: half + 1 }, () => new Float64Array(count));
  const right = new Float64Array(count);
  const b = new Float64Array(4);
  let total = 0;
  for (let i = 0; i < y.length; i++) {
    const weight = weights[i]!;
    if (weight === 0) continue;
    total += weight;
    const place = ((i + 0.5) / y.length) * intervals;
    const left = Math.min(intervals - 1, Math.floor(place));
    basis(place - left, b);
    for (let p = 0; p < 4; p++) {
      right[left + p] = right[left + p]! + weight * b[p]! * y[i]!;
      for (let q = 0; q <= p; q++) {
        const row = band[p - q]!;
        row[left + p] = row[left + p]! + weight * b[p]! * b[q]!;
      }
    }
  }
  const penalty = stiffness * (total / count);
  const third = [-1, 3, -3, 1];
  for (let k = 0; k + 3 < count; k++) {
    for (let p = 0; p < 4; p++) {
      for (let q = 0; q <= p; q++) {
        const row = band[p - q]!;
        row[k + p] = row[k + p]! + penalty * third[p]! * third[q]!;
      }
    }
  }
  // A trace on the diagonal keeps the system solvable where all weight sits in one interval.
  for (let k = 0; k < count; k++) band[0]![k] = band[0]![k]! + 1e-9 * (total / count);
  return { intervals, coefficients: solveBand(band, right) };
}

/** Value of the spline at a place between 0 and 1 of its range. */
export function splineAt(spline: SmoothSpline, place: number): number {
  const scaled = place * spline.intervals;
  const left = Math.max(0, Math.min(spline.intervals - 1, Math.floor(scaled)));
  const u = scaled - left;
  const v = 1 - u;
  const c = spline.coefficients;
  return (
    (v * v * v * c[left]! +
      (3 * u * u * u - 6 * u * u + 4) * c[left + 1]! +
      (3 * v * v * v - 6 * v * v + 4) * c[left + 2]! +
      u * u * u * c[left + 3]!) /
    6
  );
}
