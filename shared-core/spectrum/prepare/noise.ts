import { selectRank } from '../select-rank.ts';

/** Noise of a flat residual: per point, and how far it is correlated. */
export interface NoiseEstimate {
  /** 1 sigma at each point. */
  readonly noise: Float64Array;
  /** 1 sigma over the whole range. */
  readonly overall: number;
  /** Sum of the autocorrelation over all lags, points: 1 for independent points. */
  readonly correlationPoints: number;
}

const lags = [1, 2, 3, 4, 6, 8, 12, 16, 24, 32];

/** Standard deviation of mostly normal values: median of sizes first, then the mean square within 3.5 of that. */
function robustDeviation(sizes: Float64Array, count: number): number {
  if (count === 0) return 0;
  for (let i = 0; i < count; i++) sizes[i] = Math.abs(sizes[i]!);
  const scale = 1.4826 * selectRank(sizes, count, count >> 1);
  const limit = scale > 0 ? 3.5 * scale : selectRank(sizes, count, Math.floor(0.9 * (count - 1)));
  let sum = 0;
  let within = 0;
  for (let i = 0; i < count; i++) {
    if (sizes[i]! > limit) continue;
    sum += sizes[i]! ** 2;
    within++;
  }
  // A normal distribution cut at 3.5 sigma keeps 0.9939 of its variance.
  return within === 0 ? scale : Math.sqrt(sum / within / 0.9939);
}

/** Second differences at one lag over free points, scaled to the deviation of one independent point. */
function lagDeviation(
  residual: Float64Array,
  free: Uint8Array,
  lag: number,
  from: number,
  to: number,
  scratch: Float64Array,
): { deviation: number; count: number } {
  let count = 0;
  const stride = Math.max(1, Math.floor((to - from) / scratch.length));
  for (let i = from + lag; i + lag < to && count < scratch.length; i += stride) {
    if (free[i]! && free[i - lag]! && free[i + lag]!) {
      scratch[count++] = residual[i - lag]! - 2 * residual[i]! + residual[i + lag]!;
    }
  }
  return { deviation: robustDeviation(scratch, count) / Math.sqrt(6), count };
}

/** The lag from which differences no longer grow: beyond the correlation of zero-filled points. */
function decorrelationLag(residual: Float64Array, free: Uint8Array, scratch: Float64Array): number {
  const n = residual.length;
  const deviations: number[] = [];
  for (const lag of lags) {
    const { deviation, count } = lagDeviation(residual, free, lag, 0, n, scratch);
    if (count < 60) break;
    deviations.push(deviation);
    const k = deviations.length - 1;
    if (
      k >= 2 &&
      deviations[k]! < 1.04 * deviations[k - 2]! &&
      deviations[k - 1]! < 1.04 * deviations[k - 2]!
    ) {
      return lags[k - 2]!;
    }
  }
  return deviations.length === 0 ? 1 : lags[deviations.length - 1]!;
}

/** Variance of means over `size` neighbouring points, times size, over the variance of a point. */
function correlationOf(residual: Float64Array, free: Uint8Array, overall: number): number {
  const size = 8;
  const differences = new Float64Array(Math.floor(residual.length / size) + 1);
  let count = 0;
  const means: number[] = [];
  for (let from = 0; from + size <= residual.length; from += size) {
    let sum = 0;
    let all = true;
    for (let i = from; i < from + size; i++) {
      sum += residual[i]!;
      if (free[i] === 0) all = false;
    }
    means.push(all ? sum / size : NaN);
  }
  for (let k = 2; k < means.length; k++) {
    const difference = means[k - 2]! - 2 * means[k - 1]! + means[k]!;
    if (!Number.isNaN(difference)) differences[count++] = difference / Math.sqrt(6);
  }
  if (count < 12 || overall === 0) return 1;
  const ratio = (size * robustDeviation(differences, count) ** 2) / overall ** 2;
  return ratio < 1.3 ? 1 : Math.min(32, ratio);
}

/** Local deviations, drawn towards the overall one where few points stand behind them, interpolated over the range. */
function localNoise(
  residual: Float64Array,
  free: Uint8Array,
  lag: number,
  overall: number,
  scratch: Float64Array,
): Float64Array {
  const n = residual.length;
  const segments = Math.max(1, Math.min(24, Math.floor(n / 250)));
  const logs = Array.from({ length: segments }, (_, k) => {
    const from = Math.floor((k * n) / segments);
    const to = Math.floor(((k + 1) * n) / segments);
    const { deviation, count } = lagDeviation(residual, free, lag, from, to, scratch);
    const prior = 60 * lag;
    const variance = (count * deviation ** 2 + prior * overall ** 2) / (count + prior);
    return 0.5 * Math.log(Math.max(variance, 1e-4 * overall ** 2));
  });
  const noise = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const place = Math.max(0, Math.min(segments - 1, ((i + 0.5) * segments) / n - 0.5));
    const left = Math.min(segments - 1, Math.floor(place));
    const right = Math.min(segments - 1, left + 1);
    noise[i] = Math.exp(logs[left]! + (place - left) * (logs[right]! - logs[left]!));
  }
  return noise;
}

/**
 * Noise along a residual from the points that `free` marks (no lines), from second differences at a lag beyond the
 * correlation; never below `least` (the rounding of the file).
 */
export function estimateNoise(residual: Float64Array, free: Uint8Array, least: number): NoiseEstimate {
  const scratch = new Float64Array(Math.min(residual.length, 20_000));
  const lag = decorrelationLag(residual, free, scratch);
  const measured = lagDeviation(residual, free, lag, 0, residual.length, scratch).deviation;
  const overall = Math.max(measured, least);
  if (measured <= least) {
    return { noise: new Float64Array(residual.length).fill(overall), overall, correlationPoints: 1 };
  }
  const noise = localNoise(residual, free, lag, overall, scratch);
  for (let i = 0; i < noise.length; i++) noise[i] = Math.max(noise[i]!, least);
  return { noise, overall, correlationPoints: correlationOf(residual, free, measured) };
}

/** A quick overall figure of the same kind: all points where `free` is null (lines then widen it a little). */
export function scatterOf(residual: Float64Array, free: Uint8Array | null): number {
  const scratch = new Float64Array(Math.min(residual.length, 4000));
  const points = free ?? new Uint8Array(residual.length).fill(1);
  const lag = decorrelationLag(residual, points, scratch);
  return lagDeviation(residual, points, lag, 0, residual.length, scratch).deviation;
}
