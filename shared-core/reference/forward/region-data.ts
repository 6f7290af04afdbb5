import type { PreparedSpectrum } from '../../spectrum/types.ts';
import { lowerBound } from './line-columns.ts';

/** The points of one region, ready for the fit. */
export interface RegionData {
  readonly samplePerCm: Float64Array;
  readonly observed: Float64Array;
  /** 1/σ of each point; 0 where a point does not count. */
  readonly weights: Float64Array;
  readonly stepPerCm: number;
}

/** Points of a prepared spectrum between two wavenumbers; saturated tops that the detector flattened get no weight. */
export function regionData(prepared: PreparedSpectrum, fromPerCm: number, toPerCm: number): RegionData {
  const first = lowerBound(prepared.wavenumberPerCm, fromPerCm);
  const end = lowerBound(prepared.wavenumberPerCm, toPerCm);
  const observed = prepared.transmittance.slice(first, end);
  const ceiling = prepared.saturationAbsorbance;
  const weights = Float64Array.from(observed, (_, i) => {
    const flattened = ceiling !== null && prepared.absorbance[first + i]! > 0.9 * ceiling;
    return flattened ? 0 : 1 / prepared.noise[first + i]!;
  });
  return {
    samplePerCm: prepared.wavenumberPerCm.slice(first, end),
    observed,
    weights,
    stepPerCm: prepared.stepPerCm,
  };
}

/** Knots of a piecewise linear baseline factor: evenly spread, one about every `spacingPerCm`, at least two. */
export function baselineKnots(samplePerCm: Float64Array, spacingPerCm: number): Float64Array {
  const from = samplePerCm[0]!;
  const to = samplePerCm[samplePerCm.length - 1]!;
  const count = Math.max(2, Math.round((to - from) / spacingPerCm) + 1);
  return Float64Array.from({ length: count }, (_, k) => from + ((to - from) * k) / (count - 1));
}

/** Value of the piecewise linear factor at the samples. */
export function baselineAt(
  samplePerCm: Float64Array,
  knots: Float64Array,
  factors: Float64Array,
): Float64Array {
  const spacing = knots[1]! - knots[0]!;
  return samplePerCm.map((x) => {
    const position = (x - knots[0]!) / spacing;
    const k = Math.min(knots.length - 2, Math.max(0, Math.floor(position)));
    const t = position - k;
    return factors[k]! * (1 - t) + factors[k + 1]! * t;
  });
}
