import { build } from 'vite';
import { fileURLToPath } from 'node:url';

const root = fileURLToPath(new URL('../../', import.meta.url));

/** Bundles the Electron entry and the modules of the threads. @param outDir emptied first. */
export async function buildMain(outDir: string): Promise<void> {
  await build({
    root,
    configFile: false,
    logLevel: 'warn',
    build: {
      ssr: true,
      target: 'node24',
      outDir,
      emptyOutDir: true,
      rolldownOptions: {
        input: {
          main: 'electron/hosts/electron-main.ts',
          'reference-worker': 'electron/backend/jobs/reference-worker.ts',
          'store-thread': 'electron/backend/store/store-thread.ts',
        },
        external: ['electron', 'better-sqlite3'],
        output: { format: 'es', entryFileNames: '[name].js' },
      },
    },
  });
}

/** Bundles the preload: sandboxed, it is a script, no module. @param outDir emptied first. */
export async function buildPreload(outDir: string): Promise<void> {
  await build({
    root,
    configFile: false,
    logLevel: 'warn',
    build: {
      target: 'node24',
      outDir,
      emptyOutDir: true,
      lib: { entry: 'electron/hosts/electron-preload.ts', formats: ['cjs'], fileName: () => 'preload.cjs' },
      rolldownOptions: { external: ['electron'] },
    },
  });
}
