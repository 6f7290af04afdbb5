// Works on a store until it is killed; every line on standard output is a reply that was acknowledged.
import { writeSync } from 'node:fs';
import type { Envelope } from '../../shared-core/contract/index.ts';
import { createBackend } from '../../electron/backend/create-backend.ts';

const [storeFile, migrationsFolder, seedText] = process.argv.slice(2);
let state = Number(seedText) % 2_147_483_647 || 1;
const random = (most: number): number => {
  state = (state * 48_271) % 2_147_483_647;
  return state % most;
};
const say = (fact: unknown): void => void writeSync(1, `${JSON.stringify(fact)}\n`);

say({ fact: 'opening' });
const backend = await createBackend({
  storeFile: storeFile!,
  migrationsFolder: migrationsFolder!,
  workers: 1,
});
say({ fact: 'opened' });

async function ask<T>(method: string, input: unknown): Promise<T> {
  const reply = (await backend.dispatch(method, input)) as Envelope<T>;
  if (!reply.ok) throw new Error(`${method}: ${reply.error.message}`);
  return reply.value;
}

/** A small noisy spectrum: enough for the fitting to have something to do. */
function spectrum(): string {
  const lines = Array.from({ length: 1500 }, (_, i) => {
    const x = 2700 + i * 0.3;
    const peak = [2843.6, 2865.1, 2906.2, 2925.9].reduce(
      (sum, at) => sum + 0.3 / (1 + ((x - at) / 0.4) ** 2),
      0,
    );
    return `${x.toFixed(2)} ${(peak + random(1000) * 1e-6).toFixed(6)}`;
  });
  return lines.join('\n');
}

async function takeIn(): Promise<void> {
  const { sectionId } = await ask<{ sectionId: number }>('sections.create', {
    title: `Section ${random(1e6)}`,
  });
  say({ fact: 'section', sectionId });
  const { intakeId } = await ask<{ intakeId: number }>('intake.begin', { sectionId });
  const rows = Array.from({ length: 1 + random(4) }, (_, i) => `S${i},s${i}.txt,10.${random(99)}`);
  const files = [
    ['submissions.csv', `student,spectrum,Be (cm-1)\n${rows.join('\n')}\n`],
    ...rows.map((_, i) => [`s${i}.txt`, spectrum()]),
  ];
  for (const [fileName, text] of files)
    await ask('intake.putPart', {
      intakeId,
      fileName,
      offset: 0,
      base64: Buffer.from(text!).toString('base64'),
      last: true,
    });
  say({ fact: 'staged', sectionId, intakeId, files: files.length });
  await ask('intake.commit', { intakeId });
  say({ fact: 'committed', sectionId, submissions: rows.length, spectra: rows.length });
}

let count = 0;
await takeIn();
for (;;) {
  const sections = await ask<{ id: number }[]>('sections.list', {});
  const sectionId = sections[random(sections.length)]!.id;
  const rows = await ask<{ submissionId: number }[]>('review.list', { sectionId });
  const row = rows.length > 0 ? rows[random(rows.length)] : undefined;
  const what = random(6);
  count++;
  if (what === 0) await takeIn();
  else if (row === undefined) continue;
  else if (what === 1) {
    await ask('export.grades', { sectionId, options: {} });
    say({ fact: 'exported', sectionId });
  } else if (what === 2) {
    await ask('review.comment', { submissionId: row.submissionId, comment: `${process.pid}-${count}` });
    say({ fact: 'comment', submissionId: row.submissionId, text: `${process.pid}-${count}` });
  } else {
    await ask('review.decide', {
      submissionId: row.submissionId,
      isotopologue: 'H35Cl',
      quantity: 'Be',
      ruling: { action: 'points', points: 1, comment: `${process.pid}-${count}` },
    });
    say({ fact: 'decision', submissionId: row.submissionId, text: `${process.pid}-${count}` });
  }
}
