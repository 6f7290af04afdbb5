import { parentPort, workerData } from 'node:worker_threads';
import { openStore, purgeBackups, StoreRefusal } from './open-store.ts';
import { operations } from './operations.ts';
import type Database from 'better-sqlite3';

interface Opening {
  readonly file: string;
  readonly migrationsFolder: string;
  readonly today: string;
}

if (parentPort === null) throw new Error('store-thread runs as a worker thread only');
const port = parentPort;
const { file, migrationsFolder, today } = workerData as Opening;

function start(): void {
  let store: ReturnType<typeof openStore>;
  try {
    store = openStore(file, migrationsFolder, today);
  } catch (error) {
    const refusal =
      error instanceof StoreRefusal
        ? { code: error.code, message: error.message }
        : { code: 'store-damaged', message: String(error) };
    port.postMessage({ opened: false, refusal });
    return;
  }
  port.on('message', ({ id, name, argument }: { id: number; name: string; argument: unknown }) => {
    if (name === 'close') {
      store.close();
      port.postMessage({ id, result: null });
      port.close();
      return;
    }
    try {
      const operation = operations[name as keyof typeof operations] as (
        db: Database.Database,
        argument: unknown,
      ) => unknown;
      const result = operation(store.db, argument);
      if (name === 'removeSection') purgeBackups(store.db, file, today);
      port.postMessage({ id, result });
    } catch (error) {
      port.postMessage({ id, error: error instanceof Error ? error.message : String(error) });
    }
  });
  port.postMessage({ opened: true });
}

start();
