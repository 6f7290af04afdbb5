// npm start: builds what is missing and opens the app; the Electron window where its binary is there, else the system's browser.
import { spawn, spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { parseArgs } from 'node:util';
import { createBackend } from '../backend/create-backend.ts';
import { defaultStoreFile, migrationsFolder } from './folders.ts';
import { startLoopback } from './loopback.ts';

const root = fileURLToPath(new URL('../../', import.meta.url));
const { values } = parseArgs({
  options: {
    store: { type: 'string' },
    port: { type: 'string' },
    'no-browser': { type: 'boolean' },
    loopback: { type: 'boolean' },
  },
});
const storeFile = values.store ?? defaultStoreFile();
const say = (sentence: string): void => void process.stdout.write(`${sentence}\n`);

if (!existsSync(join(root, 'dist/renderer/index.html'))) await import('./build.ts');
const electron = values.loopback === true ? null : electronBinary();
if (electron !== null) {
  const child = spawn(electron, [join(root, 'dist/main/main.js')], {
    stdio: 'inherit',
    env: { ...process.env, ROVIMARK_STORE: storeFile },
  });
  child.on('exit', (code) => process.exit(code ?? 0));
} else await openInBrowser();

/** Electron's own binary, asked for once with a short limit; null where it is not to be had or there is no display. */
function electronBinary(): string | null {
  const folder = join(root, 'node_modules/electron');
  const name =
    process.platform === 'win32'
      ? 'electron.exe'
      : process.platform === 'darwin'
        ? 'Electron.app/Contents/MacOS/Electron'
        : 'electron';
  const binary = join(folder, 'dist', name);
  if (
    process.platform === 'linux' &&
    process.env['DISPLAY'] === undefined &&
    process.env['WAYLAND_DISPLAY'] === undefined
  )
    return null;
  if (!existsSync(binary) && existsSync(join(folder, 'install.js'))) {
    spawnSync(process.execPath, ['install.js'], { cwd: folder, stdio: 'ignore', timeout: 60_000 });
  }
  return existsSync(binary) ? binary : null;
}

async function openInBrowser(): Promise<void> {
  if (values.loopback !== true)
    say(
      'The Electron window is not to be had here (no binary or no display); the same app opens in the browser on this computer.',
    );
  const backend = await createBackend({ storeFile, migrationsFolder: migrationsFolder() }).catch(
    (error: unknown) => {
      process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`);
      return process.exit(2);
    },
  );
  const stop = (): void => {
    void host
      .close()
      .then(() => backend.close())
      .then(() => process.exit(0));
  };
  const host = await startLoopback({
    backend,
    webFolder: join(root, 'dist/renderer'),
    port: Number(values.port ?? 0),
    idleMs: 12 * 3_600_000,
    onIdle: stop,
  });
  say(`Rovimark: ${host.url}`);
  process.on('SIGINT', stop);
  process.on('SIGTERM', stop);
  if (values['no-browser'] !== true) openBrowser(host.url);
}

/** The system's browser; where there is none, the printed address is enough. */
function openBrowser(url: string): void {
  const [command, ...args] =
    process.platform === 'win32'
      ? ['cmd', '/c', 'start', '', url]
      : process.platform === 'darwin'
        ? ['open', url]
        : ['xdg-open', url];
  const child = spawn(command, args, { stdio: 'ignore', detached: true });
  child.on('error', () => undefined);
  child.unref();
}
