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
    if (count < 24) break;
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

interface Segment {
  readonly from: number;
  readonly to: number;
  /** Share of free points. */
  readonly freeShare: number;
}

function segmentsOf(free: Uint8Array): Segment[] {
  const n = free.length;
  const count = Math.max(1, Math.min(24, Math.floor(n / 80)));
  return Array.from({ length: count }, (_, k) => {
    const from = Math.floor((k * n) / count);
    const to = Math.floor(((k + 1) * n) / count);
    let points = 0;
    for (let i = from; i < to; i++) points += free[i]!;
    return { from, to, freeShare: points / (to - from) };
  });
}

/** Free points of the quietest third of the segments: where the remains of lines and side lobes are least. */
function quietPoints(
  residual: Float64Array,
  free: Uint8Array,
  segments: readonly Segment[],
  scratch: Float64Array,
): { points: Uint8Array; segments: ReadonlySet<Segment> } {
  const judged = segments
    .map((segment) => ({ segment, ...lagDeviation(residual, free, 4, segment.from, segment.to, scratch) }))
    .filter((each) => each.count >= 20)
    .sort((a, b) => a.deviation - b.deviation);
  const quiet = new Set(
    judged.slice(0, Math.max(3, Math.ceil(judged.length / 3))).map((each) => each.segment),
  );
  const points = new Uint8Array(free.length);
  for (const { from, to } of quiet) points.set(free.subarray(from, to), from);
  return { points, segments: quiet };
}

/** Whether many points of a segment stand clearly above the baseline: side lobes of an instrument without apodisation. */
function isRinging(residual: Float64Array, segment: Segment, sigma: number): boolean {
  let high = 0;
  for (let i = segment.from; i < segment.to; i++) if (residual[i]! > 6 * sigma) high++;
  return high > 0.01 * (segment.to - segment.from);
}

/**
 * One deviation per segment (natural logarithm): its own where most of it is free and no line remains show; else what
 * the trusted ones around it say, or its own if that is less.
 */
function segmentLogs(
  residual: Float64Array,
  free: Uint8Array,
  lag: number,
  quiet: { readonly deviation: number; readonly segments: ReadonlySet<Segment> },
  segments: readonly Segment[],
  scratch: Float64Array,
): number[] {
  const own = segments.map((segment) => {
    const { deviation, count } = lagDeviation(residual, free, lag, segment.from, segment.to, scratch);
    const prior = 30 * Math.sqrt(lag);
    const variance = (count * deviation ** 2 + prior * quiet.deviation ** 2) / (count + prior);
    return 0.5 * Math.log(Math.max(variance, 1e-4 * quiet.deviation ** 2));
  });
  const trusted = segments.map(
    (segment) =>
      quiet.segments.has(segment) ||
      (segment.freeShare >= 0.6 && !isRinging(residual, segment, quiet.deviation)),
  );
  return own.map((value, k) => {
    if (trusted[k]) return value;
    const below = trusted.lastIndexOf(true, k);
    const above = trusted.indexOf(true, k);
    const left = below < 0 ? own[above]! : own[below]!;
    const right = above < 0 ? left : own[above]!;
    const between = below < 0 || above < 0 ? left : left + ((right - left) * (k - below)) / (above - below);
    return Math.min(value, between);
  });
}

function interpolated(logs: readonly number[], n: number): Float64Array {
  const noise = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const place = Math.max(0, Math.min(logs.length - 1, ((i + 0.5) * logs.length) / n - 0.5));
    const left = Math.floor(place);
    const right = Math.min(logs.length - 1, left + 1);
    noise[i] = Math.exp(logs[left]! + (place - left) * (logs[right]! - logs[left]!));
  }
  return noise;
}

/**
 * Nothing is free of lines: what neighbours differ by in the calmest stretch, lines included, stands for the noise; it
 * is rather too much than too little.
 */
function withoutFreePoints(residual: Float64Array, least: number, scratch: Float64Array): NoiseEstimate {
  const n = residual.length;
  const all = new Uint8Array(n).fill(1);
  const stretches = Math.max(1, Math.min(24, Math.floor(n / 16)));
  let overall = Infinity;
  for (let k = 0; k < stretches; k++) {
    const [from, to] = [Math.floor((k * n) / stretches), Math.floor(((k + 1) * n) / stretches)];
    overall = Math.min(overall, lagDeviation(residual, all, 2, from, to, scratch).deviation);
  }
  overall = Math.max(overall, least);
  return { noise: new Float64Array(n).fill(overall), overall, correlationPoints: 1 };
}

/**
 * Noise along a residual from the points that `free` marks (no lines), from second differences at a lag beyond the
 * correlation; never below `least` (the rounding of the file).
 */
export function estimateNoise(residual: Float64Array, free: Uint8Array, least: number): NoiseEstimate {
  const scratch = new Float64Array(Math.min(residual.length, 8000));
  const segments = segmentsOf(free);
  const freeShare = segments.reduce((sum, segment) => sum + segment.freeShare, 0) / segments.length;
  if (freeShare < 0.05) return withoutFreePoints(residual, least, scratch);
  const found = quietPoints(residual, free, segments, scratch);
  // Where lines are so dense that no stretch is free, the free points of the whole range have to do.
  const quiet = found.segments.size > 0 ? found : { points: free, segments: new Set(segments) };
  const lag = decorrelationLag(residual, quiet.points, scratch);
  const measured = lagDeviation(residual, quiet.points, lag, 0, residual.length, scratch);
  if (measured.count < 30) return withoutFreePoints(residual, least, scratch);
  const calm = measured.deviation;
  if (calm <= least) {
    return { noise: new Float64Array(residual.length).fill(least), overall: least, correlationPoints: 1 };
  }
  const logs = segmentLogs(
    residual,
    free,
    lag,
    { deviation: calm, segments: quiet.segments },
    segments,
    scratch,
  );
  const noise = interpolated(logs, residual.length);
  for (let i = 0; i < noise.length; i++) noise[i] = Math.max(noise[i]!, least);
  const overall = Math.exp(logs.reduce((sum, value) => sum + value, 0) / logs.length);
  return { noise, overall, correlationPoints: correlationOf(residual, quiet.points, calm) };
}

/** A quick overall figure of the same kind: all points where `free` is null (lines then widen it a little). */
export function scatterOf(residual: Float64Array, free: Uint8Array | null): number {
  const scratch = new Float64Array(Math.min(residual.length, 2000));
  const points = free ?? new Uint8Array(residual.length).fill(1);
  const lag = decorrelationLag(residual, points, scratch);
  return lagDeviation(residual, points, lag, 0, residual.length, scratch).deviation;
}
