import type { Isotopologue, PublishedConstants } from './types.ts';

/** ρ = √(μ/μ′): ratio by which ωe scales from one isotopologue to another. */
export function massRatio(from: Isotopologue, to: Isotopologue): number {
  return Math.sqrt(from.reducedMassU / to.reducedMassU);
}

/** Equilibrium constants of another isotopologue: ωe ρ, ωexe ρ², ωeye ρ³, Be ρ², αe ρ³, γe ρ⁴, D ρ⁴. */
export function scaleConstants(
  constants: PublishedConstants,
  from: Isotopologue,
  to: Isotopologue,
): PublishedConstants {
  const rho = massRatio(from, to);
  return {
    ...constants,
    isotopologue: to.name,
    omegaEPerCm: constants.omegaEPerCm * rho,
    omegaExePerCm: constants.omegaExePerCm * rho ** 2,
    omegaEyePerCm: constants.omegaEyePerCm * rho ** 3,
    rotationalConstantEquilibriumPerCm: constants.rotationalConstantEquilibriumPerCm * rho ** 2,
    alphaEPerCm: constants.alphaEPerCm * rho ** 3,
    gammaEPerCm: constants.gammaEPerCm * rho ** 4,
    centrifugalConstantPerCm: constants.centrifugalConstantPerCm * rho ** 4,
    source: `mass scaling of ${from.name}: ${constants.source}`,
  };
}
