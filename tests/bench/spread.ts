import { Worker } from 'node:worker_threads';

/** What a bench measures on one task, in a module of its own so that a worker can load it. */
export interface Measurement {
  /** Address of the module. */
  readonly module: string;
  /** Name of its function, one JSON-safe task to one JSON-safe record. */
  readonly name: string;
}

/** Runs a measurement on every task, in this process or spread over worker threads; records come in the order of tasks. */
export async function spread<Result>(
  measurement: Measurement,
  tasks: readonly unknown[],
  workers: number,
): Promise<Result[]> {
  if (workers <= 1) {
    const loaded = (await import(measurement.module)) as Record<string, (task: unknown) => Result>;
    return tasks.map((task) => loaded[measurement.name]!(task));
  }
  const results = new Array<Result>(tasks.length);
  let next = 0;
  await Promise.all(
    Array.from({ length: workers }, async () => {
      const worker = new Worker(new URL('./spread-worker.ts', import.meta.url), { workerData: measurement });
      try {
        while (next < tasks.length) {
          const index = next++;
          results[index] = await new Promise<Result>((resolve, reject) => {
            worker.once('message', resolve);
            worker.once('error', reject);
            worker.postMessage(tasks[index]);
          });
          worker.removeAllListeners();
        }
      } finally {
        await worker.terminate();
      }
    }),
  );
  return results;
}
