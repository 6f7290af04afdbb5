import type { SlipDefinition } from './definition.ts';

/**
 * Prior probabilities, written down once. They say how often a careful instructor meets each case, in round numbers of common practice;
 * they are not fitted to any class.
 */
export const priors = {
  /** Correct work, apart from reading error and rounding. */
  correct: 0.55,
  /** One slip of the catalogue, shared out by its weights. */
  oneSlip: 0.28,
  /** Two of them. */
  twoSlips: 0.05,
  /** A value from a handbook in place of the student's own. */
  handbook: 0.02,
  /** Two digits exchanged, or one lost or mistyped, somewhere in a submission. */
  digitsSwapped: 0.01,
  digitLost: 0.006,
  /** Something unknown happened to one value, and the later ones follow from it. */
  unknownCarried: 0.05,
  /** Something unknown happened to the lines. */
  unknownLines: 0.02,
  /** Something unknown happened to one value by itself: for each such value. */
  unknownValue: 0.012,
} as const;

/** Share of a definition among all. */
export function shareOf(definition: SlipDefinition, totalWeight: number): number {
  return definition.weight / totalWeight;
}

/**
 * ln of the probability density, per unit of ln|y|, that something unknown turned `expected` into `value`.
 *
 * Half stays within some per cent (misreadings, other data), a third within a factor of about two (lost terms and factors), the rest
 * is spread evenly over twenty e-folds; the sign changes in one case of ten.
 */
export function logUnknownDensity(value: number, expected: number): number {
  const sameSign = value * expected > 0;
  const l = Math.log(Math.abs(value) / Math.max(Math.abs(expected), 1e-300));
  const cauchy = (scale: number): number => scale / (Math.PI * (scale * scale + l * l));
  const wide = Math.abs(l) < 10 ? 1 / 20 : 1e-4;
  const density = 0.5 * cauchy(0.03) + 0.33 * cauchy(0.5) + 0.17 * wide;
  return Math.log(density * (sameSign ? 0.9 : 0.1));
}
