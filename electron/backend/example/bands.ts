import type { BandConstants } from '../../../shared-core/molecule/types.ts';
import {
  isotopologuesOf,
  secondRadiationConstantCmK,
  type EquilibriumConstants,
  type GasName,
  type SimulatedIsotopologue,
} from './constants.ts';
import { createRandom } from './random.ts';

/** One gas of a cell, in one band n <- 0. */
export interface GasOptions {
  readonly gas: GasName;
  /** Upper vibrational quantum number; 1: the fundamental. */
  readonly upper?: 1 | 2 | 3;
  /** Decadic absorbance at the centre of the strongest line, before the instrument broadens it. */
  readonly peakAbsorbance: number;
  /** Shares of the isotopologues by name; natural where absent. */
  readonly shares?: Readonly<Record<string, number>>;
  /** Relative standard deviation of the constants from the published ones; the origin moves by a tenth of it. */
  readonly deviation?: number;
  /** Lines left out, as m (for example [1] for a missing R(0), or all negative ones for a missing P branch). */
  readonly missing?: readonly number[];
  /** Strength times (1 + first m + second m^2)^2-like factor: [first, second]. */
  readonly intensityFactors?: readonly [number, number];
}

/** A band with everything that its lines need; constants on the true axis. */
export interface SimulatedBand {
  readonly isotopologue: string;
  readonly gas: GasName;
  readonly upper: number;
  readonly massU: number;
  readonly constants: BandConstants;
  /** Integral of the decadic absorbance over a line of relative strength 1, cm-1. */
  readonly strength: number;
  readonly missing: readonly number[];
  readonly intensityFactors: readonly [number, number];
}

export interface SimulatedLine {
  readonly m: number;
  readonly wavenumberPerCm: number;
  /** |m| exp(-hc F0(J)/kT) times wavenumber over origin. */
  readonly relativeStrength: number;
}

/** Term value F(J) = B J(J+1) - D [J(J+1)]^2 + H [J(J+1)]^3. */
function term(j: number, b: number, d: number, h: number): number {
  const x = j * (j + 1);
  return x * (b - x * (d - x * h));
}

/** Wavenumber of the line m: origin + F_upper(J') - F_lower(J''). */
export function lineWavenumber(constants: BandConstants, m: number): number {
  const lower = m > 0 ? m - 1 : -m;
  const upper = m > 0 ? m : -m - 1;
  return (
    constants.bandOriginPerCm +
    term(
      upper,
      constants.rotationalConstantUpperPerCm,
      constants.centrifugalConstantUpperPerCm,
      constants.sexticConstantUpperPerCm,
    ) -
    term(
      lower,
      constants.rotationalConstantLowerPerCm,
      constants.centrifugalConstantLowerPerCm,
      constants.sexticConstantLowerPerCm,
    )
  );
}

/** Lines of a band down to 1e-6 of the strongest, out to |m| = 60. */
export function linesOf(band: SimulatedBand, temperatureK: number): readonly SimulatedLine[] {
  const all: SimulatedLine[] = [];
  const c = band.constants;
  for (let m = -60; m <= 60; m++) {
    if (m === 0 || band.missing.includes(m)) continue;
    const lower = m > 0 ? m - 1 : -m;
    const energy = term(
      lower,
      c.rotationalConstantLowerPerCm,
      c.centrifugalConstantLowerPerCm,
      c.sexticConstantLowerPerCm,
    );
    const wavenumberPerCm = lineWavenumber(c, m);
    const factor = 1 + band.intensityFactors[0] * m + band.intensityFactors[1] * m * m;
    all.push({
      m,
      wavenumberPerCm,
      relativeStrength:
        Math.abs(m) *
        Math.exp((-secondRadiationConstantCmK * energy) / temperatureK) *
        (wavenumberPerCm / c.bandOriginPerCm) *
        Math.max(0, factor),
    });
  }
  const strongest = Math.max(...all.map((line) => line.relativeStrength));
  return all.filter((line) => line.relativeStrength > 1e-6 * strongest);
}

/**
 * Band constants n <- 0 from equilibrium constants. D_v = De + betaE (v + 1/2) with
 * betaE = De (8 omegaExe/omegaE - 5 alphaE/Be - alphaE^2 omegaE/(24 Be^3)) and H = (2 De/(3 omegaE^2)) (12 Be^2 - alphaE omegaE):
 * Herzberg, Spectra of Diatomic Molecules (1950).
 */
export function bandConstants(e: EquilibriumConstants, upper: number): BandConstants {
  const level = (v: number): number =>
    e.omegaE * (v + 0.5) - e.omegaExe * (v + 0.5) ** 2 + e.omegaEye * (v + 0.5) ** 3;
  const rotational = (v: number): number => e.be - e.alphaE * (v + 0.5) + e.gammaE * (v + 0.5) ** 2;
  const betaE =
    e.de *
    ((8 * e.omegaExe) / e.omegaE - (5 * e.alphaE) / e.be - (e.alphaE ** 2 * e.omegaE) / (24 * e.be ** 3));
  const sextic = ((2 * e.de) / (3 * e.omegaE ** 2)) * (12 * e.be ** 2 - e.alphaE * e.omegaE);
  return {
    bandOriginPerCm: level(upper) - level(0),
    rotationalConstantLowerPerCm: rotational(0),
    rotationalConstantUpperPerCm: rotational(upper),
    centrifugalConstantLowerPerCm: e.de + betaE * 0.5,
    centrifugalConstantUpperPerCm: e.de + betaE * (upper + 0.5),
    sexticConstantLowerPerCm: sextic,
    sexticConstantUpperPerCm: sextic,
  };
}

/** All constants multiplied by 1 + ppm/1e6: what an axis that is off by so much shows. */
export function onScaledAxis(constants: BandConstants, ppm: number): BandConstants {
  const factor = 1 + ppm * 1e-6;
  return Object.fromEntries(
    Object.entries(constants).map(([key, value]: [string, number]) => [key, value * factor]),
  ) as unknown as BandConstants;
}

function withDeviation(
  isotopologue: SimulatedIsotopologue,
  upper: number,
  deviation: number,
  draw: () => number,
): BandConstants {
  const exact = bandConstants(isotopologue.constants, upper);
  if (deviation === 0) return exact;
  const off = (value: number, size: number): number => value * (1 + size * draw());
  return {
    ...exact,
    bandOriginPerCm: off(exact.bandOriginPerCm, deviation / 10),
    rotationalConstantLowerPerCm: off(exact.rotationalConstantLowerPerCm, deviation),
    rotationalConstantUpperPerCm: off(exact.rotationalConstantUpperPerCm, deviation),
    centrifugalConstantLowerPerCm: off(exact.centrifugalConstantLowerPerCm, 10 * deviation),
    centrifugalConstantUpperPerCm: off(exact.centrifugalConstantUpperPerCm, 10 * deviation),
  };
}

/**
 * The bands of the gases asked for. `areaAtUnitPeak(wavenumber, mass)` gives the area of a line whose centre has
 * absorbance 1, so that `peakAbsorbance` is that of the strongest line of the most abundant isotopologue.
 */
export function bandsOf(
  gases: readonly GasOptions[],
  seed: number,
  temperatureK: number,
  areaAtUnitPeak: (wavenumberPerCm: number, massU: number) => number,
): readonly SimulatedBand[] {
  const random = createRandom(seed, 1);
  return gases.flatMap((options) => {
    const upper = options.upper ?? 1;
    const isotopologues = isotopologuesOf(options.gas);
    const shares = isotopologues.map((each) => options.shares?.[each.name] ?? each.share);
    const largest = Math.max(...shares);
    const main = isotopologues[shares.indexOf(largest)]!;
    const make = (isotopologue: SimulatedIsotopologue, strength: number): SimulatedBand => ({
      isotopologue: isotopologue.name,
      gas: options.gas,
      upper,
      massU: isotopologue.massU,
      constants: withDeviation(isotopologue, upper, options.deviation ?? 0, () => random.normal()),
      strength,
      missing: options.missing ?? [],
      intensityFactors: options.intensityFactors ?? [0, 0],
    });
    const lines = linesOf(make(main, 1), temperatureK);
    const strongest = lines.reduce((a, b) => (b.relativeStrength > a.relativeStrength ? b : a));
    const unit =
      (options.peakAbsorbance * areaAtUnitPeak(strongest.wavenumberPerCm, main.massU)) /
      (strongest.relativeStrength * largest);
    return isotopologues
      .map((isotopologue, index) => make(isotopologue, unit * shares[index]!))
      .filter((band) => band.strength > 0);
  });
}
