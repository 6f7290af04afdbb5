import { Worker } from 'node:worker_threads';
import { AppError, type ErrorCode } from '../../../shared-core/contract/index.ts';
import type { ArgumentOf, OperationName, ResultOf } from './operations.ts';

/** The store seen from outside its thread. */
export interface Store {
  readonly call: <N extends OperationName>(name: N, argument: ArgumentOf<N>) => Promise<ResultOf<N>>;
  readonly close: () => Promise<void>;
}

type Message =
  | { readonly opened: true }
  | { readonly opened: false; readonly refusal: { readonly code: ErrorCode; readonly message: string } }
  | { readonly id: number; readonly result: unknown }
  | { readonly id: number; readonly error: string };

export interface StoreOptions {
  readonly file: string;
  readonly migrationsFolder: string;
  readonly today: string;
  readonly script?: URL;
}

/** Starts the store's thread. Rejects with an AppError where the store is busy, damaged or newer. */
export async function startStore(options: StoreOptions): Promise<Store> {
  const { file, migrationsFolder, today } = options;
  const worker = new Worker(options.script ?? new URL('./store-thread.ts', import.meta.url), {
    workerData: { file, migrationsFolder, today },
  });
  const waiting = new Map<number, { resolve: (value: unknown) => void; reject: (error: Error) => void }>();
  let next = 1;
  await new Promise<void>((resolve, reject) => {
    worker.on('message', (message: Message) => {
      if ('opened' in message) {
        if (message.opened) resolve();
        else reject(new AppError(message.refusal.code, message.refusal.message));
        return;
      }
      const call = waiting.get(message.id);
      waiting.delete(message.id);
      if ('error' in message) call?.reject(new Error(message.error));
      else call?.resolve(message.result);
    });
    worker.on('error', (error: Error) => {
      reject(error);
      for (const call of waiting.values()) call.reject(error);
      waiting.clear();
    });
  }).catch(async (error: unknown) => {
    await worker.terminate();
    throw error;
  });
  const ask = (name: string, argument: unknown): Promise<unknown> =>
    new Promise((resolve, reject) => {
      const id = next++;
      waiting.set(id, { resolve, reject });
      worker.postMessage({ id, name, argument });
    });
  return {
    call: <N extends OperationName>(name: N, argument: ArgumentOf<N>) =>
      ask(name, argument) as Promise<ResultOf<N>>,
    close: async () => {
      await ask('close', null);
      await worker.terminate();
    },
  };
}
