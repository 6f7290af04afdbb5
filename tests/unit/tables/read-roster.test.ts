import { describe, expect, it } from 'vitest';
import { readRoster, readTextTable, understandTable } from '../../../shared-core/tables/index.ts';

function roster(text: string) {
  const read = readTextTable(text, 'roster.csv');
  if (!read.ok) throw new Error(read.reason);
  const understood = understandTable(read.tables[0]!);
  return { kind: understood.kind, ...readRoster(read.tables[0]!, understood) };
}

describe('a roster', () => {
  it('has keys, names and groups; a key twice is told', () => {
    const { kind, people, problems } = roster(
      'Student ID,First name,Last name,Lab group\nS1,Ida,Lund,3\nS2,Tom,Weiss,3\nS1,Ida,Lund,4\n',
    );
    expect(kind).toBe('roster');
    expect(people).toEqual([
      { student: 'S1', name: 'Ida Lund', group: '3' },
      { student: 'S2', name: 'Tom Weiss', group: '3' },
    ]);
    expect(problems.map((p) => p.row)).toEqual([4]);
  });

  it('has pairs in one cell, or by partners that name each other', () => {
    const pair = roster('student;name\n"S1; S2";Ida & Tom\nS3;Eva\n');
    expect(pair.people.map((p) => [p.student, p.name, p.group])).toEqual([
      ['S1', 'Ida', 'S1 + S2'],
      ['S2', 'Tom', 'S1 + S2'],
      ['S3', 'Eva', null],
    ]);
    const partners = roster('student,name,lab partner\nS1,Ida,S2\nS2,Tom,S1\nS3,Eva,\n');
    expect(partners.people.map((p) => p.group)).toEqual(['S1 + S2', 'S1 + S2', null]);
  });
});
