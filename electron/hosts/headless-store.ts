import type { Envelope, IntakeView, MethodName, OutputOf } from '../../shared-core/contract/index.ts';
import type { MarkingScheme } from '../../shared-core/marking/types.ts';
import { createBackend, type Backend } from '../backend/create-backend.ts';
import { migrationsFolder } from './folders.ts';
import { readSource } from './read-source.ts';
import { Unusable } from './unusable.ts';

interface KeepJob {
  readonly storeFile: string;
  /** A section of this title takes the files in; it is made where it is not there. */
  readonly title: string;
  readonly files: readonly { readonly name: string; readonly path: string }[];
  readonly scheme: MarkingScheme;
  readonly workers: number;
  readonly say: (sentence: string) => void;
}

const partBytes = 1_500_000;

/** Keeps a marked folder as a section of a store, by the same calls that the window makes; what is there already stays once. */
export async function keepInStore(job: KeepJob): Promise<void> {
  const backend = await createBackend({
    storeFile: job.storeFile,
    migrationsFolder: migrationsFolder(),
    workers: job.workers,
  }).catch((error: unknown): never => {
    throw new Unusable(error instanceof Error ? error.message : String(error));
  });
  try {
    await keep(backend, job);
  } finally {
    await backend.close();
  }
}

async function keep(backend: Backend, job: KeepJob): Promise<void> {
  async function ask<M extends MethodName>(method: M, input: unknown): Promise<OutputOf<M>> {
    const reply = (await backend.dispatch(method, input)) as Envelope<OutputOf<M>>;
    if (!reply.ok) throw new Unusable(reply.error.message);
    return reply.value;
  }
  const before = (await ask('sections.list', {})).find((s) => s.title === job.title);
  const sectionId = before?.id ?? (await ask('sections.create', { title: job.title })).sectionId;
  if (before === undefined) await ask('scheme.save', { sectionId, scheme: job.scheme });
  const { intakeId } = await ask('intake.begin', { sectionId });
  for (const { name, path } of job.files) {
    const read = await readSource(path, name);
    if (!read.ok) continue;
    const { bytes } = read.file;
    for (let offset = 0; offset === 0 || offset < bytes.length; offset += partBytes) {
      const part = bytes.subarray(offset, offset + partBytes);
      const last = offset + partBytes >= bytes.length;
      const base64 = Buffer.from(part).toString('base64');
      await ask('intake.putPart', { intakeId, fileName: name, offset, base64, last });
    }
  }
  const view: IntakeView = await ask('intake.view', { intakeId });
  if (view.blockers.length > 0) {
    await ask('intake.cancel', { intakeId });
    throw new Unusable(`Nothing was kept in ${job.storeFile}: ${view.blockers.join(' ')}`);
  }
  const counts = await ask('intake.commit', { intakeId });
  while ((await ask('jobs.state', { sectionId })).running)
    await new Promise((resolve) => setTimeout(resolve, 50));
  job.say(
    `Kept in ${job.storeFile}: section “${job.title}”, ${counts.newSubmissions} new submissions, ${counts.newFiles} new files.`,
  );
}
