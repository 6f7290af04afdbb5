import { combineAnalyses, analyseSpectrum, plainSettings } from '../../../shared-core/reference/index.ts';
import type { Correction, FileReference, MethodSettings } from '../../../shared-core/reference/types.ts';
import {
  noiseSignature,
  prepareSpectrum,
  readSpectrumFile,
  type NoiseSignature,
} from '../../../shared-core/spectrum/index.ts';
import type { SourceFile, Spectrum } from '../../../shared-core/spectrum/types.ts';
import { coreVersion } from '../../../shared-core/version.ts';

/** What a worker is asked to do: one file, one reference. */
export interface ReferenceTask {
  readonly file: SourceFile;
  readonly settings: MethodSettings | null;
  readonly candidates: readonly string[] | null;
  readonly preferred: readonly string[];
  readonly corrections: readonly Correction[];
  readonly withSignature: boolean;
}

export interface ReferenceResult {
  readonly fileName: string;
  readonly reference: FileReference;
  readonly signature: NoiseSignature | null;
  /** Title that the file gives itself, and its points; null where it was not read. */
  readonly title: string | null;
  readonly points: number | null;
  readonly stepPerCm: number | null;
  /** One sentence where the file could not be read at all. */
  readonly unreadable: string | null;
}

/** Does a task; pure, so that the answer does not depend on which worker does it. */
export function runReferenceTask(task: ReferenceTask): ReferenceResult {
  const read = readSpectrumFile(task.file);
  if (!read.ok) return unreadable(task, read.code, read.reason);
  const analyses = read.spectra.map((spectrum) =>
    analyseSpectrum(spectrum, {
      corrections: task.corrections,
      ...(task.candidates === null ? {} : { candidates: task.candidates }),
    }),
  );
  const reference = combineAnalyses(analyses, task.settings ?? plainSettings, task.preferred);
  const first = read.spectra[0]!;
  const x = first.wavenumberPerCm;
  return {
    fileName: task.file.name,
    reference,
    signature: task.withSignature ? signatureOf(first) : null,
    title: first.title,
    points: x.length,
    stepPerCm: (x[x.length - 1]! - x[0]!) / Math.max(1, x.length - 1),
    unreadable: null,
  };
}

function signatureOf(spectrum: Spectrum): NoiseSignature | null {
  const prepared = prepareSpectrum(spectrum);
  return 'unusable' in prepared ? null : noiseSignature(prepared);
}

function unreadable(task: ReferenceTask, code: string, reason: string): ReferenceResult {
  return {
    fileName: task.file.name,
    reference: emptyReference(code, reason),
    signature: null,
    title: null,
    points: null,
    stepPerCm: null,
    unreadable: reason,
  };
}

/** A reference of reliability *none* with its reason. */
export function emptyReference(code: string, text: string): FileReference {
  return {
    reliability: 'none',
    reasons: [{ code, text }],
    checks: [],
    axisScalePpm: null,
    ordinate: 'unusable',
    ordinateReason: 'the file was not read',
    isotopologue: null,
    best: {},
    isotopologues: {},
    isotopologueReliability: {},
    isotopologueReasons: {},
    isotopologueChecks: {},
    runnerUp: null,
    lines: [],
    model: '',
    notes: [],
    coreVersion,
  };
}
