import { mkdir, readdir, readFile, stat, writeFile } from 'node:fs/promises';
import { basename, join, relative, resolve, sep } from 'node:path';
import { findRepeatedSpectra } from '../../shared-core/marking/repeated-spectra.ts';
import { markSection } from '../../shared-core/marking/mark-section.ts';
import { reportJson } from '../../shared-core/marking/report-json.ts';
import type { MarkingScheme } from '../../shared-core/marking/types.ts';
import type { NoiseSignature } from '../../shared-core/spectrum/index.ts';
import { matchFiles, writeGrades } from '../../shared-core/tables/index.ts';
import { coreVersion } from '../../shared-core/version.ts';
import { emptyReference, type ReferenceResult } from '../backend/jobs/reference-task.ts';
import { createWorkerPool } from '../backend/jobs/worker-pool.ts';
import { readSectionTables, type SectionTables } from '../backend/section-folder.ts';
import { keepInStore } from './headless-store.ts';
import { readSource } from './read-source.ts';
import { Unusable } from './unusable.ts';

export interface FolderJob {
  readonly folder: string;
  readonly out: string;
  readonly schemeFile: string | null;
  readonly storeFile: string | null;
  readonly workers: number;
  readonly say: (sentence: string) => void;
}

const tableNames = ['submissions.csv', 'submissions.tsv', 'submissions.xlsx'];
const sectionTable = /^(submissions|lines)\.(csv|tsv|xlsx)$/i;
/** Files of a section that are no spectra. */
const notSpectra =
  /^(submissions\.(csv|tsv|xlsx)|lines\.(csv|tsv|xlsx)|scheme\.json|grades\.csv|report\.json|what-was-put-in\.csv|readme(\.\w+)?|\..*|thumbs\.db)$/i;

/** Marks the section in a folder: grades.csv and report.json; what cannot be read costs a sentence and the rest goes on. */
export async function markFolder(job: FolderJob): Promise<void> {
  const section = await sectionOf(job);
  for (const problem of section.problems) job.say(problem);
  const names = await spectraBelow(job.folder, job.out);
  const results = await references(job, names, section.scheme);
  const titles = new Map(results.flatMap((r) => (r.title === null ? [] : [[r.fileName, r.title] as const])));
  const { submissions, files, missing } = matchFiles(names, section.submissions, titles);
  for (const m of missing)
    job.say(
      `${m.student}: the table names the spectrum “${m.wanted}”, but one such file is not in the folder.`,
    );
  for (const f of files)
    if (f.state !== 'matched')
      job.say(
        `${f.fileName}: ${f.state === 'ambiguous' ? `may belong to ${f.candidates.join(' or ')}` : f.reason}.`,
      );
  const byFile = new Map(results.map((r) => [r.fileName, r.reference]));
  const steps = new Map(results.map((r) => [r.fileName, r.stepPerCm]));
  const signatures = new Map(
    results.flatMap((r): [string, NoiseSignature][] =>
      r.signature === null ? [] : [[r.fileName, r.signature]],
    ),
  );
  const marked = markSection(submissions, byFile, section.scheme, {
    stepPerCmOf: (file) => steps.get(file) ?? null,
    repeatedSpectra: findRepeatedSpectra(signatures),
  });
  await write(job, section.scheme, marked);
  if (job.storeFile !== null) {
    const tables = (await readdir(job.folder)).filter((e) => sectionTable.test(e));
    await keepInStore({
      storeFile: job.storeFile,
      title: basename(resolve(job.folder)),
      files: [...tables, ...names].map((name) => ({ name, path: join(job.folder, name) })),
      scheme: section.scheme,
      workers: job.workers,
      say: job.say,
    });
  }
  const open = marked.submissions.filter((s) => s.open > 0).length;
  job.say(
    `Marked ${marked.submissions.length} submissions; ${open} with open values. grades.csv and report.json are in ${job.out}.`,
  );
}

async function sectionOf(job: FolderJob): Promise<SectionTables> {
  const isFolder = await stat(job.folder).then(
    (s) => s.isDirectory(),
    () => false,
  );
  if (!isFolder) throw new Unusable(`${job.folder} is no folder that can be read.`);
  const entries = await readdir(job.folder);
  const tables = entries.filter((e) => tableNames.includes(e.toLowerCase()));
  if (tables.length === 0)
    throw new Unusable(`${job.folder} holds no submissions.csv (or .tsv, .xlsx): one row per submission.`);
  if (tables.length > 1)
    throw new Unusable(`${job.folder} holds ${tables.join(' and ')}: leave one of them.`);
  const named = async (name: string): Promise<{ name: string; bytes: Uint8Array }> => {
    const read = await readSource(join(job.folder, name), name);
    if (!read.ok) throw new Unusable(read.reason);
    return read.file;
  };
  const lines = entries.find((e) => /^lines\.(csv|tsv|xlsx)$/i.test(e));
  const scheme = job.schemeFile === null ? entries.find((e) => e.toLowerCase() === 'scheme.json') : undefined;
  const given = job.schemeFile === null ? null : await schemeFileOf(job.schemeFile);
  const outcome = await readSectionTables({
    submissions: await named(tables[0]!),
    lines: lines === undefined ? null : await named(lines),
    scheme: given ?? (scheme === undefined ? null : await named(scheme)),
  });
  if (!outcome.ok) throw new Unusable(outcome.reason);
  return outcome.section;
}

async function schemeFileOf(path: string): Promise<{ name: string; bytes: Uint8Array }> {
  try {
    return { name: path, bytes: new Uint8Array(await readFile(path)) };
  } catch {
    throw new Unusable(`${path}: the scheme cannot be read.`);
  }
}

/** Files below the folder that may be spectra, with "/" between folders, in a fixed order. */
async function spectraBelow(folder: string, out: string): Promise<string[]> {
  const entries = await readdir(folder, { recursive: true, withFileTypes: true });
  const outside = relative(folder, out);
  return entries
    .filter((e) => e.isFile() && !notSpectra.test(e.name))
    .map((e) => relative(folder, join(e.parentPath, e.name)).split(sep).join('/'))
    .filter(
      (name) =>
        !name.split('/').some((part) => part.startsWith('.')) &&
        (outside === '' || !name.startsWith(`${outside.split(sep).join('/')}/`)),
    )
    .sort();
}

/** References of all files, by the pool; progress on standard error. */
async function references(
  job: FolderJob,
  names: readonly string[],
  scheme: MarkingScheme,
): Promise<ReferenceResult[]> {
  const pool = createWorkerPool(Math.max(1, Math.min(job.workers, names.length)));
  let done = 0;
  try {
    return await mapInFlight(names, 2 * pool.size, async (name): Promise<ReferenceResult> => {
      const read = await readSource(join(job.folder, name), name);
      const result: ReferenceResult = read.ok
        ? await pool.run({
            file: read.file,
            settings: scheme,
            candidates: null,
            preferred: scheme.isotopologues,
            corrections: [],
            withSignature: true,
          })
        : {
            fileName: name,
            reference: emptyReference(read.code, read.reason),
            signature: null,
            title: null,
            points: null,
            stepPerCm: null,
            unreadable: read.reason,
          };
      done++;
      if (result.unreadable !== null) job.say(result.unreadable);
      job.say(`${done} of ${names.length}: ${name}, ${result.reference.reliability}`);
      return result;
    });
  } finally {
    await pool.close();
  }
}

/** Keeps at most `most` files in memory at a time; results in the order of the items. */
async function mapInFlight<T, R>(
  items: readonly T[],
  most: number,
  work: (item: T) => Promise<R>,
): Promise<R[]> {
  const results = new Array<R>(items.length);
  let next = 0;
  const lane = async (): Promise<void> => {
    while (next < items.length) {
      const i = next++;
      results[i] = await work(items[i]!);
    }
  };
  await Promise.all(Array.from({ length: Math.min(most, items.length) }, lane));
  return results;
}

async function write(
  job: FolderJob,
  scheme: MarkingScheme,
  marked: ReturnType<typeof markSection>,
): Promise<void> {
  const grades = writeGrades(
    marked.submissions.map((m) => ({ marked: m })),
    scheme,
  );
  const report = reportJson(marked.submissions, marked.observations, scheme, coreVersion);
  try {
    await mkdir(job.out, { recursive: true });
    await writeFile(join(job.out, 'grades.csv'), grades);
    await writeFile(join(job.out, 'report.json'), `${JSON.stringify(report, null, 1)}\n`);
  } catch (error) {
    throw new Unusable(
      `${job.out} cannot be written (${(error as NodeJS.ErrnoException).code ?? String(error)}).`,
    );
  }
}
