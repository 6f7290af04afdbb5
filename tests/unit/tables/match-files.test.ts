import { describe, expect, it } from 'vitest';
import type { Submission } from '../../../shared-core/marking/types.ts';
import { matchFiles } from '../../../shared-core/tables/index.ts';

const submission = (student: string, spectra: string[] = [], attempt = 1): Submission => ({
  student, name: null, group: null, attempt, received: null, isotopologue: 'H35Cl', spectra, values: [], lines: [], lineCount: null,
}); // prettier-ignore

describe('files and the submissions they belong to', () => {
  it('are matched by the file column: other case, folders, no extension, several files', () => {
    const files = ['week1/A_HCl.JDX', 'week1/b.csv', 'week2/c.dx'];
    const { submissions, files: list } = matchFiles(files, [
      submission('S1', ['a_hcl.jdx', 'B']),
      submission('S2', ['raw\\c']),
    ]);
    expect(submissions.map((s) => s.spectra)).toEqual([['week1/A_HCl.JDX', 'week1/b.csv'], ['week2/c.dx']]);
    expect(list.map((f) => f.state)).toEqual(['matched', 'matched', 'matched']);
  });

  it('are matched by the key at the edge of a word: S1 is not in S10', () => {
    const { submissions, files } = matchFiles(
      ['S10_hcl.jdx', 'hcl-s1.jdx', 'background.jdx'],
      [submission('S1'), submission('S10')],
    );
    expect(submissions.map((s) => s.spectra)).toEqual([['hcl-s1.jdx'], ['S10_hcl.jdx']]);
    expect(files.map((f) => f.state)).toEqual(['matched', 'matched', 'left-over']);
  });

  it('are matched by a title where no name helps', () => {
    const { submissions, files } = matchFiles(
      ['0001.jdx'],
      [submission('S4')],
      new Map([['0001.jdx', 'HCl, bench 2, S4']]),
    );
    expect(submissions[0]!.spectra).toEqual(['0001.jdx']);
    expect(files[0]!.reason).toMatch(/title/);
  });

  it('are ambiguous where a name fits two students, or one name of the table fits two files', () => {
    const two = matchFiles(['S1_S2.jdx'], [submission('S1'), submission('S2')]);
    expect(two.files[0]).toMatchObject({ state: 'ambiguous', candidates: ['S1', 'S2'] });
    const folders = matchFiles(['mon/x.jdx', 'tue/x.jdx'], [submission('S1', ['x.jdx'])]);
    expect(folders.files.map((f) => f.state)).toEqual(['ambiguous', 'ambiguous']);
    expect(folders.missing).toEqual([{ student: 'S1', attempt: 1, wanted: 'x.jdx' }]);
    expect(folders.submissions[0]!.spectra).toEqual([]);
  });

  it('may be shared by a pair that the table names', () => {
    const { files } = matchFiles(['p.jdx'], [submission('S1', ['p.jdx']), submission('S2', ['p.jdx'])]);
    expect(files[0]).toMatchObject({ state: 'matched', reason: 'named in the table by 2 students' });
  });
});
