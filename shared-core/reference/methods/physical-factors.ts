import { bondLengthFactor, forceConstantFactor } from '../../molecule/physical-constants.ts';

/**
 * Bond length as a student works it out: r = √(h/(8π²cμ|B|)), pm. A negative B (branches exchanged) still ends in a length, since
 * the sign is dropped under the root; NaN for B = 0.
 */
export function bondLengthPm(rotationalConstantPerCm: number, reducedMassU: number): number {
  return Math.sqrt(bondLengthFactor / (Math.abs(rotationalConstantPerCm) * reducedMassU));
}

/** Force constant from a vibrational wavenumber: k = 4π²c²μν̃², N/m. */
export function forceConstantNPerM(wavenumberPerCm: number, reducedMassU: number): number {
  return forceConstantFactor * reducedMassU * wavenumberPerCm ** 2;
}
