import {
  AppError,
  type ReferenceDetail,
  type ReferenceRow,
  type SpectrumPoints,
} from '../../../shared-core/contract/index.ts';
import type { Correction, FileReference } from '../../../shared-core/reference/types.ts';
import { prepareSpectrum, readSpectrumFile } from '../../../shared-core/spectrum/index.ts';
import type { Context } from '../context.ts';
import { enqueue, enqueueMissing } from '../reference-queue.ts';
import type { FileRow } from '../store/files.ts';
import { changed, mustExist, note, type Handlers } from './handler.ts';

function rowOf(
  context: Context,
  file: FileRow,
  reference: FileReference | null,
  students: readonly string[],
  corrections: number,
): ReferenceRow {
  const waiting = context.jobs.isWaiting(file.section_id, file.id);
  const be = reference?.best.Be;
  return {
    fileId: file.id,
    name: file.name,
    state: waiting ?? (reference === null ? 'waiting' : 'done'),
    reliability: reference?.reliability ?? null,
    isotopologues: Object.keys(reference?.isotopologues ?? {}),
    lines: reference?.lines.filter((l) => l.used).length ?? 0,
    be: be === undefined ? null : { value: be.value, uncertainty: be.uncertainty },
    axisScalePpm: reference?.axisScalePpm ?? null,
    reasons: reference?.reasons ?? [],
    students,
    corrections,
  };
}

async function mustGetFile(context: Context, fileId: number): Promise<FileRow> {
  const file = await context.store.call('getFile', { id: fileId });
  if (file === null) throw new AppError('not-found', 'This file does not exist (any more).');
  return file;
}

async function detail(context: Context, fileId: number): Promise<ReferenceDetail> {
  const file = await mustGetFile(context, fileId);
  const [record, corrections, submissions] = await Promise.all([
    context.store.call('getReference', { fileId }),
    context.store.call('listCorrections', { fileId }),
    context.store.call('listSubmissions', { sectionId: file.section_id }),
  ]);
  const reference = record === null ? null : (JSON.parse(record.document) as FileReference);
  const students = submissions
    .filter((s) => s.files.some((f) => f.id === fileId))
    .map((s) => s.submission.student);
  return {
    row: rowOf(context, file, reference, students, corrections.length),
    reference,
    corrections: corrections.map((c) => ({
      correction: JSON.parse(c.document) as Correction,
      at: c.made_at,
    })),
  };
}

/** Points of a spectrum as absorbance over its baseline-free file values, for the chart. */
async function points(context: Context, fileId: number): Promise<SpectrumPoints> {
  const file = await mustGetFile(context, fileId);
  const bytes = await context.store.call('getOriginal', { sha256: file.sha256 });
  const read = bytes === null ? null : readSpectrumFile({ name: file.name, bytes });
  if (read === null || !read.ok)
    throw new AppError(
      'not-found',
      `${file.name} cannot be read: ${read === null ? 'its original is missing' : read.reason}`,
    );
  const spectrum = read.spectra[0]!;
  const prepared = prepareSpectrum(spectrum);
  const [x, y] =
    'unusable' in prepared
      ? [spectrum.wavenumberPerCm, spectrum.ordinate]
      : [prepared.wavenumberPerCm, prepared.absorbance];
  const base64 = (values: Float64Array): string =>
    Buffer.from(values.buffer, values.byteOffset, values.byteLength).toString('base64');
  return { wavenumberBase64: base64(x), absorbanceBase64: base64(y), points: x.length };
}

async function refit(context: Context, file: FileRow): Promise<ReferenceDetail> {
  changed(context, file.section_id, 'decisions');
  enqueue(context, file.section_id, [file.id]);
  return detail(context, file.id);
}

/** References, their spectra and the corrections to them. */
export const referenceHandlers: Handlers<
  | 'references.list'
  | 'references.get'
  | 'references.spectrum'
  | 'references.correct'
  | 'references.takeBack'
  | 'jobs.state'
  | 'jobs.cancel'
  | 'jobs.resume'
> = {
  'references.list': async (context, { sectionId }) => {
    await mustExist(context, sectionId);
    const [files, records, submissions, corrections] = await Promise.all([
      context.store.call('listFiles', { sectionId }),
      context.store.call('listReferences', { sectionId }),
      context.store.call('listSubmissions', { sectionId }),
      context.store.call('countCorrections', { sectionId }),
    ]);
    const references = new Map(records.map((r) => [r.file_id, JSON.parse(r.document) as FileReference]));
    const counts = new Map(corrections.map((c) => [c.file_id, c.count]));
    return files
      .filter((f) => f.kind === 'spectrum')
      .map((f) => {
        const students = submissions
          .filter((s) => s.files.some((own) => own.id === f.id))
          .map((s) => s.submission.student);
        return rowOf(context, f, references.get(f.id) ?? null, students, counts.get(f.id) ?? 0);
      });
  },
  'references.get': (context, { fileId }) => detail(context, fileId),
  'references.spectrum': (context, { fileId }) => points(context, fileId),
  'references.correct': async (context, { fileId, correction }) => {
    const file = await mustGetFile(context, fileId);
    await context.store.call('addCorrection', {
      note: note(context, file.section_id, `corrected ${file.name}: ${correction.kind}`),
      fileId,
      document: JSON.stringify(correction),
    });
    return refit(context, file);
  },
  'references.takeBack': async (context, { fileId, index }) => {
    const file = await mustGetFile(context, fileId);
    const corrections = await context.store.call('listCorrections', { fileId });
    const one = corrections[index];
    if (one === undefined) throw new AppError('not-found', `${file.name} has no correction ${index + 1}.`);
    await context.store.call('removeCorrection', {
      note: note(context, file.section_id, `took a correction of ${file.name} back`),
      id: one.id,
    });
    return refit(context, file);
  },
  'jobs.state': (context, { sectionId }) => Promise.resolve(context.jobs.state(sectionId)),
  'jobs.cancel': (context, { sectionId }) => {
    context.jobs.cancel(sectionId);
    return Promise.resolve(context.jobs.state(sectionId));
  },
  'jobs.resume': async (context, { sectionId }) => {
    await mustExist(context, sectionId);
    await enqueueMissing(context, sectionId);
    return context.jobs.state(sectionId);
  },
};
