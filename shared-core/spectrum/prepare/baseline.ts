import { binMeans, binsFor, type Bins } from './bins.ts';
import { findFringes, type Fringes } from './fringes.ts';
import { scatterOf } from './noise.ts';
import { fitSmoothSpline, splineAt, type SmoothSpline } from './smooth-spline.ts';

export interface Baseline {
  /** In transmittance, above zero. */
  readonly values: Float64Array;
  /** 1 where a point shows baseline only, 0 in lines and their wings. */
  readonly free: Uint8Array;
  readonly fringes: Fringes | null;
}

/** Distance of the knots: the curve follows nothing narrower; lines of a band are closer, gas bands are masked. */
const stiffKnotsPerCm = 120;
const finalKnotsPerCm = 60;

/**
 * Asymmetrically reweighted least squares (S.-J. Baek et al., Analyst 140 (2015) 250), turned so that lines point down:
 * points far below the curve lose their weight, by the scatter of the points above it.
 */
function upperCurve(
  means: Float64Array,
  counts: Float64Array,
  intervals: number,
): { curve: SmoothSpline; scatter: number } {
  const n = means.length;
  const weights = counts.map((count) => Math.min(1, count));
  let curve = fitSmoothSpline(means, weights, intervals, 0.03);
  let scatter = 0;
  const depth = new Float64Array(n);
  for (let round = 0; round < 30; round++) {
    let sum = 0;
    let squares = 0;
    let above = 0;
    for (let i = 0; i < n; i++) {
      depth[i] = splineAt(curve, (i + 0.5) / n) - means[i]!;
      if (counts[i]! > 0 && depth[i]! < 0) {
        sum += depth[i]!;
        squares += depth[i]! ** 2;
        above++;
      }
    }
    if (above < 3) break;
    const mean = sum / above;
    scatter = Math.sqrt(Math.max(0, squares / above - mean * mean));
    if (scatter === 0) break;
    let change = 0;
    for (let i = 0; i < n; i++) {
      if (counts[i] === 0) continue;
      const exponent = Math.min(50, (2 * (depth[i]! - (2 * scatter - mean))) / scatter);
      const weight = Math.max(1e-5, 1 / (1 + Math.exp(exponent)));
      change += Math.abs(weight - weights[i]!);
      weights[i] = weight;
    }
    if (change < 0.005 * n) break;
    curve = fitSmoothSpline(means, weights, intervals, 0.03);
  }
  return { curve, scatter };
}

/** Marks points that lie within the tolerance of the curve, and unmarks the neighbours of those that do not. */
function freePoints(depth: Float64Array, tolerance: number, reach: number): Uint8Array {
  const free = new Uint8Array(depth.length).fill(1);
  let blockedUntil = -1;
  for (let i = 0; i < depth.length; i++) {
    if (depth[i]! <= tolerance && depth[i]! >= -2 * tolerance) continue;
    const to = Math.min(depth.length - 1, i + reach);
    for (let k = Math.max(0, blockedUntil + 1, i - reach); k <= to; k++) free[k] = 0;
    blockedUntil = to;
  }
  return free;
}

function shareOf(free: Uint8Array): number {
  let count = 0;
  for (const each of free) count += each;
  return count / free.length;
}

function intervalsFor(bins: Bins, distance: number): number {
  return Math.max(2, Math.round((bins.count * bins.widthPerCm) / distance));
}

/** Through the free points; where lines leave none for long, the curve keeps to the one before. */
function throughFree(bins: Bins, y: Float64Array, free: Uint8Array, before: SmoothSpline): SmoothSpline {
  const { means, counts } = binMeans(bins, y, free);
  for (let b = 0; b < means.length; b++) {
    if (counts[b] === 0) means[b] = splineAt(before, (b + 0.5) / bins.count);
    counts[b] = Math.max(counts[b]!, 0.003);
  }
  // Few free points between dense lines: a supple curve would sag into the band.
  const distance = shareOf(free) < 0.3 ? stiffKnotsPerCm : finalKnotsPerCm;
  return fitSmoothSpline(means, counts, intervalsFor(bins, distance), 0.01);
}

function sampledQuantile(values: Float64Array, share: number): number {
  const sorted = values.toSorted();
  return sorted[Math.floor(share * (sorted.length - 1))]!;
}

/**
 * The baseline of a transmittance whose lines point down: a stiff curve through the upper side, one wave of fringes,
 * and a gentle refinement through the points that show no line.
 */
export function estimateBaseline(x: Float64Array, t: Float64Array, stepPerCm: number): Baseline {
  const n = x.length;
  const bins = binsFor(x, stepPerCm);
  const { means, counts } = binMeans(bins, t, null);
  const stiff = upperCurve(means, counts, intervalsFor(bins, stiffKnotsPerCm));
  const least = Math.max(1e-9, 1e-3 * sampledQuantile(means, 0.9));
  const reach = Math.max(2, Math.round(0.5 / stepPerCm));
  const span = bins.count * bins.widthPerCm;
  const valuesOf = (spline: SmoothSpline): Float64Array => {
    const values = new Float64Array(n);
    for (let i = 0; i < n; i++) values[i] = Math.max(least, splineAt(spline, (x[i]! - bins.from) / span));
    return values;
  };
  let curve = stiff.curve;
  let values = valuesOf(curve);
  const depth = new Float64Array(n);
  const measureDepth = (): void => {
    for (let i = 0; i < n; i++) depth[i] = 1 - t[i]! / values[i]!;
  };
  measureDepth();
  const scale = sampledQuantile(means, 0.9);
  const scatter = (2.5 * stiff.scatter) / Math.max(scale, 1e-9);
  let free = freePoints(depth, Math.max(scatter, 3 * scatterOf(depth, null)), reach);
  let fringes: ReturnType<typeof findFringes> = null;
  for (let round = 0; round < 3 && shareOf(free) >= 0.03; round++) {
    const sigma = scatterOf(depth, free);
    if (round < 2) {
      // The wave found before is in `values`; here it is looked for afresh on the bare curve.
      const bare = fringes ? valuesOf(curve) : values;
      const relative = new Float64Array(n);
      for (let i = 0; i < n; i++) relative[i] = t[i]! / bare[i]! - 1;
      const flat = binMeans(bins, relative, free);
      fringes = findFringes(flat.means, flat.counts, bins.widthPerCm, sigma);
    }
    const wave = fringes;
    const factor = wave ? x.map((w) => 1 + wave.atBin((w - bins.from) / bins.widthPerCm - 0.5)) : null;
    curve = throughFree(bins, factor ? t.map((value, i) => value / factor[i]!) : t, free, curve);
    values = valuesOf(curve);
    if (factor) for (let i = 0; i < n; i++) values[i] = values[i]! * factor[i]!;
    measureDepth();
    const tolerance = 3 * scatterOf(depth, free);
    free = freePoints(
      depth,
      round === 0 ? Math.max(tolerance, 0.6 * scatter) : Math.max(tolerance, 1e-6),
      reach,
    );
  }
  return { values, free, fringes };
}
