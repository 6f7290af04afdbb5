import type { GasOptions } from '../../electron/backend/example/bands.ts';
import { fileStyles, type FileStyle } from '../../electron/backend/example/file-writer.ts';
import { apodisations } from '../../electron/backend/example/instrument.ts';
import { createRandom, type Random } from '../../electron/backend/example/random.ts';
import type { SimulationOptions } from '../../electron/backend/example/simulate.ts';

/** A draw from everything that a teaching laboratory's instrument produces. */
export interface EnvelopeDraw {
  readonly options: SimulationOptions;
  readonly style: FileStyle;
  readonly clipAbsorbance: number;
}

const ranges = {
  HCl: [2600, 3150],
  DCl: [1880, 2260],
  HBr: [2300, 2800],
  CO: [2000, 2280],
} as const;
export type EnvelopeGas = keyof typeof ranges;

const logUniform = (random: Random, low: number, high: number): number =>
  low * (high / low) ** random.uniform();

/** Absorbance at the centre that shows about `apparent` after the instrument has broadened the line. */
function monochromatic(apparent: number, resolutionPerCm: number, halfWidthPerCm: number): number {
  return Math.min(60, apparent * Math.sqrt(1 + (resolutionPerCm / (2.2 * halfWidthPerCm)) ** 2));
}

function instrument(random: Random): Partial<SimulationOptions> & { resolutionPerCm: number } {
  const resolutionPerCm = random.pick([0.25, 0.5, 0.5, 1, 1, 2, 4]);
  const zeroFilling = random.pick([1, 2, 2, 4]);
  return {
    resolutionPerCm,
    apodisation: random.pick(apodisations),
    // Instruments differ in what they call their resolution, and few of them step by a round number.
    maximumPathDifferenceCm: (random.uniform() < 0.5 ? 1 : random.between(0.85, 1.1)) / resolutionPerCm,
    zeroFilling,
    noiseModel: random.uniform() < 0.5 ? 'white' : 'interferogram',
    noise: logUniform(random, 2e-4, 1.2e-2),
    noiseRise: random.between(0.7, 1.6),
    scaleErrorPpm: random.between(-100, 100),
    ...(random.uniform() < 0.2 ? { phaseErrorRad: random.between(-0.08, 0.08) } : {}),
  };
}

function baseline(random: Random): Partial<SimulationOptions> {
  return {
    baselineOffset: random.uniform() < 0.5 ? random.between(0, 0.5) : 0,
    baselineSlope: random.between(-0.08, 0.08),
    baselineCurvature: random.between(-0.05, 0.05),
    ...(random.uniform() < 0.3
      ? {
          fringes: {
            amplitude: logUniform(random, 0.002, 0.03),
            periodPerCm: random.between(6, 60),
            phaseRad: random.between(0, 6.28),
          },
        }
      : {}),
  };
}

function disturbances(random: Random): Partial<SimulationOptions> {
  const sign = random.uniform() < 0.5 ? -1 : 1;
  return {
    ...(random.uniform() < 0.4
      ? {
          foreign: {
            water: sign * logUniform(random, 0.01, 0.3),
            carbonDioxide: sign * random.between(0, 0.2),
          },
        }
      : {}),
    ...(random.uniform() < 0.1
      ? { spikes: { count: 1 + random.below(4), height: random.between(0.02, 0.3) } }
      : {}),
    ...(random.uniform() < 0.15 ? { detectorFloor: random.between(0.001, 0.03) } : {}),
  };
}

/** One spectrum of the envelope; the same seed gives the same draw. */
export function drawEnvelope(seed: number): EnvelopeDraw {
  const random = createRandom(seed, 21);
  const gas = random.pick(Object.keys(ranges) as EnvelopeGas[]);
  const device = instrument(random);
  const lorentzHalfWidthPerCm = logUniform(random, 0.02, 0.2);
  const peak = (low: number, high: number): number =>
    monochromatic(logUniform(random, low, high), device.resolutionPerCm, lorentzHalfWidthPerCm);
  const gases: GasOptions[] = [{ gas, peakAbsorbance: peak(0.1, 3), deviation: 1e-5 }];
  let [from, to]: [number, number] = [...ranges[gas]];
  if ((gas === 'HCl' || gas === 'DCl') && random.uniform() < 0.3) {
    gases.push({ gas: gas === 'HCl' ? 'DCl' : 'HCl', peakAbsorbance: peak(0.1, 2), deviation: 1e-5 });
    [from, to] = [1850, 3200];
  }
  if (random.uniform() < 0.1) gases[0] = { ...gases[0]!, missing: [random.pick([1, -1])] };
  if (random.uniform() < 0.3) [from, to] = [from - random.between(0, 400), to + random.between(0, 600)];
  const styles = Object.values(fileStyles) as FileStyle[];
  return {
    options: {
      seed,
      gases,
      fromPerCm: from + random.uniform(),
      toPerCm: to + random.uniform(),
      temperatureK: random.between(289, 301),
      lorentzHalfWidthPerCm,
      ...device,
      ...baseline(random),
      ...disturbances(random),
    },
    style: random.pick(styles),
    clipAbsorbance: random.pick([2, 3, 4, 6]),
  };
}
