import { Worker } from 'node:worker_threads';
import type { ReferenceResult, ReferenceTask } from './reference-task.ts';

interface Waiting {
  readonly task: ReferenceTask;
  readonly resolve: (result: ReferenceResult) => void;
  readonly reject: (error: Error) => void;
}

/** Threads that make references; each does one file at a time, in the order in which they were asked. */
export interface WorkerPool {
  /** Rejects with `AbortError` where the signal fires first. */
  readonly run: (task: ReferenceTask, signal?: AbortSignal) => Promise<ReferenceResult>;
  readonly size: number;
  readonly close: () => Promise<void>;
}

class AbortError extends Error {
  override readonly name = 'AbortError';
}

/**
 * @param size number of threads, 1 or more. @param script the worker's module: TypeScript in the source tree, bundled in a build.
 * @throws RangeError where the size is no whole number above 0.
 */
export function createWorkerPool(
  size: number,
  script: URL = new URL('./reference-worker.ts', import.meta.url),
): WorkerPool {
  if (!Number.isInteger(size) || size < 1)
    throw new RangeError(`size: expected a whole number above 0, got ${size}`);
  const queue: Waiting[] = [];
  const threads = Array.from({ length: size }, () => thread(script, () => next()));
  let closed = false;

  function next(): void {
    for (const t of threads) {
      if (queue.length === 0) return;
      if (!t.busy()) t.start(queue.shift()!);
    }
  }

  return {
    size,
    run: (task, signal) =>
      new Promise((resolve, reject) => {
        if (closed) {
          reject(new Error('the worker pool is closed'));
          return;
        }
        if (signal?.aborted === true) {
          reject(new AbortError('cancelled'));
          return;
        }
        const waiting: Waiting = { task, resolve, reject };
        queue.push(waiting);
        signal?.addEventListener(
          'abort',
          () => {
            const at = queue.indexOf(waiting);
            if (at >= 0) queue.splice(at, 1);
            // A file that is being fitted is let to its end (some 0.1 s): the thread stays warm for the next.
            reject(new AbortError('cancelled'));
          },
          { once: true },
        );
        next();
      }),
    close: async () => {
      closed = true;
      for (const w of queue.splice(0)) w.reject(new AbortError('closed'));
      await Promise.all(threads.map((t) => t.stop()));
    },
  };
}

interface Thread {
  readonly busy: () => boolean;
  readonly start: (waiting: Waiting) => void;
  readonly stop: () => Promise<void>;
}

function thread(script: URL, whenFree: () => void): Thread {
  let worker: Worker | null = null;
  let current: Waiting | null = null;
  let id = 0;

  function started(): Worker {
    if (worker !== null) return worker;
    const fresh = new Worker(script);
    fresh.on('message', (message: { id: number; result: ReferenceResult }) => {
      if (message.id !== id) return;
      const done = current;
      current = null;
      done?.resolve(message.result);
      whenFree();
    });
    // A thread that dies takes one file with it, not the pool.
    fresh.on('error', (error: Error) => {
      worker = null;
      const done = current;
      current = null;
      done?.reject(error);
      whenFree();
    });
    worker = fresh;
    return fresh;
  }

  return {
    busy: () => current !== null,
    start: (waiting) => {
      current = waiting;
      id++;
      started().postMessage({ id, task: waiting.task });
    },
    stop: async () => {
      const stopping = worker;
      worker = null;
      await stopping?.terminate();
    },
  };
}
