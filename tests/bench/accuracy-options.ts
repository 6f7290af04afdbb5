import { createRandom } from '../../electron/backend/example/random.ts';
import type { SimulationOptions } from '../../electron/backend/example/simulate.ts';

export interface AccuracyCase {
  readonly name: string;
  readonly limit: string;
  /** False: printed, but not part of the 800 results of the honesty figure. */
  readonly counted: boolean;
  readonly options: (seed: number) => SimulationOptions;
}

function fundamental(
  gas: 'HCl' | 'DCl' | 'CO',
  range: readonly [number, number],
  changes: Partial<SimulationOptions> = {},
): (seed: number) => SimulationOptions {
  return (seed) => {
    const random = createRandom(seed, 11);
    const peakAbsorbance = 0.8 * 4 ** random.uniform();
    const lorentzHalfWidthPerCm = random.between(0.025, 0.06);
    // The grid of points falls differently on the lines in every file.
    const shift = random.uniform();
    return {
      seed,
      gases: [{ gas, peakAbsorbance, deviation: 1e-5 }],
      fromPerCm: range[0] + shift,
      toPerCm: range[1] + shift,
      lorentzHalfWidthPerCm,
      resolutionPerCm: 0.5,
      apodisation: 'raised-cosine',
      zeroFilling: 2,
      noise: 1e-3,
      ...changes,
    };
  };
}

const hydrogenChloride = [2650, 3090] as const;
export const accuracyCases: readonly AccuracyCase[] = [
  { name: 'HCl 0.5', limit: '1.3', counted: true, options: fundamental('HCl', hydrogenChloride) },
  { name: 'DCl 0.5', limit: '1.3', counted: true, options: fundamental('DCl', [1930, 2230]) },
  { name: 'CO 0.5', limit: '1.3', counted: true, options: fundamental('CO', [2030, 2260]) },
  {
    name: 'HCl 1.0 half resolved',
    limit: '2.6',
    counted: true,
    options: fundamental('HCl', hydrogenChloride, { resolutionPerCm: 1, noise: 5e-4 }),
  },
  {
    name: 'HCl 0.5 boxcar',
    limit: 'aim 2',
    counted: false,
    options: fundamental('HCl', hydrogenChloride, { apodisation: 'boxcar' }),
  },
  {
    name: 'HCl 0.5 correlated noise',
    limit: 'printed',
    counted: false,
    options: fundamental('HCl', hydrogenChloride, { noiseModel: 'interferogram' }),
  },
  {
    name: 'HCl 0.5 zero-filled 4 x',
    limit: 'printed',
    counted: false,
    options: fundamental('HCl', hydrogenChloride, { noiseModel: 'interferogram', zeroFilling: 4 }),
  },
];
