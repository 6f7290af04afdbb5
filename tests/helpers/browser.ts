import { execFileSync, spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';

const places = [
  '/usr/bin/chromium',
  '/usr/bin/chromium-browser',
  '/usr/bin/google-chrome',
  '/snap/bin/chromium',
];

/** Path of a Chromium on this machine, or null. */
export function findChromium(): string | null {
  const named = process.env['ROVIMARK_CHROMIUM'];
  if (named !== undefined && existsSync(named)) return named;
  return places.find((p) => existsSync(p)) ?? null;
}

/** Installs Debian's Chromium where this user may; true where it is there afterwards. */
export function installChromium(): boolean {
  const isRoot = process.getuid?.() === 0;
  if (!isRoot || spawnSync('apt-get', ['--version'], { stdio: 'ignore' }).status !== 0) return false;
  try {
    execFileSync('apt-get', ['update', '-qq'], { stdio: 'ignore' });
    execFileSync('apt-get', ['install', '-y', '-qq', '--no-install-recommends', 'chromium'], {
      stdio: 'ignore',
    });
  } catch {
    return false;
  }
  return findChromium() !== null;
}
