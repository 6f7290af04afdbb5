import type { FitOutcome } from './types.ts';

/**
 * Exact weighted linear least squares by Householder QR of the column-scaled design: minimises Σ((y − Xβ)/σ)².
 *
 * @param design n rows of p numbers (X). @param observed n numbers (y). @param sigmas n standard uncertainties > 0, unit of y.
 * @param options `scale`: 'input' keeps the stated σ; 'residuals' multiplies the covariance by χ²/ν (unweighted courses);
 *   'larger' does so only where χ²/ν exceeds 1. Default 'input'.
 * @returns values and covariance, or 'too-few-lines' where n < p (n = p under a residual scale), or 'rank-deficient'.
 * @throws TypeError where lengths disagree; RangeError where a number is not finite or a σ not positive.
 */
export function fitLinearWeighted(
  design: readonly (readonly number[])[],
  observed: ArrayLike<number>,
  sigmas: ArrayLike<number>,
  options: { readonly scale?: 'input' | 'residuals' | 'larger' } = {},
): FitOutcome {
  const n = design.length;
  const p = design[0]?.length ?? 0;
  validate(design, observed, sigmas, p);
  const scale = options.scale ?? 'input';
  const least = scale === 'input' ? p : p + 1;
  if (p === 0 || n < least) {
    return { outcome: 'too-few-lines', reason: `${n} data for ${p} constants; at least ${least} are needed` };
  }
  const rows = design.map((row, i) => row.map((v) => v / sigmas[i]!));
  const norms = columnNorms(rows, p);
  if (norms.some((v) => v === 0))
    return { outcome: 'rank-deficient', reason: 'a constant has no effect on the data' };
  const a = rows.map((row) => row.map((v, j) => v / norms[j]!));
  const b = Float64Array.from({ length: n }, (_, i) => observed[i]! / sigmas[i]!);
  triangularise(a, b, p);
  for (let j = 0; j < p; j++) {
    if (Math.abs(a[j]![j]!) < 1e-13 * Math.sqrt(n)) {
      return { outcome: 'rank-deficient', reason: 'the data cannot tell some of the constants apart' };
    }
  }
  const values = backSubstitute(a, b, p).map((v, j) => v / norms[j]!);
  const residuals = Float64Array.from(
    { length: n },
    (_, i) => observed[i]! - design[i]!.reduce((sum, x, j) => sum + x * values[j]!, 0),
  );
  const chiSquared = residuals.reduce((sum, r, i) => sum + (r / sigmas[i]!) ** 2, 0);
  const degreesOfFreedom = n - p;
  const reduced = degreesOfFreedom > 0 ? chiSquared / degreesOfFreedom : 1;
  const byResiduals = scale === 'residuals' || (scale === 'larger' && reduced > 1);
  const covariance = inverseNormal(a, norms, p).map((v) => v * (byResiduals ? reduced : 1));
  return {
    outcome: 'converged',
    values,
    covariance,
    standardDeviations: Float64Array.from({ length: p }, (_, j) => Math.sqrt(covariance[j * p + j]!)),
    residuals,
    degreesOfFreedom,
    chiSquared,
    sigmaScale: byResiduals ? 'residuals' : 'input',
    iterations: 1,
  };
}

function validate(
  design: readonly (readonly number[])[],
  observed: ArrayLike<number>,
  sigmas: ArrayLike<number>,
  p: number,
): void {
  const n = design.length;
  if (observed.length !== n || sigmas.length !== n) {
    throw new TypeError(
      `design, observed, sigmas: lengths ${n}, ${observed.length}, ${sigmas.length} differ`,
    );
  }
  for (let i = 0; i < n; i++) {
    if (design[i]!.length !== p)
      throw new TypeError(`design: row ${i} has ${design[i]!.length} numbers, expected ${p}`);
    if (!design[i]!.every(Number.isFinite))
      throw new RangeError(`design: row ${i} holds a number that is not finite`);
    if (!Number.isFinite(observed[i]!)) throw new RangeError(`observed: element ${i} is not finite`);
    if (!(sigmas[i]! > 0) || !Number.isFinite(sigmas[i]!)) {
      throw new RangeError(`sigmas: element ${i} must be a positive number, got ${sigmas[i]!}`);
    }
  }
}

function columnNorms(rows: readonly (readonly number[])[], p: number): number[] {
  return Array.from({ length: p }, (_, j) => Math.sqrt(rows.reduce((sum, row) => sum + row[j]! ** 2, 0)));
}

/** Householder reflections in place: the upper triangle of `a` becomes R, `b` becomes Qᵀb. */
function triangularise(a: number[][], b: Float64Array, p: number): void {
  const n = a.length;
  for (let k = 0; k < p; k++) {
    let norm = 0;
    for (let i = k; i < n; i++) norm = Math.hypot(norm, a[i]![k]!);
    if (norm === 0) continue;
    const alpha = a[k]![k]! > 0 ? -norm : norm;
    const v = Array.from({ length: n - k }, (_, i) => a[i + k]![k]!);
    v[0]! -= alpha;
    const vv = v.reduce((sum, x) => sum + x * x, 0);
    for (let j = k; j < p; j++) {
      let dot = 0;
      for (let i = k; i < n; i++) dot += v[i - k]! * a[i]![j]!;
      const f = (2 * dot) / vv;
      for (let i = k; i < n; i++) a[i]![j]! -= f * v[i - k]!;
    }
    let dot = 0;
    for (let i = k; i < n; i++) dot += v[i - k]! * b[i]!;
    const f = (2 * dot) / vv;
    for (let i = k; i < n; i++) b[i]! -= f * v[i - k]!;
  }
}

function backSubstitute(r: readonly (readonly number[])[], b: ArrayLike<number>, p: number): Float64Array {
  const x = new Float64Array(p);
  for (let i = p - 1; i >= 0; i--) {
    let sum = b[i]!;
    for (let j = i + 1; j < p; j++) sum -= r[i]![j]! * x[j]!;
    x[i] = sum / r[i]![i]!;
  }
  return x;
}

/** (RᵀR)⁻¹ with the column scaling undone. */
function inverseNormal(r: readonly (readonly number[])[], norms: readonly number[], p: number): Float64Array {
  const columns = Array.from({ length: p }, (_, k) =>
    backSubstitute(
      r,
      Float64Array.from({ length: p }, (_, i) => (i === k ? 1 : 0)),
      p,
    ),
  );
  const covariance = new Float64Array(p * p);
  for (let i = 0; i < p; i++) {
    for (let j = 0; j < p; j++) {
      let sum = 0;
      for (let k = 0; k < p; k++) sum += columns[k]![i]! * columns[k]![j]!;
      covariance[i * p + j] = sum / (norms[i]! * norms[j]!);
    }
  }
  return covariance;
}
