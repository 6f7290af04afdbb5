/**
 * Prediction-error filter of an autoregressive process of order p, from the autocorrelation of residuals (Yule-Walker equations,
 * solved by Levinson's recursion). Applied to data with that autocorrelation it leaves independent points of unit variance.
 *
 * A share of white noise is added to the autocorrelation, so that delays at which the instrument has no response are not blown up.
 *
 * @param residuals points in units of their σ; 0 where left out. @param present 1 where a point counts, else 0.
 * @param order p ≥ 0. @param floor share of white noise added, e.g. 0.02.
 * @returns p + 1 coefficients, the first positive.
 */
export function whiteningFilter(
  residuals: Float64Array,
  present: Uint8Array,
  order: number,
  floor: number,
): Float64Array {
  const r = autocorrelation(residuals, present, order);
  if (!(r[0]! > 0)) return Float64Array.of(1);
  const r0 = r[0]! * (1 + floor);
  let a = new Float64Array([1]);
  let error = r0;
  for (let k = 1; k <= order; k++) {
    let sum = r[k]!;
    for (let i = 1; i < k; i++) sum += a[i]! * r[k - i]!;
    const reflection = -sum / error;
    const next = new Float64Array(k + 1);
    next[0] = 1;
    for (let i = 1; i < k; i++) next[i] = a[i]! + reflection * a[k - i]!;
    next[k] = reflection;
    a = next;
    error *= 1 - reflection * reflection;
    if (!(error > 1e-6 * r0)) break;
  }
  return a.map((v) => v / Math.sqrt(error));
}

/** Autocorrelation at 0 … order points: Σ x_i x_{i−k} / n over the pairs of points present, n the number of points present. */
export function autocorrelation(x: Float64Array, present: Uint8Array, order: number): Float64Array {
  const r = new Float64Array(order + 1);
  let count = 0;
  for (let i = 0; i < x.length; i++) count += present[i]!;
  for (let k = 0; k <= order; k++) {
    let sum = 0;
    for (let i = k; i < x.length; i++) if (present[i] && present[i - k]) sum += x[i]! * x[i - k]!;
    r[k] = count > 0 ? sum / count : 0;
  }
  return r;
}
