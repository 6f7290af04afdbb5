import { parseScheme } from '../../shared-core/marking/parse-scheme.ts';
import { starterScheme, type AskedColumn } from '../../shared-core/marking/starter-scheme.ts';
import type { MarkingScheme, Submission, SubmittedLine } from '../../shared-core/marking/types.ts';
import { readLines, readSubmissions, readTable, understandTable } from '../../shared-core/tables/index.ts';
import type { RawTable, TableUnderstanding } from '../../shared-core/tables/types.ts';
import { quantities } from '../../shared-core/units/index.ts';
import { readSpreadsheet } from './read-spreadsheet.ts';

/** The tables of a section, understood; `problems` are sentences for the instructor. */
export interface SectionTables {
  readonly submissions: readonly Submission[];
  readonly scheme: MarkingScheme;
  readonly problems: readonly string[];
}

export type SectionTablesOutcome =
  { readonly ok: true; readonly section: SectionTables } | { readonly ok: false; readonly reason: string };

interface NamedBytes {
  readonly name: string;
  readonly bytes: Uint8Array;
}

/**
 * Submissions, lines and scheme of a section from their files.
 *
 * @param files table of submitted values; optionally a table of lines and a scheme. @returns the section, or why it cannot be used.
 */
export async function readSectionTables(files: {
  readonly submissions: NamedBytes;
  readonly lines: NamedBytes | null;
  readonly scheme: NamedBytes | null;
}): Promise<SectionTablesOutcome> {
  const scheme = files.scheme === null ? null : schemeFrom(files.scheme);
  if (scheme !== null && 'reason' in scheme) return { ok: false, reason: scheme.reason };
  const table = await firstTable(files.submissions);
  if (typeof table === 'string') return { ok: false, reason: table };
  const understanding = understandTable(table);
  if (understanding.kind !== 'submissions-wide' && understanding.kind !== 'submissions-long') {
    return {
      ok: false,
      reason: `${files.submissions.name}: ${understanding.reason}; a table of submissions needs a student key and a column for each quantity, such as “Be (cm-1)”.`,
    };
  }
  const problems = ambiguities(files.submissions.name, understanding);
  const lines = await linesFrom(files.lines, problems);
  const read = readSubmissions(table, understanding, {
    linesByStudent: lines,
    schemeUnitOf: (key) => scheme?.quantities.find((q) => q.key === key)?.unit ?? null,
  });
  problems.push(...read.problems.map((p) => `${files.submissions.name}: ${p.text}`));
  if (read.submissions.length === 0)
    return { ok: false, reason: `${files.submissions.name}: no row of it is a submission.` };
  return {
    ok: true,
    section: {
      submissions: read.submissions,
      scheme: scheme ?? starterFor(understanding, read.submissions),
      problems,
    },
  };
}

function schemeFrom(file: NamedBytes): MarkingScheme | { reason: string } {
  let json: unknown;
  try {
    json = JSON.parse(new TextDecoder().decode(file.bytes));
  } catch (error) {
    return {
      reason: `${file.name}: this is no JSON (${error instanceof Error ? error.message : String(error)}).`,
    };
  }
  const parsed = parseScheme(json);
  return parsed.ok ? parsed.scheme : { reason: `${file.name}: ${parsed.problems.join(' ')}` };
}

async function firstTable(file: NamedBytes): Promise<RawTable | string> {
  const read = await readTable(file.bytes, file.name, readSpreadsheet);
  if (!read.ok) return read.reason;
  return read.tables[0] ?? `${file.name}: the file holds no table.`;
}

async function linesFrom(
  file: NamedBytes | null,
  problems: string[],
): Promise<ReadonlyMap<string, readonly SubmittedLine[]>> {
  if (file === null) return new Map();
  const table = await firstTable(file);
  if (typeof table === 'string') {
    problems.push(table);
    return new Map();
  }
  const understanding = understandTable(table);
  if (understanding.kind !== 'lines') {
    problems.push(
      `${file.name}: ${understanding.reason}; a table of lines needs student, m (or branch and J) and wavenumber. It is left out.`,
    );
    return new Map();
  }
  const read = readLines(table, understanding);
  problems.push(...read.problems.map((p) => `${file.name}: ${p.text}`));
  return read.linesByStudent;
}

/** Without a window nobody can be asked: what was taken is said. */
function ambiguities(name: string, understanding: TableUnderstanding): string[] {
  return understanding.columns
    .filter((c) => c.ambiguous)
    .map((c) => {
      const taken = c.role.role === 'quantity' ? quantities[c.role.quantity].symbol : c.role.role;
      return `${name}: column “${c.header}” can be read in more than one way; it is taken as ${taken} (${c.reason}).`;
    });
}

/** Without a scheme: the starter scheme for what the columns ask, for the isotopologues that the rows name. */
function starterFor(understanding: TableUnderstanding, submissions: readonly Submission[]): MarkingScheme {
  const columns = understanding.columns.flatMap((c): AskedColumn[] =>
    c.role.role === 'quantity'
      ? [{ key: c.role.quantity, unit: c.role.unit, isotopologue: c.role.isotopologue }]
      : [],
  );
  const asked =
    columns.length > 0
      ? columns
      : submissions.flatMap((s) =>
          s.values.map((v): AskedColumn => ({ key: v.quantity, unit: null, isotopologue: v.isotopologue })),
        );
  const named = [
    ...submissions.map((s) => s.isotopologue),
    ...submissions.flatMap((s) => s.values.map((v) => v.isotopologue)),
  ];
  const isotopologues = [...new Set(named.filter((n) => n !== null))];
  return starterScheme(asked, isotopologues.length > 0 ? isotopologues : ['H35Cl']);
}
