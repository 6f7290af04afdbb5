import { autocorrelation } from './whiten.ts';
import type { RegionFit } from './fit-region.ts';
import type { RegionProblem } from './region-problem.ts';
import { priorProduct } from './priors.ts';

/** Delays, in points, over which what is left of the correlation is followed. */
const followedPoints = 48;

/** What the correlation left in the whitened residuals makes of σ. */
export interface CorrelatedCovariance {
  /** Covariance of the fitted constants (in the order of the layout), square, row-major. */
  readonly ofConstants: Float64Array;
  /** σ of the constants over that of independent residuals of unit variance: the factor for other σ of this fit. */
  readonly factor: number;
}

/**
 * Covariance of the fitted constants where the whitened residuals e are not independent: C = H R Hᵀ + N⁻¹ Λ N⁻¹, with the influence
 * H = N⁻¹Jᵀ of every point on every constant, R the autocorrelation of e, Λ the weights of the prior knowledge.
 *
 * A zero-filled spectrum has no noise at delays beyond the instrument's path difference. There the filter (with its floor) leaves
 * next to nothing, so the mean square of e lies below its power where the lines are, by about the factor of zero filling: taken for
 * independent points it would make σ too small by the root of that factor.
 */
export function correlatedCovariance(
  problem: RegionProblem,
  fit: RegionFit,
  weights: Float64Array,
): CorrelatedCovariance {
  const count = problem.layout.constants.length;
  const np = problem.maps.length;
  const correlation = residualCorrelation(fit, weights, np);
  const influences = Array.from({ length: count }, (_, c) => influenceOf(problem, fit, c));
  const carried = influences.map((h) => convolved(h, correlation));
  const rows = influences.map((_, c) => fit.inverse.subarray(c * np, (c + 1) * np));
  const ofConstants = new Float64Array(count * count);
  for (let a = 0; a < count; a++) {
    for (let b = a; b < count; b++) {
      let sum = 0;
      for (let i = 0; i < weights.length; i++) sum += influences[a]![i]! * carried[b]![i]!;
      sum += priorProduct(problem.priors, rows[a]!, rows[b]!);
      if (fit.drift !== null) sum += fit.drift[a]! * fit.drift[b]!;
      ofConstants[a * count + b] = sum;
      ofConstants[b * count + a] = sum;
    }
  }
  let logarithms = 0;
  for (let c = 0; c < count; c++)
    logarithms += Math.log(ofConstants[c * count + c]! / fit.inverse[c * np + c]!);
  return { ofConstants, factor: Math.exp(logarithms / (2 * count)) };
}

/**
 * Autocorrelation of the whitened residuals at 0, 1, 2, … points, let down to 0 linearly (so that no combination of points gets a
 * negative variance), with the share that the fit itself took out of the residuals put back: n/(n − p), n the number of independent
 * points n = N / Σ ρ².
 */
function residualCorrelation(fit: RegionFit, weights: Float64Array, parameters: number): Float64Array {
  const residual = fit.residual.values.map((v, i) => (weights[i]! > 0 ? v : 0));
  const present = Uint8Array.from(weights, (w) => (w > 0 ? 1 : 0));
  const points = present.reduce((sum, v) => sum + v, 0);
  const most = Math.min(followedPoints, Math.floor(points / 8));
  const raw = autocorrelation(residual, present, most);
  let squares = 1;
  for (let k = 1; k <= most; k++) {
    raw[k]! *= 1 - k / (most + 1);
    squares += 2 * (raw[k]! / raw[0]!) ** 2;
  }
  const independent = points / squares;
  const left = Math.max(independent - parameters, 0.2 * independent);
  return raw.map((r) => (r * independent) / left);
}

/** Change of one fitted constant by a change of each whitened point. */
function influenceOf(problem: RegionProblem, fit: RegionFit, constant: number): Float64Array {
  const np = problem.maps.length;
  const ofBasis = new Float64Array(fit.columns.length);
  problem.maps.forEach((map, q) => {
    const share = fit.inverse[constant * np + q]!;
    map.basis.forEach((i, k) => (ofBasis[i]! += share * map.coefficients[k]!));
  });
  const influence = new Float64Array(fit.residual.values.length);
  fit.columns.forEach((column, i) => {
    const share = ofBasis[i]!;
    for (let k = 0; k < column.values.length; k++) influence[column.start + k]! += share * column.values[k]!;
  });
  return influence;
}

function convolved(values: Float64Array, correlation: Float64Array): Float64Array {
  const n = values.length;
  const result = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    let sum = correlation[0]! * values[i]!;
    for (let k = 1; k < correlation.length; k++)
      sum += correlation[k]! * ((values[i - k] ?? 0) + (values[i + k] ?? 0));
    result[i] = sum;
  }
  return result;
}
