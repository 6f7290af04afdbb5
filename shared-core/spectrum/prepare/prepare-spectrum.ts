import type { Reason } from '../../units/types.ts';
import { decimalsOf } from '../even-grid.ts';
import { ordinateEvidence } from '../ordinate-evidence.ts';
import { counted } from '../refusal.ts';
import type { OrdinateKind, PreparedSpectrum, Spectrum } from '../types.ts';
import { estimateBaseline, type Baseline } from './baseline.ts';
import { findDips, findSpikes, resolutionOf, saturationLevel } from './features.ts';
import { foreignGasNotes } from './foreign-gases.ts';
import { estimateNoise, type NoiseEstimate } from './noise.ts';

interface PrepareOptions {
  /** Overrides what reading decided. */
  readonly ordinateKind?: OrdinateKind;
  readonly fromPerCm?: number;
  readonly toPerCm?: number;
}

const leastPoints = 40;

function unusable(code: string, text: string): { unusable: Reason } {
  return { unusable: { code, text } };
}

function cropped(spectrum: Spectrum, options: PrepareOptions): { x: Float64Array; y: Float64Array } {
  const x = spectrum.wavenumberPerCm;
  const from = options.fromPerCm ?? -Infinity;
  const to = options.toPerCm ?? Infinity;
  let first = 0;
  while (first < x.length && x[first]! < from) first++;
  let end = x.length;
  while (end > first && x[end - 1]! > to) end--;
  return { x: x.slice(first, end), y: spectrum.ordinate.slice(first, end) };
}

/** Transmittance from the ordinate; absorbance beyond 12 on either side is no measurement and would overflow. */
function transmittanceOf(y: Float64Array, kind: OrdinateKind): Float64Array {
  if (kind === 'absorbance') return y.map((value) => 10 ** -Math.max(-12, Math.min(12, value)));
  return kind === 'percent-transmittance' ? y.map((value) => value / 100) : y.slice();
}

function medianStep(x: Float64Array): number {
  const stride = Math.max(1, Math.floor(x.length / 300));
  const steps: number[] = [];
  for (let i = 0; i + 1 < x.length; i += stride) steps.push(x[i + 1]! - x[i]!);
  steps.sort((a, b) => a - b);
  return steps[steps.length >> 1]!;
}

/** Lines the other way up: 2 - T for a transmittance that rises to at most twice the baseline, else 1/T. */
function turnedOver(t: Float64Array, kind: OrdinateKind): Float64Array {
  const greatest = t.reduce((most, value) => Math.max(most, value), -Infinity);
  const sorted = t.toSorted();
  const base = sorted[Math.floor(0.2 * t.length)]!;
  if (kind !== 'absorbance' && greatest < 2.1 * base) return t.map((value) => 2 * base - value);
  return t.map((value) => 1 / Math.max(value, 1e-6));
}

/** What rounding on writing adds: a step of the last digit over the root of 12, in transmittance. */
function roundingNoise(y: Float64Array, kind: OrdinateKind): number {
  const decimals = decimalsOf(y);
  const step = decimals === null ? 1e-9 : 10 ** -decimals;
  const inTransmittance =
    kind === 'absorbance' ? Math.LN10 * step : kind === 'percent-transmittance' ? step / 100 : step;
  return Math.max(1e-9, inTransmittance / Math.sqrt(12));
}

function divided(t: Float64Array, baseline: Baseline): Float64Array {
  return t.map((value, i) => value / baseline.values[i]!);
}

/** Absorbance with a lower limit on the transmittance, so that black lines stay finite. */
function absorbanceFrom(
  transmittance: Float64Array,
  noise: Float64Array,
): { absorbance: Float64Array; limited: number } {
  let limited = 0;
  const absorbance = transmittance.map((value, i) => {
    const least = Math.max(1e-6, 0.2 * noise[i]!);
    if (value < least) limited++;
    return -Math.log10(Math.max(value, least));
  });
  return { absorbance, limited };
}

function remarks(
  x: Float64Array,
  baseline: Baseline,
  parts: { limited: number; spikes: readonly number[]; saturation: number | null; inverted: boolean },
): Reason[] {
  const notes: Reason[] = [];
  if (parts.inverted) {
    notes.push({
      code: 'lines-inverted',
      text: 'The lines point the other way (emission-like, or sample and background exchanged); the spectrum was turned over.',
    });
  }
  if (baseline.fringes) {
    const { periodPerCm, amplitude } = baseline.fringes;
    notes.push({
      code: 'fringes',
      text: `Interference fringes of ${(100 * amplitude).toPrecision(2)} % with a period of ${periodPerCm.toPrecision(3)} cm⁻¹ were divided out with the baseline.`,
    });
  }
  if (parts.saturation !== null) {
    notes.push({
      code: 'saturated',
      text: `The strongest lines stay flat at an absorbance of ${parts.saturation.toPrecision(2)}: they are saturated or clipped.`,
    });
  }
  if (parts.spikes.length > 0) {
    const places = parts.spikes.slice(0, 5).map((i) => x[i]!.toFixed(1));
    notes.push({
      code: 'spikes',
      text: `${counted(parts.spikes.length, 'single point')} far off both neighbours (${places.join(', ')}${parts.spikes.length > 5 ? ', …' : ''} cm⁻¹) given no weight.`,
    });
  }
  if (parts.limited > 0) {
    notes.push({
      code: 'absorbance-limited',
      text: `${counted(parts.limited, 'point')} with no light left; their absorbance is a lower limit.`,
    });
  }
  return notes;
}

/** Spikes keep their value and lose their weight: their noise becomes their own height. */
function discountSpikes(t: Float64Array, noise: Float64Array, spikes: readonly number[]): void {
  for (const i of spikes) {
    noise[i] = Math.max(noise[i]!, 3 * Math.abs(t[i]! - (t[i - 1]! + t[i + 1]!) / 2));
  }
}

/**
 * Makes a spectrum ready for the search for lines: transmittance over its baseline, absorbance = -log10(transmittance),
 * noise along the range with its correlation, resolution, saturation, direction; see PreparedSpectrum for the units.
 * @param options ordinate kind and range (cm-1) where a person corrected them
 * @returns the prepared spectrum, or the reason why its ordinate or range cannot be used
 */
export function prepareSpectrum(
  spectrum: Spectrum,
  options: PrepareOptions = {},
): PreparedSpectrum | { unusable: Reason } {
  const kind = options.ordinateKind ?? spectrum.ordinateKind;
  if (kind === 'unusable') return unusable('ordinate-unusable', spectrum.ordinateReason);
  const { x, y } = cropped(spectrum, options);
  if (x.length < leastPoints) {
    return unusable(
      'range-too-short',
      `The chosen range holds ${counted(x.length, 'point')}, too few for a band.`,
    );
  }
  const stepPerCm = medianStep(x);
  let raw = transmittanceOf(y, kind);
  const inverted = ordinateEvidence(raw).direction === 'up';
  if (inverted) raw = turnedOver(raw, kind);
  const baseline = estimateBaseline(x, raw, stepPerCm);
  const transmittance = divided(raw, baseline);
  if (!transmittance.every((value) => Number.isFinite(value))) {
    return unusable(
      'no-baseline',
      'No baseline above zero was found, so the ordinate is no transmittance or absorbance.',
    );
  }
  const residual = transmittance.map((value) => value - 1);
  const estimate: NoiseEstimate = estimateNoise(residual, baseline.free, roundingNoise(y, kind));
  const resolutionPerCm = resolutionOf(findDips(x, transmittance, estimate.noise, 8));
  const pointsPerWidth = resolutionPerCm === null ? null : resolutionPerCm / stepPerCm;
  const spikes = findSpikes(transmittance, estimate.noise, pointsPerWidth);
  discountSpikes(transmittance, estimate.noise, spikes);
  const level = saturationLevel(transmittance, estimate.noise, estimate.correlationPoints);
  const { absorbance, limited } = absorbanceFrom(transmittance, estimate.noise);
  const saturation = level === null ? null : -Math.log10(Math.max(level + estimate.overall, 1e-6));
  return {
    spectrum,
    wavenumberPerCm: x,
    transmittance,
    absorbance,
    baselineTransmittance: baseline.values,
    noise: estimate.noise,
    noiseCorrelationPoints: estimate.correlationPoints,
    stepPerCm,
    resolutionPerCm,
    saturationAbsorbance: saturation,
    inverted,
    notes: [
      ...remarks(x, baseline, { limited, spikes, saturation, inverted }),
      ...foreignGasNotes(x, transmittance, estimate.noise, estimate.correlationPoints),
    ],
  };
}
