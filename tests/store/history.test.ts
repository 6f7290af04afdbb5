import { mkdtempSync, readFileSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { createBackend, type Backend } from '../../electron/backend/create-backend.ts';
import type { Envelope } from '../../shared-core/contract/index.ts';

let folder: string;
let backend: Backend;
let day = '2026-12-01';

const open = (): Promise<Backend> =>
  createBackend({
    storeFile: join(folder, 'sections.sqlite'),
    migrationsFolder: 'migrations',
    workers: 1,
    now: () => new Date(`${day}T10:00:00Z`),
  });

async function ask<T>(method: string, input: unknown): Promise<T> {
  const reply = (await backend.dispatch(method, input)) as Envelope<T>;
  if (!reply.ok) throw new Error(`${method}: ${reply.error.message}`);
  return reply.value;
}

/** Files below the folder that hold a text anywhere in their bytes. */
function filesWith(text: string): string[] {
  return readdirSync(folder, { recursive: true, withFileTypes: true })
    .filter((e) => e.isFile())
    .map((e) => join(e.parentPath, e.name))
    .filter((path) => readFileSync(path).includes(text));
}

async function sectionWith(student: string): Promise<number> {
  const { sectionId } = await ask<{ sectionId: number }>('sections.create', {
    title: `Section of ${student}`,
  });
  const { intakeId } = await ask<{ intakeId: number }>('intake.begin', { sectionId });
  const table = `student,name,Be (cm-1)\n${student},Name of ${student},10.59\n`;
  await ask('intake.putPart', {
    intakeId,
    fileName: `${student}/submissions.csv`,
    offset: 0,
    base64: Buffer.from(table).toString('base64'),
    last: true,
  });
  await ask('intake.commit', { intakeId });
  const [row] = await ask<{ submissionId: number }[]>('review.list', { sectionId });
  await ask('review.comment', { submissionId: row!.submissionId, comment: `Talked with ${student}` });
  return sectionId;
}

beforeEach(async () => {
  folder = mkdtempSync(join(tmpdir(), 'rovimark-deletion-'));
  day = '2026-12-01';
  backend = await open();
});
afterEach(async () => {
  await backend.close();
  rmSync(folder, { recursive: true, force: true });
});

describe('a section that is deleted', () => {
  it('is gone from store, log, journal, staging and backups, byte by byte; the others and their backup stay', async () => {
    const gone = await sectionWith('LeavingStudent77');
    await sectionWith('StayingStudent88');
    await backend.close();
    day = '2026-12-02';
    backend = await open();
    expect(filesWith('LeavingStudent77').length).toBeGreaterThan(1);
    const { intakeId } = await ask<{ intakeId: number }>('intake.begin', { sectionId: gone });
    await ask('intake.putPart', {
      intakeId,
      fileName: 'again.csv',
      offset: 0,
      base64: Buffer.from('student,Be (cm-1)\nLeavingStudent77,1\n').toString('base64'),
      last: true,
    });
    await ask('sections.remove', { sectionId: gone });
    expect(filesWith('LeavingStudent77')).toEqual([]);
    expect(filesWith('StayingStudent88').some((f) => f.endsWith('.backup-2026-12-02'))).toBe(true);
    await backend.close();
    expect(filesWith('LeavingStudent77')).toEqual([]);
    backend = await open();
    expect(await ask('sections.list', {})).toHaveLength(1);
  });
});

describe('history', () => {
  it('is undone and done again across restarts', async () => {
    const sectionId = await sectionWith('S1');
    const title = async (): Promise<string> =>
      (await ask<{ title: string }>('sections.get', { sectionId })).title;
    await ask('sections.rename', { sectionId, title: 'Second' });
    await ask('sections.rename', { sectionId, title: 'Third' });
    const restart = async (): Promise<void> => {
      await backend.close();
      backend = await open();
    };
    await restart();
    await ask('journal.undo', { sectionId });
    expect(await title()).toBe('Second');
    await restart();
    await ask('journal.undo', { sectionId });
    expect(await title()).toBe('Section of S1');
    await restart();
    await ask('journal.redo', { sectionId });
    await ask('journal.redo', { sectionId });
    expect(await title()).toBe('Third');
    const entries = await ask<{ who: string; what: string; at: string }[]>('journal.list', { sectionId });
    expect(entries.map((e) => e.what)).toContain('renamed the section to “Third”');
    expect(entries.every((e) => e.who !== '' && e.at.startsWith('2026-12-01'))).toBe(true);
  });

  it('goes on although the clock was set back', async () => {
    const sectionId = await sectionWith('S1');
    day = '2025-01-01';
    await ask('sections.rename', { sectionId, title: 'Later, by an earlier clock' });
    await ask('journal.undo', { sectionId });
    expect((await ask<{ title: string }>('sections.get', { sectionId })).title).toBe('Section of S1');
  });

  it('keeps an intake that was open when the program stopped', async () => {
    const { sectionId } = await ask<{ sectionId: number }>('sections.create', { title: 'Interrupted' });
    const { intakeId } = await ask<{ intakeId: number }>('intake.begin', { sectionId });
    await ask('intake.putPart', {
      intakeId,
      fileName: 'submissions.csv',
      offset: 0,
      base64: Buffer.from('student,Be (cm-1)\nS1,10.59\n').toString('base64'),
      last: true,
    });
    await backend.close();
    backend = await open();
    expect(await ask('intake.current', { sectionId })).toEqual({ intakeId });
    const view = await ask<{ submissions: { student: string }[] }>('intake.view', { intakeId });
    expect(view.submissions.map((s) => s.student)).toEqual(['S1']);
    await ask('intake.cancel', { intakeId });
    expect((await ask<{ submissions: number }>('sections.get', { sectionId })).submissions).toBe(0);
  });
});

describe('files that come again', () => {
  const drop = async (
    sectionId: number,
    files: Readonly<Record<string, string>>,
  ): Promise<{ isNew: boolean[]; added: number }> => {
    const { intakeId } = await ask<{ intakeId: number }>('intake.begin', { sectionId });
    for (const [fileName, text] of Object.entries(files))
      await ask('intake.putPart', {
        intakeId,
        fileName,
        offset: 0,
        base64: Buffer.from(text).toString('base64'),
        last: true,
      });
    const view = await ask<{ submissions: { isNew: boolean }[] }>('intake.view', { intakeId });
    const { newSubmissions } = await ask<{ newSubmissions: number }>('intake.commit', { intakeId });
    return { isNew: view.submissions.map((s) => s.isNew), added: newSubmissions };
  };

  it('change nothing and are said to be known; changed values are the next attempt, once', async () => {
    const { sectionId } = await ask<{ sectionId: number }>('sections.create', { title: 'Again' });
    const first = { 'submissions.csv': 'student,Be (cm-1)\nS1,10.59\nS2,10.58\n' };
    const second = { 'submissions.csv': 'student,Be (cm-1)\nS1,10.44\nS2,10.58\n' };
    expect(await drop(sectionId, first)).toEqual({ isNew: [true, true], added: 2 });
    expect(await drop(sectionId, first)).toEqual({ isNew: [false, false], added: 0 });
    expect(await drop(sectionId, second)).toEqual({ isNew: [true, false], added: 1 });
    expect(await drop(sectionId, second)).toEqual({ isNew: [false, false], added: 0 });
    expect(await drop(sectionId, first)).toEqual({ isNew: [false, false], added: 0 });
    const rows = await ask<{ student: string; attempt: number; counts: boolean }[]>('review.list', {
      sectionId,
    });
    const own = rows.filter((r) => r.student === 'S1').sort((a, b) => a.attempt - b.attempt);
    expect(own.map((r) => [r.attempt, r.counts])).toEqual([
      [1, false],
      [2, true],
    ]);
  });

  it('bring spectra to submissions that had none', async () => {
    const { sectionId } = await ask<{ sectionId: number }>('sections.create', { title: 'Later spectra' });
    const table = { 'submissions.csv': 'student,spectrum,Be (cm-1)\nS1,one.txt,10.59\n' };
    const spectrum = Array.from({ length: 400 }, (_, i) => `${2700 + i} ${(i * 7919) % 13}e-4`).join('\n');
    await drop(sectionId, table);
    await drop(sectionId, { ...table, 'one.txt': spectrum });
    const files = await ask<{ name: string; students: string[] }[]>('references.list', { sectionId });
    expect(files.map((f) => [f.name, f.students])).toEqual([['one.txt', ['S1']]]);
  });
});
