import type { RegionFit } from './fit-region.ts';
import type { RegionProblem } from './region-problem.ts';
import { modelState } from './region-state.ts';
import { baselineAt } from './region-data.ts';

/** Residual of every point in units of its σ, unwhitened. */
export function pointResiduals(problem: RegionProblem, fit: RegionFit): Float64Array {
  const baseline = baselineAt(problem.data.samplePerCm, problem.knots, fit.state.baseline);
  return problem.data.observed.map(
    (y, i) => (y - baseline[i]! * fit.values.transmittance[i]!) * problem.data.weights[i]!,
  );
}

/** Distance of every point to the nearest line of the model, in units of the line width given. */
export function lineDistances(problem: RegionProblem, fit: RegionFit, widthPerCm: number): Float64Array {
  const centres = modelState(problem.layout, fit.state).centresPerCm.toSorted();
  let k = 0;
  return problem.data.samplePerCm.map((x) => {
    while (k + 1 < centres.length && Math.abs(centres[k + 1]! - x) <= Math.abs(centres[k]! - x)) k++;
    return Math.abs(x - (centres[k] ?? Infinity)) / widthPerCm;
  });
}

/** Standard deviation from the median absolute value of the points that count; 1.4826 holds for a normal distribution. */
export function robustSigma(values: Float64Array, counts: (i: number) => boolean): number {
  const chosen = Array.from(values)
    .filter((_, i) => counts(i))
    .map(Math.abs)
    .sort((a, b) => a - b);
  return chosen.length === 0 ? 1 : 1.4826 * chosen[chosen.length >> 1]!;
}

/**
 * Points where something else absorbs: more than five σ off, more than 1.2 line widths from every line of the model; each is
 * widened by a width to either side.
 *
 * @returns ranges in cm-1, ascending.
 */
export function foreignRanges(
  problem: RegionProblem,
  fit: RegionFit,
  widthPerCm: number,
): [number, number][] {
  const z = pointResiduals(problem, fit);
  const distance = lineDistances(problem, fit, widthPerCm);
  const far = (i: number): boolean => distance[i]! > 1.2 && problem.data.weights[i]! > 0;
  const sigma = robustSigma(z, far);
  const x = problem.data.samplePerCm;
  const ranges: [number, number][] = [];
  for (let i = 0; i < x.length; i++) {
    if (!far(i) || Math.abs(z[i]!) < 5 * Math.max(sigma, 0.5)) continue;
    const from = x[i]! - widthPerCm;
    const to = x[i]! + widthPerCm;
    const last = ranges.at(-1);
    if (last !== undefined && from <= last[1]) last[1] = to;
    else ranges.push([from, to]);
  }
  return ranges;
}
