import { parentPort, workerData } from 'node:worker_threads';
import type { Measurement } from './spread.ts';

const { module, name } = workerData as Measurement;
const loaded = (await import(module)) as Record<string, (task: unknown) => unknown>;
parentPort?.on('message', (task: unknown) => parentPort?.postMessage(loaded[name]!(task)));
