// npm run build: the window into dist/renderer; main, preload, and the threads into dist/main, for packaging.
import { build } from 'vite';
import { fileURLToPath } from 'node:url';
import { buildMain, buildPreload } from './build-parts.ts';

await build({
  configFile: fileURLToPath(new URL('../../vite.config.ts', import.meta.url)),
  logLevel: 'warn',
});
await buildMain('dist/main');
await buildPreload('dist/preload');
process.stdout.write('Built into dist.\n');
