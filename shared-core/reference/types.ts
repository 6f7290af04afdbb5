import type { AssignedLine, BandName, RunnerUp } from '../assignment/types.ts';
import type { OrdinateKind } from '../spectrum/types.ts';
import type { Measured, QuantityKey, Reason } from '../units/types.ts';

/** An analysis that a course prescribes (marking scheme, `methods`). */
export type PrescribedMethod =
  | { readonly fit: 'polynomial'; readonly degree: 1 | 2 | 3 | 4; readonly distortion?: 'tied' | 'free' }
  | { readonly fit: 'combination-differences'; readonly intercept: boolean; readonly cubicTerm: boolean }
  | { readonly fit: 'successive-differences' }
  | { readonly fit: 'single-branch'; readonly branch: 'P' | 'R' }
  | { readonly fit: 'midpoint' };

export type MassKind = 'isotopic' | 'average' | 'nuclear';

/** The part of a marking scheme that decides how lines become constants. */
export interface MethodSettings {
  readonly masses: MassKind;
  readonly bondLengthFrom: 'Be' | 'B0' | 'B1';
  readonly forceConstantFrom: 'omegaE' | 'nu0';
  readonly anharmonicityFrom: 'overtone' | 'isotope-pair' | 'given' | null;
  readonly anharmonicityPerCm: number | null;
}

export type LineRule = { readonly rule: 'any' } | { readonly rule: 'up-to'; readonly m: number };

/** Constants by a prescribed method; a quantity that the method does not yield is absent. */
export type Constants = Readonly<Partial<Record<QuantityKey, Measured>>>;

/** A constant by the prescribed method with the span over the admissible line sets. */
export interface PrescribedValue extends Measured {
  readonly low: number;
  readonly high: number;
}

export interface PrescribedConstants {
  /** "cubic", "quadratic", "combination differences", ... */
  readonly method: string;
  readonly values: Readonly<Partial<Record<QuantityKey, PrescribedValue>>>;
}

/** Instructor's changes to a reference, as data; `reference(files, settings, corrections)` is a pure function of them. */
export type Correction =
  | { readonly kind: 'ordinate'; readonly ordinate: Exclude<OrdinateKind, 'unusable'> }
  | { readonly kind: 'range'; readonly fromPerCm: number; readonly toPerCm: number }
  | { readonly kind: 'isotopologues'; readonly names: readonly string[] }
  | {
      readonly kind: 'index-shift';
      readonly isotopologue: string;
      readonly band: BandName;
      readonly shift: number;
    }
  | { readonly kind: 'line-out'; readonly lineId: string }
  | { readonly kind: 'line-in'; readonly lineId: string }
  | { readonly kind: 'line-moved'; readonly lineId: string; readonly wavenumberPerCm: number }
  | { readonly kind: 'outlier-accepted'; readonly lineId: string };

export type Reliability = 'sound' | 'check' | 'none';

/** A check on the result, with its figure and what it is held against. */
export interface ReferenceCheck {
  readonly code: string;
  readonly figure: number;
  readonly threshold: number;
  readonly unit: string;
  readonly passed: boolean;
  readonly text: string;
}

/** The answer key made from one raw file (or the files of one submission). JSON-safe: no NaN, unknown is null. */
export interface FileReference {
  readonly reliability: Reliability;
  readonly reasons: readonly Reason[];
  readonly checks: readonly ReferenceCheck[];
  readonly axisScalePpm: number | null;
  readonly ordinate: OrdinateKind;
  readonly ordinateReason: string;
  /** Main isotopologue (the most abundant of the strongest gas, or the one asked for). Null: nothing assigned. */
  readonly isotopologue: string | null;
  /** Best estimate of the main isotopologue, on the file's own axis. */
  readonly best: Constants;
  readonly isotopologues: Readonly<Record<string, Constants>>;
  /** Reliability of each isotopologue by itself (an overtone alone or a faint partner may be worse than the main one). */
  readonly isotopologueReliability: Readonly<Record<string, Reliability>>;
  readonly isotopologueReasons: Readonly<Record<string, readonly Reason[]>>;
  readonly isotopologueChecks: Readonly<Record<string, readonly ReferenceCheck[]>>;
  readonly runnerUp: RunnerUp | null;
  readonly lines: readonly AssignedLine[];
  /** How the best estimate was made: D tied or free, H held or free, weights, scale of sigma, lines used. */
  readonly model: string;
  readonly notes: readonly Reason[];
  readonly coreVersion: string;
}
