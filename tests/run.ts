// npm test: every test, end-to-end ones in a real Chromium included. Last line: "N passed, N failed" (", N skipped" may follow).
import { spawnSync } from 'node:child_process';
import { existsSync, mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { findChromium, installChromium } from './helpers/browser.ts';

interface Report {
  readonly numPassedTests: number;
  readonly numFailedTests: number;
  readonly numPendingTests: number;
  readonly numFailedTestSuites: number;
  readonly testResults: readonly {
    readonly name: string;
    readonly status: string;
    readonly assertionResults: readonly { readonly status: string; readonly fullName: string }[];
  }[];
}

if (!existsSync('../shared/reference-data')) {
  console.log(
    'The reference data (../shared/reference-data) is absent: tests against measured spectra and published tables are skipped.',
  );
}
if (findChromium() === null && !installChromium()) {
  console.log(
    'No Chromium was found and it may not be installed here: the end-to-end tests are skipped. As root, run: apt-get install -y --no-install-recommends chromium',
  );
}
const folder = mkdtempSync(join(tmpdir(), 'rovimark-test-'));
const output = join(folder, 'report.json');
const run = spawnSync(
  process.execPath,
  [
    'node_modules/vitest/vitest.mjs',
    'run',
    '--reporter=default',
    '--reporter=json',
    `--outputFile.json=${output}`,
    ...process.argv.slice(2),
  ],
  { stdio: 'inherit' },
);
const report = existsSync(output) ? (JSON.parse(readFileSync(output, 'utf8')) as Report) : null;
rmSync(folder, { recursive: true, force: true });
if (report === null) {
  console.log('The test runner left no report.');
  console.log('0 passed, 1 failed');
  process.exit(1);
}
const skipped = report.testResults.flatMap((r) =>
  r.assertionResults.filter((a) => a.status === 'pending' || a.status === 'skipped').map((a) => a.fullName),
);
for (const name of skipped) console.log(`skipped: ${name}`);
// A file that fails to load has no tests of its own to count.
const broken = report.testResults.filter(
  (r) => r.status === 'failed' && r.assertionResults.every((a) => a.status !== 'failed'),
).length;
const failed = report.numFailedTests + broken;
const bad = failed > 0 || run.status !== 0;
console.log(
  `${report.numPassedTests} passed, ${bad ? Math.max(1, failed) : 0} failed${skipped.length > 0 ? `, ${skipped.length} skipped` : ''}`,
);
process.exit(bad ? 1 : 0);
