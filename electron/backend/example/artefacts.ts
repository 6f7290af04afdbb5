import type { Random } from './random.ts';

/** Baseline in absorbance, with u running from -1 to 1 over the file, and interference fringes in transmittance. */
export interface BaselineOptions {
  readonly baselineOffset?: number;
  readonly baselineSlope?: number;
  readonly baselineCurvature?: number;
  readonly fringes?: { readonly amplitude: number; readonly periodPerCm: number; readonly phaseRad: number };
}

export interface DistortionOptions {
  /** Stray signal: transmittance of a black cell, so that strong lines saturate early; default 0. */
  readonly detectorFloor?: number;
  /** 'emission': lines stand up from the baseline in transmittance; 'exchanged': sample and background exchanged. */
  readonly inversion?: 'emission' | 'exchanged';
}

/** Factor on the transmittance: 10^-(offset + slope u + curvature u^2) (1 + a cos(2 pi wavenumber/period + phase)). */
export function baselineAt(u: number, wavenumberPerCm: number, options: BaselineOptions): number {
  const absorbance =
    (options.baselineOffset ?? 0) +
    (options.baselineSlope ?? 0) * u +
    (options.baselineCurvature ?? 0) * u * u;
  const fringes = options.fringes;
  const wave = fringes
    ? 1 +
      fringes.amplitude * Math.cos((2 * Math.PI * wavenumberPerCm) / fringes.periodPerCm + fringes.phaseRad)
    : 1;
  return 10 ** -absorbance * wave;
}

/** What stray signal and inversion make of the true transmittance. */
export function distort(transmittance: number, options: DistortionOptions): number {
  const floor = options.detectorFloor ?? 0;
  const seen = floor + (1 - floor) * transmittance;
  if (options.inversion === 'emission') return 2 - seen;
  if (options.inversion === 'exchanged') return 1 / Math.max(seen, 0.01);
  return seen;
}

/** Single points that jump up or down by up to `height`. */
export function addSpikes(
  transmittance: Float64Array,
  spikes: { readonly count: number; readonly height: number },
  random: Random,
): void {
  for (let i = 0; i < spikes.count; i++) {
    const place = random.below(transmittance.length);
    const jump = spikes.height * (0.4 + 0.6 * random.uniform()) * (random.uniform() < 0.5 ? -1 : 1);
    transmittance[place] = transmittance[place]! + jump;
  }
}

/** Decadic absorbance, limited at `clipAbsorbance` (what an ordinate that was clipped shows); never NaN. */
export function absorbanceOf(transmittance: Float64Array, clipAbsorbance = 6): Float64Array {
  const lowest = 10 ** -clipAbsorbance;
  return transmittance.map((t) => -Math.log10(Math.max(t, lowest)));
}
