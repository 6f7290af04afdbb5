import { app, BrowserWindow, dialog, ipcMain, net, protocol } from 'electron';
import { join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { createBackend, type Backend } from '../backend/create-backend.ts';
import { defaultStoreFile, migrationsFolder } from './folders.ts';
import { bindIpc } from './ipc-binding.ts';
import { contentSecurityPolicy, fileInside } from './static-files.ts';
import { appOrigin, isOwnUrl, lockDown, webPreferences } from './window-policy.ts';

const webFolder = fileURLToPath(new URL('../renderer/', import.meta.url));
const preload = fileURLToPath(new URL('../preload/preload.cjs', import.meta.url));

protocol.registerSchemesAsPrivileged([
  { scheme: 'app', privileges: { standard: true, secure: true, supportFetchAPI: true } },
]);

async function start(): Promise<void> {
  if (!app.requestSingleInstanceLock()) {
    app.quit();
    return;
  }
  await app.whenReady();
  protocol.handle('app', async (request) => {
    const path = isOwnUrl(request.url) ? fileInside(webFolder, new URL(request.url).pathname) : null;
    if (path === null) return new Response('There is no such page.', { status: 404 });
    const response = await net.fetch(pathToFileURL(path).toString());
    const headers = new Headers(response.headers);
    headers.set('content-security-policy', contentSecurityPolicy);
    return new Response(response.body, { status: response.status, headers });
  });
  let backend: Backend;
  try {
    backend = await createBackend({
      storeFile: process.env['ROVIMARK_STORE'] ?? defaultStoreFile(),
      migrationsFolder: migrationsFolder(),
      workerScript: new URL('./reference-worker.js', import.meta.url),
      storeScript: new URL('./store-thread.js', import.meta.url),
    });
  } catch (error) {
    dialog.showErrorBox(
      'Rovimark cannot open its store',
      error instanceof Error ? error.message : String(error),
    );
    app.quit();
    return;
  }
  bindIpc(ipcMain, backend, isOwnUrl);
  const window = openWindow();
  backend.subscribe((event) => {
    if (!window.isDestroyed()) window.webContents.send('rovimark:event', event);
  });
  app.on('second-instance', () => {
    if (window.isMinimized()) window.restore();
    window.focus();
  });
  app.on('window-all-closed', () => {
    void backend.close().finally(() => app.quit());
  });
}

function openWindow(): BrowserWindow {
  const window = new BrowserWindow({
    width: 1280,
    height: 800,
    minWidth: 1024,
    minHeight: 700,
    show: false,
    title: 'Rovimark',
    icon: join(webFolder, 'mark.svg'),
    webPreferences: webPreferences(preload),
  });
  lockDown(window.webContents);
  window.once('ready-to-show', () => window.show());
  void window.loadURL(`${appOrigin}/index.html`);
  return window;
}

void start();
