import type { Backend } from '../backend/create-backend.ts';

/** The part of Electron's ipcMain that is used, so that tests can bring a double. */
export interface IpcMainLike {
  readonly handle: (channel: string, listener: (event: IpcEventLike, ...args: unknown[]) => unknown) => void;
}
export interface IpcEventLike {
  readonly senderFrame: { readonly url: string } | null;
}

/** Answers calls of our own window; frames of any other address get a refusal, no exception. */
export function bindIpc(ipc: IpcMainLike, backend: Backend, isOwn: (url: string) => boolean): void {
  ipc.handle('rovimark:call', (event, method, input) => {
    if (event.senderFrame === null || !isOwn(event.senderFrame.url)) {
      return {
        ok: false,
        error: { code: 'bad-input', message: 'Calls from other pages are refused.', details: {} },
      };
    }
    return backend.dispatch(method, input);
  });
}
