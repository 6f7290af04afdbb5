import { fourier, type Fourier } from './fft.ts';

/**
 * Even fine grid on which Beer-Lambert's law is applied, around the sample points of a region, and the coarser grid on which the
 * instrument's output comes back: every `thinning`-th fine point. Where the samples are even, they are points of the coarse grid.
 */
export interface FineGrid {
  readonly startPerCm: number;
  readonly stepPerCm: number;
  /** A power of two. */
  readonly length: number;
  /** A power of two: the output grid has length / thinning points. */
  readonly thinning: number;
  readonly transform: Fourier;
  readonly outputTransform: Fourier;
  /** Output index of the first sample where the samples are even; else null and the interpolation below holds. */
  readonly firstSample: number | null;
  readonly index: Int32Array;
  readonly weights: Float64Array;
}

/**
 * @param samplePerCm ascending sample wavenumbers. @param sampleStepPerCm their median step.
 * @param finestPerCm largest fine step wanted. @param marginPerCm room at both ends for the wings of the instrument.
 */
export function fineGrid(
  samplePerCm: Float64Array,
  sampleStepPerCm: number,
  finestPerCm: number,
  marginPerCm: number,
): FineGrid {
  const first = samplePerCm[0]!;
  const last = samplePerCm[samplePerCm.length - 1]!;
  const count = samplePerCm.length;
  const meanStep = (last - first) / (count - 1);
  const even = samplePerCm.every((x, i) => Math.abs(x - first - i * meanStep) < 0.01 * meanStep);
  const perSample = 2 ** Math.max(0, Math.ceil(Math.log2((even ? meanStep : sampleStepPerCm) / finestPerCm)));
  const fine = (even ? meanStep : sampleStepPerCm) / perSample;
  const thinning = even ? perSample : 1;
  const coarse = fine * thinning;
  const length = thinning * 2 ** Math.ceil(Math.log2((last - first + 2 * marginPerCm) / coarse + 8));
  const before = Math.max(4, Math.floor((length / thinning - (last - first) / coarse) / 2));
  const start = first - before * coarse;
  const { index, weights } = even
    ? { index: new Int32Array(0), weights: new Float64Array(0) }
    : cubic(samplePerCm, start, fine);
  return {
    startPerCm: start,
    stepPerCm: fine,
    length,
    thinning,
    transform: fourier(length),
    outputTransform: fourier(length / thinning),
    firstSample: even ? before : null,
    index,
    weights,
  };
}

/** Lagrange's cubic through four neighbours: value = Σ w[4i+k] f[index[i] + k]. */
function cubic(
  samplePerCm: Float64Array,
  start: number,
  fine: number,
): { index: Int32Array; weights: Float64Array } {
  const index = new Int32Array(samplePerCm.length);
  const weights = new Float64Array(4 * samplePerCm.length);
  for (let i = 0; i < samplePerCm.length; i++) {
    const position = (samplePerCm[i]! - start) / fine;
    const base = Math.floor(position + 1e-7);
    const t = Math.max(0, position - base);
    index[i] = base - 1;
    weights[4 * i] = (-t * (t - 1) * (t - 2)) / 6;
    weights[4 * i + 1] = ((t + 1) * (t - 1) * (t - 2)) / 2;
    weights[4 * i + 2] = (-(t + 1) * t * (t - 2)) / 2;
    weights[4 * i + 3] = ((t + 1) * t * (t - 1)) / 6;
  }
  return { index, weights };
}

/** Values of an output-grid function at `count` samples. */
export function sampled(grid: FineGrid, values: Float64Array, count: number): Float64Array {
  if (grid.firstSample !== null) return values.slice(grid.firstSample, grid.firstSample + count);
  const result = new Float64Array(count);
  const w = grid.weights;
  for (let i = 0; i < count; i++) {
    const j = grid.index[i]!;
    result[i] =
      w[4 * i]! * values[j]! +
      w[4 * i + 1]! * values[j + 1]! +
      w[4 * i + 2]! * values[j + 2]! +
      w[4 * i + 3]! * values[j + 3]!;
  }
  return result;
}
