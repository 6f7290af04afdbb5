import { createHash } from 'node:crypto';
import {
  AppError,
  type IntakeFile,
  type IntakeTable,
  type IntakeView,
} from '../../shared-core/contract/index.ts';
import { parseScheme } from '../../shared-core/marking/parse-scheme.ts';
import { starterScheme, type AskedColumn } from '../../shared-core/marking/starter-scheme.ts';
import type { MarkingScheme, Submission, SubmittedLine } from '../../shared-core/marking/types.ts';
import {
  matchFiles,
  readLines,
  readSubmissions,
  readTable,
  understandTable,
} from '../../shared-core/tables/index.ts';
import type { ColumnRole, FileMatch, RawTable, TableUnderstanding } from '../../shared-core/tables/types.ts';
import type { Context } from './context.ts';
import { readSpreadsheet } from './read-spreadsheet.ts';
import type { StagedFile } from './staging/staging.ts';
import type { CommitRequest } from './store/intakes.ts';

/** What a person set by hand in an intake: roles of columns by header, students of files. */
export interface IntakeChoices {
  readonly columns: Readonly<Record<string, ColumnRole>>;
  readonly matches: Readonly<Record<string, readonly string[]>>;
}

export interface UnderstoodIntake {
  readonly view: IntakeView;
  readonly submissions: readonly Submission[];
  readonly scheme: MarkingScheme | null;
  readonly staged: readonly StagedFile[];
}

interface Tabled {
  readonly file: StagedFile;
  readonly table: RawTable;
  readonly understanding: TableUnderstanding;
}

/** Everything that an intake says so far: files, tables, submissions, matching; nothing of it is kept before it is committed. */
export async function understandIntake(context: Context, intakeId: number): Promise<UnderstoodIntake> {
  const intake = await openIntake(context, intakeId);
  const choices = parseChoices(intake.choices);
  const staged = context.staging.list(intakeId);
  const section = await context.store.call('getSection', { id: intake.sectionId });
  const remembered = {
    ...(JSON.parse(section?.remembered_columns ?? '{}') as IntakeChoices['columns']),
    ...choices.columns,
  };
  const tables = await tablesOf(context, intakeId, staged, remembered);
  const linesRead = tables
    .filter((t) => t.understanding.kind === 'lines')
    .map((t) => ({ t, read: readLines(t.table, t.understanding) }));
  const lines = new Map<string, SubmittedLine[]>();
  for (const { read } of linesRead)
    for (const [student, own] of read.linesByStudent)
      lines.set(student, [...(lines.get(student) ?? []), ...own]);
  const stored = await context.store.call('latestScheme', { sectionId: intake.sectionId });
  const scheme =
    stored === null ? schemeOf(context, intakeId, staged) : (JSON.parse(stored.document) as MarkingScheme);
  const submissionTables = tables.filter(
    (t) => t.understanding.kind === 'submissions-wide' || t.understanding.kind === 'submissions-long',
  );
  const read = submissionTables.map((t) => ({
    t,
    read: readSubmissions(t.table, t.understanding, {
      linesByStudent: lines,
      schemeUnitOf: (key) => scheme?.quantities.find((q) => q.key === key)?.unit ?? null,
    }),
  }));
  const drafts = read.flatMap((r) => r.read.submissions);
  const earlier = await context.store.call('listFiles', { sectionId: intake.sectionId });
  const spectra = staged.filter((f) => f.became === 'spectrum');
  const titles = new Map(spectra.map((f) => [f.name, f.text]));
  const matched = matchFiles(
    spectra.map((f) => f.name),
    drafts,
    titles,
  );
  const { submissions, matches } = byHand(matched.submissions, matched.files, choices);
  const repeated = await context.store.call('whichAreKnown', {
    sectionId: intake.sectionId,
    submissions,
  });
  const known = new Set(earlier.map((f) => `${f.name}\u0000${f.sha256}`));
  const problems = new Map([
    ...read.map((r) => [r.t, r.read.problems] as const),
    ...linesRead.map((l) => [l.t, l.read.problems] as const),
  ]);
  const view: IntakeView = {
    intakeId,
    sectionId: intake.sectionId,
    files: staged.map((f): IntakeFile => ({
      name: f.name,
      bytes: f.bytes,
      sha256: f.sha256,
      became: f.became,
      text: f.text,
      points: f.points,
      ordinate: f.ordinate,
      known: known.has(`${f.name}\u0000${f.sha256}`),
    })),
    tables: tables.map((t): IntakeTable => ({
      fileName: t.file.name,
      kind: t.understanding.kind,
      reason: t.understanding.reason,
      columns: t.understanding.columns,
      rows: t.table.rows.length - t.understanding.headerRow - 1,
      problems: (problems.get(t) ?? []).map((p) => p.text),
    })),
    matches,
    submissions: submissions.map((s, i) => ({
      student: s.student,
      name: s.name,
      attempt: s.attempt,
      isotopologue: s.isotopologue,
      spectra: s.spectra,
      values: s.values.filter((v) => v.value !== null).length,
      isNew: repeated[i] !== true,
    })),
    missing: matched.missing
      .filter((m) => !submissions.some((s) => s.student === m.student && s.spectra.length > 0))
      .map(({ student, wanted }) => ({ student, wanted })),
    hasScheme: scheme !== null,
    blockers: blockersOf(staged, tables, submissions),
  };
  return { view, submissions, scheme: scheme ?? starterFor(tables, submissions), staged };
}

/** The request with which the store takes an understood intake in, whole. */
export function commitRequest(context: Context, understood: UnderstoodIntake): CommitRequest {
  const { view, staged } = understood;
  const record = {
    files: view.files,
    tables: view.tables.map(({ fileName, kind, problems }) => ({ fileName, kind, problems })),
    matches: view.matches,
  };
  return {
    intakeId: view.intakeId,
    at: context.now(),
    files: staged
      .filter((f) => f.became !== 'left out')
      .map((f) => ({
        name: f.name,
        kind:
          f.became === 'spectrum'
            ? ('spectrum' as const)
            : f.became === 'scheme'
              ? ('other' as const)
              : ('table' as const),
        sha256: f.sha256,
        title: f.became === 'spectrum' ? f.text : null,
        bytes: context.staging.read(view.intakeId, f),
      })),
    submissions: understood.submissions,
    scheme: understood.scheme === null ? null : JSON.stringify(understood.scheme),
    record: JSON.stringify(record),
  };
}

export async function openIntake(
  context: Context,
  intakeId: number,
): Promise<{ sectionId: number; choices: string }> {
  const intake = await context.store.call('getIntake', { id: intakeId });
  if (intake === null)
    throw new AppError('not-found', 'This intake does not exist (any more); begin a new one.');
  if (intake.state !== 'open')
    throw new AppError('conflict', `This intake was ${intake.state} already; begin a new one.`);
  return { sectionId: intake.section_id, choices: intake.choices };
}

export function parseChoices(text: string): IntakeChoices {
  const choices = JSON.parse(text) as Partial<IntakeChoices>;
  return { columns: choices.columns ?? {}, matches: choices.matches ?? {} };
}

async function tablesOf(
  context: Context,
  intakeId: number,
  staged: readonly StagedFile[],
  remembered: IntakeChoices['columns'],
): Promise<Tabled[]> {
  const files = staged.filter(
    (f) => f.became === 'table of submissions' || f.became === 'table of lines' || f.became === 'roster',
  );
  const read = await Promise.all(
    files.map(async (file) => {
      const outcome = await readTable(context.staging.read(intakeId, file), file.name, readSpreadsheet);
      if (!outcome.ok) return [];
      const understood = outcome.tables.map((table) => ({
        file,
        table,
        understanding: understandTable(table, { remembered }),
      }));
      const usable = understood.filter((t) => t.understanding.kind !== 'unknown');
      return (usable.length > 0 ? usable : understood).slice(0, 1);
    }),
  );
  return read.flat();
}

function schemeOf(context: Context, intakeId: number, staged: readonly StagedFile[]): MarkingScheme | null {
  const file = staged.find((f) => f.became === 'scheme');
  if (file === undefined) return null;
  const parsed = parseScheme(JSON.parse(new TextDecoder().decode(context.staging.read(intakeId, file))));
  return parsed.ok ? parsed.scheme : null;
}

/** Matches that a person set go before those that were found. */
function byHand(
  submissions: readonly Submission[],
  files: readonly FileMatch[],
  choices: IntakeChoices,
): { submissions: Submission[]; matches: FileMatch[] } {
  const matches = files.map((f): FileMatch => {
    const students = choices.matches[f.fileName];
    if (students === undefined) return f;
    return {
      ...f,
      student: students[0] ?? null,
      attempt: null,
      state: students.length > 0 ? 'matched' : 'left-over',
      reason: 'set by hand',
      candidates: students,
    };
  });
  const changed = submissions.map((s): Submission => {
    const kept = s.spectra.filter((name) => choices.matches[name] === undefined);
    const added = Object.entries(choices.matches).flatMap(([name, students]) =>
      students.includes(s.student) ? [name] : [],
    );
    return { ...s, spectra: [...kept, ...added] };
  });
  return { submissions: changed, matches };
}

function blockersOf(
  staged: readonly StagedFile[],
  tables: readonly Tabled[],
  submissions: readonly Submission[],
): string[] {
  if (staged.length === 0) return ['Nothing has been brought in yet.'];
  const blockers: string[] = [];
  for (const t of tables) {
    const unclear = t.understanding.columns.filter((c) => c.ambiguous);
    if (unclear.length > 0 && t.understanding.kind.startsWith('submissions')) {
      blockers.push(
        `${t.file.name}: say what ${unclear.map((c) => `“${c.header}”`).join(', ')} ${unclear.length > 1 ? 'are' : 'is'}.`,
      );
    }
  }
  if (submissions.length === 0 && !staged.some((f) => f.became === 'spectrum'))
    blockers.push('No table of submissions and no spectrum is among the files.');
  return blockers;
}

function starterFor(tables: readonly Tabled[], submissions: readonly Submission[]): MarkingScheme | null {
  const columns = tables.flatMap((t) =>
    t.understanding.columns.flatMap((c): AskedColumn[] =>
      c.role.role === 'quantity'
        ? [{ key: c.role.quantity, unit: c.role.unit, isotopologue: c.role.isotopologue }]
        : [],
    ),
  );
  const long = submissions.flatMap((s) =>
    s.values.map((v): AskedColumn => ({ key: v.quantity, unit: null, isotopologue: v.isotopologue })),
  );
  const asked = columns.length > 0 ? columns : long;
  if (asked.length === 0) return null;
  const named = [
    ...submissions.map((s) => s.isotopologue),
    ...submissions.flatMap((s) => s.values.map((v) => v.isotopologue)),
  ];
  const isotopologues = [...new Set(named.filter((n) => n !== null))];
  return starterScheme(asked, isotopologues.length > 0 ? isotopologues : ['H35Cl']);
}

/** SHA-256 of a text, hexadecimal. */
export function sha256(text: string): string {
  return createHash('sha256').update(text).digest('hex');
}
