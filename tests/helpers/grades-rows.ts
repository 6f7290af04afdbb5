import { starterScheme } from '../../shared-core/marking/starter-scheme.ts';
import type { MarkedSubmission, MarkedValue, MarkingScheme } from '../../shared-core/marking/types.ts';
import type { QuantityKey } from '../../shared-core/units/types.ts';

export interface GradesCase {
  readonly student: string;
  readonly name: string | null;
  /** Points by isotopologue and quantity; null: open. */
  readonly points: readonly (readonly [isotopologue: string, key: QuantityKey, points: number | null])[];
}

/** A scheme that asks Be and re with a point each. */
export function twoValues(isotopologues: readonly string[] = ['H35Cl']): MarkingScheme {
  return starterScheme(
    [
      { key: 'Be', unit: 'cm-1', isotopologue: null },
      { key: 're', unit: 'pm', isotopologue: null },
    ],
    isotopologues,
  );
}

/** A marked submission with the points given, as far as the grades file looks at it. */
export function markedRow({ student, name, points }: GradesCase): { marked: MarkedSubmission } {
  const values = points.map(([isotopologue, quantity, own]): MarkedValue => ({
    isotopologue, quantity, text: '', submitted: null, uncertainty: null, figures: null, unit: 'cm-1', agreement: own === null ? 'no reference' : 'within',
    reason: null, reference: null, tolerance: null, deviation: null, method: null, carriedForward: false, points: own, of: 1,
  })); // prettier-ignore
  const submission = {
    student, name, group: null, attempt: 1, received: null, isotopologue: null, spectra: [], values: [], lines: [], lineCount: null,
  }; // prettier-ignore
  return {
    marked: {
      submission, spectrum: null, reference: null, prescribed: {}, values, slips: [], observations: [], remarks: [],
      points: null, of: values.length, open: values.filter((v) => v.points === null).length,
    },
  }; // prettier-ignore
}
