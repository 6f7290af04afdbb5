import type { Isotopologue } from '../../molecule/types.ts';
import type { DeriveContext, Step, Values } from '../../reference/methods/derive.ts';
import type { MethodLine } from '../../reference/methods/method-line.ts';
import type { MethodSettings, PrescribedMethod } from '../../reference/types.ts';
import type { QuantityKey } from '../../units/types.ts';

export type Steps = Partial<Record<QuantityKey, Step>>;

/** What the catalogue may look at when it lists the ways in which a slip can have happened. */
export interface SlipSurroundings {
  readonly isotopologue: Isotopologue;
  readonly settings: MethodSettings;
  readonly method: PrescribedMethod;
  /** Quantities that the student handed in. */
  readonly submitted: ReadonlySet<QuantityKey>;
  /** Numbers of lines a side that the student may have used. */
  readonly linesASide: readonly number[];
  /** The isotopologue with the other halogen isotope (35/37, 79/81), and its lines where the file shows them. */
  readonly otherHeavy: { readonly isotopologue: Isotopologue; readonly lines: readonly MethodLine[] } | null;
  /** The isotopologue with the other hydrogen, and its lines where the file shows them. */
  readonly otherLight: { readonly isotopologue: Isotopologue; readonly lines: readonly MethodLine[] } | null;
  readonly overtone: readonly MethodLine[] | null;
  /** Handbook ωe and ωexe (cm-1) for slips that bring one in; null for a gas that is not listed. */
  readonly handbook: { readonly omegaE: number; readonly omegaExe: number } | null;
}

/** Lines as the slip leaves them, and the method that is then applied (the prescribed one where null). */
export interface ReplayedLines {
  readonly lines: readonly MethodLine[];
  readonly method: PrescribedMethod | null;
}

/**
 * One way in which a slip can have happened.
 *
 * `replay` changes the lines before the method; `steps` replace steps of the derivation. Carried: later steps go on from the wrong
 * value; otherwise only the named values are wrong.
 */
export interface SlipVariant {
  readonly formula: string;
  readonly replay?: (lines: readonly MethodLine[]) => ReplayedLines | null;
  readonly steps?: Steps;
  readonly carried: boolean;
  /** True where a step reads a single line, whose error the fit does not average out. */
  readonly readsOneLine?: boolean;
  /** How often this way is met beside the others of the same slip; 1 where absent. */
  readonly often?: number;
}

export type SlipFamily = 'assignment' | 'coefficients' | 'vibration' | 'constants' | 'reporting';

/** A known wrong step. The code is stable and appears in results. */
export interface SlipDefinition {
  readonly code: string;
  readonly family: SlipFamily;
  /** Prior weight: 3 everyday, 1 usual, 0.3 rare (common practice of teaching labs, not fitted to any class). */
  readonly weight: number;
  /** What was done, as the beginning of a sentence. */
  readonly what: string;
  readonly variants: (around: SlipSurroundings) => readonly SlipVariant[];
}

/** Both forms of a step slip: carried into what follows, and alone. */
export function bothWays(formula: string, steps: Steps): SlipVariant[] {
  return [
    { formula, steps, carried: true },
    { formula: `${formula}, not carried on`, steps, carried: false, often: 0.5 },
  ];
}

/** Only the named values are wrong. */
export function alone(formula: string, steps: Steps): SlipVariant {
  return { formula, steps, carried: false };
}

/** Later steps go on from the wrong value. */
export function carriedOn(formula: string, steps: Steps): SlipVariant {
  return { formula, steps, carried: true };
}

/** A way that is met less often than the others of its slip. */
export function seldom(variant: SlipVariant, often = 0.3): SlipVariant {
  return { ...variant, often };
}

/** The values that the standard derivation of a step would read, or null where one is missing. */
export function needing<K extends QuantityKey>(
  keys: readonly K[],
  f: (values: Record<K, number>, context: DeriveContext) => number,
): Step {
  return (have: Values, context) =>
    keys.every((key) => have[key] !== undefined) ? f(have as Record<K, number>, context) : null;
}
