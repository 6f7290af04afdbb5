import { secondRadiationConstantCmK } from './physical-constants.ts';
import type { BandConstants, PublishedConstants } from './types.ts';

/**
 * Constants of the band n <- 0 from equilibrium constants:
 * ν̃0 = G(n) − G(0) with G(v) = ωe(v+½) − ωexe(v+½)² + ωeye(v+½)³, B_v = Be − αe(v+½) + γe(v+½)², D_v = De (its change with v is
 * not published for all gases), H by `sexticConstantPerCm`.
 *
 * @param upper n, 1 or more. @throws RangeError where n is no whole number above 0.
 */
export function bandConstantsFrom(constants: PublishedConstants, upper: number): BandConstants {
  if (!Number.isInteger(upper) || upper < 1)
    throw new RangeError(`upper: expected a whole number above 0, got ${upper}`);
  const g = (v: number): number => {
    const x = v + 0.5;
    return x * (constants.omegaEPerCm - x * (constants.omegaExePerCm - x * constants.omegaEyePerCm));
  };
  const b = (v: number): number =>
    constants.rotationalConstantEquilibriumPerCm -
    (v + 0.5) * (constants.alphaEPerCm - (v + 0.5) * constants.gammaEPerCm);
  const h = sexticConstantPerCm(
    constants.centrifugalConstantPerCm,
    constants.rotationalConstantEquilibriumPerCm,
    constants.alphaEPerCm,
    constants.omegaEPerCm,
  );
  return {
    bandOriginPerCm: g(upper) - g(0),
    rotationalConstantLowerPerCm: b(0),
    rotationalConstantUpperPerCm: b(upper),
    centrifugalConstantLowerPerCm: constants.centrifugalConstantPerCm,
    centrifugalConstantUpperPerCm: constants.centrifugalConstantPerCm,
    sexticConstantLowerPerCm: h,
    sexticConstantUpperPerCm: h,
  };
}

/** H ≈ (2D/3ωe²)(12B² − αeωe), cm-1: holds the sextic constant in a best estimate. */
export function sexticConstantPerCm(d: number, b: number, alpha: number, omega: number): number {
  return ((2 * d) / (3 * omega ** 2)) * (12 * b ** 2 - alpha * omega);
}

/** Rotational term value F(J) = B J(J+1) − D [J(J+1)]² + H [J(J+1)]³, cm-1. */
export function termValuePerCm(j: number, b: number, d: number, h: number): number {
  const x = j * (j + 1);
  return x * (b - x * (d - x * h));
}

/** Wavenumber of the line m (R: m = J + 1, P: m = −J) of a band, cm-1. @throws RangeError where m is 0 or no whole number. */
export function lineWavenumberPerCm(constants: BandConstants, m: number): number {
  if (!Number.isInteger(m) || m === 0)
    throw new RangeError(`m: expected a whole number other than 0, got ${m}`);
  const lower = m > 0 ? m - 1 : -m;
  const upper = m > 0 ? m : -m - 1;
  return (
    constants.bandOriginPerCm +
    termValuePerCm(
      upper,
      constants.rotationalConstantUpperPerCm,
      constants.centrifugalConstantUpperPerCm,
      constants.sexticConstantUpperPerCm,
    ) -
    termValuePerCm(
      lower,
      constants.rotationalConstantLowerPerCm,
      constants.centrifugalConstantLowerPerCm,
      constants.sexticConstantLowerPerCm,
    )
  );
}

/** Relative strength |m| · exp(−hcF_0(J)/kT) · ν̃ of a line (J of the lower state); helps to recognise a band. */
export function relativeLineStrength(constants: BandConstants, m: number, temperatureK: number): number {
  const lower = m > 0 ? m - 1 : -m;
  const term = termValuePerCm(
    lower,
    constants.rotationalConstantLowerPerCm,
    constants.centrifugalConstantLowerPerCm,
    constants.sexticConstantLowerPerCm,
  );
  return (
    Math.abs(m) *
    Math.exp((-secondRadiationConstantCmK * term) / temperatureK) *
    lineWavenumberPerCm(constants, m)
  );
}
