import type { FileStyleName } from './file-writer.ts';
import type { SlipCode } from './student-slips.ts';

/** One submission of the invented section, before anything is drawn. */
export interface PlannedSubmission {
  readonly student: string;
  readonly group: string | null;
  readonly isotopologue: 'H35Cl' | 'D35Cl';
  /** Submissions with the same key share one file. */
  readonly file: string;
  readonly style: FileStyleName;
  readonly slips: readonly SlipCode[];
  /** True where the student also hands in the table of lines. */
  readonly givesLines: boolean;
}

const numbered = (n: number): string => `S${4100 + n}`;

/** 24 submissions: six pairs that share a file, a mixed cell handed in for both gases, a dozen slips, the rest honest. */
export function sectionPlan(): readonly PlannedSubmission[] {
  const rows: readonly [string | null, 'H' | 'D', string, FileStyleName, readonly SlipCode[], boolean][] = [
    ['G1', 'H', 'hcl-1', 'jcamp-affn', [], true],
    ['G1', 'H', 'hcl-1', 'jcamp-affn', ['b0-as-be'], false],
    ['G2', 'H', 'hcl-2', 'csv-header', [], false],
    ['G2', 'H', 'hcl-2', 'csv-header', [], true],
    [null, 'H', 'hcl-3', 'csv-decimal-comma', ['numbering-all-shift'], true],
    [null, 'H', 'hcl-4', 'tab-percent', ['mass-integer'], false],
    [null, 'D', 'dcl-1', 'jcamp-difdup', [], false],
    [null, 'D', 'dcl-2', 'blanks-bare', ['k-no-two-pi'], false],
    ['G3', 'D', 'dcl-3', 'csv-trailing-rounded', [], false],
    ['G3', 'D', 'dcl-3', 'csv-trailing-rounded', ['value-from-literature'], false],
    [null, 'D', 'dcl-4', 'tab-utf16', ['alpha-sign'], true],
    [null, 'H', 'hcl-5', 'jcamp-xypoints', [], false],
    [null, 'H', 'hcl-6', 'jcamp-squeezed', ['isotope-heavy-lines'], true],
    ['G4', 'H', 'hcl-7', 'jcamp-packed', [], false],
    ['G4', 'H', 'hcl-7', 'jcamp-packed', ['origin-line'], false],
    [null, 'D', 'dcl-5', 'csv-header', [], true],
    [null, 'D', 'dcl-6', 'csv-decimal-comma', ['bbar-as-be'], false],
    ['G5', 'D', 'mixed-1', 'csv-trailing-rounded', [], false],
    ['G5', 'H', 'mixed-1', 'csv-trailing-rounded', [], false],
    [null, 'H', 'hcl-8', 'tab-percent', ['distortion-left-out'], true],
    [null, 'H', 'hcl-9', 'jcamp-difdup', ['digits-swapped'], false],
    ['G6', 'H', 'hcl-10', 'blanks-bare', [], false],
    ['G6', 'H', 'hcl-10', 'blanks-bare', [], false],
    [null, 'H', 'hcl-11', 'csv-header', ['r-root-missed'], false],
  ];
  return rows.map(([group, gas, file, style, slips, givesLines], index) => ({
    student: numbered(index + 1),
    group,
    isotopologue: gas === 'H' ? 'H35Cl' : 'D35Cl',
    file,
    style,
    slips,
    givesLines,
  }));
}

/** Marking scheme of the section: cubic in m, isotopic masses, r from Be, k from the band origin. */
export const sectionScheme = {
  version: 1,
  title: 'Invented section: hydrogen chloride and deuterium chloride',
  isotopologues: ['H35Cl', 'D35Cl'],
  masses: 'isotopic',
  methods: [{ fit: 'polynomial', degree: 3, distortion: 'tied' }],
  lines: { rule: 'any' },
  bondLengthFrom: 'Be',
  forceConstantFrom: 'nu0',
  anharmonicityFrom: null,
  anharmonicityPerCm: null,
  quantities: [
    { key: 'nu0', unit: 'cm-1', full: { absolute: 0.5 }, part: { absolute: 1.5 }, points: 1, leastFigures: 5, tellApart: [] },
    { key: 'Be', unit: 'cm-1', full: { relative: 0.003 }, part: { relative: 0.009 }, points: 2, leastFigures: 4, tellApart: ['b0-as-be'] },
    { key: 'alphaE', unit: 'cm-1', full: { relative: 0.03 }, part: { relative: 0.08 }, points: 2, leastFigures: 3, tellApart: [] },
    { key: 'D', unit: 'cm-1', full: { relative: 0.15 }, part: { relative: 0.4 }, points: 1, leastFigures: 1, tellApart: [] },
    { key: 're', unit: 'pm', full: { relative: 0.002 }, part: { relative: 0.005 }, points: 2, leastFigures: 4, tellApart: ['r0-as-re'] },
    { key: 'k', unit: 'N/m', full: { relative: 0.005 }, part: { relative: 0.02 }, points: 2, leastFigures: 3, tellApart: [] },
  ],
  handItems: [{ title: 'Discussion', points: 5 }],
  readingErrorPerCm: null,
  carryForward: true,
  oncePerCause: true,
  attempts: 'latest',
  due: '2026-03-20T17:00:00+01:00',
  lateness: null,
} as const; // prettier-ignore

/** What each slip of the section means, in words, for the list of what was put in. */
export const slipWords: Readonly<Partial<Record<SlipCode, string>>> = {
  'b0-as-be': 'B_0 given as Be, and re computed from it',
  'numbering-all-shift': 'every line numbered one too high or too low',
  'mass-integer': 'mass numbers used in place of masses',
  'k-no-two-pi': 'the factor 4 pi squared lost in k',
  'value-from-literature': 'handbook digits given in place of the own fit',
  'alpha-sign': 'alphaE with the wrong sign',
  'isotope-heavy-lines': 'all lines read from the 37Cl partner',
  'origin-line': 'a line given as band origin',
  'bbar-as-be': 'half the mean spacing given as Be',
  'distortion-left-out': 'quadratic fitted where the cubic is prescribed',
  'digits-swapped': 'two digits exchanged in one value',
  'r-root-missed': 'square of the bond length given',
};
