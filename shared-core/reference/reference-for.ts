import type { FileReference } from './types.ts';

/**
 * The same reference seen from another of its isotopologues: `best`, reliability, reasons and checks become those of that one.
 *
 * @returns null where the file shows no such isotopologue.
 */
export function referenceFor(reference: FileReference, isotopologue: string): FileReference | null {
  const best = reference.isotopologues[isotopologue];
  if (best === undefined) return null;
  return {
    ...reference,
    isotopologue,
    best,
    reliability: reference.isotopologueReliability[isotopologue] ?? 'check',
    reasons: reference.isotopologueReasons[isotopologue] ?? [],
    checks: reference.isotopologueChecks[isotopologue] ?? [],
  };
}
