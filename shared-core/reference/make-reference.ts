import { readSpectrumFile } from '../spectrum/read-spectrum-file.ts';
import type { SourceFile } from '../spectrum/types.ts';
import { analyseSpectrum, type SpectrumAnalysis } from './analyse-spectrum.ts';
import { combineAnalyses } from './combine.ts';
import type { Correction, FileReference, MethodSettings } from './types.ts';

interface ReferenceInput {
  /** Raw files of one submission: one, or several that belong together (an H/D pair, an overtone). */
  readonly files: readonly SourceFile[];
  readonly settings: MethodSettings;
  readonly corrections?: readonly Correction[];
  /** Isotopologues that may be there; absent: all listed gases. */
  readonly candidates?: readonly string[];
  /** Isotopologues asked for, in order: the first one present becomes the main one. */
  readonly preferred?: readonly string[];
}

/** Settings where no scheme says otherwise. */
export const plainSettings: MethodSettings = {
  masses: 'isotopic',
  bondLengthFrom: 'Be',
  forceConstantFrom: 'nu0',
  anharmonicityFrom: null,
  anharmonicityPerCm: null,
};

/**
 * The answer key made from raw files: read, prepared, assigned blind, fitted, derived, checked. A pure function of its input; a file
 * that cannot be read gives a reference of reliability *none* with the reason.
 *
 * @throws RangeError where there is no file.
 */
export function makeReference(input: ReferenceInput): FileReference {
  if (input.files.length === 0) throw new RangeError('files: expected at least one');
  const analyses = input.files.flatMap((file) => analyseFile(file, input));
  return combineAnalyses(analyses, input.settings, input.preferred ?? input.candidates ?? []);
}

/** One analysis for each spectrum in a file; a refused file gives one that says why. */
function analyseFile(
  file: SourceFile,
  options: { readonly corrections?: readonly Correction[]; readonly candidates?: readonly string[] },
): SpectrumAnalysis[] {
  const read = readSpectrumFile(file);
  if (!read.ok) {
    return [
      {
        fileName: file.name,
        ordinate: 'unusable',
        ordinateReason: 'the file was not read',
        bands: [],
        lines: [],
        runnerUp: null,
        doubts: [{ code: read.code, text: read.reason, takesDownTo: 'none' }],
        bandDoubts: [],
        notes: [],
        model: '',
      },
    ];
  }
  return read.spectra.map((spectrum) => analyseSpectrum(spectrum, options));
}
