import type { Values } from '../../reference/methods/derive.ts';
import type { Field } from './fields.ts';
import { predict, type SlippedSteps } from './predict.ts';
import type { Reading } from './reading.ts';

/** A reading error (cm-1 per line) with its prior probability. */
export interface ReadingError {
  readonly perCm: number;
  readonly prior: number;
}

/** Blur of computed values from constants and intermediates with few digits, relative, with prior (common practice). */
const computingBlur = [
  { relative: 1e-5, prior: 0.7 },
  { relative: 1.2e-4, prior: 0.3 },
] as const;

/** Reading errors where nothing is known of the file's sampling: from a peak fit to a ruler. */
export const unknownReadingErrors: readonly ReadingError[] = [
  { perCm: 0.01, prior: 0.2 },
  { perCm: 0.03, prior: 0.3 },
  { perCm: 0.1, prior: 0.37 },
  { perCm: 0.25, prior: 0.11 },
  { perCm: 0.6, prior: 0.02 },
];

/** Reading errors about a known one (scheme or sampling): a third of it to ten times it, since doublets and wide lines add their own. */
export function readingErrorsAbout(perCm: number): readonly ReadingError[] {
  return [
    { perCm: perCm / 3, prior: 0.25 },
    { perCm, prior: 0.35 },
    { perCm: perCm * 3, prior: 0.28 },
    { perCm: perCm * 10, prior: 0.12 },
  ];
}

/** A prediction made linear about the mean: values, and ∂values/∂primitives (n × p). */
export interface LinearPrediction {
  readonly values: Values;
  readonly gradient: readonly Float64Array[];
}

/** Prediction with its gradient for some fields; null where a field is not predicted. */
export function linearise(
  reading: Reading,
  slipped: SlippedSteps,
  fields: readonly Field[],
): LinearPrediction | null {
  const values = predict(reading.context(reading.mean), slipped);
  if (fields.some((f) => values[f.key] === undefined)) return null;
  const p = reading.mean.length;
  const { fixed, reading: perUnit } = reading.covariances();
  const gradient = fields.map(() => new Float64Array(p));
  for (let j = 0; j < p; j++) {
    const variance = fixed[j * p + j]! + 0.01 * perUnit[j * p + j]!;
    const h = Math.max(Math.sqrt(variance), 1e-9);
    const shifted = reading.mean.map((v, i) => (i === j ? v + h : v));
    const moved = predict(reading.context(shifted), slipped);
    fields.forEach((f, i) => {
      gradient[i]![j] = ((moved[f.key] ?? values[f.key]!) - values[f.key]!) / h;
    });
  }
  return { values, gradient };
}

/**
 * Logarithm of the probability that a student of this reading hands in these numbers (each an interval of its last digit).
 *
 * Gaussian with covariance G (C + σ²R) Gᵀ + rounding + blur, summed over the prior of the reading error σ and of the blur.
 */
export function logProbability(
  fields: readonly Field[],
  prediction: LinearPrediction,
  reading: Reading,
  errors: readonly ReadingError[],
): number {
  const n = fields.length;
  if (n === 0) return 0;
  const fixed = project(prediction.gradient, reading.covariances().fixed, reading.mean.length);
  const perUnit = project(prediction.gradient, reading.covariances().reading, reading.mean.length);
  const off = fields.map((f) => f.value - prediction.values[f.key]!);
  const blurs = fields.some((f) => f.computed) ? computingBlur : [{ relative: 0, prior: 1 }];
  const terms: number[] = [];
  const v = new Float64Array(n * n);
  for (const { perCm, prior } of errors) {
    for (const blur of blurs) {
      for (let i = 0; i < n; i++) {
        for (let j = 0; j <= i; j++) v[i * n + j] = fixed[i * n + j]! + perCm * perCm * perUnit[i * n + j]!;
        const f = fields[i]!;
        const blurred = f.computed ? (blur.relative * prediction.values[f.key]!) ** 2 : 0;
        v[i * n + i]! += f.roundingVariance + blurred + (1e-7 * f.value) ** 2;
      }
      terms.push(Math.log(prior * blur.prior) + logGaussian(v, off));
    }
  }
  return logSum(terms) + fields.reduce((sum, f) => sum + Math.log(2 * f.halfWidth), 0);
}

/** Standard deviations of the predicted fields for one reading error. */
export function standardDeviations(
  fields: readonly Field[],
  prediction: LinearPrediction,
  reading: Reading,
  readingErrorPerCm: number,
): number[] {
  const n = fields.length;
  const fixed = project(prediction.gradient, reading.covariances().fixed, reading.mean.length);
  const perUnit = project(prediction.gradient, reading.covariances().reading, reading.mean.length);
  return fields.map((f, i) =>
    Math.sqrt(
      fixed[i * n + i]! +
        readingErrorPerCm ** 2 * perUnit[i * n + i]! +
        f.roundingVariance +
        (f.computed ? (2e-4 * prediction.values[f.key]!) ** 2 : 0),
    ),
  );
}

/** ln Σ exp. */
export function logSum(terms: readonly number[]): number {
  const largest = Math.max(...terms);
  if (largest === -Infinity) return -Infinity;
  let sum = 0;
  for (const t of terms) sum += Math.exp(t - largest);
  return largest + Math.log(sum);
}

function project(gradient: readonly Float64Array[], covariance: Float64Array, p: number): Float64Array {
  const n = gradient.length;
  const out = new Float64Array(n * n);
  const row = new Float64Array(p);
  for (let i = 0; i < n; i++) {
    row.fill(0);
    for (let a = 0; a < p; a++) {
      const g = gradient[i]![a]!;
      if (g !== 0) for (let b = 0; b < p; b++) row[b]! += g * covariance[a * p + b]!;
    }
    for (let j = 0; j <= i; j++) {
      let sum = 0;
      for (let b = 0; b < p; b++) sum += row[b]! * gradient[j]![b]!;
      out[i * n + j] = sum;
      out[j * n + i] = sum;
    }
  }
  return out;
}

/** ln of the normal density with covariance V (lower triangle, overwritten by its Cholesky factor) at `off`. */
function logGaussian(v: Float64Array, off: readonly number[]): number {
  const n = off.length;
  const logDet = factorise(v, n);
  if (logDet === null) return -Infinity;
  return -0.5 * (chiSquared(v, off) + logDet + n * Math.log(2 * Math.PI));
}

/** Cholesky factor in place of the lower triangle; ln of the determinant, null where V is not positive definite. */
function factorise(v: Float64Array, n: number): number | null {
  let logDet = 0;
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = v[i * n + j]!;
      for (let k = 0; k < j; k++) sum -= v[i * n + k]! * v[j * n + k]!;
      if (j < i) v[i * n + j] = sum / v[j * n + j]!;
      else {
        if (!(sum > 0)) return null;
        v[i * n + i] = Math.sqrt(sum);
        logDet += Math.log(sum);
      }
    }
  }
  return logDet;
}

const scratch = new Float64Array(32);

/** offᵀ V⁻¹ off from the Cholesky factor of V. */
export function chiSquared(factor: Float64Array, off: readonly number[]): number {
  const n = off.length;
  const z = n <= scratch.length ? scratch : new Float64Array(n);
  let chi = 0;
  for (let i = 0; i < n; i++) {
    let sum = off[i]!;
    for (let k = 0; k < i; k++) sum -= factor[i * n + k]! * z[k]!;
    const one = sum / factor[i * n + i]!;
    z[i] = one;
    chi += one * one;
  }
  return chi;
}

/** Cholesky factor of the covariance of some fields for one reading error, with the wider blur; null where there is none. */
export function covarianceFactor(
  fields: readonly Field[],
  prediction: LinearPrediction,
  reading: Reading,
  readingErrorPerCm: number,
): Float64Array | null {
  const n = fields.length;
  const { fixed, reading: unit } = reading.covariances();
  const v = project(prediction.gradient, fixed, reading.mean.length);
  const perUnit = project(prediction.gradient, unit, reading.mean.length);
  const widest = Math.max(...computingBlur.map((b) => b.relative));
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) v[i * n + j]! += readingErrorPerCm ** 2 * perUnit[i * n + j]!;
    const f = fields[i]!;
    v[i * n + i]! +=
      f.roundingVariance +
      (f.computed ? (widest * prediction.values[f.key]!) ** 2 : 0) +
      (1e-7 * f.value) ** 2;
  }
  return factorise(v, n) === null ? null : v;
}
