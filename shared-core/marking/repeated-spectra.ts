import { compareSpectra } from '../spectrum/compare.ts';
import type { NoiseSignature } from '../spectrum/noise-signature.ts';
import type { RepeatedSpectrum } from './section-observations.ts';

/**
 * Pairs of files that hold one measurement: identical, or scaled, cropped, resampled, with noise added.
 *
 * @param signatures noise signature of each file, by file name (made once per file, beside its reference).
 */
export function findRepeatedSpectra(signatures: ReadonlyMap<string, NoiseSignature>): RepeatedSpectrum[] {
  const files = [...signatures].sort(([a], [b]) => (a < b ? -1 : 1));
  return files.flatMap(([first, a], i) =>
    files.slice(i + 1).flatMap(([second, b]): RepeatedSpectrum[] => {
      const found = compareSpectra(a, b);
      if (!found.same) return [];
      const figures: Record<string, number> = { points: found.points };
      if (found.noiseCorrelation !== null) figures.noiseCorrelation = found.noiseCorrelation;
      if (found.significance !== null) figures.significance = found.significance;
      return [
        { files: [first, second], how: found.kind === 'identical' ? 'identical' : found.text, figures },
      ];
    }),
  );
}
