import { upperCurve } from './prepare/upper-curve.ts';
import { selectRank } from './select-rank.ts';

/** What the numbers of an ordinate show without any label. */
export interface OrdinateEvidence {
  /** Values below which 2 %, 8 %, 50 %, 92 %, 98 % of the points lie. */
  readonly low: number;
  readonly lowBase: number;
  readonly middle: number;
  readonly highBase: number;
  readonly high: number;
  readonly least: number;
  readonly greatest: number;
  /** Where sharp features point: 'none' where neither side stands out. */
  readonly direction: 'up' | 'down' | 'none';
  readonly looksLikeInterferogram: boolean;
  /** Upper edge over sixteen stretches of the range: its highest place, and that over its lowest (null: not above 0). */
  readonly edgeHeight: number;
  readonly edgeRatio: number | null;
}

function sampled(y: Float64Array, most: number): Float64Array {
  const stride = Math.max(1, Math.floor(y.length / most));
  const sample = new Float64Array(Math.ceil(y.length / stride));
  for (let i = 0; i < sample.length; i++) sample[i] = y[i * stride]!;
  return sample.sort();
}

/** How far the features of blocks of this many points stand out above and below their middle. */
function excursions(y: Float64Array, block: number): { up: number; down: number } {
  let up = 0;
  let down = 0;
  const scratch = new Float64Array(block);
  for (let from = 0; from + block <= y.length; from += block) {
    // The second value from each end: a single spike decides nothing.
    let [greatest, second, least, nextLeast] = [-Infinity, -Infinity, Infinity, Infinity];
    for (let i = 0; i < block; i++) {
      const value = y[from + i]!;
      scratch[i] = value;
      if (value > greatest) {
        second = greatest;
        greatest = value;
      } else if (value > second) second = value;
      if (value < least) {
        nextLeast = least;
        least = value;
      } else if (value < nextLeast) nextLeast = value;
    }
    const middle = selectRank(scratch, block, block >> 1);
    up += (second - middle) ** 2;
    down += (middle - nextLeast) ** 2;
  }
  return { up: Math.sqrt(up), down: Math.sqrt(down) };
}

/** Tilt of the excursions towards up (+) or down (-), the clearest of three block lengths. */
function tiltOf(y: Float64Array): number {
  let best = 0;
  for (const block of [32, 128, 512]) {
    if (y.length < 2 * block) continue;
    const { up, down } = excursions(y, block);
    if (up + down === 0) continue;
    const tilt = (up - down) / (up + down);
    if (Math.abs(tilt) > Math.abs(best)) best = tilt;
  }
  return best;
}

/**
 * The same for few points, where a dense band fills whole blocks: a smooth curve fits the side without lines to within
 * the noise, and the side with lines badly.
 */
function tiltOfEnvelopes(y: Float64Array): number {
  const ones = new Float64Array(y.length).fill(1);
  const top = upperCurve(y, ones, 3, 0.03).scatter;
  const bottom = upperCurve(
    y.map((value) => -value),
    ones,
    3,
    0.03,
  ).scatter;
  return top + bottom === 0 ? 0 : (top - bottom) / (top + bottom);
}

function directionOf(y: Float64Array): OrdinateEvidence['direction'] {
  const tilt = y.length < 1500 ? tiltOfEnvelopes(y) : tiltOf(y);
  if (Math.abs(tilt) < 0.15) return 'none';
  return tilt > 0 ? 'up' : 'down';
}

/** A burst that swings to both sides of the mean several times, with quiet on both sides of it. */
function looksLikeInterferogram(y: Float64Array, middle: number): boolean {
  let largest = 0;
  let at = 0;
  let sum = 0;
  for (let i = 0; i < y.length; i++) {
    const size = Math.abs(y[i]! - middle);
    sum += size;
    if (size > largest) {
      largest = size;
      at = i;
    }
  }
  if (largest === 0 || sum / y.length > 0.05 * largest) return false;
  let swings = 0;
  let last = 0;
  for (let i = Math.max(0, at - 40); i < Math.min(y.length, at + 41); i++) {
    const value = y[i]! - middle;
    const side = Math.abs(value) > 0.12 * largest ? Math.sign(value) : 0;
    if (side !== 0 && side !== last) {
      swings++;
      last = side;
    }
  }
  return swings >= 5;
}

/** Second largest value of each of sixteen stretches. */
function upperEdge(y: Float64Array): Pick<OrdinateEvidence, 'edgeHeight' | 'edgeRatio'> {
  const heights = Array.from({ length: 16 }, (_, k) => {
    let [greatest, second] = [-Infinity, -Infinity];
    for (let i = Math.floor((k * y.length) / 16); i < Math.floor(((k + 1) * y.length) / 16); i++) {
      const value = y[i]!;
      if (value > greatest) [greatest, second] = [value, greatest];
      else if (value > second) second = value;
    }
    return Number.isFinite(second) ? second : greatest;
  }).filter(Number.isFinite);
  const least = Math.min(...heights);
  const edgeHeight = Math.max(...heights);
  return { edgeHeight, edgeRatio: least > 0 ? edgeHeight / least : null };
}

export function ordinateEvidence(y: Float64Array): OrdinateEvidence {
  const sorted = sampled(y, 2000);
  const quantile = (share: number): number => sorted[Math.floor(share * (sorted.length - 1))]!;
  let least = Infinity;
  let greatest = -Infinity;
  for (const value of y) {
    if (value < least) least = value;
    if (value > greatest) greatest = value;
  }
  return {
    low: quantile(0.02),
    lowBase: quantile(0.08),
    middle: quantile(0.5),
    highBase: quantile(0.92),
    high: quantile(0.98),
    least,
    greatest,
    direction: directionOf(y),
    looksLikeInterferogram: looksLikeInterferogram(y, quantile(0.5)),
    ...upperEdge(y),
  };
}
