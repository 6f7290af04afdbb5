import type { BandConstants } from '../../../shared-core/molecule/types.ts';
import { bandsOf, linesOf, onScaledAxis, type GasOptions, type SimulatedBand } from './bands.ts';
import { foreignLines, type ForeignGases } from './foreign-gases.ts';
import {
  applyInstrument,
  interferogramNoise,
  type Apodisation,
  type InstrumentOptions,
} from './instrument.ts';
import { addSpikes, baselineAt, distort, type BaselineOptions, type DistortionOptions } from './artefacts.ts';
import { createRandom } from './random.ts';
import { addVoigt, voigt, type VoigtWidths } from './voigt.ts';

/** What to simulate; everything but seed, gases and range has a default. */
export interface SimulationOptions extends BaselineOptions, DistortionOptions {
  readonly seed: number;
  readonly gases: readonly GasOptions[];
  readonly fromPerCm: number;
  readonly toPerCm: number;
  /** Default 296. */
  readonly temperatureK?: number;
  /** Lorentz half width at half height (pressure), cm-1; default 0.03. */
  readonly lorentzHalfWidthPerCm?: number;
  /** Nominal resolution: inverse of the maximum path difference; default 0.5. */
  readonly resolutionPerCm?: number;
  /** Overrides the inverse of the resolution. */
  readonly maximumPathDifferenceCm?: number;
  /** Default 'raised-cosine'. */
  readonly apodisation?: Apodisation;
  /** 1, 2, 4 or 8: step = 1/(2 x maximum path difference x factor); default 2. */
  readonly zeroFilling?: number;
  /** Overrides the step that the zero filling gives. */
  readonly stepPerCm?: number;
  /** Standard deviation per final point, of full transmittance; default 1e-3. */
  readonly noise?: number;
  /** 'white': per final point; 'interferogram': before weighting and zero filling, so correlated. Default 'white'. */
  readonly noiseModel?: 'white' | 'interferogram';
  /** Noise grows linearly to this factor at the upper end of the range; default 1. */
  readonly noiseRise?: number;
  readonly foreign?: ForeignGases;
  /** Lorentz half width of foreign lines; default 0.08. */
  readonly foreignHalfWidthPerCm?: number;
  /** Error of the file's own axis; default 0. */
  readonly scaleErrorPpm?: number;
  readonly phaseErrorRad?: number;
  readonly spikes?: { readonly count: number; readonly height: number };
}

/** What is true of one band, on the file's own axis. */
export interface TrueBand {
  readonly isotopologue: string;
  readonly gas: string;
  /** "1-0", "2-0", ... */
  readonly band: string;
  readonly constants: BandConstants;
  /** (B_0 - B_n)/n. */
  readonly alphaEPerCm: number;
  /** B_0 + alphaE/2. */
  readonly rotationalConstantEquilibriumPerCm: number;
  readonly lines: readonly {
    readonly m: number;
    readonly wavenumberPerCm: number;
    /** Decadic absorbance at the centre, before the instrument. */
    readonly peakAbsorbance: number;
  }[];
}

export interface SimulatedSpectrum {
  /** Ascending, on the file's own axis. */
  readonly wavenumberPerCm: Float64Array;
  readonly transmittance: Float64Array;
  readonly truth: { readonly bands: readonly TrueBand[]; readonly options: SimulationOptions };
  /** Bands as simulated, on the true axis: the argument that `exactModel` takes. */
  readonly bands: readonly SimulatedBand[];
  /** Noise-free transmittance at the same points, from bands that may differ: for derivatives. */
  readonly exactModel: (
    bands: readonly SimulatedBand[],
    changed?: Partial<SimulationOptions>,
  ) => Float64Array;
}

/** Half width at half height of the Doppler profile: 3.5812e-7 x wavenumber x sqrt(T/M) (CODATA). */
export function dopplerHalfWidth(wavenumberPerCm: number, temperatureK: number, massU: number): number {
  return 3.5811737e-7 * wavenumberPerCm * Math.sqrt(temperatureK / massU);
}

function widthsAt(options: SimulationOptions, wavenumberPerCm: number, massU: number): VoigtWidths {
  return {
    lorentzHalfWidthPerCm: options.lorentzHalfWidthPerCm ?? 0.03,
    dopplerHalfWidthPerCm: dopplerHalfWidth(wavenumberPerCm, options.temperatureK ?? 296, massU),
  };
}

export function instrumentOf(options: SimulationOptions): InstrumentOptions {
  return {
    apodisation: options.apodisation ?? 'raised-cosine',
    maximumPathDifferenceCm: options.maximumPathDifferenceCm ?? 1 / (options.resolutionPerCm ?? 0.5),
    phaseErrorRad: options.phaseErrorRad ?? 0,
  };
}

interface Grid {
  readonly start: number;
  readonly step: number;
  readonly length: number;
  readonly fineStep: number;
  readonly fineLength: number;
  /** Index of the first point of the file. */
  readonly offset: number;
  readonly count: number;
}

/** Output grid with room at both ends, and a fine grid whose step is the output step over a power of two. */
function gridOf(options: SimulationOptions): Grid {
  const instrument = instrumentOf(options);
  const critical = 1 / (2 * instrument.maximumPathDifferenceCm);
  const step = options.stepPerCm ?? critical / (options.zeroFilling ?? 2);
  if (!(step > 0) || step > critical * 1.0001) {
    throw new RangeError(
      `stepPerCm must be above 0 and at most ${critical} (1/(2 path difference)), got ${step}`,
    );
  }
  if (!(options.toPerCm > options.fromPerCm)) {
    throw new RangeError(`toPerCm must be above fromPerCm, got ${options.fromPerCm} to ${options.toPerCm}`);
  }
  const count = Math.floor((options.toPerCm - options.fromPerCm) / step + 1e-9) + 1;
  const length = 2 ** Math.ceil(Math.log2(count + 50 / step));
  const offset = Math.floor((length - count) / 2);
  const lorentz = options.lorentzHalfWidthPerCm ?? 0.03;
  const doppler = dopplerHalfWidth(options.fromPerCm, options.temperatureK ?? 296, 130);
  // What lies beyond 1/step - L in the interferogram folds back: let it have died away (1e-7).
  let fineStep = step;
  const decay = (x: number): number => 2 * Math.PI * lorentz * x + (Math.PI * doppler * x) ** 2 / Math.LN2;
  while (decay(1 / fineStep - instrument.maximumPathDifferenceCm) < 18) fineStep /= 2;
  const start = options.fromPerCm - offset * step;
  return { start, step, length, fineStep, fineLength: Math.round((length * step) / fineStep), offset, count };
}

/** Transmittance minus one on the fine grid: Beer and Lambert for every line of every band. */
function fineDeficit(options: SimulationOptions, bands: readonly SimulatedBand[], grid: Grid): Float64Array {
  const absorbance = new Float64Array(grid.fineLength);
  const fine = { start: grid.start, step: grid.fineStep };
  const reach = 50;
  const temperature = options.temperatureK ?? 296;
  for (const band of bands) {
    for (const line of linesOf(band, temperature)) {
      addVoigt(
        absorbance,
        fine,
        {
          centrePerCm: line.wavenumberPerCm,
          area: band.strength * line.relativeStrength,
          reachPerCm: reach,
        },
        widthsAt(options, line.wavenumberPerCm, band.massU),
      );
    }
  }
  for (const line of foreignLines(options.foreign ?? {})) {
    const widths = {
      lorentzHalfWidthPerCm: options.foreignHalfWidthPerCm ?? 0.08,
      dopplerHalfWidthPerCm: dopplerHalfWidth(line.wavenumberPerCm, temperature, 18),
    };
    const area = line.peak / voigt(0, widths);
    addVoigt(absorbance, fine, { centrePerCm: line.wavenumberPerCm, area, reachPerCm: reach }, widths);
  }
  for (let i = 0; i < absorbance.length; i++) {
    const a = absorbance[i]!;
    absorbance[i] = a === 0 ? 0 : Math.exp(-Math.LN10 * a) - 1;
  }
  return absorbance;
}

/** Noise-free transmittance on the points of the file. */
function exactTransmittance(options: SimulationOptions, bands: readonly SimulatedBand[]): Float64Array {
  const grid = gridOf(options);
  const seen = applyInstrument(
    fineDeficit(options, bands, grid),
    grid.fineStep,
    grid.length,
    instrumentOf(options),
  );
  const result = new Float64Array(grid.count);
  for (let i = 0; i < grid.count; i++) {
    const position = (2 * i) / Math.max(1, grid.count - 1) - 1;
    const wavenumber = options.fromPerCm + i * grid.step;
    result[i] = distort(1 + seen[grid.offset + i]!, options) * baselineAt(position, wavenumber, options);
  }
  return result;
}

function noiseOf(options: SimulationOptions, grid: Grid): Float64Array {
  const random = createRandom(options.seed, 2);
  const size = options.noise ?? 1e-3;
  const raw =
    options.noiseModel === 'interferogram'
      ? interferogramNoise(grid.length, grid.step, instrumentOf(options), random)
      : null;
  const rise = options.noiseRise ?? 1;
  return Float64Array.from({ length: grid.count }, (_, i) => {
    const local = size * (1 + (rise - 1) * (i / grid.count));
    return local * (raw ? raw[grid.offset + i]! : random.normal());
  });
}

function trueBand(band: SimulatedBand, options: SimulationOptions): TrueBand {
  const ppm = options.scaleErrorPpm ?? 0;
  const constants = onScaledAxis(band.constants, ppm);
  const alphaEPerCm =
    (constants.rotationalConstantLowerPerCm - constants.rotationalConstantUpperPerCm) / band.upper;
  return {
    isotopologue: band.isotopologue,
    gas: band.gas,
    band: `${band.upper}-0`,
    constants,
    alphaEPerCm,
    rotationalConstantEquilibriumPerCm: constants.rotationalConstantLowerPerCm + alphaEPerCm / 2,
    lines: linesOf(band, options.temperatureK ?? 296).map((line) => ({
      m: line.m,
      wavenumberPerCm: line.wavenumberPerCm * (1 + ppm * 1e-6),
      peakAbsorbance:
        band.strength * line.relativeStrength * voigt(0, widthsAt(options, line.wavenumberPerCm, band.massU)),
    })),
  };
}

/**
 * An invented spectrum: Beer-Lambert lines of all isotopologues on a fine grid, instrument function applied to the
 * transmittance in the interferogram domain, baseline, noise, disturbances. Everything follows from the options.
 */
export function simulateSpectrum(options: SimulationOptions): SimulatedSpectrum {
  const grid = gridOf(options);
  const bands = bandsOf(
    options.gases,
    options.seed,
    options.temperatureK ?? 296,
    (wavenumberPerCm, massU) => 1 / voigt(0, widthsAt(options, wavenumberPerCm, massU)),
  );
  const transmittance = exactTransmittance(options, bands);
  const noise = noiseOf(options, grid);
  for (let i = 0; i < transmittance.length; i++) transmittance[i] = transmittance[i]! + noise[i]!;
  if (options.spikes) addSpikes(transmittance, options.spikes, createRandom(options.seed, 3));
  const scale = 1 + (options.scaleErrorPpm ?? 0) * 1e-6;
  return {
    wavenumberPerCm: Float64Array.from(
      { length: grid.count },
      (_, i) => (options.fromPerCm + i * grid.step) * scale,
    ),
    transmittance,
    truth: { bands: bands.map((band) => trueBand(band, options)), options },
    bands,
    exactModel: (changedBands, changed) => exactTransmittance({ ...options, ...changed }, changedBands),
  };
}
