import { selectRank } from '../select-rank.ts';

/** A dip of the transmittance: index of its bottom, depth and full width at half depth. */
export interface Dip {
  readonly index: number;
  readonly depth: number;
  readonly widthPerCm: number;
}

/** Distance from the bottom to where half the depth is passed, walking in one direction; null if another dip follows first. */
function halfWidth(x: Float64Array, t: Float64Array, at: number, direction: 1 | -1): number | null {
  const half = 1 - (1 - t[at]!) / 2;
  for (let i = at + direction, steps = 0; i >= 0 && i < t.length && steps < 400; i += direction, steps++) {
    if (t[i]! >= half) {
      const inner = t[i - direction]!;
      const part = (half - inner) / (t[i]! - inner);
      return Math.abs(x[i - direction]! + direction * part * Math.abs(x[i]! - x[i - direction]!) - x[at]!);
    }
    if (t[i]! < t[at]!) return null;
  }
  return null;
}

/** Dips that stand at least `limit` sigma out of the baseline, one per minimum of its neighbourhood. */
export function findDips(x: Float64Array, t: Float64Array, noise: Float64Array, limit: number): Dip[] {
  const dips: Dip[] = [];
  for (let i = 2; i + 2 < t.length; i++) {
    const value = t[i]!;
    const depth = 1 - value;
    if (depth < limit * noise[i]! || value > t[i - 1]! || value >= t[i + 1]!) continue;
    if (value > t[i - 2]! || value > t[i + 2]!) continue;
    const left = halfWidth(x, t, i, -1);
    const right = halfWidth(x, t, i, 1);
    if (left !== null && right !== null) dips.push({ index: i, depth, widthPerCm: left + right });
  }
  return dips;
}

/**
 * Smallest width that several dips show: the fifth part from below of those that are not black and stand well above
 * the side lobes of the deep ones.
 */
export function resolutionOf(dips: readonly Dip[]): number | null {
  const depths = dips.map((dip) => dip.depth).sort((a, b) => b - a);
  const deep = depths[Math.floor(0.1 * depths.length)] ?? 0;
  const lines = dips.filter((dip) => dip.depth > 0.35 * deep);
  const clear = lines.filter((dip) => dip.depth < 0.8);
  const widths = (clear.length >= 3 ? clear : lines).map((dip) => dip.widthPerCm).sort((a, b) => a - b);
  return widths.length < 3 ? null : widths[Math.floor(0.2 * (widths.length - 1))]!;
}

/**
 * Transmittance at which lines stay flat (clipped ordinate, dark signal, black lines), null where none do: at least two
 * lines, or one with eight points, whose bottoms agree within the noise.
 */
export function saturationLevel(
  t: Float64Array,
  noise: Float64Array,
  correlationPoints: number,
): number | null {
  const floor = selectRank(t.slice(), t.length, Math.min(t.length - 1, 3));
  if (floor > 0.35) return null;
  const runLength = Math.max(4, Math.ceil(2 * correlationPoints));
  let places = 0;
  let longest = 0;
  let run = 0;
  for (let i = 0; i <= t.length; i++) {
    if (i < t.length && t[i]! < floor + 2.5 * noise[i]! + 0.002) run++;
    else {
      if (run >= runLength) places++;
      longest = Math.max(longest, run);
      run = 0;
    }
  }
  return places >= 2 || longest >= 2 * runLength ? Math.max(floor, 0) : null;
}

/**
 * Single points far off both neighbours, which agree with each other: no instrument line is that narrow. Where lines
 * are sampled by less than about three points a line on a grid point looks the same, so none are sought there.
 */
export function findSpikes(t: Float64Array, noise: Float64Array, pointsPerWidth: number | null): number[] {
  if (pointsPerWidth !== null && pointsPerWidth < 3.2) return [];
  const spikes: number[] = [];
  for (let i = 2; i + 2 < t.length; i++) {
    const around = (t[i - 1]! + t[i + 1]!) / 2;
    const height = Math.abs(t[i]! - around);
    if (height < 8 * noise[i]!) continue;
    const limit = 3.5 * noise[i]! + 0.06 * height;
    const outer = (t[i - 2]! + t[i + 2]!) / 2;
    if (Math.abs(t[i - 1]! - t[i + 1]!) < 2 * limit && Math.abs(around - outer) < limit) spikes.push(i);
  }
  return spikes;
}
