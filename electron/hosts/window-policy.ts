/** Settings of the one window: sandboxed, isolated, no Node, no way out. */
export function webPreferences(preload: string): {
  readonly preload: string;
  readonly sandbox: true;
  readonly contextIsolation: true;
  readonly nodeIntegration: false;
  readonly webSecurity: true;
  readonly webviewTag: false;
  readonly spellcheck: false;
} {
  return {
    preload,
    sandbox: true,
    contextIsolation: true,
    nodeIntegration: false,
    webSecurity: true,
    webviewTag: false,
    spellcheck: false,
  };
}

export const appOrigin = 'app://rovimark';

/** True for addresses of our own window. */
export function isOwnUrl(url: string): boolean {
  return url === appOrigin || url.startsWith(`${appOrigin}/`);
}

/** The part of a window's contents that is used, so that tests can bring a double. */
export interface ContentsLike {
  on(
    event: 'will-navigate',
    listener: (event: { preventDefault: () => void; readonly url: string }) => void,
  ): unknown;
  on(event: 'will-attach-webview', listener: (event: { preventDefault: () => void }) => void): unknown;
  readonly setWindowOpenHandler: (handler: () => { action: 'deny' }) => void;
  readonly session: {
    readonly setPermissionRequestHandler: (
      handler: (contents: unknown, permission: string, callback: (allowed: boolean) => void) => void,
    ) => void;
    readonly setPermissionCheckHandler: (handler: () => boolean) => void;
  };
}

/** Denies what the app does not need: other pages, new windows, web views, every permission. */
export function lockDown(contents: ContentsLike): void {
  contents.on('will-navigate', (event) => {
    if (!isOwnUrl(event.url)) event.preventDefault();
  });
  contents.on('will-attach-webview', (event) => event.preventDefault());
  contents.setWindowOpenHandler(() => ({ action: 'deny' }));
  contents.session.setPermissionRequestHandler((_, __, callback) => callback(false));
  contents.session.setPermissionCheckHandler(() => false);
}
