import { simulateSpectrum, type SimulationOptions } from '../../electron/backend/example/simulate.ts';
import { makeReference } from '../../shared-core/reference/make-reference.ts';
import type { Reliability } from '../../shared-core/reference/types.ts';
import { cramerRaoBounds } from './bound.ts';
import { drawEnvelope } from './envelope.ts';
import { benchSettings, boundAllows, falsehoods, fileOf } from './judge.ts';

/** What came of one spectrum of the envelope. */
export interface EnvelopeRecord {
  readonly seed: number;
  readonly gas: string;
  readonly resolutionPerCm: number;
  readonly reliability: Reliability | 'threw';
  readonly codes: readonly string[];
  /** What a sound reference says that is not true. */
  readonly falsehoods: readonly string[];
  /** Three times the bound stays inside what counts as wrong, for some isotopologue. */
  readonly allowed: boolean;
  readonly milliseconds: number;
  readonly description: string;
}

export function measureEnvelope(seed: number): EnvelopeRecord {
  const draw = drawEnvelope(seed);
  const spectrum = simulateSpectrum(draw.options);
  const bounds = cramerRaoBounds(spectrum);
  const about = {
    seed,
    gas: spectrum.truth.bands[0]!.gas,
    resolutionPerCm: draw.options.resolutionPerCm ?? 0.5,
    allowed: spectrum.truth.bands.some((band) => {
      const bound = bounds.get(`${band.isotopologue}/${band.band}`);
      return bound !== undefined && boundAllows(bound, band);
    }),
    description: describe(draw.options),
  };
  const file = fileOf(spectrum, draw.style, draw.clipAbsorbance);
  const started = performance.now();
  try {
    const reference = makeReference({ files: [file], settings: benchSettings });
    return {
      ...about,
      reliability: reference.reliability,
      codes: [...new Set(reference.reasons.map((reason) => reason.code))],
      falsehoods: falsehoods(reference, spectrum.truth.bands),
      milliseconds: performance.now() - started,
    };
  } catch (error) {
    const stack = error instanceof Error ? (error.stack ?? error.message) : String(error);
    return {
      ...about,
      reliability: 'threw',
      codes: [stack.split('\n').slice(0, 3).join(' ')],
      falsehoods: [],
      milliseconds: performance.now() - started,
    };
  }
}

function describe(o: SimulationOptions): string {
  return [
    o.gases.map((g) => `${g.gas} A${g.peakAbsorbance.toFixed(2)}`).join('+'),
    `res ${o.resolutionPerCm} ${o.apodisation} zf ${o.zeroFilling}`,
    `noise ${o.noise?.toExponential(1)} ${o.noiseModel}`,
    `width ${o.lorentzHalfWidthPerCm?.toFixed(3)}`,
    o.fringes ? `fringes ${o.fringes.amplitude.toFixed(3)}/${o.fringes.periodPerCm.toFixed(0)}` : '',
    o.foreign?.water ? `water ${o.foreign.water.toFixed(2)}` : '',
    o.detectorFloor ? `floor ${o.detectorFloor.toFixed(3)}` : '',
    o.phaseErrorRad ? `phase ${o.phaseErrorRad.toFixed(3)}` : '',
    o.spikes ? 'spikes' : '',
    o.gases[0]?.missing ? `missing ${o.gases[0].missing.join(' ')}` : '',
  ]
    .filter((part) => part !== '')
    .join(', ');
}
