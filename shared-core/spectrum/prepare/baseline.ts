import { atPoints, binMeans, binsFor, type Bins } from './bins.ts';
import { findFringes, type Fringes } from './fringes.ts';
import { quickNoise } from './noise.ts';
import { lambdaFor, smoothPenalised } from './penalised-smoother.ts';

export interface Baseline {
  /** In transmittance, above zero. */
  readonly values: Float64Array;
  /** 1 where a point shows baseline only, 0 in lines and their wings. */
  readonly free: Uint8Array;
  readonly fringes: Fringes | null;
}

/** Waves shorter than this stay in the spectrum: lines of a band are closer, gas bands are masked. */
const stiffPeriodPerCm = 300;
const finalPeriodPerCm = 150;

/**
 * Asymmetrically reweighted penalised least squares (S.-J. Baek et al., Analyst 140 (2015) 250), turned so that lines
 * point down: points far below the curve lose their weight, by the scatter of the points above it.
 */
function upperCurve(
  means: Float64Array,
  counts: Float64Array,
  lambda: number,
): { curve: Float64Array; scatter: number } {
  const n = means.length;
  const weights = counts.map((count) => Math.min(1, count));
  let curve = means;
  let scatter = 0;
  for (let round = 0; round < 25; round++) {
    curve = smoothPenalised(means, weights, lambda);
    let sum = 0;
    let squares = 0;
    let above = 0;
    for (let i = 0; i < n; i++) {
      const depth = curve[i]! - means[i]!;
      if (counts[i]! > 0 && depth < 0) {
        sum += depth;
        squares += depth * depth;
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
      const depth = curve[i]! - means[i]!;
      const exponent = Math.min(50, (2 * (depth - (2 * scatter - mean))) / scatter);
      const weight = 1 / (1 + Math.exp(exponent));
      change += Math.abs(weight - weights[i]!);
      weights[i] = Math.max(weight, 1e-7);
    }
    if (change < 0.01 * n) break;
  }
  return { curve, scatter };
}

/** Marks points that lie within the tolerance of the curve, and unmarks the neighbours of those that do not. */
function freePoints(t: Float64Array, curve: Float64Array, tolerance: number, reach: number): Uint8Array {
  const free = new Uint8Array(t.length).fill(1);
  let blockedUntil = -1;
  for (let i = 0; i < t.length; i++) {
    const depth = curve[i]! - t[i]!;
    if (depth > tolerance || depth < -2 * tolerance) {
      for (let k = Math.max(0, blockedUntil + 1, i - reach); k <= Math.min(t.length - 1, i + reach); k++)
        free[k] = 0;
      blockedUntil = Math.min(t.length - 1, i + reach);
    }
  }
  return free;
}

function share(free: Uint8Array): number {
  let count = 0;
  for (const each of free) count += each;
  return count / free.length;
}

function smoothFree(bins: Bins, y: Float64Array, free: Uint8Array, fallback: Float64Array): Float64Array {
  const { means, counts } = binMeans(bins, y, free);
  const period = Math.min(finalPeriodPerCm, 0.6 * bins.count * bins.widthPerCm);
  // Where lines leave no free point for long, the curve keeps to the stiff one instead of bending on its own.
  for (let b = 0; b < means.length; b++) {
    if (counts[b] === 0) means[b] = fallback[b]!;
    counts[b] = Math.max(counts[b]!, 0.003);
  }
  return smoothPenalised(means, counts, lambdaFor(period / bins.widthPerCm));
}

function positive(curve: Float64Array, least: number): Float64Array {
  return curve.map((value) => Math.max(value, least));
}

/**
 * The baseline of a transmittance whose lines point down: a stiff curve through the upper side, one wave of fringes,
 * and a gentle refinement through the points that show no line.
 */
export function estimateBaseline(x: Float64Array, t: Float64Array, stepPerCm: number): Baseline {
  const bins = binsFor(x, stepPerCm);
  const { means, counts } = binMeans(bins, t, null);
  const range = bins.count * bins.widthPerCm;
  const stiff = upperCurve(means, counts, lambdaFor(Math.min(stiffPeriodPerCm, range) / bins.widthPerCm));
  const least =
    1e-3 * Math.max(1e-6, ...[0.5, 0.9].map((q) => means.toSorted()[Math.floor(q * (bins.count - 1))]!));
  const noise = quickNoise(t);
  const reach = Math.max(2, Math.round(0.5 / stepPerCm));
  let binCurve = positive(stiff.curve, least);
  let free = freePoints(t, atPoints(bins, binCurve, x), Math.max(3 * noise, 2.5 * stiff.scatter), reach);
  let fringes: ReturnType<typeof findFringes> = null;
  for (let round = 0; round < 3; round++) {
    if (share(free) < 0.03) break;
    const points = atPoints(bins, binCurve, x);
    const relative = t.map((value, i) => value / points[i]! - 1);
    if (round < 2) {
      const flat = binMeans(bins, relative, free);
      fringes = findFringes(flat.means, flat.counts, bins.widthPerCm, noise);
    }
    const wave = fringes;
    const divided = wave
      ? t.map((value, i) => value / (1 + wave.atBin((x[i]! - bins.from) / bins.widthPerCm - 0.5)))
      : t;
    binCurve = positive(smoothFree(bins, divided, free, binCurve), least);
    const tolerance = round === 0 ? Math.max(3 * noise, 1.5 * stiff.scatter) : Math.max(3 * noise, 1e-6);
    free = freePoints(divided, atPoints(bins, binCurve, x), tolerance, reach);
  }
  const values = atPoints(bins, binCurve, x);
  if (fringes) {
    for (let i = 0; i < values.length; i++) {
      values[i] = values[i]! * (1 + fringes.atBin((x[i]! - bins.from) / bins.widthPerCm - 0.5));
    }
  }
  return { values, free, fringes };
}
