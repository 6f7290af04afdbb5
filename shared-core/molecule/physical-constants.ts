/** CODATA 2022 recommended values. */
export const speedOfLightMPerS = 299792458;
export const planckJs = 6.62607015e-34;
export const boltzmannJPerK = 1.380649e-23;
export const atomicMassConstantKg = 1.66053906892e-27;
export const electronMassU = 5.485799090441e-4;

/** Second radiation constant hc/k, cm K. */
export const secondRadiationConstantCmK = (planckJs * speedOfLightMPerS * 100) / boltzmannJPerK;

/** h/(8π²c), kg m² cm-1: I = this / B. */
export const momentOfInertiaFactor = planckJs / (8 * Math.PI ** 2 * speedOfLightMPerS * 100);

/** h/(8π²c u) in u pm² cm-1 (16.857629 u Å² cm-1): r = √(this/(μB)). */
export const bondLengthFactor = (momentOfInertiaFactor / atomicMassConstantKg) * 1e24;

/** 4π²c² u in N m-1 u-1 cm² (5.89183e-5): k = this · μ ν̃². */
export const forceConstantFactor = 4 * Math.PI ** 2 * (speedOfLightMPerS * 100) ** 2 * atomicMassConstantKg;
