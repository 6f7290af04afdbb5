import { contextBridge, ipcRenderer } from 'electron';

/** The only thing that the window sees of the program: calls and events, no Node. */
contextBridge.exposeInMainWorld('rovimark', {
  call: (method: string, input: unknown): Promise<unknown> =>
    ipcRenderer.invoke('rovimark:call', method, input),
  onEvent: (listener: (event: unknown) => void): (() => void) => {
    const forward = (_: unknown, event: unknown): void => listener(event);
    ipcRenderer.on('rovimark:event', forward);
    return () => ipcRenderer.off('rovimark:event', forward);
  },
});
