import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import type {
  Envelope,
  IntakeView,
  JobState,
  MethodName,
  OutputOf,
  ReviewRow,
} from '../../shared-core/contract/index.ts';
import { createBackend, type Backend } from '../../electron/backend/create-backend.ts';

const folder = mkdtempSync(join(tmpdir(), 'rovimark-'));
let backend: Backend;

async function ask<M extends MethodName>(method: M, input: unknown): Promise<OutputOf<M>> {
  const reply = (await backend.dispatch(method, input)) as Envelope<OutputOf<M>>;
  if (!reply.ok) throw new Error(`${method}: ${reply.error.message}`);
  return reply.value;
}

async function settled(sectionId: number): Promise<JobState> {
  for (;;) {
    const state = await ask('jobs.state', { sectionId });
    if (!state.running) return state;
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
}

beforeAll(async () => {
  backend = await createBackend({
    storeFile: join(folder, 'store', 'sections.sqlite'),
    migrationsFolder: 'migrations',
    workers: 2,
  });
});
afterAll(async () => {
  await backend.close();
  rmSync(folder, { recursive: true, force: true });
});

// Fits of a whole section take their time on a busy machine.
vi.setConfig({ testTimeout: 240_000 });

describe('the example section through the back end', () => {
  let sectionId = 0;
  let view: IntakeView;

  it('is understood whole before anything is kept', async () => {
    const made = await ask('sections.makeExample', {});
    sectionId = made.sectionId;
    view = await ask('intake.view', { intakeId: made.intakeId });
    expect(view.blockers).toEqual([]);
    expect(view.submissions).toHaveLength(24);
    expect(view.files.filter((f) => f.became === 'spectrum')).toHaveLength(18);
    expect(view.files.filter((f) => f.became === 'left out')).toEqual([]);
    expect(view.missing).toEqual([]);
    expect((await ask('sections.get', { sectionId })).submissions).toBe(0);
  });

  it('is committed once; the same files again change nothing', async () => {
    const first = await ask('intake.commit', { intakeId: view.intakeId });
    expect(first.newSubmissions).toBe(24);
    await settled(sectionId);
    const again = await ask('sections.makeExample', {});
    const other = await ask('intake.view', { intakeId: again.intakeId });
    expect(other.submissions).toHaveLength(24);
    await ask('intake.cancel', { intakeId: again.intakeId });
    await ask('sections.remove', { sectionId: again.sectionId });
  });

  it('exports the same bytes as the headless command', async () => {
    const exported = await ask('export.grades', { sectionId, options: {} });
    const headless = (...args: string[]): void => {
      execFileSync(process.execPath, args, { stdio: ['ignore', 'ignore', 'ignore'] });
    };
    headless('electron/hosts/example.ts', join(folder, 'example'));
    headless('electron/hosts/headless.ts', join(folder, 'example'), '--out', join(folder, 'out'));
    expect(exported.text).toBe(readFileSync(join(folder, 'out', 'grades.csv'), 'utf8'));
  });

  it('keeps a decision, takes it back and does it again', async () => {
    const flagged = (rows: readonly ReviewRow[]): ReviewRow =>
      rows.find((r) => r.values.some((v) => v.agreement === 'outside'))!;
    const row = flagged(await ask('review.list', { sectionId }));
    const value = row.values.find((v) => v.agreement === 'outside')!;
    const input = {
      submissionId: row.submissionId,
      isotopologue: value.isotopologue,
      quantity: value.quantity,
    };
    const pointsNow = async (): Promise<number | null> => {
      const { row: now } = await ask('review.get', { submissionId: row.submissionId });
      return now.values.find((v) => v.isotopologue === value.isotopologue && v.quantity === value.quantity)!
        .points;
    };
    await ask('review.decide', {
      ...input,
      ruling: { action: 'points', points: value.of, comment: 'argued well' },
    });
    expect(await pointsNow()).toBe(value.of);
    expect((await ask('export.records', { sectionId }))[0]!.changedSince).toBe(true);
    await ask('journal.undo', { sectionId });
    expect(await pointsNow()).toBe(value.points);
    await ask('journal.redo', { sectionId });
    expect(await pointsNow()).toBe(value.of);
    await ask('journal.undo', { sectionId });
  });

  it('refits after a correction and says so', async () => {
    const [file] = await ask('references.list', { sectionId });
    const before = await ask('references.get', { fileId: file!.fileId });
    const line = before.reference!.lines.find((l) => l.used)!;
    await ask('references.correct', {
      fileId: file!.fileId,
      correction: { kind: 'line-out', lineId: line.id },
    });
    await settled(sectionId);
    const after = await ask('references.get', { fileId: file!.fileId });
    expect(after.reference!.lines.find((l) => l.id === line.id)?.used).toBe(false);
    expect(after.reference!.best.Be!.value).not.toBe(before.reference!.best.Be!.value);
    expect(Math.abs(after.reference!.best.Be!.value - before.reference!.best.Be!.value)).toBeLessThan(
      5 * before.reference!.best.Be!.uncertainty!,
    );
    await ask('journal.undo', { sectionId });
    await settled(sectionId);
    const back = await ask('references.get', { fileId: file!.fileId });
    expect(back.reference).toEqual(before.reference);
  });
});
