import fc from 'fast-check';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createBackend, type Backend } from '../../electron/backend/create-backend.ts';
import { errorCodes, inputs, methodNames, type Envelope } from '../../shared-core/contract/index.ts';

/** A seeded share here; `npm run fuzz` asks for more with ROVIMARK_HOSTILE_CALLS. */
const callsPerMethod = Number(process.env['ROVIMARK_HOSTILE_CALLS'] ?? 60);
const folder = mkdtempSync(join(tmpdir(), 'rovimark-hostile-'));
let backend: Backend;
let sectionId = 0;

const ask = (method: unknown, input: unknown): Promise<Envelope<unknown>> => backend.dispatch(method, input);
const valueOf = async (method: string, input: unknown): Promise<unknown> => {
  const reply = await ask(method, input);
  if (!reply.ok) throw new Error(reply.error.message);
  return reply.value;
};

/** All that a window could see of the store. */
async function state(): Promise<unknown> {
  return [
    await valueOf('sections.list', {}),
    await valueOf('sections.get', { sectionId }),
    await valueOf('review.list', { sectionId }),
    await valueOf('journal.list', { sectionId }),
    await valueOf('intake.current', { sectionId }),
  ];
}

function expectEnvelope(reply: Envelope<unknown>): void {
  if (reply.ok) return;
  expect(errorCodes).toContain(reply.error.code);
  expect(reply.error.code).not.toBe('internal');
  expect(reply.error.message.length).toBeGreaterThan(10);
  expect(JSON.parse(JSON.stringify(reply))).toEqual(reply);
}

beforeAll(async () => {
  backend = await createBackend({
    storeFile: join(folder, 'sections.sqlite'),
    migrationsFolder: 'migrations',
    workers: 1,
  });
  sectionId = ((await valueOf('sections.create', { title: 'Gas phase' })) as { sectionId: number }).sectionId;
  const { intakeId } = (await valueOf('intake.begin', { sectionId })) as { intakeId: number };
  const table = Buffer.from('student,Be (cm-1)\nS1,10.59\nS2,10.29\n').toString('base64');
  await valueOf('intake.putPart', {
    intakeId,
    fileName: 'submissions.csv',
    offset: 0,
    base64: table,
    last: true,
  });
  await valueOf('intake.commit', { intakeId });
});
afterAll(async () => {
  await backend.close();
  rmSync(folder, { recursive: true, force: true });
});

describe('hostile calls', () => {
  it('of unknown methods are answered, whatever they are', async () => {
    const before = await state();
    await fc.assert(
      fc.asyncProperty(fc.oneof(fc.string(), fc.anything()), fc.anything(), async (method, input) => {
        fc.pre(typeof method !== 'string' || !Object.hasOwn(inputs, method));
        const reply = await ask(method, input);
        expect(reply).toMatchObject({ ok: false, error: { code: 'unknown-method' } });
      }),
      { seed: 7, numRuns: callsPerMethod * 3 },
    );
    for (const name of ['__proto__', 'constructor', 'toString', 'hasOwnProperty'])
      expect(await ask(name, {})).toMatchObject({ ok: false, error: { code: 'unknown-method' } });
    expect(await state()).toEqual(before);
  });

  it.each(methodNames)('of %s with anything as input are refused and change nothing', async (method) => {
    const before = await state();
    const shape = Object.keys(inputs[method].shape);
    // Half-right inputs: the right keys with anything in them, and things that should not be there.
    const nearly = fc.record(
      Object.fromEntries(
        shape.map((key) => [key, fc.oneof(fc.anything(), fc.constant(sectionId), fc.string())]),
      ),
    );
    await fc.assert(
      fc.asyncProperty(
        fc.oneof(fc.anything(), nearly, fc.dictionary(fc.string(), fc.anything())),
        async (input) => {
          fc.pre(!inputs[method].safeParse(input).success);
          const reply = await ask(method, input);
          expect(reply).toMatchObject({ ok: false, error: { code: 'bad-input' } });
          expectEnvelope(reply);
        },
      ),
      { seed: 11, numRuns: callsPerMethod },
    );
    expect(await state()).toEqual(before);
  });

  it('that are well formed but name what is not there are told so', async () => {
    const before = await state();
    const gone = 987_654_321;
    const ruling = { action: 'points', points: 1, comment: '' };
    const value = { submissionId: gone, isotopologue: 'H35Cl', quantity: 'Be' };
    const calls: Record<string, unknown> = {
      'sections.rename': { sectionId: gone, title: 'x' },
      'sections.copy': { sectionId: gone, title: 'x' },
      'sections.remove': { sectionId: gone },
      'sections.get': { sectionId: gone },
      'scheme.preview': { sectionId: gone, scheme: {} },
      'scheme.save': { sectionId: gone, scheme: {} },
      'intake.begin': { sectionId: gone },
      'intake.putPart': { intakeId: gone, fileName: 'x', offset: 0, base64: '', last: true },
      'intake.view': { intakeId: gone },
      'intake.setMatch': { intakeId: gone, fileName: 'x', students: [] },
      'intake.commit': { intakeId: gone },
      'intake.cancel': { intakeId: gone },
      'references.list': { sectionId: gone },
      'references.get': { fileId: gone },
      'references.spectrum': { fileId: gone },
      'references.correct': { fileId: gone, correction: { kind: 'line-out', lineId: 'x' } },
      'references.takeBack': { fileId: gone, index: 0 },
      'jobs.resume': { sectionId: gone },
      'review.list': { sectionId: gone },
      'review.get': { submissionId: gone },
      'review.decide': { ...value, ruling },
      'review.sameSlip': { sectionId: gone, code: 'x' },
      'review.decideMany': { values: [value], ruling },
      'review.handPoints': { submissionId: gone, item: 'x', points: 1 },
      'review.comment': { submissionId: gone, comment: 'x' },
      'export.preview': { sectionId: gone, options: {} },
      'export.grades': { sectionId: gone, options: {} },
      'export.report': { sectionId: gone },
      'export.feedback': { sectionId: gone, withReference: true, withNames: true },
      'export.summary': { sectionId: gone },
      'export.records': { sectionId: gone },
      'journal.list': { sectionId: gone },
      'journal.undo': { sectionId: gone },
      'journal.redo': { sectionId: gone },
    };
    for (const [method, input] of Object.entries(calls)) {
      const reply = await ask(method, input);
      expect({ method, reply }).toMatchObject({ method, reply: { ok: false, error: { code: 'not-found' } } });
    }
    expect(await state()).toEqual(before);
  });

  it('with schemes of any shape are checked, never believed', async () => {
    const before = await state();
    await fc.assert(
      fc.asyncProperty(fc.dictionary(fc.string(), fc.jsonValue()), async (scheme) => {
        const checked = await ask('scheme.check', { scheme });
        expect(checked).toMatchObject({ ok: true });
        const saved = await ask('scheme.save', { sectionId, scheme });
        expect(saved).toMatchObject({ ok: false, error: { code: 'bad-input' } });
      }),
      { seed: 13, numRuns: callsPerMethod },
    );
    expect(await state()).toEqual(before);
  });

  it('with numbers that JSON cannot hold never leave in a reply', async () => {
    const [row] = (await valueOf('review.list', { sectionId })) as { submissionId: number }[];
    const reply = await ask('review.handPoints', {
      submissionId: row!.submissionId,
      item: 'x',
      points: Number.NaN,
    });
    expect(reply).toMatchObject({ ok: false, error: { code: 'bad-input' } });
    const listed = await ask('review.list', { sectionId });
    expect(JSON.parse(JSON.stringify(listed))).toEqual(listed);
  });
});
