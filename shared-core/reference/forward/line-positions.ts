import { choleskyFactor, choleskyInverse, choleskySolve } from '../../fitting/cholesky.ts';
import { dot } from './columns.ts';
import type { RegionFit } from './fit-region.ts';
import type { RegionProblem } from './region-problem.ts';
import { modelState } from './region-state.ts';
import type { ForwardLine } from './types.ts';

/**
 * Position of every line by itself: one linear step from the fitted model in which this line's centre and strength, and those of its
 * neighbours closer than two widths, are free and everything else stays.
 *
 * @param scale factor of σ that the fit as a whole showed.
 */
export function linePositions(
  problem: RegionProblem,
  fit: RegionFit,
  widthPerCm: number,
  scale: number,
): ForwardLine[] {
  const { centresPerCm, strengths, lorentzHalfWidthPerCm } = modelState(problem.layout, fit.state);
  const n = centresPerCm.length;
  const depths = observedDepths(problem, fit, centresPerCm);
  return problem.layout.lines.map((line, i) => {
    const group = Array.from({ length: n }, (_, j) => j).filter(
      (j) => j === i || Math.abs(centresPerCm[j]! - centresPerCm[i]!) < 2 * widthPerCm,
    );
    const resolvable = group.filter(
      (j) => j === i || Math.abs(centresPerCm[j]! - centresPerCm[i]!) > 0.35 * widthPerCm,
    );
    const { shift, sigma } = ownStep(fit, n, i, resolvable, widthPerCm);
    return {
      bandIndex: line.bandIndex,
      m: line.m,
      wavenumberPerCm: centresPerCm[i]! + shift,
      uncertaintyPerCm: sigma * scale,
      residualPerCm: shift,
      trueAbsorbance: strengths[i]! / (Math.PI * lorentzHalfWidthPerCm * Math.LN10),
      depth: depths[i]!,
      blended: group.length > 1,
    };
  });
}

function ownStep(
  fit: RegionFit,
  n: number,
  i: number,
  group: readonly number[],
  widthPerCm: number,
): { shift: number; sigma: number } {
  const chosen = [i, ...group.filter((j) => j !== i)].flatMap((j) => [fit.columns[j]!, fit.columns[n + j]!]);
  const p = chosen.length;
  const normal = new Float64Array(p * p);
  for (let a = 0; a < p; a++) {
    for (let b = a; b < p; b++) {
      const value = dot(chosen[a]!, chosen[b]!);
      normal[a * p + b] = value;
      normal[b * p + a] = value;
    }
  }
  const factor = choleskyFactor(normal, p);
  if (factor === null) return { shift: 0, sigma: widthPerCm };
  const step = choleskySolve(
    factor,
    chosen.map((c) => dot(c, fit.residual)),
    p,
  );
  const sigma = Math.sqrt(choleskyInverse(factor, p)[0]!);
  // A step beyond half a width is no longer linear: the line is not there, or something else is.
  const shift = Math.max(-0.5 * widthPerCm, Math.min(0.5 * widthPerCm, step[0]!));
  return { shift, sigma: Math.min(sigma, widthPerCm) };
}

/** Depth of the model's transmittance at each centre, from the nearest sample. */
function observedDepths(problem: RegionProblem, fit: RegionFit, centresPerCm: Float64Array): Float64Array {
  const x = problem.data.samplePerCm;
  return centresPerCm.map((centre) => {
    const i = Math.round((centre - x[0]!) / problem.data.stepPerCm);
    return 1 - fit.values.transmittance[Math.min(x.length - 1, Math.max(0, i))]!;
  });
}
