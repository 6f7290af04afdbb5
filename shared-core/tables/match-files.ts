import type { Submission } from '../marking/types.ts';
import type { FileMatch } from './types.ts';

export interface MatchResult {
  /** Submissions with the spectra that were found for them, by full file name. */
  readonly submissions: readonly Submission[];
  readonly files: readonly FileMatch[];
  /** File names in the table that no file answers to. */
  readonly missing: readonly {
    readonly student: string;
    readonly attempt: number;
    readonly wanted: string;
  }[];
}

const namedInTable = 'named in the table';
const severalOfName = 'several files have the name that the table gives';

const baseOf = (name: string): string => name.slice(name.lastIndexOf('/') + 1).toLowerCase();
const stemOf = (name: string): string => baseOf(name).replace(/\.[a-z0-9]{1,5}$/i, '');
const escaped = (text: string): string => text.replace(/[.*+?^${}()|[\]\\]/g, '\\$&');

/**
 * Which file belongs to which submission: by the file column; else by the student key in the file name, at the edge of a word (S1 is not
 * in S10); else by a title that names the key.
 *
 * @param fileNames spectra, with folders. @param titles title of each spectrum by file name, where it has one.
 */
export function matchFiles(
  fileNames: readonly string[],
  submissions: readonly Submission[],
  titles: ReadonlyMap<string, string> = new Map(),
): MatchResult {
  const missing: { student: string; attempt: number; wanted: string }[] = [];
  const owners = new Map<string, { student: string; attempt: number; reason: string }[]>();
  const claim = (file: string, s: Submission, reason: string): void => {
    owners.set(file, [...(owners.get(file) ?? []), { student: s.student, attempt: s.attempt, reason }]);
  };
  const matched = submissions.map((s): Submission => {
    const found: string[] = [];
    for (const wanted of s.spectra) {
      const hits = byName(fileNames, wanted);
      if (hits.length === 1) {
        found.push(hits[0]!);
        claim(hits[0]!, s, namedInTable);
        continue;
      }
      missing.push({ student: s.student, attempt: s.attempt, wanted });
      // Several files of that name in different folders: a person says which.
      for (const hit of hits) claim(hit, s, severalOfName);
    }
    if (s.spectra.length === 0) {
      for (const [file, reason] of byKey(fileNames, s, titles, submissions)) {
        found.push(file);
        claim(file, s, reason);
      }
    }
    return { ...s, spectra: found };
  });
  const files = fileNames.map((fileName): FileMatch => {
    const own = owners.get(fileName) ?? [];
    const first = own[0];
    if (first === undefined) {
      return {
        fileName,
        student: null,
        attempt: null,
        state: 'left-over',
        reason: 'no submission names it',
        candidates: [],
      };
    }
    const students = [...new Set(own.map((o) => o.student))];
    // A file that the table gives to several students is shared (a pair); one that only its name gives to several is not clear.
    const shared = own.every((o) => o.reason === namedInTable);
    return {
      fileName,
      student: first.student,
      attempt: first.attempt,
      state: (students.length > 1 && !shared) || first.reason === severalOfName ? 'ambiguous' : 'matched',
      reason:
        students.length > 1 && shared ? `named in the table by ${students.length} students` : first.reason,
      candidates: students,
    };
  });
  return { submissions: matched, files, missing };
}

function byName(fileNames: readonly string[], wanted: string): string[] {
  const name = wanted.replaceAll('\\', '/').toLowerCase();
  const whole = fileNames.filter((f) => f.toLowerCase() === name || f.toLowerCase().endsWith(`/${name}`));
  if (whole.length > 0) return whole;
  const base = fileNames.filter((f) => baseOf(f) === baseOf(name));
  if (base.length > 0) return base;
  return fileNames.filter((f) => stemOf(f) === stemOf(name));
}

function byKey(
  fileNames: readonly string[],
  s: Submission,
  titles: ReadonlyMap<string, string>,
  submissions: readonly Submission[],
): [string, string][] {
  const key = new RegExp(`(?<![a-z0-9])${escaped(s.student.toLowerCase())}(?![a-z0-9])`);
  const attempts = submissions.filter(
    (o) => o.student === s.student && o.isotopologue === s.isotopologue,
  ).length;
  const named = fileNames.filter((f) => key.test(f.toLowerCase()));
  const usable =
    attempts > 1
      ? named.filter((f) => new RegExp(`(attempt|a|v|_|-)0*${s.attempt}(?!\\d)`, 'i').test(stemOf(f)))
      : named;
  const chosen = usable.length > 0 ? usable : attempts > 1 ? [] : named;
  if (chosen.length > 0) return chosen.map((f) => [f, `its name holds the key ${s.student}`]);
  const titled = fileNames.filter((f) => key.test((titles.get(f) ?? '').toLowerCase()));
  return titled.map((f) => [f, `its title holds the key ${s.student}`]);
}
