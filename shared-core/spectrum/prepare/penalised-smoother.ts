/**
 * Penalised least squares on even points: minimises sum w (y - z)^2 + lambda sum (second difference of z)^2
 * (E. T. Whittaker 1922; solved as a pentadiagonal system by LDLt, O(n)). Points of weight zero are bridged.
 * @param weights at least two above zero
 * @returns z, of the length of y
 */
export function smoothPenalised(y: Float64Array, weights: Float64Array, lambda: number): Float64Array {
  const n = y.length;
  if (weights.length !== n || n < 5) {
    throw new RangeError(`weights must be as long as y and at least 5, got ${weights.length} and ${n}`);
  }
  const pivot = new Float64Array(n);
  const first = new Float64Array(n);
  const second = new Float64Array(n);
  const z = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const edge = Math.min(i, n - 1 - i);
    const diagonal = weights[i]! + lambda * (edge === 0 ? 1 : edge === 1 ? 5 : 6);
    const off1 = i === n - 1 ? 0 : lambda * (edge === 0 || i === n - 2 ? -2 : -4);
    const off2 = i >= n - 2 ? 0 : lambda;
    const p1 = i >= 1 ? pivot[i - 1]! : 0;
    const p2 = i >= 2 ? pivot[i - 2]! : 0;
    const f1 = i >= 1 ? first[i - 1]! : 0;
    const s1 = i >= 1 ? second[i - 1]! : 0;
    const s2 = i >= 2 ? second[i - 2]! : 0;
    const d = diagonal - p1 * f1 * f1 - p2 * s2 * s2;
    pivot[i] = d;
    first[i] = (off1 - p1 * f1 * s1) / d;
    second[i] = off2 / d;
    z[i] = weights[i]! * y[i]! - (i >= 1 ? f1 * z[i - 1]! : 0) - (i >= 2 ? s2 * z[i - 2]! : 0);
  }
  for (let i = n - 1; i >= 0; i--) {
    const one = i + 1 < n ? first[i]! * z[i + 1]! : 0;
    const two = i + 2 < n ? second[i]! * z[i + 2]! : 0;
    z[i] = z[i]! / pivot[i]! - one - two;
  }
  return z;
}

/** The lambda at which a wave of this many points per period passes with half its height: (period/2 pi)^4. */
export function lambdaFor(periodPoints: number): number {
  return (periodPoints / (2 * Math.PI)) ** 4;
}
