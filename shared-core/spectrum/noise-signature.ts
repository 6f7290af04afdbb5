import { transform } from './prepare/fringes.ts';
import { selectRank } from './select-rank.ts';
import type { PreparedSpectrum } from './types.ts';

/** The noise of a spectrum where no line stands: what no second measurement repeats. */
export interface NoiseSignature {
  readonly fileName: string;
  readonly wavenumberPerCm: Float64Array;
  readonly stepPerCm: number;
  /** Residual of the transmittance after baseline and slow waves, in units of its own noise; NaN near lines. */
  readonly residual: Float64Array;
  /** Transmittance for the scale between two spectra. */
  readonly absorbance: Float64Array;
  readonly correlationPoints: number;
  /** Points with a residual. */
  readonly count: number;
  /** Many points stand above the baseline: side lobes, which two measurements share, are left in the residual. */
  readonly ringing: boolean;
}

/** Points of the quiet part of the range without lines, with room around every feature. */
function quietFree(prepared: PreparedSpectrum, excess: Float64Array): Uint8Array {
  const { noise, stepPerCm, noiseCorrelationPoints } = prepared;
  const n = noise.length;
  const quiet = selectRank(noise.slice(), n, Math.floor(0.15 * n));
  const free = new Uint8Array(n).fill(1);
  const reach = Math.max(3, Math.round(0.6 / stepPerCm), Math.round(2 * noiseCorrelationPoints));
  for (let i = 0; i < n; i++) {
    const strange = excess[i]! < -4 * noise[i]! || excess[i]! > 5 * noise[i]!;
    if (strange) free.fill(0, Math.max(0, i - reach), i + reach + 1);
    // Where the residual is livelier than in the quiet part, side lobes and faint lines are left in it.
    if (noise[i]! > 1.4 * quiet) free[i] = 0;
  }
  return free;
}

function isRinging(transmittance: Float64Array, noise: Float64Array): boolean {
  const quiet = selectRank(noise.slice(), noise.length, Math.floor(0.15 * noise.length));
  let high = 0;
  for (const value of transmittance) if (value - 1 > 5 * quiet) high++;
  return high > 0.005 * transmittance.length;
}

/** Subtracts the mean over the free points within `half` points: waves and slopes that a cell shows every time. */
function withoutSlowWaves(excess: Float64Array, free: Uint8Array, half: number): Float64Array {
  const n = excess.length;
  const result = new Float64Array(n).fill(NaN);
  let sum = 0;
  let count = 0;
  for (let i = -half; i < n; i++) {
    const enters = i + half;
    const leaves = i - half - 1;
    if (enters < n && free[enters]! === 1) {
      sum += excess[enters]!;
      count++;
    }
    if (leaves >= 0 && free[leaves]! === 1) {
      sum -= excess[leaves]!;
      count--;
    }
    if (i >= 0 && free[i]! === 1 && count > half) result[i] = excess[i]! - sum / count;
  }
  return result;
}

/** Frequency (per point) with the most power in the residual, and its share of all power; gaps count as zero. */
function strongestWave(residual: Float64Array): { frequency: number; share: number } {
  const length = Math.min(4096, 2 ** Math.floor(Math.log2(residual.length)));
  const power = new Float64Array(length / 2 + 1);
  for (let from = 0; from + length <= residual.length; from += length) {
    const re = Float64Array.from({ length }, (_, i) => residual[from + i]! || 0);
    const im = new Float64Array(length);
    transform(re, im);
    for (let k = 0; k < power.length; k++) power[k] = power[k]! + re[k]! ** 2 + im[k]! ** 2;
  }
  let total = 0;
  let best = 1;
  for (let k = 1; k < power.length; k++) {
    total += power[k]!;
    if (power[k]! > power[best]!) best = k;
  }
  // Side lobes change their height along the range, so their power spreads over a few neighbours.
  let near = 0;
  for (let k = Math.max(1, best - 4); k <= Math.min(power.length - 1, best + 4); k++) near += power[k]!;
  return { frequency: best / length, share: total > 0 ? near / total : 0 };
}

/**
 * Takes out a wave of one frequency whose height and phase change slowly: what an instrument without apodisation lays
 * around its lines, alike in every spectrum of one gas. Fitted by least squares in windows of 48 points.
 */
function withoutWave(residual: Float64Array, frequency: number): Float64Array {
  const result = residual.slice();
  const width = 48;
  for (let from = 0; from < residual.length; from += width) {
    let [cc, ss, cs, yc, ys, count] = [0, 0, 0, 0, 0, 0];
    const to = Math.min(residual.length, from + width);
    for (let i = from; i < to; i++) {
      const value = residual[i]!;
      if (Number.isNaN(value)) continue;
      const cos = Math.cos(2 * Math.PI * frequency * i);
      const sin = Math.sin(2 * Math.PI * frequency * i);
      cc += cos * cos;
      ss += sin * sin;
      cs += cos * sin;
      yc += value * cos;
      ys += value * sin;
      count++;
    }
    const ridge = 1e-3 * count;
    const determinant = (cc + ridge) * (ss + ridge) - cs * cs;
    const c = (yc * (ss + ridge) - ys * cs) / determinant;
    const s = (ys * (cc + ridge) - yc * cs) / determinant;
    for (let i = from; i < to; i++) {
      if (count < 12) result[i] = NaN;
      else if (!Number.isNaN(result[i]!)) {
        result[i] =
          result[i]! - c * Math.cos(2 * Math.PI * frequency * i) - s * Math.sin(2 * Math.PI * frequency * i);
      }
    }
  }
  return result;
}

/**
 * What makes one measurement recognisable: its noise between the lines, baseline and slow waves taken out.
 * @param modelTransmittance a fitted model at the same points, where there is one; it takes out faint lines and side
 *   lobes, which two honest spectra of one gas have in common
 */
export function noiseSignature(
  prepared: PreparedSpectrum,
  modelTransmittance?: Float64Array,
): NoiseSignature {
  const { transmittance, noise, wavenumberPerCm } = prepared;
  if (modelTransmittance && modelTransmittance.length !== transmittance.length) {
    throw new RangeError(
      `modelTransmittance must have ${transmittance.length} values, got ${modelTransmittance.length}`,
    );
  }
  const free = quietFree(
    prepared,
    transmittance.map((value) => value - 1),
  );
  const excess = transmittance.map((value, i) => (value - (modelTransmittance?.[i] ?? 1)) / noise[i]!);
  const half = Math.max(8, Math.round(4 * prepared.noiseCorrelationPoints));
  let residual = withoutSlowWaves(excess, free, half);
  for (let round = 0; round < 2; round++) {
    const wave = strongestWave(residual);
    if (wave.share > 0.1) residual = withoutWave(residual, wave.frequency);
  }
  let count = 0;
  for (const value of residual) if (!Number.isNaN(value)) count++;
  return {
    fileName: prepared.spectrum.fileName,
    wavenumberPerCm,
    stepPerCm: prepared.stepPerCm,
    residual,
    absorbance: prepared.absorbance,
    correlationPoints: prepared.noiseCorrelationPoints,
    count,
    ringing: !modelTransmittance && isRinging(transmittance, noise),
  };
}
