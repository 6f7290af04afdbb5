import type { FoundLine } from '../lines/types.ts';
import {
  bandConstantsFrom,
  lineWavenumberPerCm,
  publishedConstants,
  relativeLineStrength,
} from '../molecule/index.ts';
import type { BandConstants, Isotopologue } from '../molecule/types.ts';

/** A band that may be in the file, with the constants published for it. */
export interface BandCandidate {
  readonly isotopologue: Isotopologue;
  readonly upper: number;
  readonly constants: BandConstants;
  readonly lines: readonly {
    readonly m: number;
    readonly wavenumberPerCm: number;
    readonly strength: number;
  }[];
}

/** How well a candidate explains found lines at one scale of the axis. */
export interface BandScore {
  readonly candidate: BandCandidate;
  readonly scalePpm: number;
  /** Natural logarithm of the odds of these matches against chance, the doubt about the scale included. */
  readonly logOdds: number;
  readonly matches: readonly { readonly m: number; readonly line: number }[];
  /** Lines expected to be visible in the range of the found ones. */
  readonly expected: number;
}

const roomTemperatureK = 296;
/** Lines weaker than this share of the strongest do not take part in the search. */
const leastStrength = 0.02;
/** 1σ of the wavenumber scale of teaching instruments, ppm (common practice: up to 160 seen). */
const scaleSigmaPpm = 100;

export function bandCandidate(isotopologue: Isotopologue, upper: number): BandCandidate | null {
  const published = publishedConstants(isotopologue.name);
  if (published === null) return null;
  const constants = bandConstantsFrom(published, upper);
  const all = [];
  for (let m = -60; m <= 60; m++) {
    if (m === 0) continue;
    const strength = relativeLineStrength(constants, m, roomTemperatureK);
    all.push({ m, wavenumberPerCm: lineWavenumberPerCm(constants, m), strength });
  }
  const strongest = Math.max(...all.map((l) => l.strength));
  const lines = all
    .map((l) => ({ ...l, strength: l.strength / strongest }))
    .filter((l) => l.strength > leastStrength);
  return { isotopologue, upper, constants, lines };
}

/** Found lines ready for look-up. */
export interface LineIndex {
  readonly lines: readonly FoundLine[];
  readonly positions: Float64Array;
  readonly free: readonly boolean[];
}

/** Nearest free found line to a wavenumber within a tolerance; −1 where there is none. */
export function nearest(index: LineIndex, wavenumberPerCm: number, tolerancePerCm: number): number {
  const { positions } = index;
  let low = 0;
  let high = positions.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (positions[middle]! < wavenumberPerCm) low = middle + 1;
    else high = middle;
  }
  let best = -1;
  let distance = tolerancePerCm;
  for (let i = low; i < positions.length && positions[i]! - wavenumberPerCm <= distance; i++) {
    if (index.free[i]) {
      distance = positions[i]! - wavenumberPerCm;
      best = i;
      break;
    }
  }
  for (let i = low - 1; i >= 0 && wavenumberPerCm - positions[i]! <= distance; i--) {
    if (index.free[i]) {
      best = i;
      break;
    }
  }
  return best;
}

/** Best scale of a candidate: the axis is tried in steps finer than the tolerance of a match. */
export function scoreBand(
  index: LineIndex,
  candidate: BandCandidate,
  scaleRangePpm: readonly [number, number],
  tolerancePerCm: number,
): BandScore | null {
  const positions = index.positions;
  if (positions.length < 4) return null;
  const from = positions[0]! - 1;
  const to = positions[positions.length - 1]! + 1;
  const visible = candidate.lines.filter((l) => l.wavenumberPerCm > from && l.wavenumberPerCm < to);
  if (visible.length < 4) return null;
  const step = (0.5e6 * tolerancePerCm) / candidate.constants.bandOriginPerCm;
  let best: BandScore | null = null;
  for (let ppm = scaleRangePpm[0]; ppm <= scaleRangePpm[1] + 1e-9; ppm += step) {
    const score = scoreAt(index, candidate, visible, ppm, tolerancePerCm);
    if (score !== null && (best === null || score.logOdds > best.logOdds)) best = score;
  }
  return best;
}

function scoreAt(
  index: LineIndex,
  candidate: BandCandidate,
  visible: BandCandidate['lines'],
  ppm: number,
  tolerance: number,
): BandScore | null {
  const scale = 1 + ppm * 1e-6;
  const hits = visible.map((l) => ({ l, line: nearest(index, l.wavenumberPerCm * scale, tolerance) }));
  const matched = hits.filter((h) => h.line >= 0);
  if (matched.length < 4) return null;
  // Strength of the band: the median over matches, so that single foreign lines do not set it.
  const ratios = matched.map((h) => index.lines[h.line]!.peakAbsorbance / h.l.strength).sort((a, b) => a - b);
  const amount = ratios[ratios.length >> 1]!;
  const floor = Math.min(...index.lines.map((l) => (5 * l.peakAbsorbance) / l.signalToNoise));
  let logOdds = -((ppm / scaleSigmaPpm) ** 2) / 2 - 3;
  let expected = 0;
  const matches: { m: number; line: number }[] = [];
  for (const { l, line } of hits) {
    const density = densityNear(index, l.wavenumberPerCm * scale);
    const chance = Math.min(0.8, 2 * tolerance * density);
    const shouldShow = amount * l.strength > 2 * floor;
    if (shouldShow) expected++;
    const likely = line >= 0 && strengthAgrees(index.lines[line]!, amount * l.strength);
    if (likely) {
      // A foreign line would also have to have the right strength: half of them do.
      logOdds += Math.log(0.9 / (0.5 * chance));
      matches.push({ m: l.m, line });
    } else if (shouldShow) logOdds += Math.log(0.1 / (1 - 0.5 * chance));
  }
  return { candidate, scalePpm: ppm, logOdds, matches, expected };
}

/** Within a factor of four; a saturated line may be any number of times stronger than it looks. */
function strengthAgrees(line: FoundLine, expectedAbsorbance: number): boolean {
  const ratio = line.peakAbsorbance / expectedAbsorbance;
  return ratio < 4 && (ratio > 0.25 || line.saturated);
}

/** Found lines per cm-1 within 40 cm-1. */
function densityNear(index: LineIndex, wavenumberPerCm: number): number {
  const reach = 40;
  const { positions } = index;
  let count = 0;
  for (const p of positions) if (Math.abs(p - wavenumberPerCm) < reach) count++;
  return Math.max(1, count) / (2 * reach);
}
