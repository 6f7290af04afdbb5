import type { BandCandidate } from './band-search.ts';
import type { RefinedBand } from './refine-band.ts';

/** Largest relative differences from published constants that a numbering may show before it is refused; an instrument makes none of them. */
const limits = { rotational: 0.01, alpha: 0.25 };

/** Why a numbered band cannot be the candidate, in words; null where it can. */
export function plausibility(
  name: string,
  candidate: BandCandidate,
  refined: RefinedBand,
  widthPerCm: number,
): string | null {
  const { constants } = refined;
  const published = candidate.constants;
  const rotational = constants.rotationalConstantLowerPerCm / published.rotationalConstantLowerPerCm - 1;
  if (Math.abs(rotational) > limits.rotational) {
    return `Lines stand near those of ${name}, but B_0 would be ${(100 * rotational).toFixed(1)} % off.`;
  }
  const alpha =
    (constants.rotationalConstantLowerPerCm - constants.rotationalConstantUpperPerCm) /
      (published.rotationalConstantLowerPerCm - published.rotationalConstantUpperPerCm) -
    1;
  if (Math.abs(alpha) > limits.alpha) {
    return `Lines stand near those of ${name}, but αe would be ${(100 * alpha).toFixed(0)} % off.`;
  }
  if (refined.rmsPerCm > Math.max(0.15, 0.3 * widthPerCm)) {
    return `Lines stand near those of ${name}, but scatter by ${refined.rmsPerCm.toFixed(2)} cm⁻¹ about one band.`;
  }
  const m = refined.matches.map((x) => x.m);
  const gaps = Math.max(...m) - Math.min(...m) + 1 - m.length;
  if (gaps > m.length) return `Lines stand near those of ${name}, but more than half of the band is missing.`;
  return null;
}
