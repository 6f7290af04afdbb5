import type { BandName } from '../../assignment/types.ts';
import type { BandConstants, Isotopologue } from '../../molecule/types.ts';
import type { PreparedSpectrum } from '../../spectrum/types.ts';

/** How the centrifugal constants of a band are treated. */
export type DistortionModel = 'free' | 'tied' | 'held';

/** A band that the model of the spectrum holds. */
export interface ForwardBand {
  readonly isotopologue: Isotopologue;
  readonly band: BandName;
  /** Starting values; held constants keep them. */
  readonly constants: BandConstants;
  readonly ms: readonly number[];
  readonly distortion: DistortionModel;
  /** Lines (by m) whose position is free: they do not take part in the constants (corrections, outliers). */
  readonly freeMs?: readonly number[];
  /**
   * Index of another band that this one follows: same change of origin, constants in the given ratio to those of the leader,
   * strengths in a given ratio to the same m. For partners that the resolution cannot tell apart.
   */
  readonly follows?: { readonly leader: number; readonly strengthRatio: number };
  /** Starting peak absorbance (decadic) of each line, in the order of `ms`. */
  readonly peakAbsorbance: readonly number[];
}

export interface ForwardInput {
  readonly prepared: PreparedSpectrum;
  readonly bands: readonly ForwardBand[];
}

/** What the fit says of one line. */
export interface ForwardLine {
  readonly bandIndex: number;
  readonly m: number;
  /** Position by itself, everything else as fitted, cm-1. */
  readonly wavenumberPerCm: number;
  readonly uncertaintyPerCm: number;
  /** Observed − calculated, cm-1. */
  readonly residualPerCm: number;
  /** Decadic absorbance at the line centre, before the instrument. */
  readonly trueAbsorbance: number;
  /** Depth of the observed line, in transmittance. */
  readonly depth: number;
  readonly blended: boolean;
}

export interface Instrument {
  readonly maximumPathDifferenceCm: number;
  /** Weighting of the interferogram: 1 − q1 − q2 + q1 cos(πx/L) + q2 cos(2πx/L). */
  readonly q1: number;
  readonly q2: number;
  readonly lorentzHalfWidthPerCm: number;
}

export interface ForwardFit {
  readonly outcome: 'converged';
  readonly constants: readonly BandConstants[];
  /** Joint covariance over (band, ν̃0, B_0, B_n, D_0, D_n), 5·bands square, row-major, cm-2; held constants have rows of 0. */
  readonly covariance: Float64Array;
  readonly lines: readonly ForwardLine[];
  readonly instrument: Instrument;
  /** Noise of the transmittance beside the lines, 1σ. */
  readonly noise: number;
  /** Scale of σ on the lines over the noise beside them, 1 where the model fits. */
  readonly misfit: number;
  readonly iterations: number;
  /** Ranges left out since something else absorbs there, cm-1. */
  readonly leftOutPerCm: readonly (readonly [number, number])[];
}

export type ForwardOutcome =
  | ForwardFit
  | { readonly outcome: 'not-converged' | 'rank-deficient' | 'too-few-lines'; readonly reason: string };
