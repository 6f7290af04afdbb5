import { mkdtempSync, existsSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';
import { build } from 'vite';
import { createBackend, type Backend } from '../../electron/backend/create-backend.ts';
import { startLoopback, type Loopback } from '../../electron/hosts/loopback.ts';
import { findChromium } from '../helpers/browser.ts';

/** The real app on the loopback host with a store of its own, and a real browser. */
export interface TestApp {
  readonly browser: Browser;
  readonly host: Loopback;
  readonly backend: Backend;
  readonly context: BrowserContext;
  /** A page of the session; its faults are collected in `faults`. */
  readonly page: (size?: { width: number; height: number }) => Promise<Page>;
  readonly faults: string[];
  /** Addresses outside this computer that the page asked for. */
  readonly foreign: string[];
  readonly close: () => Promise<void>;
}

const flags = [
  '--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync',
]; // prettier-ignore

let built: Promise<unknown> | null = null;

export async function startApp(workers = 2): Promise<TestApp> {
  built ??=
    existsSync('dist/renderer/index.html') && process.env['ROVIMARK_KEEP_BUILD'] === '1'
      ? Promise.resolve()
      : build({ configFile: 'vite.config.ts', logLevel: 'error' });
  await built;
  const folder = mkdtempSync(join(tmpdir(), 'rovimark-e2e-'));
  const backend = await createBackend({
    storeFile: join(folder, 'store', 'sections.sqlite'),
    migrationsFolder: 'migrations',
    workers,
  });
  const host = await startLoopback({ backend, webFolder: 'dist/renderer' });
  const browser = await chromium.launch({ executablePath: findChromium()!, headless: true, args: flags });
  const context = await browser.newContext({ acceptDownloads: true });
  const faults: string[] = [];
  const foreign: string[] = [];
  let opened = false;
  return {
    browser,
    host,
    backend,
    context,
    faults,
    foreign,
    page: async (size = { width: 1280, height: 800 }) => {
      const page = await context.newPage();
      await page.setViewportSize(size);
      page.on('pageerror', (error) => faults.push(error.message));
      page.on('console', (message) => {
        if (message.type() === 'error') faults.push(message.text());
      });
      page.on('request', (request) => {
        const { protocol, hostname } = new URL(request.url());
        if (protocol.startsWith('http') && hostname !== '127.0.0.1') foreign.push(request.url());
      });
      await page.goto(opened ? `http://127.0.0.1:${host.port}/` : host.url);
      opened = true;
      return page;
    },
    close: async () => {
      await browser.close();
      await host.close();
      await backend.close();
      rmSync(folder, { recursive: true, force: true });
    },
  };
}
