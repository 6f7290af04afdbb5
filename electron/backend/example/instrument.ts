import { transform } from './fourier.ts';
import type { Random } from './random.ts';

/** Weights of the interferogram, as functions of u = path difference over its maximum. */
const weights = {
  boxcar: () => 1,
  triangular: (u: number) => 1 - u,
  'raised-cosine': (u: number) => 0.5 * (1 + Math.cos(Math.PI * u)),
  'raised-cosine-on-pedestal': (u: number) => 0.54 + 0.46 * Math.cos(Math.PI * u),
  'three-term-cosine': (u: number) => 0.42 + 0.5 * Math.cos(Math.PI * u) + 0.08 * Math.cos(2 * Math.PI * u),
  'squared-parabola': (u: number) => (1 - u * u) ** 2,
} as const;
export type Apodisation = keyof typeof weights;
export const apodisations = Object.keys(weights) as Apodisation[];

export interface InstrumentOptions {
  readonly apodisation: Apodisation;
  /** Interferogram ends here, cm; nominal resolution is its inverse (common practice). */
  readonly maximumPathDifferenceCm: number;
  /** Phase error left in the interferogram, rad; gives lines a mild asymmetry. */
  readonly phaseErrorRad: number;
}

/** Weight at path difference x, cm; 0 beyond the maximum. */
export function apodisationWeight(options: InstrumentOptions, pathDifferenceCm: number): number {
  const u = pathDifferenceCm / options.maximumPathDifferenceCm;
  return u > 1 + 1e-9 ? 0 : weights[options.apodisation](Math.min(1, u));
}

/**
 * What the instrument makes of a spectrum on a fine grid (length N, step `fineStepPerCm`, periodic): the interferogram is
 * cut at the maximum path difference, weighted, and transformed back to `outputLength` points over the same range.
 * Exact, since nothing is left beyond half of 1/output step.
 */
export function applyInstrument(
  fine: Float64Array,
  fineStepPerCm: number,
  outputLength: number,
  options: InstrumentOptions,
): Float64Array {
  const length = fine.length;
  const real = Float64Array.from(fine);
  const imaginary = new Float64Array(length);
  transform(real, imaginary);
  const outReal = new Float64Array(outputLength);
  const outImaginary = new Float64Array(outputLength);
  const range = length * fineStepPerCm;
  const [cosPhase, sinPhase] = [Math.cos(options.phaseErrorRad), Math.sin(options.phaseErrorRad)];
  for (let k = 0; k <= outputLength / 2; k++) {
    const weight = apodisationWeight(options, k / range) / length;
    if (weight === 0) continue;
    // A phase error turns the two halves of the interferogram in opposite senses.
    const sine = k === 0 ? 0 : sinPhase;
    const r = weight * (real[k]! * cosPhase - imaginary[k]! * sine);
    const i = weight * (real[k]! * sine + imaginary[k]! * cosPhase);
    if (k === 0 || k === outputLength / 2) {
      outReal[k] = r;
    } else {
      outReal[k] = r;
      outImaginary[k] = i;
      outReal[outputLength - k] = r;
      outImaginary[outputLength - k] = -i;
    }
  }
  transform(outReal, outImaginary, true);
  return outReal;
}

/**
 * Noise as it arises: white on the interferogram up to its end, then weighted and zero-filled like the signal, so that
 * neighbouring points of a zero-filled spectrum are correlated. Standard deviation 1 per point.
 */
export function interferogramNoise(
  length: number,
  stepPerCm: number,
  options: InstrumentOptions,
  random: Random,
): Float64Array {
  const real = new Float64Array(length);
  const imaginary = new Float64Array(length);
  const range = length * stepPerCm;
  let power = 0;
  for (let k = 0; k <= length / 2; k++) {
    const weight = apodisationWeight(options, k / range);
    if (weight === 0) break;
    const [r, i] = [random.normal() * weight, random.normal() * weight];
    if (k === 0 || k === length / 2) {
      real[k] = r;
      power += weight ** 2;
    } else {
      real[k] = r * Math.SQRT1_2;
      imaginary[k] = i * Math.SQRT1_2;
      real[length - k] = real[k]!;
      imaginary[length - k] = -imaginary[k]!;
      power += 2 * weight ** 2;
    }
  }
  transform(real, imaginary, true);
  const norm = 1 / Math.sqrt(power);
  for (let i = 0; i < length; i++) real[i] = real[i]! * norm;
  return real;
}

/** Ratio of the standard deviation per final point to that on an unweighted interferogram (critically sampled). */
export function noiseReduction(options: InstrumentOptions): number {
  const samples = 2000;
  let sum = 0;
  for (let i = 0; i < samples; i++) {
    sum += apodisationWeight(options, ((i + 0.5) / samples) * options.maximumPathDifferenceCm) ** 2;
  }
  return Math.sqrt(sum / samples);
}
