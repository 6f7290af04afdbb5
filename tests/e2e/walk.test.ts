import { readFileSync } from 'node:fs';
import AxeBuilder from '@axe-core/playwright';
import type { Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { exampleSection } from '../../electron/backend/example/section.ts';
import { findChromium } from '../helpers/browser.ts';
import { startApp, type TestApp } from './app.ts';

const noBrowser = findChromium() === null;

async function violations(page: Page): Promise<string[]> {
  const found: string[] = [];
  for (const colorScheme of ['light', 'dark'] as const) {
    await page.emulateMedia({ colorScheme });
    const result = await new AxeBuilder({ page }).analyze();
    found.push(
      ...result.violations.map(
        (v) => `${colorScheme}: ${v.id}: ${v.nodes.map((n) => n.html.slice(0, 120)).join(' | ')}`,
      ),
    );
  }
  return found;
}

/** References are done when no progress shows any more. */
async function referencesDone(page: Page): Promise<void> {
  await page.getByRole('grid').waitFor({ timeout: 60_000 });
  await expect
    .poll(() => page.getByText('sound', { exact: true }).count(), { timeout: 240_000, interval: 500 })
    .toBeGreaterThan(12);
  await page.waitForFunction(
    () => document.querySelector('progress, [role="progressbar"]') === null,
    undefined,
    { timeout: 240_000 },
  );
}

describe.skipIf(noBrowser)('the whole path in a real browser', () => {
  let app: TestApp;
  beforeAll(async () => {
    app = await startApp();
  }, 120_000);
  afterAll(async () => {
    await app.close();
  });

  it('leads by mouse from an empty start to a grades file, with reloads on the way', async () => {
    const page = await app.page();
    await page.getByRole('button', { name: 'Open the example section' }).waitFor();
    expect(await violations(page)).toEqual([]);
    await page.getByRole('button', { name: 'New section', exact: true }).first().click();
    await page.getByLabel('Name of the section').fill('Gas spectra, bench 2');
    await page.getByRole('button', { name: 'Create', exact: true }).click();
    const files = exampleSection(1).files.filter((f) => f.name !== 'what-was-put-in.csv');
    await page.getByTestId('files').waitFor({ state: 'attached' });
    const send = (some: typeof files): Promise<void> =>
      page.getByTestId('files').setInputFiles(
        some.map((f) => ({
          name: f.name.slice(f.name.lastIndexOf('/') + 1),
          mimeType: 'application/octet-stream',
          buffer: Buffer.from(f.bytes),
        })),
      );
    await send(files.slice(0, 6));
    await page.getByText('What each file became').waitFor({ timeout: 60_000 });
    // In the middle of intake: what came in waits on disk.
    await page.reload();
    await page.getByText('What each file became').waitFor({ timeout: 60_000 });
    await send([
      ...files.slice(6),
      { name: 'notes.txt', bytes: new TextEncoder().encode('no spectrum, only words\n') },
    ]);
    await page.getByText('24 submissions').waitFor({ timeout: 60_000 });
    await page.getByText('1 file refused').waitFor();
    expect(await violations(page)).toEqual([]);
    await page.getByRole('button', { name: 'Commit the intake' }).click();
    await page.getByRole('grid').waitFor({ timeout: 60_000 });
    // In the middle of fitting: the back end goes on.
    await page.reload();
    await referencesDone(page);
    expect(await violations(page)).toEqual([]);
    await page.getByRole('link', { name: /Review/ }).click();
    await page.getByRole('button', { name: /^Accept/ }).waitFor();
    expect(await violations(page)).toEqual([]);
    const before = await page
      .getByText(/values? to decide/)
      .first()
      .textContent();
    await page.getByRole('button', { name: /^Full points/ }).click();
    await expect
      .poll(() =>
        page
          .getByText(/values? to decide/)
          .first()
          .textContent(),
      )
      .not.toBe(before);
    await page.getByRole('link', { name: /Export/ }).click();
    await page.getByRole('button', { name: 'Save the grades file' }).waitFor();
    expect(await violations(page)).toEqual([]);
    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.getByRole('button', { name: 'Save the grades file' }).click(),
    ]);
    const grades = readFileSync(await download.path(), 'utf8');
    expect(grades.startsWith('student,name,group,attempt,')).toBe(true);
    expect(grades.split('\r\n')).toHaveLength(26);
    await page.getByRole('link', { name: 'Sections' }).click();
    await page.getByRole('link', { name: /^Open: Gas spectra/ }).click();
    await page.getByRole('heading', { name: 'Marking scheme' }).waitFor();
    await page.waitForTimeout(600);
    expect(await violations(page)).toEqual([]);
    await page.close();
  }, 420_000);

  it('leads by keyboard alone, every flagged value decided one by one', async () => {
    const page = await app.page();
    let presses = 0;
    const press = async (...keys: string[]): Promise<void> => {
      for (const key of keys) {
        presses++;
        await page.keyboard.press(key);
      }
    };
    const tabTo = async (name: RegExp): Promise<void> => {
      for (let i = 0; i < 80; i++) {
        const label = await page.evaluate(() => {
          const e = document.activeElement;
          return e === null ? '' : (e.getAttribute('aria-label') ?? e.textContent);
        });
        if (name.test(label.trim())) return;
        await press('Tab');
      }
      throw new Error(`no way by Tab to ${name.source}`);
    };
    await page.getByRole('button', { name: 'Example section', exact: true }).waitFor();
    await tabTo(/^Example section$/);
    await press('Enter');
    await page.getByRole('button', { name: 'Commit the intake' }).waitFor({ timeout: 60_000 });
    await tabTo(/^Commit the intake$/);
    await press('Enter');
    await referencesDone(page);
    // A line out and the way back.
    await press('n', 'x');
    await expect.poll(() => page.getByText(/left out/).count(), { timeout: 60_000 }).toBeGreaterThan(0);
    await press('Control+z');
    await press('g', 'r');
    await page.getByRole('button', { name: /^Accept/ }).waitFor();
    const flagged = async (): Promise<number> => {
      const words = await page
        .getByText(/\d+ values? to decide|Every flagged value is decided/)
        .first()
        .textContent();
      return Number(/\d+/.exec(words ?? '')?.[0] ?? 0);
    };
    await expect.poll(flagged, { timeout: 30_000 }).toBeGreaterThan(5);
    const start = await flagged();
    let decisions = 0;
    for (let left = start; left > 0 && decisions < 3 * start; decisions++) {
      await press(decisions % 5 === 0 ? 'f' : 'a');
      const now = left;
      await expect.poll(flagged, { timeout: 15_000 }).toBeLessThan(now);
      left = await flagged();
      await page.waitForTimeout(120);
    }
    expect(await flagged()).toBe(0);
    await press('g', 'e');
    await page.getByRole('button', { name: 'Save the grades file' }).waitFor();
    await tabTo(/^Save the grades file$/);
    const [download] = await Promise.all([page.waitForEvent('download'), press('Enter')]);
    expect(download.suggestedFilename()).toBe('grades.csv');
    console.log(
      `${presses} key presses for ${decisions} decisions: ${presses - 2 * decisions} beyond two a decision`,
    );
    await page.close();
  }, 420_000);

  it('asks for nothing outside this computer and raises no fault', () => {
    expect(app.foreign).toEqual([]);
    expect(app.faults).toEqual([]);
  });
});
