import { bondLengthPm, forceConstantNPerM, momentOfInertiaKgM2 } from '../molecule/index.ts';
import type { Measured, StandardUnit } from '../units/types.ts';
import {
  anharmonicityFromOvertone,
  anharmonicityFromPair,
  anharmonicityGiven,
  type Anharmonicity,
} from './anharmonicity.ts';
import { bandParameters, type FittedBand } from './fitted-band.ts';
import { propagate } from './propagate.ts';
import type { Constants, MethodSettings } from './types.ts';

/**
 * Constants that the bands of one isotopologue support, each with the uncertainty that the covariance of the fit gives it.
 *
 * From the fundamental: ν̃0, B_0, B_1, αe = B_0 − B_1, Be = B_0 + αe/2, D = (D_0 + D_1)/2, re from Be, r0 from B_0, I from Be;
 * with the first overtone also ν̃0 of 2←0, B_2 and ωe, ωexe. From an overtone alone: its origin, B_0, B_2, D and r0, nothing more.
 *
 * @param bands bands of one isotopologue. @param pairs fundamentals of other isotopologues of the same elements, for ωexe.
 * @param settings which wavenumber gives k, and a supplied ωexe.
 * @returns constants in cm-1, pm, N/m, kg m2; a key that the bands do not support is absent.
 */
export function deriveConstants(
  bands: readonly FittedBand[],
  pairs: readonly FittedBand[],
  settings: MethodSettings,
): { constants: Constants; anharmonicity: Anharmonicity | null } {
  const fundamental = bands.find((b) => b.upper === 1);
  const overtone = bands.find((b) => b.upper === 2);
  const constants: Record<string, Measured> = {};
  if (overtone !== undefined) Object.assign(constants, fromOvertone(overtone));
  if (fundamental === undefined) return { constants, anharmonicity: null };
  Object.assign(constants, fromFundamental(fundamental));
  const anharmonicity = findAnharmonicity(fundamental, overtone, pairs, settings);
  if (anharmonicity !== null) {
    constants['omegaE'] = anharmonicity.omegaE;
    constants['omegaExe'] = anharmonicity.omegaExe;
  }
  const wavenumber =
    settings.forceConstantFrom === 'omegaE' && anharmonicity !== null
      ? anharmonicity.omegaE
      : constants['nu0']!;
  const k = forceConstantNPerM(wavenumber.value, fundamental.isotopologue.reducedMassU);
  constants['k'] = {
    value: k,
    uncertainty: wavenumber.uncertainty === null ? null : (2 * k * wavenumber.uncertainty) / wavenumber.value,
    unit: 'N/m',
  };
  return { constants, anharmonicity };
}

function fromFundamental(band: FittedBand): Record<string, Measured> {
  const p = bandParameters(band.constants);
  const mu = band.isotopologue.reducedMassU;
  const of = (unit: StandardUnit, f: (v: readonly number[]) => number): Measured => ({
    ...propagate(p, band.covariance, f),
    unit,
  });
  const be = (v: readonly number[]): number => 1.5 * v[1]! - 0.5 * v[2]!;
  const result: Record<string, Measured> = {
    nu0: of('cm-1', (v) => v[0]!),
    B0: of('cm-1', (v) => v[1]!),
    B1: of('cm-1', (v) => v[2]!),
    alphaE: of('cm-1', (v) => v[1]! - v[2]!),
    Be: of('cm-1', be),
    D: of('cm-1', (v) => (v[3]! + v[4]!) / 2),
  };
  if (be(p) > 0 && p[1]! > 0) {
    result['re'] = of('pm', (v) => bondLengthPm(be(v), mu));
    result['r0'] = of('pm', (v) => bondLengthPm(v[1]!, mu));
    result['I'] = of('kg m2', (v) => momentOfInertiaKgM2(be(v)));
  }
  return result;
}

function fromOvertone(band: FittedBand): Record<string, Measured> {
  const p = bandParameters(band.constants);
  const of = (unit: StandardUnit, f: (v: readonly number[]) => number): Measured => ({
    ...propagate(p, band.covariance, f),
    unit,
  });
  return {
    nu02: of('cm-1', (v) => v[0]!),
    B0: of('cm-1', (v) => v[1]!),
    B2: of('cm-1', (v) => v[2]!),
    D: of('cm-1', (v) => (v[3]! + v[4]!) / 2),
    r0: of('pm', (v) => bondLengthPm(v[1]!, band.isotopologue.reducedMassU)),
  };
}

/** The source that the settings name; without one, the overtone, else an H/D pair. */
function findAnharmonicity(
  fundamental: FittedBand,
  overtone: FittedBand | undefined,
  pairs: readonly FittedBand[],
  settings: MethodSettings,
): Anharmonicity | null {
  const wanted = settings.anharmonicityFrom;
  if (wanted === 'given') {
    return settings.anharmonicityPerCm === null
      ? null
      : anharmonicityGiven(fundamental, settings.anharmonicityPerCm);
  }
  if (overtone !== undefined && wanted !== 'isotope-pair')
    return anharmonicityFromOvertone(fundamental, overtone);
  const mu = fundamental.isotopologue.reducedMassU;
  const partner = pairs.find(
    (b) => b.upper === 1 && Math.abs(Math.sqrt(mu / b.isotopologue.reducedMassU) - 1) > 0.05,
  );
  return partner !== undefined && wanted !== 'overtone' ? anharmonicityFromPair(fundamental, partner) : null;
}
