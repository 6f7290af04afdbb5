import type { Measured } from '../units/types.ts';
import type { FittedBand } from './fitted-band.ts';

/** ωe and ωexe with where they came from; cm-1. */
export interface Anharmonicity {
  readonly omegaE: Measured;
  readonly omegaExe: Measured;
  readonly from: 'overtone' | 'isotope-pair' | 'given';
}

const measured = (value: number, variance: number): Measured => ({
  value,
  uncertainty: Math.sqrt(Math.max(variance, 0)),
  unit: 'cm-1',
});
const originVariance = (band: FittedBand): number => band.covariance[0]!;

/**
 * From fundamental and first overtone of one isotopologue: ωexe = (2ν̃1 − ν̃2)/2, ωe = 3ν̃1 − ν̃2.
 *
 * @param fundamental band 1-0. @param overtone band 2-0 of the same isotopologue.
 * @throws RangeError where the bands are not 1-0 and 2-0 of one isotopologue.
 */
export function anharmonicityFromOvertone(fundamental: FittedBand, overtone: FittedBand): Anharmonicity {
  if (
    fundamental.isotopologue.name !== overtone.isotopologue.name ||
    fundamental.upper !== 1 ||
    overtone.upper !== 2
  ) {
    throw new RangeError('fundamental, overtone: expected bands 1-0 and 2-0 of one isotopologue');
  }
  const first = fundamental.constants.bandOriginPerCm;
  const second = overtone.constants.bandOriginPerCm;
  const v1 = originVariance(fundamental);
  const v2 = originVariance(overtone);
  return {
    omegaE: measured(3 * first - second, 9 * v1 + v2),
    omegaExe: measured(first - second / 2, v1 + v2 / 4),
    from: 'overtone',
  };
}

/**
 * From the fundamentals of two isotopologues whose masses differ much (H/D): with ρ = √(μ/μ′), ω′ = ρω and x scaling as ρ²,
 * ωe = (ρ²ν̃ − ν̃′)/(ρ² − ρ), ωexe = (ωe − ν̃)/2.
 *
 * @param own the isotopologue for which the result holds. @param partner the other one.
 * @throws RangeError where ρ is within 5 % of 1 (a 35/37 pair cannot fix ωexe).
 */
export function anharmonicityFromPair(own: FittedBand, partner: FittedBand): Anharmonicity {
  const rho = Math.sqrt(own.isotopologue.reducedMassU / partner.isotopologue.reducedMassU);
  if (Math.abs(rho - 1) < 0.05) {
    throw new RangeError(
      `partner: mass ratio ρ = ${rho.toFixed(4)} is too close to 1 to fix the anharmonicity`,
    );
  }
  const denominator = rho * rho - rho;
  const origin = own.constants.bandOriginPerCm;
  const partnerOrigin = partner.constants.bandOriginPerCm;
  const omega = (rho * rho * origin - partnerOrigin) / denominator;
  const dOwn = (rho * rho) / denominator;
  const dPartner = -1 / denominator;
  const v = originVariance(own);
  const vPartner = originVariance(partner);
  return {
    omegaE: measured(omega, dOwn ** 2 * v + dPartner ** 2 * vPartner),
    omegaExe: measured((omega - origin) / 2, ((dOwn - 1) / 2) ** 2 * v + (dPartner / 2) ** 2 * vPartner),
    from: 'isotope-pair',
  };
}

/** From a value that the course supplies (taken as exact): ωe = ν̃0 + 2ωexe. */
export function anharmonicityGiven(fundamental: FittedBand, omegaExePerCm: number): Anharmonicity {
  return {
    omegaE: measured(fundamental.constants.bandOriginPerCm + 2 * omegaExePerCm, originVariance(fundamental)),
    omegaExe: { value: omegaExePerCm, uncertainty: null, unit: 'cm-1' },
    from: 'given',
  };
}
