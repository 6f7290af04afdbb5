import { describe, expect, it } from 'vitest';
import { writeGrades } from '../../../shared-core/tables/index.ts';
import { markedRow, twoValues } from '../../helpers/grades-rows.ts';

const done = markedRow({ student: 'S1', name: 'Lund, Ida', points: [['H35Cl', 'Be', 1], ['H35Cl', 're', 0.5]] }); // prettier-ignore
const open = markedRow({ student: 'S2', name: '=1+1', points: [['H35Cl', 'Be', 1], ['H35Cl', 're', null]] }); // prettier-ignore

describe('the grades file', () => {
  it('has a column for every quantity asked; an open value and its total stay empty', () => {
    expect(writeGrades([done, { ...open, comment: '-see me' }], twoValues())).toBe(
      'student,name,group,attempt,Be,re,points,of,open,comment\r\n' +
        'S1,"Lund, Ida",,1,1,0.5,1.5,2,0,\r\n' +
        "S2,'=1+1,,1,1,,,2,1,'-see me\r\n",
    );
  });

  it('takes what a person decided; null keeps a value open', () => {
    const decided = [
      { ...open, decided: { 'H35Cl/re': 0 } },
      { ...done, decided: { 'H35Cl/Be': null } },
    ];
    const rows = writeGrades(decided, twoValues(), { names: false }).split('\r\n');
    expect(rows.slice(1, 3)).toEqual(['S2,,1,1,0,1,2,0,', 'S1,,1,,0.5,,2,1,']);
  });

  it('writes lateness and adjustment into the total alone', () => {
    const rows = writeGrades([{ ...done, lateness: 0.25, adjustment: 0.5 }], twoValues()).split('\r\n');
    expect(rows[1]).toBe('S1,"Lund, Ida",,1,1,0.5,1.75,2,0,');
  });

  it('chooses and orders columns, decimal sign, separator and places; total only', () => {
    const options = { separator: ';', decimalSign: ',', places: 2, columns: ['points', 'student'] } as const;
    expect(writeGrades([done], twoValues(), options)).toBe('points;student\r\n1,50;S1\r\n');
    expect(writeGrades([done], twoValues(), { perValue: false }).split('\r\n')[0]).toBe(
      'student,name,group,attempt,points,of,open,comment',
    );
    expect(writeGrades([done], twoValues(), { decimalSign: ',', columns: ['student', 'points'] })).toBe(
      'student,points\r\nS1,"1,5"\r\n',
    );
  });

  it('names the isotopologue in the columns where a submission has several', () => {
    const both = markedRow({ student: 'S3', name: null, points: [['H35Cl', 'Be', 1], ['D35Cl', 'Be', 0]] }); // prettier-ignore
    const [header, row] = writeGrades([both], twoValues(['H35Cl', 'D35Cl'])).split('\r\n');
    expect(header).toBe('student,name,group,attempt,Be H35Cl,Be D35Cl,points,of,open,comment');
    expect(row).toBe('S3,,,1,1,0,1,2,0,');
  });
});
