// npm run build: the window into dist/renderer; main, preload, and the threads into dist/main, for packaging.
import { build } from 'vite';
import { fileURLToPath } from 'node:url';

const root = fileURLToPath(new URL('../../', import.meta.url));

await build({ configFile: `${root}vite.config.ts`, logLevel: 'warn' });
await build({
  root,
  configFile: false,
  logLevel: 'warn',
  build: {
    ssr: true,
    target: 'node24',
    outDir: 'dist/main',
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
// A sandboxed preload is a script, no module.
await build({
  root,
  configFile: false,
  logLevel: 'warn',
  build: {
    target: 'node24',
    outDir: 'dist/preload',
    emptyOutDir: true,
    lib: { entry: 'electron/hosts/electron-preload.ts', formats: ['cjs'], fileName: () => 'preload.cjs' },
    rolldownOptions: { external: ['electron'] },
  },
});
process.stdout.write('Built into dist.\n');
