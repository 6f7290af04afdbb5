import { execFileSync } from 'node:child_process';
import { cpSync, existsSync, mkdirSync, rmSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { buildMain, buildPreload } from '../../electron/hosts/build-parts.ts';

const built = resolve('node_modules/.cache/rovimark-double');
type Report = Record<string, unknown>;

function run(store: string, env: Record<string, string> = {}): Report {
  const output = execFileSync(process.execPath, ['tests/helpers/electron-driver.ts', built], {
    env: { ...process.env, ROVIMARK_STORE: store, ...env },
    encoding: 'utf8',
    stdio: ['ignore', 'pipe', 'pipe'],
    timeout: 60_000,
  });
  return JSON.parse(output.trim().split('\n').at(-1)!) as Report;
}

beforeAll(async () => {
  rmSync(built, { recursive: true, force: true });
  await buildMain(join(built, 'main'));
  await buildPreload(join(built, 'preload'));
  cpSync('migrations', join(built, 'migrations'), { recursive: true });
  mkdirSync(join(built, 'renderer'));
  writeFileSync(join(built, 'renderer', 'index.html'), '<!doctype html>');
});
afterAll(() => rmSync(built, { recursive: true, force: true }));

describe('the built main and preload over a double of electron', () => {
  let report: Report;
  beforeAll(() => {
    report = run(join(built, 'store', 'sections.sqlite'));
  });

  it('open one window: sandboxed, isolated, without Node, on a protocol of its own', () => {
    expect(report).toMatchObject({
      windows: 1,
      errorBoxes: [],
      loaded: 'app://rovimark/index.html',
      schemes: [{ scheme: 'app', privileges: { standard: true, secure: true } }],
      preferences: {
        sandbox: true,
        contextIsolation: true,
        nodeIntegration: false,
        webSecurity: true,
        webviewTag: false,
        preload: join(built, 'preload', 'preload.cjs'),
      },
    });
  });

  it('give the window calls and events, nothing else', () => {
    expect(report).toMatchObject({
      exposed: ['rovimark'],
      bridge: ['call', 'onEvent'],
      channels: ['rovimark:call'],
    });
  });

  it('answer calls through the store, and tell of changes', () => {
    expect(report['made']).toMatchObject({ ok: true });
    expect(report['listed']).toMatchObject({ ok: true, value: [{ title: 'Over the bridge' }] });
    expect(report['events']).toContainEqual({ event: 'changed', sectionId: 1 });
    expect(existsSync(join(built, 'store', 'sections.sqlite'))).toBe(true);
  });

  it('answer hostile calls with envelopes', () => {
    const codes = (report['hostile'] as { error: { code: string } }[]).map((r) => r.error.code);
    expect(codes).toEqual(['unknown-method', 'unknown-method', 'bad-input', 'not-found']);
  });

  it('refuse every sender but their own window', () => {
    const foreign = report['foreign'] as { ok: boolean }[];
    expect(foreign).toHaveLength(5);
    expect(foreign.every((r) => !r.ok)).toBe(true);
  });

  it('deny navigation, new windows and permissions', () => {
    expect(report).toMatchObject({
      opens: 'deny',
      permission: false,
      permissionCheck: false,
      navigation: { own: true, foreign: false, lookalike: false, file: false },
    });
  });

  it('serve the build alone, under a strict policy', () => {
    const pages = report['pages'] as Record<string, { status: number; policy: string | null }>;
    expect(pages['own']?.status).toBe(200);
    expect(pages['own']?.policy).toMatch(/default-src 'none'; script-src 'self'/);
    expect(pages['climbing']?.status).toBe(404);
    expect(pages['foreign']?.status).toBe(404);
  });

  it('close the store with the window', () => {
    expect(report['quit']).toBe(true);
    expect(existsSync(join(built, 'store', 'sections.sqlite.lock'))).toBe(false);
  });

  it('leave the field to a first instance', () => {
    const second = run(join(built, 'second', 'sections.sqlite'), { DOUBLE_SECOND_INSTANCE: '1' });
    expect(second).toMatchObject({ windows: 0, quit: true });
    expect(existsSync(join(built, 'second'))).toBe(false);
  });

  it('say in words why a store cannot be opened, and leave', () => {
    mkdirSync(join(built, 'broken'));
    const file = join(built, 'broken', 'sections.sqlite');
    writeFileSync(file, 'this is no store of anything, whatever its name may say about it');
    const report = run(file);
    expect(report).toMatchObject({ windows: 0, quit: true });
    expect((report['errorBoxes'] as string[])[0]).toMatch(/cannot be opened as a store/);
  });
});
