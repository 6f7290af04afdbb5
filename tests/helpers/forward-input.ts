import { createRandom } from '../../electron/backend/example/random.ts';
import {
  simulateSpectrum,
  type SimulatedSpectrum,
  type SimulationOptions,
} from '../../electron/backend/example/simulate.ts';
import { isotopologue } from '../../shared-core/molecule/index.ts';
import type { ForwardBand } from '../../shared-core/reference/forward/types.ts';
import { prepareSpectrum } from '../../shared-core/spectrum/prepare/prepare-spectrum.ts';
import type { PreparedSpectrum } from '../../shared-core/spectrum/types.ts';

/** A simulated spectrum with what the search for lines gets of it. */
export interface PreparedSimulation {
  readonly simulated: SimulatedSpectrum;
  readonly prepared: PreparedSpectrum;
}

export function prepareSimulated(options: SimulationOptions): PreparedSimulation {
  const simulated = simulateSpectrum(options);
  const prepared = prepareSpectrum({
    fileName: 'simulated.csv',
    title: '',
    wavenumberPerCm: simulated.wavenumberPerCm,
    ordinate: simulated.transmittance,
    abscissaKind: 'wavenumber-per-cm',
    abscissaReason: 'simulated',
    ordinateKind: 'transmittance',
    ordinateReason: 'simulated',
    notes: [],
  });
  if ('unusable' in prepared) throw new Error(prepared.unusable.text);
  return { simulated, prepared };
}

/** Bands as an assignment would hand them over: every line above a hundredth of the strongest, constants a little off. */
export function startingBands({ simulated }: PreparedSimulation, seed: number): ForwardBand[] {
  const random = createRandom(seed, 99);
  const tallest = Math.max(...simulated.truth.bands[0]!.lines.map((l) => l.peakAbsorbance));
  return simulated.truth.bands.flatMap((band): ForwardBand[] => {
    const lines = band.lines.filter((l) => l.peakAbsorbance > Math.max(0.01 * tallest, 0.004));
    if (lines.length < 8) return [];
    const { constants } = band;
    return [
      {
        isotopologue: isotopologue(band.isotopologue)!,
        band: band.band,
        constants: {
          ...constants,
          bandOriginPerCm: constants.bandOriginPerCm + 0.01 * random.normal(),
          rotationalConstantLowerPerCm: constants.rotationalConstantLowerPerCm * (1 + 1e-4 * random.normal()),
        },
        ms: lines.map((l) => l.m),
        distortion: 'free',
        peakAbsorbance: lines.map((l) => 0.5 * l.peakAbsorbance),
      },
    ];
  });
}
