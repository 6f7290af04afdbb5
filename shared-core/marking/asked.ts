import type { FileReference } from '../reference/types.ts';
import type { MarkingScheme, QuantityRule, Submission, SubmittedValue } from './types.ts';

/** A quantity asked for, of one isotopologue. */
export interface Asked {
  readonly isotopologue: string;
  readonly rule: QuantityRule;
}

/**
 * Which isotopologues a submission is about: its own column; those that its values name; else, where nothing names one, the
 * single isotopologue of the scheme that the file shows (or the first of the scheme).
 */
export function isotopologuesOf(
  submission: Submission,
  scheme: MarkingScheme,
  reference: FileReference | null,
): string[] {
  const named = submission.values.flatMap((v) => v.isotopologue ?? []);
  const own = submission.isotopologue === null ? [] : [submission.isotopologue];
  const all = [...new Set([...own, ...named])];
  if (all.length > 0) {
    const inOrder = scheme.isotopologues.filter((i) => all.includes(i));
    return [...inOrder, ...all.filter((i) => !inOrder.includes(i))];
  }
  const main = reference?.isotopologue ?? null;
  if (main !== null && scheme.isotopologues.includes(main)) return [main];
  const shown = scheme.isotopologues.find((i) => reference?.isotopologues[i] !== undefined);
  return [shown ?? scheme.isotopologues[0]!];
}

/** Everything that is asked of a submission, in the order of the scheme. */
export function askedOf(scheme: MarkingScheme, isotopologues: readonly string[]): Asked[] {
  return isotopologues.flatMap((isotopologue) =>
    scheme.quantities
      .filter((rule) => !rule.isotopologues?.length || rule.isotopologues.includes(isotopologue))
      .map((rule) => ({ isotopologue, rule })),
  );
}

/** The values that a submission gives for one isotopologue; a value that names none belongs to the first. */
export function valuesOf(
  submission: Submission,
  isotopologue: string,
  isotopologues: readonly string[],
): SubmittedValue[] {
  const unnamed = submission.isotopologue ?? isotopologues[0];
  return submission.values.filter((v) => (v.isotopologue ?? unnamed) === isotopologue);
}
