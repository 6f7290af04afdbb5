import { bandConstantsFrom, lineWavenumberPerCm } from '../molecule/band-constants.ts';
import { isotopologue as isotopologueNamed, isotopologuesOf } from '../molecule/isotopologue.ts';
import { publishedConstants } from '../molecule/published-constants.ts';
import type { Isotopologue } from '../molecule/types.ts';
import type { MethodExtra } from '../reference/methods/constants-by-method.ts';
import type { CandidateLine } from '../reference/methods/line-sets.ts';
import { otherHydrogen } from './prescribe.ts';

/** Lines a side that a typical teaching spectrum shows: twelve of a hydride, twenty of a heavier gas (common practice). */
export function usualLinesASide(molecule: Isotopologue): number {
  return molecule.reducedMassU < 3 ? 12 : 20;
}

/** Lines of the band n ← 0 from published constants: to show what a scheme would do, never as an answer. Null for an unlisted gas. */
export function publishedLines(
  isotopologue: string,
  upper: number,
  linesASide: number,
): CandidateLine[] | null {
  const published = publishedConstants(isotopologue);
  if (published === null) return null;
  const band = bandConstantsFrom(published, upper);
  const ms = Array.from({ length: linesASide }, (_, i) => i + 1).flatMap((m) => [-m, m]);
  return ms.map((m) => ({
    m,
    wavenumberPerCm: lineWavenumberPerCm(band, m),
    uncertaintyPerCm: 0,
    used: true,
    blended: false,
    saturated: false,
  }));
}

/** Overtone and H/D partner from published constants, for methods that need them. */
export function publishedExtra(molecule: Isotopologue, linesASide: number): MethodExtra {
  const overtone = publishedLines(molecule.name, 2, linesASide);
  const partner = otherHydrogen(molecule);
  const partnerMolecule = partner === null ? null : isotopologueNamed(partner);
  const partnerLines = partner === null ? null : publishedLines(partner, 1, linesASide);
  return {
    upper: 1,
    ...(overtone === null ? {} : { overtone }),
    ...(partnerMolecule === null || partnerLines === null
      ? {}
      : { partner: { isotopologue: partnerMolecule, lines: partnerLines } }),
  };
}

/** The other common isotopologue with the same lighter atom: H37Cl for H35Cl; null where there is none. */
export function otherHeavyOf(molecule: Isotopologue): string | null {
  const all = isotopologuesOf(molecule.gas).filter((i) => i.name !== molecule.name);
  return all.find((i) => i.nuclides[0].name === molecule.nuclides[0].name)?.name ?? null;
}
