import type { ColumnRole, RawTable, TableUnderstanding } from './types.ts';

/** A person of the section. */
export interface RosterEntry {
  readonly student: string;
  readonly name: string | null;
  readonly group: string | null;
}

export interface ReadRosterResult {
  readonly people: readonly RosterEntry[];
  readonly problems: readonly { readonly row: number; readonly text: string }[];
}

/**
 * The people of a section with their pairs or groups. Several keys in one cell ("S1; S2") are a group of their own, and so are two who
 * name each other as partners.
 */
export function readRoster(table: RawTable, understanding: TableUnderstanding): ReadRosterResult {
  const people = new Map<string, RosterEntry>();
  const problems: { row: number; text: string }[] = [];
  table.rows.forEach((cells, i) => {
    if (i <= understanding.headerRow || cells.every((c) => c.text === '')) return;
    const texts = (role: ColumnRole['role']): string[] =>
      understanding.columns
        .filter((c) => c.role.role === role)
        .map((c) => cells[c.index]?.text ?? '')
        .filter((t) => t !== '');
    const row = i + 1;
    const keys = (texts('student')[0] ?? texts('name').join(' '))
      .split(/\s*[;&+]\s*/)
      .filter((k) => k !== '');
    if (keys.length === 0) problems.push({ row, text: `Row ${row} of the roster has no student key.` });
    const names = texts('name')
      .join(' ')
      .split(/\s*[;&+]\s*/);
    const group = texts('group')[0] ?? partnerGroup(keys, understanding, (index) => cells[index]?.text ?? '');
    keys.forEach((student, n) => {
      if (people.has(student)) {
        problems.push({ row, text: `Row ${row} of the roster names ${student} again; the first row stays.` });
        return;
      }
      const name = names.length === keys.length ? names[n]! : '';
      people.set(student, { student, name: name === '' ? null : name, group });
    });
  });
  return { people: [...people.values()], problems };
}

/** A group by its members, the same whoever of them is read first; null for a person alone. */
function partnerGroup(
  keys: readonly string[],
  understanding: TableUnderstanding,
  text: (index: number) => string,
): string | null {
  const column = understanding.columns.find((c) => /partner|compa[ñn]er[oa]/i.test(c.header));
  const partners =
    column === undefined
      ? []
      : text(column.index)
          .split(/\s*[;&+]\s*/)
          .filter((k) => k !== '');
  const members = [...new Set([...keys, ...partners])].sort();
  return members.length > 1 ? members.join(' + ') : null;
}
