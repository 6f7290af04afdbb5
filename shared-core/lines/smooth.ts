/** Gaussian smoothing of an even series and the second derivative of the smoothed series, by one kernel each. */
export interface Smoothed {
  readonly value: Float64Array;
  /** Minus the second derivative, per point²: positive at the top of a line, sharper than the line itself. */
  readonly curvature: Float64Array;
  /** σ of `value` and of `curvature` for independent noise of unit σ. */
  readonly valueGain: number;
  readonly curvatureGain: number;
}

/** @param sigmaPoints standard deviation of the Gaussian in points, > 0. @throws RangeError where it is not. */
export function smooth(series: Float64Array, sigmaPoints: number): Smoothed {
  if (!(sigmaPoints > 0)) throw new RangeError(`sigmaPoints: expected a number above 0, got ${sigmaPoints}`);
  const half = Math.max(2, Math.ceil(4 * sigmaPoints));
  const kernel = new Float64Array(half + 1);
  let sum = 0;
  for (let k = 0; k <= half; k++) {
    kernel[k] = Math.exp(-((k / sigmaPoints) ** 2) / 2);
    sum += k === 0 ? kernel[k]! : 2 * kernel[k]!;
  }
  const bend = new Float64Array(half + 1);
  let bendSum = 0;
  for (let k = 0; k <= half; k++) {
    kernel[k]! /= sum;
    bend[k] = (kernel[k]! * (1 - (k / sigmaPoints) ** 2)) / sigmaPoints ** 2;
    bendSum += k === 0 ? bend[k]! : 2 * bend[k]!;
  }
  // A constant has no curvature, also on a coarse grid.
  for (let k = 0; k <= half; k++) bend[k]! -= bendSum * kernel[k]!;
  return {
    value: symmetric(series, kernel),
    curvature: symmetric(series, bend),
    valueGain: gain(kernel),
    curvatureGain: gain(bend),
  };
}

function symmetric(series: Float64Array, kernel: Float64Array): Float64Array {
  const n = series.length;
  const last = n - 1;
  const half = kernel.length - 1;
  const result = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    let sum = kernel[0]! * series[i]!;
    if (i >= half && i + half <= last) {
      for (let k = 1; k <= half; k++) sum += kernel[k]! * (series[i - k]! + series[i + k]!);
    } else {
      for (let k = 1; k <= half; k++)
        sum += kernel[k]! * (series[Math.max(0, i - k)]! + series[Math.min(last, i + k)]!);
    }
    result[i] = sum;
  }
  return result;
}

function gain(kernel: Float64Array): number {
  let sum = kernel[0]! ** 2;
  for (let k = 1; k < kernel.length; k++) sum += 2 * kernel[k]! ** 2;
  return Math.sqrt(sum);
}
