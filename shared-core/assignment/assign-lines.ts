import type { FoundLine } from '../lines/types.ts';
import {
  isotopologue as isotopologueNamed,
  isotopologuesOf,
  listedGases,
  naturalAbundance,
} from '../molecule/index.ts';
import type { BandConstants, Isotopologue } from '../molecule/types.ts';
import {
  bandCandidate,
  scoreBand,
  type BandCandidate,
  type BandScore,
  type LineIndex,
} from './band-search.ts';
import { findPartners, type Partner } from './partners.ts';
import { plausibility } from './plausibility.ts';
import { refineBand, type RefinedBand } from './refine-band.ts';
import { runnerUpOf } from './runner-up.ts';
import type { AssignedBand, AssignedLine, Assignment, NoAssignment, RunnerUp } from './types.ts';

export interface AssignOptions {
  /** Isotopologues that may be there; default: all listed gases. */
  readonly candidates?: readonly string[];
  /** Largest error of the axis that is tried, ppm; default 400, beyond what an instrument shows, so that it can be told. */
  readonly scaleTolerancePpm?: number;
  /** Width of a line of this spectrum, cm-1; default the median of the found ones. */
  readonly widthPerCm?: number;
}

/** Odds against chance that a band must have, as a natural logarithm: some hundred trials, and one wrong in a million. */
const leastLogOdds = 18;
const fewestMatches = 6;

/**
 * Assigns lines blind: gas, band, isotopologue and m from the consistency of positions alone, several bands one after the other.
 *
 * Every candidate band is laid over the found lines at all scales of the axis that an instrument can have; the matches are weighed
 * against chance; the best one is numbered through by its own fit, its partners by mass scaling; its lines are taken away and the
 * search goes on.
 *
 * @param found lines, ascending. @returns the bands with the next best reading, or why there is none.
 */
export function assignLines(
  found: readonly FoundLine[],
  options: AssignOptions = {},
): Assignment | NoAssignment {
  if (found.length < fewestMatches) {
    return {
      bands: [],
      code: 'few-lines',
      reason: `Only ${found.length} lines stand out: too few to number a band.`,
    };
  }
  const tolerancePpm = options.scaleTolerancePpm ?? 400;
  const width = options.widthPerCm ?? medianWidth(found);
  const positions = Float64Array.from(found, (l) => l.wavenumberPerCm);
  const candidates = candidatesFor(options.candidates);
  const free = found.map(() => true);
  const bands: AssignedBand[] = [];
  let runnerUp: RunnerUp | null = null;
  let range: readonly [number, number] = [-tolerancePpm, tolerancePpm];
  const refused: string[] = [];
  for (let round = 0; round < 8; round++) {
    const index: LineIndex = { lines: found, positions, free };
    const ranked = rank(
      index,
      candidates.filter((c) => !taken(bands, c)),
      range,
      width,
    );
    const chosen = ranked
      .map((score) => ({ score, refined: accept(index, score, width) }))
      .find((x): x is { score: BandScore; refined: RefinedBand } => {
        if (typeof x.refined === 'string') refused.push(x.refined);
        return typeof x.refined !== 'string';
      });
    if (chosen === undefined) break;
    const { score, refined } = chosen;
    runnerUp ??= runnerUpOf(score, refined, ranked);
    const partners = findPartners(
      index,
      score.candidate,
      refined,
      isotopologuesOf(score.candidate.isotopologue.gas),
      width,
    );
    bands.push(...assigned(found, score.candidate, refined, partners));
    for (const { line } of refined.matches) free[line] = false;
    for (const { line } of partners.flatMap((p) => p.matches)) free[line] = false;
    // One axis, one scale: what comes next stands where the first band says.
    if (round === 0) {
      const ppm = 1e6 * (refined.constants.bandOriginPerCm / score.candidate.constants.bandOriginPerCm - 1);
      range = [ppm - 60, ppm + 60];
    }
  }
  if (bands.length === 0) {
    return {
      bands: [],
      code: 'no-band',
      reason:
        refused[0] ??
        `${found.length} lines stand out, but no band of ${options.candidates?.join(', ') ?? 'a listed gas'} explains them.`,
    };
  }
  return { bands, runnerUp, unexplained: found.filter((_, i) => free[i]) };
}

function medianWidth(found: readonly FoundLine[]): number {
  const widths = found.map((l) => l.fullWidthHalfHeightPerCm).sort((a, b) => a - b);
  return widths[widths.length >> 1]!;
}

/** Main isotopologue of every gas asked for, fundamental and first overtone. */
function candidatesFor(names: readonly string[] | undefined): BandCandidate[] {
  const mains =
    names === undefined
      ? listedGases.flatMap((gas) => isotopologuesOf(gas).slice(0, 1))
      : [...new Set(names.map((n) => isotopologueNamed(n)?.gas))].flatMap((gas) =>
          gas === undefined ? [] : mainOf(gas, names),
        );
  return mains.flatMap((i) => [1, 2].flatMap((upper) => bandCandidate(i, upper) ?? []));
}

/** The most abundant isotopologue; where only rare ones are asked for (13CO), the first of those. */
function mainOf(gas: string, names: readonly string[]): Isotopologue[] {
  const all = isotopologuesOf(gas);
  const asked = all.filter((i) => names.includes(i.name));
  const main = all[0];
  return main === undefined
    ? []
    : asked.length > 0 && asked.every((i) => naturalAbundance(i) < 0.05)
      ? asked.slice(0, 1)
      : [main];
}

const taken = (bands: readonly AssignedBand[], c: BandCandidate): boolean =>
  bands.some((b) => b.isotopologue.name === c.isotopologue.name && b.band === `${c.upper}-0`);

function rank(
  index: LineIndex,
  candidates: readonly BandCandidate[],
  range: readonly [number, number],
  width: number,
): BandScore[] {
  const tolerance = Math.max(0.1, 0.3 * width);
  return candidates
    .flatMap((c) => scoreBand(index, c, range, tolerance) ?? [])
    .filter((s) => s.logOdds > leastLogOdds)
    .sort((a, b) => b.logOdds - a.logOdds);
}

/** The numbered band, or in words why it does not hold. */
function accept(index: LineIndex, score: BandScore, width: number): RefinedBand | string {
  const name = `${score.candidate.isotopologue.name} ${score.candidate.upper}-0`;
  const refined = refineBand(index, score, width);
  if (refined === null) return `Lines stand near those of ${name}, but they do not follow one band.`;
  if (refined.matches.length < fewestMatches)
    return `Only ${refined.matches.length} lines of ${name} can be told.`;
  return plausibility(name, score.candidate, refined, width) ?? refined;
}

function assigned(
  found: readonly FoundLine[],
  main: BandCandidate,
  refined: RefinedBand,
  partners: readonly Partner[],
): AssignedBand[] {
  const merged = partners.filter((p) => p.merged);
  const share = merged.reduce((sum, p) => sum + p.naturalRatio, 0);
  // In a merged doublet the found lines stand at the centre of gravity.
  const offset = merged.reduce(
    (sum, p) =>
      sum +
      (p.naturalRatio / (1 + share)) * (p.constants.bandOriginPerCm - refined.constants.bandOriginPerCm),
    0,
  );
  const moved = (c: BandConstants): BandConstants => ({ ...c, bandOriginPerCm: c.bandOriginPerCm - offset });
  const mainBand = band(found, main, moved(refined.constants), refined.matches, refined.rmsPerCm, false);
  return [
    mainBand,
    ...partners.map((p) =>
      band(
        found,
        p.candidate,
        p.merged ? moved(p.constants) : p.constants,
        p.matches,
        refined.rmsPerCm,
        p.merged,
      ),
    ),
  ];
}

function band(
  found: readonly FoundLine[],
  candidate: BandCandidate,
  constants: BandConstants,
  matches: readonly { m: number; line: number }[],
  rmsPerCm: number,
  merged: boolean,
): AssignedBand {
  const name = `${candidate.upper}-0`;
  const lines = matches.map(({ m, line }): AssignedLine => {
    const l = found[line]!;
    const branch = m > 0 ? 'R' : 'P';
    const jLower = m > 0 ? m - 1 : -m;
    return {
      id: `${candidate.isotopologue.name}/${name}/${branch}/${jLower}`,
      isotopologue: candidate.isotopologue.name,
      band: name,
      branch,
      jLower,
      m,
      wavenumberPerCm: l.wavenumberPerCm,
      uncertaintyPerCm: l.uncertaintyPerCm,
      peakAbsorbance: l.peakAbsorbance,
      saturated: l.saturated,
      blended: l.blended,
      used: true,
      leftOutBecause: null,
      residualPerCm: null,
    };
  });
  return { isotopologue: candidate.isotopologue, band: name, lines, constants, rmsPerCm, merged };
}
