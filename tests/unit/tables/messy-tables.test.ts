import { existsSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import type { Submission } from '../../../shared-core/marking/types.ts';
import {
  readLines,
  readSubmissions,
  readTable,
  understandTable,
  type RawTable,
  type TableUnderstanding,
} from '../../../shared-core/tables/index.ts';

const utf8 = (text: string): Uint8Array => new TextEncoder().encode(text);

async function open(
  bytes: Uint8Array,
  name = 'table.csv',
): Promise<{ table: RawTable; understood: TableUnderstanding }> {
  const read = await readTable(bytes, name);
  if (!read.ok) throw new Error(read.reason);
  const table = read.tables[0]!;
  return { table, understood: understandTable(table) };
}

/** What a person would have read: student, then "isotopologue quantity value unit". */
const seen = (submissions: readonly Submission[]): string[] =>
  submissions.map(
    (s) =>
      `${s.student}#${s.attempt} ${s.values.map((v) => `${v.isotopologue ?? '?'} ${v.quantity} ${v.value ?? 'null'}`).join(', ')}`,
  );

const asked = (understood: TableUnderstanding): string[] =>
  understood.columns.filter((c) => c.ambiguous).map((c) => c.header);

describe('twelve messy tables', () => {
  it('semicolons and decimal commas in Windows-1252, German headers, a thousands point', async () => {
    const text =
      'Matrikelnummer;Nachname;Vorname;Gruppe;Bandenursprung in cm^-1;Rotationskonstante Be / cm-1;Bindungsl\xe4nge re [pm];Kraftkonstante (N/m)\r\n4711;M\xfcller;Ida;3;2.885,98;10,593;127,46;480,7\r\n4712;Weiss;Tom;3;2886,1;10,59;1,274e2;481\r\n';
    const { table, understood } = await open(Uint8Array.from(text, (c) => c.charCodeAt(0)));
    expect(asked(understood)).toEqual([]);
    const { submissions, problems } = readSubmissions(table, understood);
    expect(problems).toEqual([]);
    expect(seen(submissions)).toEqual([
      '4711#1 ? nu0 2885.98, ? Be 10.593, ? re 127.46, ? k 480.7',
      '4712#1 ? nu0 2886.1, ? Be 10.59, ? re 127.4, ? k 481',
    ]);
    expect([submissions[0]!.name, submissions[0]!.group]).toEqual(['Ida Müller', '3']);
  });

  it('title rows and a blank row above the header, merged gases over it, a row of units below it', async () => {
    const { table, understood } = await open(
      utf8(
        'Lab course 4, week 2,,,,,\nresults as handed in,,,,,\n,,,,,\n,,H35Cl,,D35Cl,\nStudent,Group,B0,re,B0,re\n,,cm-1,pm,cm-1,Å\nS1,A,10.44,127.5,5.392,1.275\nS2,A,10.43,127.6,5.39,1.276\n',
      ),
    );
    expect(asked(understood)).toEqual([]);
    expect(seen(readSubmissions(table, understood).submissions)).toEqual([
      'S1#1 H35Cl B0 10.44, H35Cl re 127.5, D35Cl B0 5.392, D35Cl re 127.5',
      'S2#1 H35Cl B0 10.43, H35Cl re 127.6, D35Cl B0 5.39, D35Cl re 127.6',
    ]);
  });

  it('a form export: whole questions as headers, a row number, an address, a time, points and feedback', async () => {
    const header = [
      'ID', 'Completion time', 'Email', 'What is your student number?',
      'What is your value for the rotational constant Be of H35Cl in cm-1?', 'Points - What is your value for the rotational constant Be of H35Cl in cm-1?',
      'Enter the equilibrium bond length re of H35Cl (in Å), with its uncertainty', 'Upload your raw spectrum file',
    ]; // prettier-ignore
    const rows = [
      header,
      ['1', '2025-11-03T10:00', 'a@b.c', 'S7', '10.59', '1', '1.2746 ± 0.0004', 'S7.jdx'],
      ['2', '2025-11-03T10:05', 'd@e.f', 'S8', '≈10.6', '0', '1.28', 'S8.jdx; S8b.jdx'],
    ];
    const { table, understood } = await open(
      utf8(rows.map((r) => r.map((c) => `"${c}"`).join(',')).join('\r\n')),
    );
    const { submissions } = readSubmissions(table, understood);
    expect(seen(submissions)).toEqual([
      'S7#1 H35Cl Be 10.59, H35Cl re 127.46',
      'S8#1 H35Cl Be 10.6, H35Cl re 128',
    ]);
    expect(submissions[0]!.values[1]!.uncertainty).toBeCloseTo(0.04, 9);
    expect(submissions[1]!.spectra).toEqual(['S8.jdx', 'S8b.jdx']);
    expect(understood.columns[5]!.role.role).toBe('ignore');
    expect(asked(understood)).toEqual([]);
  });

  it('UTF-16 with tabs, French headers, thin spaces, real minus signs and powers of ten', async () => {
    const text =
      '\ufeffNuméro d’étudiant\tConstante de rotation Be (cm⁻¹)\tCouplage vibration-rotation αe (cm⁻¹)\tLongueur de liaison re (m)\tMoment d’inertie (kg m²)\nE1\t10,59\t−0,307\t1,2746 × 10⁻¹⁰\t2,643·10⁻⁴⁷\nE2\t10,6 cm⁻¹\t0,31\t1,27e-10\t2,6e-47\n';
    const units = Uint16Array.from(Array.from({ length: text.length }, (_, i) => text.charCodeAt(i)));
    const { table, understood } = await open(new Uint8Array(units.buffer));
    expect(asked(understood)).toEqual([]);
    expect(seen(readSubmissions(table, understood).submissions)).toEqual([
      'E1#1 ? Be 10.59, ? alphaE -0.307, ? re 127.46, ? I 2.643e-47',
      'E2#1 ? Be 10.6, ? alphaE 0.31, ? re 127, ? I 2.6e-47',
    ]);
  });

  it('uncertainties, literature values and percentages in columns of their own', async () => {
    const { table, understood } = await open(
      utf8(
        'student,Be (cm-1),u(Be),literature Be (cm-1),% error Be,re / pm,±,comment\nS1,10.59,0.02,10.5934,0.03,127.5,0.1,fine\nS2,10.4,0.05,10.5934,1.8,128.9,,\n',
      ),
    );
    const { submissions } = readSubmissions(table, understood);
    expect(seen(submissions)).toEqual(['S1#1 ? Be 10.59, ? re 127.5', 'S2#1 ? Be 10.4, ? re 128.9']);
    expect(submissions[0]!.values.map((v) => v.uncertainty)).toEqual([0.02, 0.1]);
    expect(submissions[1]!.values.map((v) => v.uncertainty)).toEqual([0.05, null]);
    expect(asked(understood)).toEqual([]);
  });

  it('no units at all: the sizes tell lengths and force constants, common practice the wavenumbers', async () => {
    const { table, understood } = await open(
      utf8('id,nu0,Be,alpha_e,re,k\nS1,2886,10.59,0.304,1.275,480\nS2,2885.9,10.6,0.31,1.28,5.1e2\n'),
    );
    expect(asked(understood)).toEqual([]);
    expect(understood.columns[4]!.role).toMatchObject({ quantity: 're', unit: 'Å' });
    expect(seen(readSubmissions(table, understood).submissions)[0]).toBe(
      'S1#1 ? nu0 2886, ? Be 10.59, ? alphaE 0.304, ? re 127.5, ? k 480',
    );
  });

  it('headers that do not say which: B, D_e beside a size, r; asked where the size does not tell', async () => {
    const { table, understood } = await open(
      utf8('student,B (cm-1),D_e (cm-1),r (pm)\nS1,10.44,0.00053,128.4\nS2,10.45,0.00052,128.3\n'),
    );
    expect(asked(understood)).toEqual(['B (cm-1)', 'r (pm)']);
    expect(understood.columns[1]!.alternatives).toMatchObject([{ quantity: 'B0' }]);
    expect(understood.columns[2]!.role).toMatchObject({ quantity: 'D' });
    const remembered = {
      'B (cm-1)': { role: 'quantity', quantity: 'B0', unit: 'cm-1', isotopologue: 'H35Cl' },
    } as const;
    expect(asked(understandTable(table, { remembered }))).toEqual(['r (pm)']);
  });

  it('a long table with quantity, value and unit, blank cells, an unknown quantity and a second value', async () => {
    const { table, understood } = await open(
      utf8(
        'Student,Isotopologue,Quantity,Value,Unit,Uncertainty\nS1,HCl,Be,10.59,cm-1,0.01\nS1,HCl,bond length,1.275,Å,\nS1,HCl,Be,10.7,cm-1,\nS2,DCl,αe,0.11,,\nS2,DCl,colour,blue,,\n\nS2,DCl,force constant,4.9,mdyn/Å,\n',
      ),
    );
    expect(understood.kind).toBe('submissions-long');
    const { submissions, problems } = readSubmissions(table, understood);
    expect(seen(submissions)).toEqual([
      'S1#1 H35Cl Be 10.59, H35Cl re 127.5',
      'S2#1 D35Cl alphaE 0.11, D35Cl k 490',
    ]);
    expect(submissions[0]!.values[0]!.uncertainty).toBe(0.01);
    expect(problems.map((p) => p.row)).toEqual([4, 6]);
  });

  it('ragged rows, a repeated header, a row of means, a row without a key, spreadsheet errors', async () => {
    const { table, understood } = await open(
      utf8(
        'student,Be (cm-1),re (pm),spectrum\nS1,10.59,127.5,S1.jdx,,,\nS2,10.6\nstudent,Be (cm-1),re (pm),spectrum\n,10.5,127,x.jdx\nS3,#DIV/0!,n/a,S3.jdx\nMean,10.595,127.5,\n',
      ),
    );
    const { submissions, problems } = readSubmissions(table, understood);
    expect(seen(submissions)).toEqual([
      'S1#1 ? Be 10.59, ? re 127.5',
      'S2#1 ? Be 10.6, ? re null',
      'S3#1 ? Be null, ? re null',
    ]);
    expect(submissions[2]!.values.map((v) => v.unreadableBecause !== null)).toEqual([true, false]);
    expect(problems.map((p) => p.row)).toEqual([5, 7]);
    expect(asked(understood)).toEqual([]);
  });

  it('two columns for one quantity, and a column of numbers without a header', async () => {
    const { understood } = await open(
      utf8('student,Be (cm-1),Be (GHz),,spectrum\nS1,10.59,317.5,3.7,a.jdx\nS2,10.6,317.8,1.2,b.jdx\n'),
    );
    expect(asked(understood)).toEqual(['Be (cm-1)', 'Be (GHz)', '']);
  });

  it('formulas as typeset: LaTeX headers, factors of ten in the unit, capitals', async () => {
    const { table, understood } = await open(
      utf8(
        'STUDENT ID\t$\\tilde{\\nu}_0$ / CM-1\t$\\alpha_{e}$ / cm$^{-1}$\tD (10^-4 cm-1)\tk / (10² N/m)\t\\omega_e x_e (cm-1)\nS1\t2885.98\t0.304\t5.3\t4.81\t52\nS2\t2886.0\t0.31\t5.2\t4.8\t51.8\n',
      ),
      'pasted.tsv',
    );
    expect(asked(understood)).toEqual([]);
    expect(seen(readSubmissions(table, understood).submissions)[0]).toBe(
      'S1#1 ? nu0 2885.98, ? alphaE 0.304, ? D 0.00053, ? k 481, ? omegaExe 52',
    );
  });

  it('each student with a decimal sign of their own, commas that may be either settled by the row or left unread', async () => {
    const { table, understood } = await open(
      utf8(
        'student\tBe (cm-1)\tB0 (cm-1)\tre (pm)\nS1\t1,234\t1,23\t127,5\nS2\t1,234\t1.23\t127.5\nS3\t1,234\t10\t127\n',
      ),
    );
    const { submissions } = readSubmissions(table, understood);
    expect(submissions.map((s) => s.values[0]!.value)).toEqual([1.234, 1234, null]);
    expect(submissions[2]!.values[0]!.unreadableBecause).toMatch(/comma is unclear/);
  });
});

describe('other tables', () => {
  it('with columns in each other’s place are asked about: no value has a usual size', async () => {
    const rows = ['S1,127.5,10.59', 'S2,127.4,10.6', 'S3,127.1,10.58', 'S4,127.6,10.4'];
    const { understood } = await open(utf8(['student,Be (cm-1),re (pm)', ...rows].join('\n')));
    expect(asked(understood)).toEqual(['re (pm)']);
  });

  it('that know groups only go by the group; a row of bracketed units is no submission', async () => {
    const { table, understood } = await open(
      utf8('Group,Be,re\n(no.),(cm-1),(Å)\nG1,10.59,1.275\nG2,10.6,1.28\n'),
    );
    expect(asked(understood)).toEqual([]);
    expect(seen(readSubmissions(table, understood).submissions)).toEqual([
      'G1#1 ? Be 10.59, ? re 127.5',
      'G2#1 ? Be 10.6, ? re 128',
    ]);
  });

  it('of lines give m from branch and J, and tell rows that cannot be used', async () => {
    const { table, understood } = await open(
      utf8(
        'student;isotopologue;branch;J;wavenumber\nS1;HCl;R;0;2906,25\nS1;HCl;P;1;2865,10\nS1;HCl;Q;1;2886\nS1;D35Cl;;R(3);2140.1\n',
      ),
    );
    expect(understood.kind).toBe('lines');
    const { linesByStudent, problems } = readLines(table, understood);
    expect(linesByStudent.get('S1')).toEqual([
      { isotopologue: 'H35Cl', m: 1, wavenumberPerCm: 2906.25 },
      { isotopologue: 'H35Cl', m: -1, wavenumberPerCm: 2865.1 },
      { isotopologue: 'D35Cl', m: 4, wavenumberPerCm: 2140.1 },
    ]);
    expect(problems.map((p) => p.row)).toEqual([4]);
  });

  const file = new URL('../../../../shared/reference-data/spectra/submissions.csv', import.meta.url);
  it.skipIf(!existsSync(file))('of the measured section are understood without a question', async () => {
    const { table, understood } = await open(readFileSync(file));
    expect(asked(understood)).toEqual([]);
    const { submissions, problems } = readSubmissions(table, understood);
    expect(problems).toEqual([]);
    expect(seen(submissions)[2]).toBe(
      'A03#1 H35Cl nu0 2886.22, H35Cl Be 10.591, H35Cl alphaE 0.3025, H35Cl re 127.47, H35Cl k 12.18',
    );
  });
});
