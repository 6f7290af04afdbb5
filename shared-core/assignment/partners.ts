import { lineWavenumberPerCm, naturalAbundance } from '../molecule/index.ts';
import type { BandConstants } from '../molecule/types.ts';
import { bandCandidate, nearest, type BandCandidate, type LineIndex } from './band-search.ts';
import type { RefinedBand } from './refine-band.ts';

/** Another isotopologue of the gas, as it shows beside the main one. */
export interface Partner {
  readonly candidate: BandCandidate;
  /** Predicted from the main one, or fitted where its lines stand apart. */
  readonly constants: BandConstants;
  readonly matches: readonly { readonly m: number; readonly line: number }[];
  /** Abundance over that of the main isotopologue. */
  readonly naturalRatio: number;
  /** Its lines run into those of the main one: abundance has to be assumed. */
  readonly merged: boolean;
}

/** Constants of a partner on the file's axis: published ones moved as the main isotopologue's fitted constants moved. */
export function partnerConstants(
  main: BandCandidate,
  fitted: BandConstants,
  partner: BandCandidate,
): BandConstants {
  const moved = (key: keyof BandConstants): number =>
    main.constants[key] === 0
      ? partner.constants[key]
      : (partner.constants[key] * fitted[key]) / main.constants[key];
  return {
    bandOriginPerCm: moved('bandOriginPerCm'),
    rotationalConstantLowerPerCm: moved('rotationalConstantLowerPerCm'),
    rotationalConstantUpperPerCm: moved('rotationalConstantUpperPerCm'),
    centrifugalConstantLowerPerCm: moved('centrifugalConstantLowerPerCm'),
    centrifugalConstantUpperPerCm: moved('centrifugalConstantUpperPerCm'),
    sexticConstantLowerPerCm: partner.constants.sexticConstantLowerPerCm,
    sexticConstantUpperPerCm: partner.constants.sexticConstantUpperPerCm,
  };
}

/**
 * Looks for the other isotopologues of a gas beside its main one, which numbers them: their lines stand where mass scaling puts them.
 * Intensity labels nothing; it only says which partners could be seen at all.
 */
export function findPartners(
  index: LineIndex,
  main: BandCandidate,
  refined: RefinedBand,
  isotopologues: readonly BandCandidate['isotopologue'][],
  widthPerCm: number,
): Partner[] {
  const own = new Set(refined.matches.map((x) => x.line));
  const free = index.free.map((f, i) => f && !own.has(i));
  const others = { ...index, free };
  return isotopologues.flatMap((isotopologue): readonly Partner[] => {
    if (isotopologue.name === main.isotopologue.name) return [];
    const candidate = bandCandidate(isotopologue, main.upper);
    if (candidate === null) return [];
    const constants = partnerConstants(main, refined.constants, candidate);
    const ratio = naturalAbundance(isotopologue) / naturalAbundance(main.isotopologue);
    const splittings = refined.matches.map(
      ({ m }) => lineWavenumberPerCm(constants, m) - lineWavenumberPerCm(refined.constants, m),
    );
    const splitting = Math.abs(splittings.sort((a, b) => a - b)[splittings.length >> 1] ?? 0);
    const tolerance = Math.max(0.06, 0.2 * Math.min(widthPerCm, splitting));
    const matches = refined.matches.flatMap(({ m }) => {
      const line = nearest(others, lineWavenumberPerCm(constants, m), tolerance);
      return line < 0 ? [] : [{ m, line }];
    });
    const expected = refined.matches.filter(({ line }) => {
      const found = index.lines[line]!;
      return found.signalToNoise * ratio > 15 || found.saturated;
    }).length;
    const apart = matches.length >= 5 && matches.length >= 0.4 * Math.min(expected, refined.matches.length);
    if (apart) return [{ candidate, constants, matches, naturalRatio: ratio, merged: false }];
    const merged = ratio > 0.02 && splitting < 1.1 * widthPerCm;
    return merged ? [{ candidate, constants, matches: [], naturalRatio: ratio, merged: true }] : [];
  });
}
