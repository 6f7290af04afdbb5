import type { FoundLine } from '../lines/types.ts';
import type { BandConstants, Isotopologue } from '../molecule/types.ts';

export type Branch = 'P' | 'R';
/** "1-0", "2-0", "3-0": upper and lower vibrational quantum number. */
export type BandName = string;

/** One line with its place in a band. Ids survive a refit: "H35Cl/1-0/R/0". */
export interface AssignedLine {
  readonly id: string;
  readonly isotopologue: string;
  readonly band: BandName;
  readonly branch: Branch;
  readonly jLower: number;
  /** J + 1 for R, -J for P. */
  readonly m: number;
  readonly wavenumberPerCm: number;
  readonly uncertaintyPerCm: number;
  readonly peakAbsorbance: number;
  readonly saturated: boolean;
  readonly blended: boolean;
  /** False where left out of the fit, with the reason (outlier, blend, correction). */
  readonly used: boolean;
  readonly leftOutBecause: string | null;
  /** True where a person accepted the line although it stands off: it is not left out again. */
  readonly accepted?: boolean;
  /** observed - calculated, cm-1; null before a fit. */
  readonly residualPerCm: number | null;
}

/** One band of one isotopologue, assigned blind. */
export interface AssignedBand {
  readonly isotopologue: Isotopologue;
  readonly band: BandName;
  readonly lines: readonly AssignedLine[];
  readonly constants: BandConstants;
  /** RMS residual of the band fit, cm-1. */
  readonly rmsPerCm: number;
  /** True where a doublet could not be told apart and abundance was assumed. */
  readonly merged: boolean;
}

/** The next best reading of the same lines, and how much worse it is. */
export interface RunnerUp {
  readonly text: string;
  /** Odds of the runner-up against the chosen reading (small: sure). */
  readonly odds: number;
}

export interface Assignment {
  readonly bands: readonly AssignedBand[];
  readonly runnerUp: RunnerUp | null;
  /** Found lines that belong to none of the bands. */
  readonly unexplained: readonly FoundLine[];
}

export interface NoAssignment {
  readonly bands: readonly [];
  /** Stable code and sentence. */
  readonly code: string;
  readonly reason: string;
}
