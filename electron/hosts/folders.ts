import { existsSync } from 'node:fs';
import { homedir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** Folder of migrations: beside the source tree, or beside a build. */
export function migrationsFolder(): string {
  const places = [new URL('../../migrations/', import.meta.url), new URL('../migrations/', import.meta.url)];
  return fileURLToPath(places.find((p) => existsSync(p)) ?? places[0]!);
}

/** Where the store lies when nobody says otherwise: the system's place for the data of programs. */
export function defaultStoreFile(): string {
  const { platform, env } = process;
  const base =
    platform === 'win32'
      ? (env['APPDATA'] ?? join(homedir(), 'AppData', 'Roaming'))
      : platform === 'darwin'
        ? join(homedir(), 'Library', 'Application Support')
        : (env['XDG_DATA_HOME'] ?? join(homedir(), '.local', 'share'));
  return join(base, 'rovimark', 'sections.sqlite');
}
