/** CODATA 2022: speed of light (exact), Planck constant (exact), atomic mass constant. */
const speedOfLightCmPerS = 2.99792458e10;
const planckJs = 6.62607015e-34;
const atomicMassKg = 1.66053906892e-27;

/** h/(8π²c): moment of inertia times rotational constant, kg m² cm-1. */
export const inertiaFactorKgM2PerCm = planckJs / (8 * Math.PI ** 2 * speedOfLightCmPerS);

/** μ B r² for a diatomic, u pm² cm-1 (16.857629 u Å² cm-1). */
export const bondLengthFactor = (inertiaFactorKgM2PerCm / atomicMassKg) * 1e24;

/** k = factor · μ ν̃²: 4π²c², in N m-1 per u per cm-2. */
export const forceConstantFactor = 4 * Math.PI ** 2 * speedOfLightCmPerS ** 2 * atomicMassKg;

/** Bond length from a rotational constant: r = √(h/(8π²cμB)), pm. */
export function bondLengthPm(rotationalConstantPerCm: number, reducedMassU: number): number {
  return Math.sqrt(bondLengthFactor / (rotationalConstantPerCm * reducedMassU));
}

/** Force constant from a vibrational wavenumber: k = 4π²c²μν̃², N/m. */
export function forceConstantNPerM(wavenumberPerCm: number, reducedMassU: number): number {
  return forceConstantFactor * reducedMassU * wavenumberPerCm ** 2;
}
