import type { BandConstants } from '../../molecule/types.ts';
import { lineWavenumberPerCm } from '../../molecule/index.ts';
import type { ParameterMap } from './columns.ts';
import type { ForwardBand } from './types.ts';

/** One line of the model: where it stands in the input. */
export interface ModelLine {
  readonly bandIndex: number;
  readonly m: number;
  /** Position of its own: no part in the constants. */
  readonly free: boolean;
  /** Index of the line whose strength it shares, with the ratio; itself and 1 where it has its own. */
  readonly strengthOf: number;
  readonly strengthRatio: number;
}

/** A constant that is fitted: which band, and its derivatives by ν̃0, B_0, B_n, D_0, D_n (tied D counts as one). */
export interface ModelConstant {
  readonly bandIndex: number;
  readonly which: readonly number[];
}

export interface Layout {
  readonly lines: readonly ModelLine[];
  readonly constants: readonly ModelConstant[];
  /** Lines that carry a strength of their own. */
  readonly ownStrengths: readonly number[];
  readonly freeLines: readonly number[];
  /** Number of baseline knots. */
  readonly knots: number;
}

/** Derivatives of a line's wavenumber by ν̃0, B_0, B_n, D_0, D_n. */
export function lineDerivatives(m: number): readonly [number, number, number, number, number] {
  const lower = m > 0 ? (m - 1) * m : -m * (-m + 1);
  const upper = m > 0 ? m * (m + 1) : (-m - 1) * -m;
  return [1, -lower, upper, lower * lower, -upper * upper];
}

export function makeLayout(bands: readonly ForwardBand[], knots: number): Layout {
  const lines: ModelLine[] = [];
  bands.forEach((band, bandIndex) => {
    for (const m of band.ms) {
      const leader =
        band.follows === undefined
          ? -1
          : lines.findIndex((l) => l.bandIndex === band.follows!.leader && l.m === m);
      const own = lines.length;
      lines.push({
        bandIndex,
        m,
        free: band.freeMs?.includes(m) ?? false,
        strengthOf: leader < 0 ? own : leader,
        strengthRatio: leader < 0 ? 1 : band.follows!.strengthRatio,
      });
    }
  });
  const constants = bands.flatMap((band, bandIndex) => {
    if (band.follows !== undefined) return [];
    const own: ModelConstant[] = [0, 1, 2].map((which) => ({ bandIndex, which: [which] }));
    if (band.distortion === 'tied') own.push({ bandIndex, which: [3, 4] });
    if (band.distortion === 'free') own.push({ bandIndex, which: [3] }, { bandIndex, which: [4] });
    return own;
  });
  return {
    lines,
    constants,
    ownStrengths: lines.flatMap((l, i) => (l.strengthOf === i ? [i] : [])),
    freeLines: lines.flatMap((l, i) => (l.free ? [i] : [])),
    knots,
  };
}

/** Constants of a follower from those of its leader: origin moved alike, the rest in proportion. */
export function followerConstants(
  start: BandConstants,
  leaderStart: BandConstants,
  leader: BandConstants,
): BandConstants {
  const scaled = (key: keyof BandConstants): number =>
    leaderStart[key] === 0 ? start[key] : (start[key] * leader[key]) / leaderStart[key];
  return {
    bandOriginPerCm: start.bandOriginPerCm + leader.bandOriginPerCm - leaderStart.bandOriginPerCm,
    rotationalConstantLowerPerCm: scaled('rotationalConstantLowerPerCm'),
    rotationalConstantUpperPerCm: scaled('rotationalConstantUpperPerCm'),
    centrifugalConstantLowerPerCm: scaled('centrifugalConstantLowerPerCm'),
    centrifugalConstantUpperPerCm: scaled('centrifugalConstantUpperPerCm'),
    sexticConstantLowerPerCm: start.sexticConstantLowerPerCm,
    sexticConstantUpperPerCm: start.sexticConstantUpperPerCm,
  };
}

export const constantKeys = [
  'bandOriginPerCm',
  'rotationalConstantLowerPerCm',
  'rotationalConstantUpperPerCm',
  'centrifugalConstantLowerPerCm',
  'centrifugalConstantUpperPerCm',
] as const;

/**
 * Map from the basis columns (by centre of every line, by strength of every line, width, path, q1, q2, knots) to the parameters
 * (constants, free centres, own strengths, width, path, q1, q2, knots).
 */
export function parameterMaps(layout: Layout, bands: readonly ForwardBand[]): ParameterMap[] {
  const n = layout.lines.length;
  const maps: ParameterMap[] = layout.constants.map((constant) => {
    const basis: number[] = [];
    const coefficients: number[] = [];
    layout.lines.forEach((line, i) => {
      const follows = bands[line.bandIndex]!.follows;
      if (line.free || (line.bandIndex !== constant.bandIndex && follows?.leader !== constant.bandIndex))
        return;
      const d = lineDerivatives(line.m);
      const value = constant.which.reduce((sum, w) => sum + d[w]! * ratioOf(bands, line.bandIndex, w), 0);
      basis.push(i);
      coefficients.push(value);
    });
    return { basis, coefficients };
  });
  for (const i of layout.freeLines) maps.push({ basis: [i], coefficients: [1] });
  for (const i of layout.ownStrengths) {
    const sharing = layout.lines.flatMap((l, k) => (l.strengthOf === i ? [k] : []));
    maps.push({
      basis: sharing.map((k) => n + k),
      coefficients: sharing.map((k) => layout.lines[k]!.strengthRatio),
    });
  }
  for (let k = 0; k < 4 + layout.knots; k++) maps.push({ basis: [2 * n + k], coefficients: [1] });
  return maps;
}

function ratioOf(bands: readonly ForwardBand[], bandIndex: number, which: number): number {
  const follows = bands[bandIndex]!.follows;
  if (follows === undefined || which === 0) return 1;
  const key = constantKeys[which]!;
  const leader = bands[follows.leader]!.constants[key];
  return leader === 0 ? 1 : bands[bandIndex]!.constants[key] / leader;
}

/** Line centres for the constants of every band; free lines keep the position given. */
export function lineCentres(
  layout: Layout,
  constants: readonly BandConstants[],
  freeCentres: ReadonlyMap<number, number>,
): Float64Array {
  return Float64Array.from(
    layout.lines,
    (line, i) => freeCentres.get(i) ?? lineWavenumberPerCm(constants[line.bandIndex]!, line.m),
  );
}

/** A follower with at least this share of its leader is a merged partner; rarer ones only stand in the background. */
const mergedShare = 0.05;

export const isMerged = (band: ForwardBand): boolean =>
  band.follows !== undefined && band.follows.strengthRatio > mergedShare;
