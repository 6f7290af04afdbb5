// npm run shots: a picture of every view, light and dark, at two sizes, into shots/ (ignored).
import { mkdirSync } from 'node:fs';
import type { Page } from 'playwright-core';
import { findChromium } from '../helpers/browser.ts';
import { startApp } from './app.ts';

if (findChromium() === null) {
  console.log(
    'No Chromium was found; install it (Debian: apt-get install -y --no-install-recommends chromium).',
  );
  process.exit(2);
}
mkdirSync('shots', { recursive: true });
const app = await startApp();
const page = await app.page();

async function shoot(name: string): Promise<void> {
  for (const [width, height] of [
    [1280, 800],
    [1920, 1080],
  ] as const) {
    await page.setViewportSize({ width, height });
    for (const theme of ['light', 'dark'] as const) {
      await page.emulateMedia({ colorScheme: theme });
      await page.waitForTimeout(250);
      await page.screenshot({ path: `shots/${name}-${width}-${theme}.png` });
    }
  }
}
async function waitForReferences(on: Page): Promise<void> {
  await on.waitForFunction(
    () => document.querySelector('[role="progressbar"], progress') === null,
    undefined,
    { timeout: 300_000 },
  );
}

await page.getByRole('button', { name: 'Open the example section' }).waitFor();
await shoot('1-sections-empty');
await page.getByRole('button', { name: 'Open the example section' }).click();
await page.getByRole('button', { name: 'Commit the intake' }).waitFor({ timeout: 60_000 });
await shoot('2-intake');
await page.getByRole('button', { name: 'Commit the intake' }).click();
await page.getByRole('grid').waitFor({ timeout: 60_000 });
await shoot('3-references-running');
await page.waitForTimeout(1000);
await waitForReferences(page);
await page.waitForTimeout(800);
await shoot('4-references');
await page.keyboard.press('g');
await page.keyboard.press('r');
await page.getByRole('button', { name: /Accept/ }).waitFor({ timeout: 60_000 });
await page.waitForTimeout(500);
await shoot('5-review');
await page.keyboard.press('c');
await page.waitForTimeout(300);
await shoot('6-review-comment');
await page.keyboard.press('Escape');
await page.keyboard.press('g');
await page.keyboard.press('e');
await page.getByRole('button', { name: 'Save the grades file' }).waitFor();
await shoot('7-export');
await page.keyboard.press('g');
await page.keyboard.press('s');
await page.getByRole('link', { name: /^Open/ }).first().waitFor();
await shoot('8-sections');
await page.getByRole('link', { name: /^Open/ }).first().click();
await page.getByRole('heading', { name: 'Marking scheme' }).waitFor();
await page.waitForTimeout(800);
await shoot('9-section');
await page.keyboard.press('?');
await page.waitForTimeout(300);
await shoot('10-keys');
for (const fault of app.faults) console.log(`fault: ${fault}`);
for (const address of app.foreign) console.log(`foreign address: ${address}`);
await app.close();
console.log('Pictures are in shots/.');
