/** Points gathered into bins of even width, so that the baseline costs the same at any step. */
export interface Bins {
  readonly widthPerCm: number;
  readonly count: number;
  /** Bin of every point, from 0. */
  readonly binOfPoint: Int32Array;
  readonly from: number;
}

/** Bins of at least one point's width, about a thousandth of the range wide and at most 1 cm-1. */
export function binsFor(x: Float64Array, stepPerCm: number): Bins {
  const from = x[0]!;
  const range = x[x.length - 1]! - from;
  const wished = Math.min(1, range / 800);
  const widthPerCm = Math.max(stepPerCm, wished, range / 8000);
  const count = Math.max(5, Math.floor(range / widthPerCm + 1e-6) + 1);
  const binOfPoint = new Int32Array(x.length);
  for (let i = 0; i < x.length; i++) {
    binOfPoint[i] = Math.min(count - 1, Math.floor((x[i]! - from) / widthPerCm + 1e-6));
  }
  return { widthPerCm, count, binOfPoint, from };
}

/** Means and numbers of the points that `taken` admits, per bin (mean 0 where there is none). */
export function binMeans(
  bins: Bins,
  y: Float64Array,
  taken: Uint8Array | null,
): { means: Float64Array; counts: Float64Array } {
  const means = new Float64Array(bins.count);
  const counts = new Float64Array(bins.count);
  for (let i = 0; i < y.length; i++) {
    if (taken && taken[i] === 0) continue;
    const bin = bins.binOfPoint[i]!;
    means[bin] = means[bin]! + y[i]!;
    counts[bin] = counts[bin]! + 1;
  }
  for (let b = 0; b < bins.count; b++) if (counts[b]! > 0) means[b] = means[b]! / counts[b]!;
  return { means, counts };
}
