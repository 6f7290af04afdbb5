/** A recording double of the parts of `electron` that the app uses; every call between main and window is cloned, as the real one does. */
type Listener = (...args: never[]) => unknown;

interface Recorded {
  readonly windows: FakeWindow[];
  readonly handlers: Map<string, Listener>;
  readonly appEvents: Map<string, Listener>;
  readonly schemes: unknown[];
  readonly errorBoxes: string[];
  readonly exposed: Record<string, unknown>;
  readonly sent: { channel: string; payload: unknown }[];
  protocolHandler: ((request: Request) => Promise<Response>) | null;
  quit: boolean;
  /** Address of the frame that calls come from. */
  frameUrl: string | null;
}

export const recorded: Recorded = {
  windows: [],
  handlers: new Map(),
  appEvents: new Map(),
  schemes: [],
  errorBoxes: [],
  exposed: {},
  sent: [],
  protocolHandler: null,
  quit: false,
  frameUrl: 'app://rovimark/index.html',
};

const rendererListeners = new Map<string, Set<(event: unknown, payload: unknown) => void>>();

class FakeWindow {
  readonly options: Record<string, unknown>;
  readonly contentsEvents = new Map<string, Listener>();
  openHandler: (() => { action: string }) | null = null;
  permissionRequest:
    ((contents: unknown, permission: string, callback: (allowed: boolean) => void) => void) | null = null;
  permissionCheck: (() => boolean) | null = null;
  loaded: string | null = null;
  readonly webContents = {
    on: (event: string, listener: Listener): void => void this.contentsEvents.set(event, listener),
    setWindowOpenHandler: (handler: () => { action: string }): void => void (this.openHandler = handler),
    session: {
      setPermissionRequestHandler: (handler: NonNullable<FakeWindow['permissionRequest']>): void =>
        void (this.permissionRequest = handler),
      setPermissionCheckHandler: (handler: () => boolean): void => void (this.permissionCheck = handler),
    },
    send: (channel: string, payload: unknown): void => {
      const copy = structuredClone(payload);
      recorded.sent.push({ channel, payload: copy });
      for (const listener of rendererListeners.get(channel) ?? []) listener({}, copy);
    },
  };
  constructor(options: Record<string, unknown>) {
    this.options = options;
    recorded.windows.push(this);
  }
  once(): void {}
  show(): void {}
  focus(): void {}
  restore(): void {}
  isMinimized(): boolean {
    return false;
  }
  isDestroyed(): boolean {
    return false;
  }
  loadURL(url: string): Promise<void> {
    this.loaded = url;
    return Promise.resolve();
  }
}
export const BrowserWindow = FakeWindow;

export const app = {
  requestSingleInstanceLock: (): boolean => process.env['DOUBLE_SECOND_INSTANCE'] !== '1',
  whenReady: (): Promise<void> => Promise.resolve(),
  on: (event: string, listener: Listener): void => void recorded.appEvents.set(event, listener),
  quit: (): void => void (recorded.quit = true),
};
export const dialog = {
  showErrorBox: (title: string, text: string): void => void recorded.errorBoxes.push(`${title}: ${text}`),
};
export const protocol = {
  registerSchemesAsPrivileged: (schemes: unknown[]): void => void recorded.schemes.push(...schemes),
  handle: (_: string, handler: NonNullable<Recorded['protocolHandler']>): void =>
    void (recorded.protocolHandler = handler),
};
export const net = {
  fetch: (url: string): Promise<Response> => Promise.resolve(new Response(`file ${url}`)),
};
export const ipcMain = {
  handle: (channel: string, listener: Listener): void => void recorded.handlers.set(channel, listener),
};
export const contextBridge = {
  exposeInMainWorld: (name: string, api: unknown): void => void (recorded.exposed[name] = api),
};
export const ipcRenderer = {
  invoke: async (channel: string, ...args: unknown[]): Promise<unknown> => {
    const handler = recorded.handlers.get(channel) as ((...all: unknown[]) => unknown) | undefined;
    if (handler === undefined) throw new Error(`no handler for ${channel}`);
    const event = { senderFrame: recorded.frameUrl === null ? null : { url: recorded.frameUrl } };
    return structuredClone(await handler(event, ...structuredClone<unknown[]>(args)));
  },
  on: (channel: string, listener: (event: unknown, payload: unknown) => void): void => {
    const set = rendererListeners.get(channel) ?? new Set();
    set.add(listener);
    rendererListeners.set(channel, set);
  },
  off: (channel: string, listener: (event: unknown, payload: unknown) => void): void =>
    void rendererListeners.get(channel)?.delete(listener),
};
