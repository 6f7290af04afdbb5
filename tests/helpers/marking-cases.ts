// File references and submissions for the tests of marking, from term values; nothing here fits anything.
import type { AssignedLine } from '../../shared-core/assignment/types.ts';
import type { MarkingScheme, Submission, SubmittedValue } from '../../shared-core/marking/types.ts';
import { unitOf } from '../../shared-core/reference/methods/constants-by-method.ts';
import type { Constants, FileReference, Reliability } from '../../shared-core/reference/types.ts';
import type { QuantityKey } from '../../shared-core/units/types.ts';
import { hydrogenChloride, wavenumberOf, type BandForTests } from './term-value-lines.ts';

const massRatio = Math.sqrt(0.9795925 / 0.9810776);

/** H37Cl from H35Cl by mass scaling, about. */
export const heavyHydrogenChloride: BandForTests = {
  origin: hydrogenChloride.origin - 2.1,
  bLower: hydrogenChloride.bLower * massRatio ** 2,
  bUpper: hydrogenChloride.bUpper * massRatio ** 2,
  dLower: hydrogenChloride.dLower * massRatio ** 4,
  dUpper: hydrogenChloride.dUpper * massRatio ** 4,
};

function assigned(isotopologue: string, band: BandForTests, bandName: string, m: number): AssignedLine {
  const branch = m > 0 ? 'R' : 'P';
  const jLower = m > 0 ? m - 1 : -m;
  return {
    id: `${isotopologue}/${bandName}/${branch}/${jLower}`,
    isotopologue,
    band: bandName,
    branch,
    jLower,
    m,
    wavenumberPerCm: wavenumberOf(band, m),
    uncertaintyPerCm: 0.001,
    peakAbsorbance: 0.5,
    saturated: false,
    blended: false,
    used: true,
    leftOutBecause: null,
    residualPerCm: 0,
  };
}

export interface BandOfFile {
  readonly isotopologue: string;
  readonly band: BandForTests;
  readonly name?: string;
  readonly reliability?: Reliability;
}

/** A reference as if it had been made from a file that shows these bands. */
export function referenceOf(bands: readonly BandOfFile[], linesASide = 10): FileReference {
  const names = [...new Set(bands.map((b) => b.isotopologue))];
  const per = <T>(f: (name: string) => T): Record<string, T> =>
    Object.fromEntries(names.map((n) => [n, f(n)]));
  const main = bands[0]!;
  const constants = (band: BandForTests): Constants => ({
    nu0: { value: band.origin, uncertainty: 1e-3, unit: 'cm-1' },
    B0: { value: band.bLower, uncertainty: 1e-4, unit: 'cm-1' },
  });
  const ms = Array.from({ length: linesASide }, (_, i) => i + 1).flatMap((m) => [-m, m]);
  return {
    reliability: main.reliability ?? 'sound',
    reasons: main.reliability === 'none' ? [{ code: 'few-lines', text: 'Too few lines.' }] : [],
    checks: [],
    axisScalePpm: 0,
    ordinate: 'absorbance',
    ordinateReason: 'for tests',
    isotopologue: main.isotopologue,
    best: constants(main.band),
    isotopologues: per((n) => constants(bands.find((b) => b.isotopologue === n)!.band)),
    isotopologueReliability: per((n) => bands.find((b) => b.isotopologue === n)!.reliability ?? 'sound'),
    isotopologueReasons: per(() => []),
    isotopologueChecks: per(() => []),
    runnerUp: null,
    lines: bands.flatMap((b) => ms.map((m) => assigned(b.isotopologue, b.band, b.name ?? '1-0', m))),
    model: 'for tests',
    notes: [],
    coreVersion: 'test',
  };
}

/** H35Cl and H37Cl in one file. */
export const hydrogenChlorideFile = referenceOf([
  { isotopologue: 'H35Cl', band: hydrogenChloride },
  { isotopologue: 'H37Cl', band: heavyHydrogenChloride },
]);

/** A value as it would come out of a table, in the standard unit. */
export function submitted(
  quantity: QuantityKey,
  text: string,
  isotopologue: string | null = null,
): SubmittedValue {
  const [mantissa = '', exponent = '0'] = text.split('e');
  const digits = mantissa.replace(/[-.]/g, '').replace(/^0+/, '');
  const decimals = mantissa.includes('.') ? mantissa.length - mantissa.indexOf('.') - 1 : 0;
  const unit = unitOf(quantity);
  return {
    isotopologue,
    quantity,
    text,
    value: Number(text),
    uncertainty: null,
    figures: digits.length,
    halfLastDigit: 0.5 * 10 ** (Number(exponent) - decimals),
    unit,
    standardUnit: unit,
    unreadableBecause: null,
  };
}

export function submissionOf(
  texts: Readonly<Partial<Record<QuantityKey, string>>>,
  more: Partial<Submission> = {},
): Submission {
  return {
    student: 'S1',
    name: null,
    group: null,
    attempt: 1,
    received: null,
    isotopologue: 'H35Cl',
    spectra: ['a.csv'],
    values: (Object.entries(texts) as [QuantityKey, string][]).map(([key, text]) => submitted(key, text)),
    lines: [],
    lineCount: null,
    ...more,
  };
}

const partTolerance: Partial<Record<QuantityKey, number>> = {
  D: 0.4,
  alphaE: 0.08,
  re: 0.005,
  r0: 0.005,
  k: 0.02,
};

function fullTolerance(key: QuantityKey): MarkingScheme['quantities'][number]['full'] {
  const relative: Partial<Record<QuantityKey, number>> = {
    D: 0.15,
    alphaE: 0.03,
    re: 0.002,
    r0: 0.002,
    k: 0.005,
  };
  return key === 'nu0' ? { absolute: 0.5 } : { relative: relative[key] ?? 0.003 };
}

/** A scheme for H35Cl by a cubic; every quantity one point. */
export function schemeFor(keys: readonly QuantityKey[], more: Partial<MarkingScheme> = {}): MarkingScheme {
  return {
    version: 1,
    title: 'test',
    isotopologues: ['H35Cl'],
    masses: 'isotopic',
    methods: [{ fit: 'polynomial', degree: 3, distortion: 'tied' }],
    lines: { rule: 'any' },
    bondLengthFrom: 'Be',
    forceConstantFrom: 'nu0',
    anharmonicityFrom: null,
    anharmonicityPerCm: null,
    quantities: keys.map((key) => ({
      key,
      unit: unitOf(key),
      full: fullTolerance(key),
      part: key === 'nu0' ? { absolute: 1.5 } : { relative: partTolerance[key] ?? 0.007 },
      points: 1,
      leastFigures: key === 'D' ? 1 : key === 'alphaE' ? 2 : 4,
      tellApart: [],
    })),
    handItems: [],
    readingErrorPerCm: null,
    carryForward: true,
    oncePerCause: true,
    attempts: 'latest',
    due: null,
    lateness: null,
    ...more,
  };
}
