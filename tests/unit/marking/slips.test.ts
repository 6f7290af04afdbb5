import { describe, expect, it } from 'vitest';
import { markSubmission } from '../../../shared-core/marking/mark-submission.ts';
import { slipCatalogue } from '../../../shared-core/marking/slips/catalogue.ts';
import type {
  MarkingScheme,
  SlipFinding,
  Submission,
  SubmittedLine,
} from '../../../shared-core/marking/types.ts';
import type { FileReference } from '../../../shared-core/reference/types.ts';
import type { QuantityKey } from '../../../shared-core/units/types.ts';
import {
  hydrogenChlorideFile,
  submitted,
  heavyHydrogenChloride,
  referenceOf,
  schemeFor,
  submissionOf,
} from '../../helpers/marking-cases.ts';
import {
  deuteriumChloride,
  hydrogenChloride,
  hydrogenChlorideOvertone,
  wavenumberOf,
} from '../../helpers/term-value-lines.ts';

/** A cubic on ten lines a side of H35Cl. */
const correct = {
  nu0: 2885.967,
  B0: 10.43996,
  B1: 10.13652,
  Be: 10.59168,
  alphaE: 0.30344,
  D: 5.2492e-4,
  re: 127.4656,
  r0: 128.3885,
  k: 480.7048,
};
const keys = ['nu0', 'B0', 'B1', 'Be', 'alphaE', 'D', 're', 'r0', 'k'] as const;
const { B0, B1, Be, alphaE, D, re, r0, k, nu0 } = correct;
const length = (b: number): number => re * Math.sqrt(Be / b);
const strength = (wavenumber: number): number => k * (wavenumber / nu0) ** 2;

type Numbers = Partial<Record<QuantityKey, number>>;

function written(numbers: Numbers): Partial<Record<QuantityKey, string>> {
  return Object.fromEntries(
    Object.entries(numbers).map(([key, v]) => [
      key,
      v.toPrecision(key === 'D' ? 3 : key === 'nu0' || key.startsWith('B') ? 6 : 5),
    ]),
  );
}

function findings(
  changed: Numbers,
  scheme: MarkingScheme = schemeFor(keys),
  reference: FileReference = hydrogenChlorideFile,
  more: Partial<Submission> = {},
): readonly SlipFinding[] {
  const submission = submissionOf(written({ ...correct, ...changed }), more);
  return markSubmission(submission, [{ file: 'a.csv', reference }], scheme).slips;
}

/** Expected numbers by the formulas of the slip catalogue, written out here a second time. */
const oneStep: readonly (readonly [string, Numbers, readonly string[]])[] = [
  ['bbar-as-be', { Be: Be - alphaE, re: length(Be - alphaE) }, ['be-minus-half-alpha']],
  ['b0-as-be', { Be: Be - alphaE / 2, re: length(B0) }, []],
  ['b1-as-be', { Be: Be - 1.5 * alphaE, re: length(B1) }, []],
  ['r0-as-re', { re: r0 }, []],
  ['alpha-sign', { alphaE: -alphaE }, []],
  ['alpha-sign', { alphaE: -alphaE, Be: Be - 2 * alphaE, re: length(Be - 2 * alphaE) }, []],
  ['alpha-sign', { alphaE: -alphaE, Be: Be - alphaE, re: length(Be - alphaE) }, []],
  ['alpha-sign', { alphaE: -alphaE, Be: Be - 3 * alphaE, re: length(Be - 3 * alphaE) }, []],
  ['alpha-half', { alphaE: alphaE / 2, Be: Be - alphaE / 2, re: length(Be - alphaE / 2) }, []],
  ['alpha-half', { alphaE: alphaE / 2, Be: Be - alphaE / 4, re: length(Be - alphaE / 4) }, []],
  ['alpha-double', { alphaE: 2 * alphaE, Be: Be + alphaE, re: length(Be + alphaE) }, []],
  ['be-minus-half-alpha', { Be: B0 - alphaE / 2, re: length(B0 - alphaE / 2) }, ['bbar-as-be']],
  ['be-plus-alpha', { Be: B0 + alphaE, re: length(B0 + alphaE) }, []],
  [
    'spacing-2b-as-b',
    { B0: 2 * B0, B1: 2 * B1, Be: 2 * Be, alphaE: 2 * alphaE, re: re * 0.7071068, r0: r0 * 0.7071068 },
    [],
  ],
  [
    'spacing-2b-as-4b',
    { B0: B0 / 2, B1: B1 / 2, Be: Be / 2, alphaE: alphaE / 2, re: re * Math.SQRT2, r0: r0 * Math.SQRT2 },
    [],
  ],
  ['bbar-as-b0', { B0: B0 - alphaE / 2, r0: length(B0 - alphaE / 2) }, []],
  ['origin-midpoint', { nu0: nu0 - alphaE, k: strength(nu0 - alphaE) }, []],
  ['origin-line', { nu0: nu0 + 2 * B1, k: strength(nu0 + 2 * B1) }, []],
  ['origin-line', { nu0: nu0 - 2 * B0, k: strength(nu0 - 2 * B0) }, []],
  ['distortion-factor', { D: 4 * D }, []],
  ['distortion-factor', { D: -D }, ['sign-lost']],
  ['k-from-omega', { k: k / 0.931 }, []],
  ['c-in-m', { re: 10 * re, r0: 10 * r0, k: 1e-4 * k }, []],
  ['c-in-cm', { re: 0.1 * re, r0: 0.1 * r0, k: 1e4 * k }, []],
  ['hbar-for-h', { re: 0.398942 * re, r0: 0.398942 * r0 }, []],
  ['h-for-hbar', { re: 2.506628 * re, r0: 2.506628 * r0 }, []],
  ['pi-eight', { re: 1.772454 * re, r0: 1.772454 * r0 }, []],
  ['pi-four', { re: 1.414214 * re, r0: 1.414214 * r0 }, ['mass-half']],
  ['k-no-two-pi', { k: 0.0253303 * k }, []],
  ['k-one-two-pi', { k: 0.1591549 * k }, []],
  ['k-extra-two-pi', { k: 39.47842 * k }, []],
  ['k-pi-unsquared', { k: 0.3183099 * k }, []],
  ['k-not-squared', { k: k / nu0 }, []],
  ['r-root-missed', { re: re ** 2 / 100, r0: r0 ** 2 / 100 }, []],
  ['mass-average', { re: 0.999725 * re, r0: 0.999725 * r0, k: k / 0.999725 ** 2 }, []],
  ['mass-integer', { re: 1.003779 * re, r0: 1.003779 * r0, k: k / 1.003779 ** 2 }, []],
  ['mass-other-isotope', { re: 0.999243 * re, r0: 0.999243 * r0, k: k / 0.999243 ** 2 }, []],
  ['mass-other-isotope', { re: 0.7172 * re, r0: 0.7172 * r0, k: k / 0.7172 ** 2 }, []],
  ['mass-sum', { re: 0.16501 * re, r0: 0.16501 * r0, k: k / 0.16501 ** 2 }, []],
  ['mass-product', { re: 0.166722 * re, r0: 0.166722 * r0, k: k / 0.166722 ** 2 }, []],
  ['mass-inverse', { re: 0.979593 * re, r0: 0.979593 * r0, k: k / 0.979593 ** 2 }, []],
  ['mass-mean', { re: 0.23336 * re, r0: 0.23336 * r0, k: k / 0.23336 ** 2 }, []],
  ['mass-half', { re: 1.414214 * re, r0: 1.414214 * r0, k: k / 2 }, []],
  ['mass-light-atom', { re: 0.98589 * re, r0: 0.98589 * r0, k: k / 0.98589 ** 2 }, []],
  ['mass-grams', { re: 0.0316228 * re, r0: 0.0316228 * r0, k: 1000 * k }, []],
  ['mass-no-avogadro', { re: 1.288632e-12 * re, r0: 1.288632e-12 * r0, k: k / 1.288632e-12 ** 2 }, []],
  ['mass-u-unconverted', { re: 4.075e-14 * re, r0: 4.075e-14 * r0, k: k / 4.075e-14 ** 2 }, []],
  ['unit-r', { re: re / 100, r0: r0 / 100 }, []],
  ['unit-k', { k: 1000 * k }, ['power-of-ten']],
  [
    'unit-b',
    { B0: 29.9792458 * B0, B1: 29.9792458 * B1, Be: 29.9792458 * Be, alphaE: 29.9792458 * alphaE },
    [],
  ],
  ['power-of-ten', { Be: 10 * Be }, []],
  ['sign-lost', { B0: -B0 }, []],
  ['fields-swapped', { B0: B1, B1: B0 }, []],
  ['fields-swapped', { re: r0, r0: re }, []],
];

describe('slips of one step are found from their numbers', () => {
  it.each(oneStep)('%s', (code, changed, rivals) => {
    const found = findings(changed);
    expect([code, ...rivals]).toContain(found[0]?.code);
    expect(found.slice(0, 3).map((f) => f.code)).toContain(code);
  });

  it('names the quantities and shows the arithmetic in numbers', () => {
    const [first] = findings({ Be: B0, re: length(B0) });
    expect(first!.quantities).toEqual(['Be', 're']);
    expect(first!.text).toMatch(/Be: submitted 10\.44, this step gives 10\.4/);
    expect(first!.probability).toBeGreaterThan(0.9);
  });

  it('a slip may attach to values that are within: 37 for 35', () => {
    const submission = submissionOf(
      written({ ...correct, re: 0.999243 * re, r0: 0.999243 * r0, k: k / 0.999243 ** 2 }),
    );
    const marked = markSubmission(
      submission,
      [{ file: 'a.csv', reference: hydrogenChlorideFile }],
      schemeFor(keys),
    );
    expect(marked.values.every((v) => v.agreement === 'within')).toBe(true);
    expect(marked.slips[0]!.code).toBe('mass-other-isotope');
  });

  it('rivals with the same numbers stand together and say what would tell them apart', () => {
    const found = findings({ Be: Be - alphaE, re: length(Be - alphaE) });
    expect(
      found
        .slice(0, 2)
        .map((f) => f.code)
        .sort(),
    ).toEqual(['bbar-as-be', 'be-minus-half-alpha']);
    expect(found[0]!.tellApart).toContain(found[1]!.code);
  });
});

describe('slips in the numbering are found by replay', () => {
  // Figures of the slip catalogue for ten lines a side.
  const shift = (s: 1 | -1): Numbers => {
    const [c1, c2, c3] = [B0 + B1, B1 - B0, -4 * D];
    const c = { c0: nu0 - s * c1 + c2 - s * c3, c1: c1 - 2 * s * c2 + 3 * c3, c2: c2 - 3 * s * c3 };
    const [b0, b1] = [(c.c1 - c.c2) / 2, (c.c1 + c.c2) / 2];
    return {
      nu0: c.c0,
      B0: b0,
      B1: b1,
      alphaE: b0 - b1,
      Be: b0 + (b0 - b1) / 2,
      re: length(b0 + (b0 - b1) / 2),
      r0: length(b0),
      k: strength(c.c0),
    };
  };
  it.each([1, -1] as const)('numbering-all-shift by %i', (s) => {
    expect(findings(shift(s))[0]!.code).toBe('numbering-all-shift');
  });

  it('branches-swapped: Be → −Be + 2αe, αe kept, D → −D', () => {
    const be = -Be + 2 * alphaE;
    expect(findings({ B0: -B1, B1: -B0, Be: be, D: -D, re: length(-be), r0: length(B1) })[0]!.code).toBe(
      'branches-swapped',
    );
  });

  it('isotope-heavy-lines: ν̃0 −2.10, B ρ², αe ρ³, and r/ρ with the light mass', () => {
    const rho2 = heavyHydrogenChloride.bLower / hydrogenChloride.bLower;
    const heavy = {
      nu0: nu0 - 2.1,
      B0: B0 * rho2,
      B1: B1 * rho2,
      Be: Be * rho2,
      alphaE: alphaE * rho2,
      re: length(Be * rho2),
      r0: length(B0 * rho2),
      k: strength(nu0 - 2.1),
    };
    expect(findings(heavy)[0]!.code).toBe('isotope-heavy-lines');
  });
});

describe('tables of lines', () => {
  const table = (m: (own: number) => number, band = hydrogenChloride): SubmittedLine[] =>
    Array.from({ length: 9 }, (_, i) => i + 1)
      .flatMap((j) => [-j, j])
      .map((own) => ({
        isotopologue: null,
        m: m(own),
        wavenumberPerCm: Number(wavenumberOf(band, own).toFixed(2)),
      }));
  const codes = (lines: SubmittedLine[]): string[] => {
    const submission = submissionOf(written(correct), { lines });
    return markSubmission(
      submission,
      [{ file: 'a.csv', reference: hydrogenChlorideFile }],
      schemeFor(keys),
    ).slips.map((s) => s.code);
  };

  it('a table that agrees with the file shows no slip of its lines', () => {
    expect(codes(table((m) => m))).toEqual([]);
  });

  it.each([
    ['numbering-all-shift', table((m) => m + 1)],
    ['branches-swapped', table((m) => -m)],
    ['numbering-r-from-zero', table((m) => (m > 0 ? m - 1 : m))],
    ['numbering-r-shift', table((m) => (m > 0 ? m + 1 : m))],
    ['numbering-p-shift', table((m) => (m < 0 ? m - 1 : m))],
    ['numbering-both-high', table((m) => m + Math.sign(m))],
    ['isotope-heavy-lines', table((m) => m, heavyHydrogenChloride)],
  ])('%s shows in the table itself', (code, lines) => {
    expect(codes(lines)[0]).toBe(code);
  });

  it('a single misread line is named, not explained away', () => {
    const lines = table((m) => m).map((l) =>
      l.m === 4 ? { ...l, wavenumberPerCm: l.wavenumberPerCm + 3 } : l,
    );
    const submission = submissionOf(written(correct), { lines });
    const marked = markSubmission(
      submission,
      [{ file: 'a.csv', reference: hydrogenChlorideFile }],
      schemeFor(keys),
    );
    const odd = marked.observations.find((o) => o.code === 'line-misread');
    expect(odd?.text).toContain('R(3)');
  });
});

describe('vibration', () => {
  const bands = referenceOf([
    { isotopologue: 'H35Cl', band: hydrogenChloride },
    { isotopologue: 'H35Cl', band: hydrogenChlorideOvertone, name: '2-0' },
    { isotopologue: 'D35Cl', band: deuteriumChloride },
  ]);
  const asked = ['nu0', 'omegaE', 'omegaExe', 'k'] as const;
  const scheme = schemeFor(asked, { anharmonicityFrom: 'overtone', forceConstantFrom: 'omegaE' });
  const X = hydrogenChloride.origin - hydrogenChlorideOvertone.origin / 2;
  const omega = hydrogenChloride.origin + 2 * X;
  const own = { nu0: hydrogenChloride.origin, omegaE: omega, omegaExe: X, k: strength(omega) };
  const found = (changed: Numbers): string | undefined =>
    markSubmission(
      submissionOf(written({ ...own, ...changed })),
      [{ file: 'a.csv', reference: bands }],
      scheme,
    ).slips[0]?.code;

  it.each<[string, Numbers]>([
    ['k-from-nu0', { k: strength(hydrogenChloride.origin) }],
    ['omega-is-nu0', { omegaE: omega - 2 * X, k: strength(omega - 2 * X) }],
    ['omega-sign', { omegaE: omega - 4 * X, k: strength(omega - 4 * X) }],
    ['omega-lost-two', { omegaE: omega - X, k: strength(omega - X) }],
    ['anharmonicity-double', { omegaExe: 2 * X }],
    ['anharmonicity-sign', { omegaExe: -X }],
    ['anharmonicity-ratio', { omegaExe: X / omega }],
  ])('%s', (code, changed) => {
    expect(found(changed)).toBe(code);
  });
});

describe('columns of isotopologues', () => {
  const file = referenceOf([
    { isotopologue: 'H35Cl', band: hydrogenChloride },
    { isotopologue: 'D35Cl', band: deuteriumChloride },
  ]);
  const scheme = schemeFor(['nu0', 'Be', 'alphaE'], { isotopologues: ['H35Cl', 'D35Cl'] });
  const hydrogen: Numbers = { nu0, Be, alphaE };
  const deuterium: Numbers = { nu0: 2091.06, Be: 5.44848, alphaE: 0.11245 };
  const codes = (first: Numbers, second: Numbers): string[] => {
    const of = (numbers: Numbers, name: string) =>
      Object.entries(written(numbers)).map(([key, text]) => submitted(key as QuantityKey, text, name));
    const values = [...of(first, 'H35Cl'), ...of(second, 'D35Cl')];
    const marked = markSubmission(
      submissionOf({}, { isotopologue: null, values }),
      [{ file: 'a.csv', reference: file }],
      scheme,
    );
    return marked.slips.map((s) => s.code);
  };
  it('values in each other’s columns are recognised, values in their own are not', () => {
    expect(codes(deuterium, hydrogen)[0]).toBe('isotope-columns-swapped');
    expect(codes(hydrogen, deuterium)).toEqual([]);
  });
});

describe('when nothing earns it', () => {
  it('a value off by a number of no meaning is left unexplained', () => {
    expect(findings({ re: 1.0613 * re })).toEqual([]);
    expect(findings({ k: 0.8731 * k })).toEqual([]);
  });

  it('a careless but honest reading is no slip', () => {
    expect(
      findings({
        Be: Be * 1.0008,
        B0: B0 * 1.0008,
        B1: B1 * 1.0008,
        re: re * 0.9996,
        r0: r0 * 0.9996,
        alphaE: alphaE * 1.004,
      }),
    ).toEqual([]);
  });
});

describe('catalogue', () => {
  it('has stable, distinct codes in kebab case and a sentence for each', () => {
    const codes = slipCatalogue.map((s) => s.code);
    expect(new Set(codes).size).toBe(codes.length);
    for (const { code, what, weight } of slipCatalogue) {
      expect(code).toMatch(/^[a-z0-9]+(-[a-z0-9]+)*$/);
      expect(what.length).toBeGreaterThan(10);
      expect(weight).toBeGreaterThan(0);
    }
  });
});
