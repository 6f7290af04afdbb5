import type { AppEvent, Envelope } from '../../shared-core/contract/index.ts';

/** How calls reach the back end: through Electron's bridge, or by HTTP on this computer. */
export interface Transport {
  readonly call: (method: string, input: unknown) => Promise<Envelope<unknown>>;
  readonly onEvent: (listener: (event: AppEvent) => void) => () => unknown;
}

declare global {
  interface Window {
    readonly rovimark?: Transport;
  }
}

/** The bridge of the preload where there is one, else HTTP. */
export function findTransport(unreachable: string): Transport {
  return window.rovimark ?? httpTransport(unreachable);
}

function httpTransport(unreachable: string): Transport {
  // One stream for the whole window: a browser opens only six connections to a host.
  const listeners = new Set<(event: AppEvent) => void>();
  let source: EventSource | null = null;
  return {
    call: async (method, input) => {
      try {
        const response = await fetch(`api/${method}`, {
          method: 'POST',
          headers: { 'content-type': 'application/json' },
          body: JSON.stringify(input),
          credentials: 'same-origin',
        });
        if (response.ok) return (await response.json()) as Envelope<unknown>;
        return { ok: false, error: { code: 'internal', message: await response.text(), details: {} } };
      } catch {
        return { ok: false, error: { code: 'internal', message: unreachable, details: {} } };
      }
    },
    onEvent: (listener) => {
      listeners.add(listener);
      if (source === null) {
        source = new EventSource('events');
        source.onmessage = (message: MessageEvent<string>) => {
          const event = JSON.parse(message.data) as AppEvent;
          for (const each of listeners) each(event);
        };
      }
      return () => listeners.delete(listener);
    },
  };
}
