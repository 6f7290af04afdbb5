import type { AppEvent, JobState } from '../../../shared-core/contract/index.ts';
import type { ReferenceResult, ReferenceTask } from './reference-task.ts';
import type { WorkerPool } from './worker-pool.ts';

/** One file that needs a reference; `task` is made when its turn comes, so that a long queue holds no bytes. */
export interface QueuedFile {
  readonly fileId: number;
  readonly task: () => Promise<ReferenceTask | null>;
}

/** References made in the background, section by section. */
export interface JobRunner {
  /** Adds files that are not yet waiting. */
  readonly add: (sectionId: number, files: readonly QueuedFile[]) => void;
  readonly state: (sectionId: number) => JobState;
  readonly isWaiting: (sectionId: number, fileId: number) => 'waiting' | 'running' | null;
  /** Forgets what waits; what is being fitted is let to its end and not kept. */
  readonly cancel: (sectionId: number) => void;
  readonly close: () => Promise<void>;
}

interface SectionQueue {
  readonly waiting: Map<number, QueuedFile>;
  readonly running: Set<number>;
  generation: number;
  total: number;
  done: number;
}

/**
 * @param keep stores a result; its file may have gone meanwhile. @param emit told after every file.
 */
export function createJobRunner(
  pool: WorkerPool,
  keep: (fileId: number, result: ReferenceResult) => Promise<void>,
  emit: (event: AppEvent) => void,
): JobRunner {
  const sections = new Map<number, SectionQueue>();
  let lanes = 0;
  let closed = false;

  const queueOf = (sectionId: number): SectionQueue => {
    const known = sections.get(sectionId) ?? {
      waiting: new Map(),
      running: new Set(),
      generation: 0,
      total: 0,
      done: 0,
    };
    sections.set(sectionId, known);
    return known;
  };
  const state = (sectionId: number): JobState => {
    const queue = queueOf(sectionId);
    return { total: queue.total, done: queue.done, running: queue.waiting.size + queue.running.size > 0 };
  };

  async function lane(): Promise<void> {
    for (;;) {
      const next = [...sections].find(([, q]) => q.waiting.size > 0);
      if (next === undefined || closed) return;
      const [sectionId, queue] = next;
      const file = queue.waiting.values().next().value!;
      queue.waiting.delete(file.fileId);
      queue.running.add(file.fileId);
      const { generation } = queue;
      try {
        const task = await file.task();
        const result = task === null ? null : await pool.run(task);
        if (result !== null && generation === queue.generation) await keep(file.fileId, result);
      } catch {
        // The pool is closing, or its thread died: the file stays without a reference and can be asked for again.
      }
      queue.running.delete(file.fileId);
      if (generation === queue.generation) queue.done++;
      emit({ event: 'job', sectionId, state: state(sectionId), fileId: file.fileId });
    }
  }

  return {
    add: (sectionId, files) => {
      const queue = queueOf(sectionId);
      if (queue.waiting.size + queue.running.size === 0) {
        queue.total = 0;
        queue.done = 0;
      }
      for (const file of files) {
        if (!queue.waiting.has(file.fileId)) queue.total++;
        queue.waiting.set(file.fileId, file);
      }
      emit({ event: 'job', sectionId, state: state(sectionId), fileId: null });
      while (lanes < pool.size) {
        lanes++;
        void lane().finally(() => lanes--);
      }
    },
    state,
    isWaiting: (sectionId, fileId) => {
      const queue = queueOf(sectionId);
      return queue.running.has(fileId) ? 'running' : queue.waiting.has(fileId) ? 'waiting' : null;
    },
    cancel: (sectionId) => {
      const queue = queueOf(sectionId);
      queue.generation++;
      queue.waiting.clear();
      queue.total = queue.done;
      emit({ event: 'job', sectionId, state: state(sectionId), fileId: null });
    },
    close: async () => {
      closed = true;
      for (const queue of sections.values()) queue.waiting.clear();
      await pool.close();
    },
  };
}
