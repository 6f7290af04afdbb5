import { lineWavenumberPerCm, relativeLineStrength } from '../molecule/index.ts';
import type { BandConstants } from '../molecule/types.ts';
import { nearest, type BandScore, type LineIndex } from './band-search.ts';
import { fitBand, type BandLine } from './fit-band.ts';

/** A band with its lines, numbered. */
export interface RefinedBand {
  readonly constants: BandConstants;
  readonly matches: readonly { readonly m: number; readonly line: number }[];
  readonly rmsPerCm: number;
}

const mostM = 60;

/**
 * Numbers the lines of a band: fits what matched, predicts all lines, matches again, tighter and farther out, until nothing changes.
 *
 * @returns null where the matches do not hold together.
 */
export function refineBand(index: LineIndex, score: BandScore, widthPerCm: number): RefinedBand | null {
  let constants = scaled(score.candidate.constants, score.scalePpm);
  let matches: readonly { m: number; line: number }[] = score.matches;
  let rms = widthPerCm / 4;
  for (let round = 0; round < 6; round++) {
    const fit = fitMatches(index, matches, score.candidate.constants, constants);
    if (fit === null) return null;
    constants = fit.constants;
    rms = fit.rms;
    const tolerance = Math.max(0.04, 0.12 * widthPerCm, Math.min(5 * rms, 0.5 * widthPerCm));
    const next = matchAll(
      index,
      constants,
      tolerance,
      round < 2 ? extent(matches) + 3 : mostM,
      amountOf(index, matches, constants),
    );
    if (next.length < 4) return null;
    if (round > 2 && same(next, matches)) break;
    matches = next;
  }
  return { constants, matches, rmsPerCm: rms };
}

const extent = (matches: readonly { m: number }[]): number => Math.max(...matches.map((x) => Math.abs(x.m)));
const same = (
  a: readonly { m: number; line: number }[],
  b: readonly { m: number; line: number }[],
): boolean => a.length === b.length && a.every((x, i) => x.m === b[i]!.m && x.line === b[i]!.line);

function scaled(constants: BandConstants, ppm: number): BandConstants {
  return { ...constants, bandOriginPerCm: constants.bandOriginPerCm * (1 + ppm * 1e-6) };
}

function fitMatches(
  index: LineIndex,
  matches: readonly { m: number; line: number }[],
  published: BandConstants,
  current: BandConstants,
): { constants: BandConstants; rms: number } | null {
  const all = matches.map(({ m, line }): BandLine => {
    const l = index.lines[line]!;
    return {
      m,
      wavenumberPerCm: l.wavenumberPerCm,
      uncertaintyPerCm: Math.hypot(l.uncertaintyPerCm, 0.02 * l.fullWidthHalfHeightPerCm),
    };
  });
  // With few lines the distortion stays as published; it only has to carry the numbering.
  const wide = all.length >= 10 && Math.max(...all.map((l) => Math.abs(l.m))) >= 6;
  const options = {
    distortion: wide ? ('tied' as const) : ('fixed' as const),
    centrifugal: [published.centrifugalConstantLowerPerCm, published.centrifugalConstantUpperPerCm] as const,
    sextic: [published.sexticConstantLowerPerCm, published.sexticConstantUpperPerCm] as const,
  };
  const residual = (l: BandLine, c: BandConstants): number => l.wavenumberPerCm - lineWavenumberPerCm(c, l.m);
  const first = fitBand(all, options);
  if (first.outcome !== 'converged') return null;
  const sizes = all.map((l) => Math.abs(residual(l, first.constants))).sort((a, b) => a - b);
  const limit = Math.max(4 * 1.48 * sizes[sizes.length >> 1]!, 0.03);
  const kept = all.filter((l) => Math.abs(residual(l, first.constants)) <= limit);
  const fit = kept.length >= 5 ? fitBand(kept, options) : first;
  if (fit.outcome !== 'converged') return null;
  const rms = Math.sqrt(
    kept.reduce((sum, l) => sum + residual(l, fit.constants) ** 2, 0) / Math.max(1, kept.length),
  );
  const jump = Math.abs(fit.constants.bandOriginPerCm - current.bandOriginPerCm);
  return jump > 3 ? null : { constants: fit.constants, rms };
}

/**
 * Every m whose predicted line has a found one beside it that is strong enough; outward from the origin until six in a row are missing.
 *
 * Far off the strength law a found line is another gas's: a factor of seven is beyond what a teaching spectrum shows, saturation aside.
 */
function matchAll(
  index: LineIndex,
  constants: BandConstants,
  tolerance: number,
  most: number,
  amount: number,
): { m: number; line: number }[] {
  const taken = new Set<number>();
  const matches: { m: number; line: number }[] = [];
  for (const sign of [-1, 1]) {
    let missing = 0;
    for (let j = 1; j <= most && missing < 6; j++) {
      const m = sign * j;
      const line = nearest(index, lineWavenumberPerCm(constants, m), tolerance);
      if (
        line < 0 ||
        taken.has(line) ||
        !strengthAgrees(index, line, amount * relativeLineStrength(constants, m, 296))
      ) {
        missing++;
        continue;
      }
      missing = 0;
      taken.add(line);
      matches.push({ m, line });
    }
  }
  return matches.sort((a, b) => a.m - b.m);
}

function strengthAgrees(index: LineIndex, line: number, expected: number): boolean {
  const found = index.lines[line]!;
  const ratio = found.peakAbsorbance / expected;
  return found.saturated ? ratio < 7 : ratio > 1 / 7 && ratio < 7;
}

/** Peak absorbance per unit of relative strength: the median over the matches. */
function amountOf(
  index: LineIndex,
  matches: readonly { m: number; line: number }[],
  constants: BandConstants,
): number {
  const ratios = matches
    .map(({ m, line }) => index.lines[line]!.peakAbsorbance / relativeLineStrength(constants, m, 296))
    .sort((a, b) => a - b);
  return ratios[ratios.length >> 1] ?? 0;
}
