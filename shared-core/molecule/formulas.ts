import { bondLengthFactor, forceConstantFactor, momentOfInertiaFactor } from './physical-constants.ts';

/**
 * Bond length from a rotational constant: r = √(h/(8π²c μ B)), pm.
 *
 * @param rotationalConstantPerCm B > 0, cm-1. @param reducedMassU μ > 0, u.
 * @throws RangeError where either is not a positive number.
 */
export function bondLengthPm(rotationalConstantPerCm: number, reducedMassU: number): number {
  positive('rotationalConstantPerCm', rotationalConstantPerCm);
  positive('reducedMassU', reducedMassU);
  return Math.sqrt(bondLengthFactor / (reducedMassU * rotationalConstantPerCm));
}

/**
 * Force constant from a wavenumber: k = 4π²c² μ ν̃², N/m; ν̃ = ωe gives the harmonic one.
 *
 * @throws RangeError where the reduced mass is not a positive number.
 */
export function forceConstantNPerM(wavenumberPerCm: number, reducedMassU: number): number {
  positive('reducedMassU', reducedMassU);
  return forceConstantFactor * reducedMassU * wavenumberPerCm ** 2;
}

/** Moment of inertia from a rotational constant: I = h/(8π²c B), kg m². @throws RangeError where B is not positive. */
export function momentOfInertiaKgM2(rotationalConstantPerCm: number): number {
  positive('rotationalConstantPerCm', rotationalConstantPerCm);
  return momentOfInertiaFactor / rotationalConstantPerCm;
}

function positive(name: string, value: number): void {
  if (!(value > 0)) throw new RangeError(`${name}: expected a number above 0, got ${value}`);
}
