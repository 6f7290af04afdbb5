import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { createBackend } from '../../electron/backend/create-backend.ts';
import type { Envelope, ExportedFile, SectionSummary } from '../../shared-core/contract/index.ts';

const folder = mkdtempSync(join(tmpdir(), 'rovimark-headless-'));
const section = join(folder, 'gas-phase');
const store = join(folder, 'store', 'sections.sqlite');

function mark(...args: string[]): { status: number; errors: string } {
  try {
    execFileSync(process.execPath, ['electron/hosts/headless.ts', ...args], { stdio: 'pipe' });
    return { status: 0, errors: '' };
  } catch (error) {
    const failed = error as { status: number; stderr: Buffer };
    return { status: failed.status, errors: failed.stderr.toString() };
  }
}

beforeAll(() => {
  execFileSync(process.execPath, ['electron/hosts/example.ts', section], { stdio: 'ignore' });
  // Three rows with their spectra are enough here.
  const table = join(section, 'submissions.csv');
  const rows = readFileSync(table, 'utf8').split(/\r?\n/).slice(0, 4);
  writeFileSync(table, `${rows.join('\r\n')}\r\n`);
  for (const name of readdirSync(join(section, 'spectra')))
    if (!rows.some((row) => row.includes(name))) rmSync(join(section, 'spectra', name));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

it('a folder marked with --store is a section of that store, once, with the same grades', async () => {
  const out = join(folder, 'out');
  expect(mark(section, '--out', out, '--store', store).status).toBe(0);
  expect(mark(section, '--out', out, '--store', store).status).toBe(0);
  const backend = await createBackend({ storeFile: store, migrationsFolder: 'migrations', workers: 1 });
  try {
    const listed = (await backend.dispatch('sections.list', {})) as Envelope<SectionSummary[]>;
    const sections = listed.ok ? listed.value : [];
    expect(sections.map((s) => [s.title, s.submissions, s.withoutReference])).toEqual([['gas-phase', 3, 0]]);
    const sectionId = sections[0]!.id;
    const reply = (await backend.dispatch('export.grades', {
      sectionId,
      options: {},
    })) as Envelope<ExportedFile>;
    expect(reply.ok && reply.value.text).toBe(readFileSync(join(out, 'grades.csv'), 'utf8'));
    // While it is open here, another program says who holds it and leaves it alone.
    const refused = mark(section, '--out', out, '--store', store);
    expect(refused.status).toBe(2);
    expect(refused.errors).toMatch(/is open in another Rovimark \(process \d+\)/);
  } finally {
    await backend.close();
  }
}, 180_000);

it('arguments that cannot be used end with status 2 and a sentence', () => {
  const empty = mkdtempSync(join(folder, 'empty-'));
  const broken = join(folder, 'scheme.json');
  writeFileSync(broken, '{');
  expect(mark(empty, '--out', join(folder, 'x'))).toMatchObject({ status: 2 });
  expect(mark(empty, '--out', join(folder, 'x')).errors).toMatch(/holds no submissions\.csv/);
  expect(mark(section, '--out', join(folder, 'x'), '--scheme', broken).errors).toMatch(/no JSON/);
  expect(mark().errors).toMatch(/^Usage/);
  expect(mark('--bare').errors).toMatch(/at least one file/);
});
