import type { SubmittedLine } from '../marking/types.ts';
import { isotopologue as isotopologueNamed, isotopologuesOf } from '../molecule/index.ts';
import { readNumber } from '../units/index.ts';
import type { ColumnRole, RawTable, ReadLinesResult, TableUnderstanding } from './types.ts';

/**
 * Lines that students handed in: m, or branch and J (R: m = J + 1, P: m = −J), with the wavenumber in cm-1.
 *
 * @returns lines by student key; rows that cannot be used are told, with their number in the file.
 */
export function readLines(table: RawTable, understanding: TableUnderstanding): ReadLinesResult {
  const linesByStudent = new Map<string, SubmittedLine[]>();
  const problems: { row: number; text: string }[] = [];
  table.rows.forEach((cells, i) => {
    if (i <= understanding.headerRow || cells.every((c) => c.text === '')) return;
    const text = (role: ColumnRole['role']): string => {
      const column = understanding.columns.find((c) => c.role.role === role);
      return column === undefined ? '' : (cells[column.index]?.text ?? '');
    };
    const row = i + 1;
    const student = text('student') || text('name');
    const m = indexOf(text);
    const position = readNumber(text('wavenumber'), { expected: [300, 12000] });
    if (student === '') problems.push({ row, text: `Row ${row} of the lines has no student key.` });
    else if (m === null)
      problems.push({ row, text: `Row ${row} of the lines has no usable m, or branch and J.` });
    else if (position.state !== 'number')
      problems.push({ row, text: `Row ${row} of the lines has no wavenumber.` });
    else {
      const gas = text('isotopologue');
      const name = isotopologueNamed(gas)?.name ?? isotopologuesOf(gas)[0]?.name ?? null;
      const list = linesByStudent.get(student) ?? [];
      list.push({ isotopologue: name, m, wavenumberPerCm: position.number.value });
      linesByStudent.set(student, list);
    }
  });
  return { linesByStudent, problems };
}

/** m as given (0 stays: a student may have numbered so), else from branch and J. */
function indexOf(text: (role: ColumnRole['role']) => string): number | null {
  const whole = (t: string): number | null => (/^[+-−]?\d+$/.test(t) ? Number(t.replace('−', '-')) : null);
  const m = whole(text('m'));
  if (m !== null) return m;
  const j = whole(text('J').replace(/^[RP]\((\d+)\)$/i, '$1'));
  const branch = (text('branch') || text('J')).trim().charAt(0).toUpperCase();
  if (j === null || j < 0) return null;
  if (branch === 'R') return j + 1;
  return branch === 'P' ? -j : null;
}
