import type { MarkingScheme } from '../../shared-core/marking/types.ts';
import type { Correction } from '../../shared-core/reference/types.ts';
import type { Context } from './context.ts';
import type { QueuedFile } from './jobs/job-runner.ts';
import type { ReferenceTask } from './jobs/reference-task.ts';

/** The task of one file as it stands when its turn comes; null where the file has gone. */
export async function referenceTask(context: Context, fileId: number): Promise<ReferenceTask | null> {
  const file = await context.store.call('getFile', { id: fileId });
  if (file === null) return null;
  const [bytes, scheme, corrections] = await Promise.all([
    context.store.call('getOriginal', { sha256: file.sha256 }),
    context.store.call('latestScheme', { sectionId: file.section_id }),
    context.store.call('listCorrections', { fileId }),
  ]);
  if (bytes === null) return null;
  const settings = scheme === null ? null : (JSON.parse(scheme.document) as MarkingScheme);
  return {
    file: { name: file.name, bytes },
    settings,
    candidates: null,
    preferred: settings?.isotopologues ?? [],
    corrections: corrections.map((c) => JSON.parse(c.document) as Correction),
    withSignature: false,
  };
}

/** Queues every spectrum of a section that has no reference yet. */
export async function enqueueMissing(context: Context, sectionId: number): Promise<void> {
  const [files, references] = await Promise.all([
    context.store.call('listFiles', { sectionId }),
    context.store.call('listReferences', { sectionId }),
  ]);
  const done = new Set(references.map((r) => r.file_id));
  const missing = files.filter((f) => f.kind === 'spectrum' && !done.has(f.id));
  enqueue(
    context,
    sectionId,
    missing.map((f) => f.id),
  );
}

export function enqueue(context: Context, sectionId: number, fileIds: readonly number[]): void {
  if (fileIds.length === 0) return;
  context.jobs.add(
    sectionId,
    fileIds.map((fileId): QueuedFile => ({ fileId, task: () => referenceTask(context, fileId) })),
  );
}
