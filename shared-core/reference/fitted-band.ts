import type { BandName } from '../assignment/types.ts';
import type { BandConstants, Isotopologue } from '../molecule/types.ts';

/** Constants of one band of one isotopologue with their covariance (5 × 5, row-major, over ν̃0, B_0, B_n, D_0, D_n; cm-1). */
export interface FittedBand {
  readonly isotopologue: Isotopologue;
  readonly band: BandName;
  /** Upper vibrational quantum number n of n <- 0. */
  readonly upper: number;
  readonly constants: BandConstants;
  readonly covariance: Float64Array;
  /** A partner that could not be told apart and was held to this band by natural abundance. */
  readonly merged: boolean;
}

/** The five constants in the order of the covariance. */
export function bandParameters(constants: BandConstants): number[] {
  return [
    constants.bandOriginPerCm,
    constants.rotationalConstantLowerPerCm,
    constants.rotationalConstantUpperPerCm,
    constants.centrifugalConstantLowerPerCm,
    constants.centrifugalConstantUpperPerCm,
  ];
}
