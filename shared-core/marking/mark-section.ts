import type { FileReference } from '../reference/types.ts';
import { markInParts, type MarkOptions } from './mark-submission.ts';
import { otherSpectrum } from './other-spectrum.ts';
import type { NamedReference } from './prescribe.ts';
import { sectionObservations, type RepeatedSpectrum } from './section-observations.ts';
import type { MarkedSubmission, MarkingScheme, SectionObservation, Submission } from './types.ts';

export interface SectionOptions extends MarkOptions {
  /** Pairs of files that hold the same measurement, as the comparison of spectra found them. */
  readonly repeatedSpectra?: readonly RepeatedSpectrum[];
}

export interface MarkedSection {
  readonly submissions: readonly MarkedSubmission[];
  readonly observations: readonly SectionObservation[];
}

/**
 * Marks a section: every submission by its own files, then what shows only across submissions (shared slips, values that fit another
 * file, repeated spectra, axis scale, outlying spectra). Observations never change points.
 *
 * @param referencesByFile references by file name, as `Submission.spectra` names them.
 */
export function markSection(
  submissions: readonly Submission[],
  referencesByFile: ReadonlyMap<string, FileReference>,
  scheme: MarkingScheme,
  options: SectionOptions = {},
): MarkedSection {
  const inParts = submissions.map((s) => markInParts(s, referencesOf(s, referencesByFile), scheme, options));
  const withOthers = inParts.map(({ marked, parts }) => ({
    ...marked,
    observations: [...marked.observations, ...otherSpectrum(marked, parts, inParts)],
  }));
  return {
    submissions: withOthers,
    observations: sectionObservations(withOthers, referencesByFile, options.repeatedSpectra ?? []),
  };
}

/** The references of a submission's files, in its own order. */
export function referencesOf(
  submission: Submission,
  referencesByFile: ReadonlyMap<string, FileReference>,
): NamedReference[] {
  return submission.spectra.flatMap((file) => {
    const reference = referencesByFile.get(file);
    return reference === undefined ? [] : [{ file, reference }];
  });
}
