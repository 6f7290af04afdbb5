import { mkdirSync, readdirSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { exampleSection } from '../backend/example/section.ts';

const usage = 'Usage: npm run --silent example -- DIR [--seed N]   (DIR: a new or empty folder)';

function refuse(sentence: string): never {
  process.stderr.write(`${sentence}\n`);
  process.exit(2);
}

function parse(list: readonly string[]): { folder: string; seed: number } {
  const rest = [...list];
  const at = rest.indexOf('--seed');
  let seed = 1;
  if (at >= 0) {
    seed = Number(rest[at + 1]);
    if (rest[at + 1] === undefined || !Number.isInteger(seed))
      refuse(`--seed wants a whole number. ${usage}`);
    rest.splice(at, 2);
  }
  const folder = rest[0];
  if (rest.length !== 1 || folder === undefined || folder === '' || folder.startsWith('-')) refuse(usage);
  return { folder, seed };
}

function mustBeEmpty(folder: string): void {
  let entries: string[];
  try {
    entries = readdirSync(folder);
  } catch (error) {
    const code = (error as NodeJS.ErrnoException).code;
    if (code === 'ENOENT') return;
    refuse(
      code === 'ENOTDIR'
        ? `${folder} is a file; name a new or empty folder.`
        : `${folder} cannot be read (${String(code)}).`,
    );
  }
  if (entries.length > 0) {
    refuse(`${folder} is not empty; nothing was written. Name a new or empty folder.`);
  }
}

const { folder, seed } = parse(process.argv.slice(2));
mustBeEmpty(folder);
const section = exampleSection(seed);
try {
  for (const file of section.files) {
    const path = join(folder, file.name);
    mkdirSync(dirname(path), { recursive: true });
    writeFileSync(path, file.bytes);
  }
} catch (error) {
  refuse(`The example could not be written to ${folder}: ${(error as Error).message}`);
}
process.stdout.write(
  `Invented section written to ${folder}: ${section.truth.length} submissions, ${section.files.length - 4} spectra, ` +
    'submissions.csv, lines.csv, scheme.json, and what-was-put-in.csv (the answer sheet; not for marking).\n',
);
