import { availableParallelism, userInfo } from 'node:os';
import { mkdirSync } from 'node:fs';
import { dirname, join } from 'node:path';
import type { AppEvent, Envelope } from '../../shared-core/contract/index.ts';
import type { Context } from './context.ts';
import { dispatch } from './dispatch.ts';
import { createJobRunner } from './jobs/job-runner.ts';
import { createWorkerPool } from './jobs/worker-pool.ts';
import { enqueueMissing } from './reference-queue.ts';
import { createSectionMarks } from './section-marks.ts';
import { createStaging } from './staging/staging.ts';
import { startStore } from './store/store.ts';

export interface BackendOptions {
  readonly storeFile: string;
  /** Folder for uploads that wait; default beside the store. */
  readonly stagingFolder?: string;
  readonly migrationsFolder: string;
  readonly workers?: number;
  readonly now?: () => Date;
  /** Modules of the threads in a build; the TypeScript beside this file otherwise. */
  readonly workerScript?: URL;
  readonly storeScript?: URL;
}

/** The one back end of all hosts. */
export interface Backend {
  readonly dispatch: (name: unknown, input: unknown) => Promise<Envelope<unknown>>;
  /** @returns a function that ends the subscription. */
  readonly subscribe: (listener: (event: AppEvent) => void) => () => void;
  readonly close: () => Promise<void>;
}

/** Composition root: store, staging, workers, handlers. Rejects with an AppError where the store cannot be opened. */
export async function createBackend(options: BackendOptions): Promise<Backend> {
  const clock = options.now ?? ((): Date => new Date());
  const now = (): string => clock().toISOString();
  if (options.storeFile !== ':memory:') mkdirSync(dirname(options.storeFile), { recursive: true });
  const store = await startStore({
    file: options.storeFile,
    migrationsFolder: options.migrationsFolder,
    today: now().slice(0, 10),
    ...(options.storeScript === undefined ? {} : { script: options.storeScript }),
  });
  const staging = createStaging(options.stagingFolder ?? join(dirname(options.storeFile), 'staging'));
  staging.sweep(await store.call('listOpenIntakes', undefined));
  const listeners = new Set<(event: AppEvent) => void>();
  const emit = (event: AppEvent): void => {
    for (const listener of listeners) listener(event);
  };
  const marks = createSectionMarks(store);
  const workers = options.workers ?? Math.max(1, availableParallelism() - 1);
  const pool =
    options.workerScript === undefined
      ? createWorkerPool(workers)
      : createWorkerPool(workers, options.workerScript);
  const jobs = createJobRunner(
    pool,
    async (fileId, result) => {
      const file = await store.call('getFile', { id: fileId });
      if (file === null) return;
      await store.call('addReference', {
        file_id: fileId,
        core_version: result.reference.coreVersion,
        document: JSON.stringify(result.reference),
        step_per_cm: result.stepPerCm,
        at: now(),
      });
      marks.forget(file.section_id, 'marks');
    },
    emit,
  );
  const context: Context = { store, staging, jobs, marks, now, who: userName(), emit };
  // What a stop interrupted goes on.
  for (const section of await store.call('listSections', undefined))
    await enqueueMissing(context, section.id);
  return {
    dispatch: (name, input) => dispatch(context, name, input),
    subscribe: (listener) => {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    close: async () => {
      listeners.clear();
      await jobs.close();
      await store.close();
    },
  };
}

function userName(): string {
  try {
    return userInfo().username;
  } catch {
    return 'local user';
  }
}
