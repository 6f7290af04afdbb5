import { fitSmoothSpline, splineAt, type SmoothSpline } from './smooth-spline.ts';

export interface UpperCurve {
  readonly curve: SmoothSpline;
  /** Scatter of the bins above it. */
  readonly scatter: number;
}

function depthsBelow(curve: SmoothSpline, means: Float64Array, into: Float64Array): void {
  const n = means.length;
  for (let i = 0; i < n; i++) into[i] = splineAt(curve, (i + 0.5) / n) - means[i]!;
}

/** Mean and deviation of the depths of the bins above the curve; null where there are hardly any. */
function scatterAbove(
  depths: Float64Array,
  counts: Float64Array,
): { mean: number; deviation: number } | null {
  let [sum, squares, above] = [0, 0, 0];
  for (let i = 0; i < depths.length; i++) {
    const depth = depths[i]!;
    if (counts[i] === 0 || depth >= 0) continue;
    sum += depth;
    squares += depth * depth;
    above++;
  }
  if (above < 3) return null;
  const mean = sum / above;
  return { mean, deviation: Math.sqrt(Math.max(0, squares / above - mean * mean)) };
}

/**
 * A curve through the upper side of the bins. First least squares with 50 times the weight above the curve (P. H. C.
 * Eilers, Anal. Chem. 75 (2003) 3631), so that it starts from the top however dense the lines are; then the weights of
 * S.-J. Baek et al., Analyst 140 (2015) 250, turned over: what lies below by more than the scatter above is a line.
 */
export function upperCurve(
  means: Float64Array,
  counts: Float64Array,
  intervals: number,
  stiffness: number,
): UpperCurve {
  const n = means.length;
  const weights = counts.map((count) => Math.min(1, count));
  const depths = new Float64Array(n);
  let curve = fitSmoothSpline(means, weights, intervals, stiffness);
  for (let round = 0; round < 12; round++) {
    depthsBelow(curve, means, depths);
    let changed = 0;
    for (let i = 0; i < n; i++) {
      const weight = depths[i]! < 0 ? 1 : 0.02;
      if (counts[i] === 0 || weight === weights[i]) continue;
      weights[i] = weight;
      changed++;
    }
    if (round > 1 && changed < 0.002 * n) break;
    curve = fitSmoothSpline(means, weights, intervals, stiffness);
  }
  let scatter = 0;
  for (let round = 0; round < 15; round++) {
    depthsBelow(curve, means, depths);
    const above = scatterAbove(depths, counts);
    if (!above || above.deviation === 0) break;
    scatter = above.deviation;
    let change = 0;
    for (let i = 0; i < n; i++) {
      if (counts[i] === 0) continue;
      const exponent = Math.min(50, (2 * (depths[i]! - (2 * scatter - above.mean))) / scatter);
      const weight = Math.max(1e-5, 1 / (1 + Math.exp(exponent)));
      change += Math.abs(weight - weights[i]!);
      weights[i] = weight;
    }
    if (change < 0.005 * n) break;
    curve = fitSmoothSpline(means, weights, intervals, stiffness);
  }
  return { curve, scatter };
}

/** Share of bins within the tolerance of the curve in the outer eighth of the range, the poorer end of the two. */
function hold(curve: SmoothSpline, means: Float64Array, tolerance: number): number {
  const n = means.length;
  const eighth = Math.max(3, Math.floor(n / 8));
  let [lower, upper] = [0, 0];
  for (let i = 0; i < eighth; i++) {
    if (Math.abs(splineAt(curve, (i + 0.5) / n) - means[i]!) < tolerance) lower++;
    if (Math.abs(splineAt(curve, (n - i - 0.5) / n) - means[n - 1 - i]!) < tolerance) upper++;
  }
  return Math.min(lower, upper) / eighth;
}

/** A parabola where both ends bear it out and nothing stands above it: the supple curve sags into dense bands. */
export function stiffCurve(means: Float64Array, counts: Float64Array, intervals: number): UpperCurve {
  const supple = upperCurve(means, counts, intervals, 0.03);
  const parabola = upperCurve(means, counts, 2, 1e4);
  const serves =
    parabola.scatter < 1.5 * supple.scatter && hold(parabola.curve, means, 3 * parabola.scatter) > 0.3;
  return serves ? parabola : supple;
}
