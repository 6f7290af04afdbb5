import { describe, expect, it } from 'vitest';
import { markSubmission } from '../../../shared-core/marking/mark-submission.ts';
import { submissionJson } from '../../../shared-core/marking/report-json.ts';
import type {
  MarkedSubmission,
  MarkedValue,
  MarkingScheme,
  Submission,
} from '../../../shared-core/marking/types.ts';
import type { FileReference } from '../../../shared-core/reference/types.ts';
import type { QuantityKey } from '../../../shared-core/units/types.ts';
import {
  hydrogenChlorideFile,
  referenceOf,
  schemeFor,
  submissionOf,
  submitted,
} from '../../helpers/marking-cases.ts';
import { valuesByMethod } from '../../../shared-core/reference/methods/constants-by-method.ts';
import { deuteriumChloride, h35cl, hydrogenChloride, wavenumberOf } from '../../helpers/term-value-lines.ts';

const all = ['nu0', 'B0', 'B1', 'Be', 'alphaE', 'D', 're', 'k'] as const;
/** A cubic on ten lines a side of H35Cl, rounded: nothing here was computed by the marking. */
const honest = {
  nu0: '2885.97',
  B0: '10.4400',
  B1: '10.1364',
  Be: '10.5917',
  alphaE: '0.3035',
  D: '5.25e-4',
  re: '127.465',
  k: '480.7',
};
const mark = (
  submission: Submission,
  scheme: MarkingScheme = schemeFor(all),
  reference: FileReference | null = hydrogenChlorideFile,
): MarkedSubmission =>
  markSubmission(submission, reference === null ? [] : [{ file: 'a.csv', reference }], scheme);
const value = (marked: MarkedSubmission, key: QuantityKey): MarkedValue =>
  marked.values.find((v) => v.quantity === key)!;

describe('agreement and points', () => {
  it('honest work is within throughout and nothing is explained', () => {
    const marked = mark(submissionOf(honest));
    expect(marked.values.map((v) => v.agreement)).toEqual(all.map(() => 'within'));
    expect([marked.points, marked.of, marked.open]).toEqual([8, 8, 0]);
    expect(marked.slips).toEqual([]);
    expect(value(marked, 'Be').method).toBe('cubic');
  });

  it('a value between the full and the part tolerance gets half the points, or slides', () => {
    const off = submissionOf({ ...honest, Be: '10.6450' });
    expect(value(mark(off), 'Be')).toMatchObject({ agreement: 'part credit', points: 0.5 });
    const scheme = schemeFor(all);
    const sliding = {
      ...scheme,
      quantities: scheme.quantities.map((q) => ({ ...q, partCredit: 'sliding' as const })),
    };
    const { points } = value(mark(off, sliding), 'Be');
    // 0.0533 (less the allowance of half a digit at four figures) between 0.0318 and 0.0741
    expect(points).toBeGreaterThan(0.4);
    expect(points).toBeLessThan(0.75);
  });

  it('what is not given earns nothing, what cannot be read stays open', () => {
    const unreadable = {
      ...submitted('re', '0'),
      text: 'see report',
      value: null,
      figures: null,
      halfLastDigit: null,
      unreadableBecause: 'no number in "see report"',
    };
    const marked = mark(
      submissionOf({ nu0: '2885.97' }, { values: [submitted('nu0', '2885.97'), unreadable] }),
    );
    expect(value(marked, 'Be')).toMatchObject({ agreement: 'not given', points: 0 });
    expect(value(marked, 're')).toMatchObject({
      agreement: 'unreadable',
      points: null,
      reason: 'no number in "see report"',
    });
    expect(marked.open).toBe(1);
  });

  it('without a sound reference no value has points, and the total is open', () => {
    const check = referenceOf([{ isotopologue: 'H35Cl', band: hydrogenChloride, reliability: 'check' }]);
    const marked = mark(submissionOf(honest), schemeFor(all), check);
    expect(value(marked, 'Be')).toMatchObject({ agreement: 'within', points: null });
    expect(marked).toMatchObject({ points: null, open: 8, of: 8 });
    const none = referenceOf([{ isotopologue: 'H35Cl', band: hydrogenChloride, reliability: 'none' }]);
    expect(value(mark(submissionOf(honest), schemeFor(all), none), 'Be')).toMatchObject({
      agreement: 'no reference',
      points: null,
      reason: 'Too few lines.',
    });
    expect(value(mark(submissionOf(honest), schemeFor(all), null), 'Be').reason).toContain('No spectrum');
  });

  it('an isotopologue that the file does not show has no reference, with the reason', () => {
    const marked = mark(
      submissionOf({ Be: '5.4484' }, { isotopologue: 'D35Cl' }),
      schemeFor(['Be'], { isotopologues: ['H35Cl', 'D35Cl'] }),
    );
    expect(marked.values).toHaveLength(1);
    expect(value(marked, 'Be')).toMatchObject({
      isotopologue: 'D35Cl',
      agreement: 'no reference',
      points: null,
    });
    expect(value(marked, 'Be').reason).toContain('shows no D35Cl');
  });

  it('a quantity that no accepted method yields stays open', () => {
    const marked = mark(
      submissionOf({ nu0: '2885.67', Be: '10.59' }),
      schemeFor(['nu0', 'Be'], { methods: [{ fit: 'midpoint' }] }),
    );
    expect(value(marked, 'nu0')).toMatchObject({ agreement: 'within', method: 'midpoint of R(0) and P(1)' });
    expect(value(marked, 'Be')).toMatchObject({ agreement: 'no reference', points: null });
  });

  it('agreement with one of several accepted methods is agreement, and says with which', () => {
    const methods: MarkingScheme['methods'] = [
      { fit: 'polynomial', degree: 3 },
      { fit: 'combination-differences', intercept: true, cubicTerm: false },
    ];
    // Ten a side, free intercept: low by about 1.04 % (worked out beforehand: 0.85 % for J to 8, 1.24 % for J to 10).
    const marked = mark(submissionOf({ Be: '10.482', re: '128.13' }), schemeFor(['Be', 're'], { methods }));
    expect(value(marked, 'Be')).toMatchObject({
      agreement: 'within',
      method: 'combination differences with intercept',
    });
  });

  it('all values have to agree with one and the same line set', () => {
    const quadratic = schemeFor(['B0', 'B1', 'Be'], { methods: [{ fit: 'polynomial', degree: 2 }] });
    const spanned = mark(submissionOf({ B0: '10.4140', B1: '10.1100', Be: '10.5660' }), quadratic);
    expect(spanned.values.every((v) => v.agreement === 'within')).toBe(true);
    // Each number lies in the span of its own quantity, but no one set gives both.
    for (const one of [{ B0: '10.4440' }, { B1: '10.0450' }]) {
      const { agreement } = mark(submissionOf(one), quadratic).values.find((v) => v.quantity in one)!;
      expect(agreement).toBe('within');
    }
    const mixed = mark(submissionOf({ B0: '10.4440', B1: '10.0450' }), quadratic);
    expect(mixed.values.filter((v) => v.quantity !== 'Be').every((v) => v.agreement === 'within')).toBe(
      false,
    );
  });

  it('marks values of two isotopologues each by its own reference', () => {
    const file = referenceOf([
      { isotopologue: 'H35Cl', band: hydrogenChloride },
      { isotopologue: 'D35Cl', band: deuteriumChloride },
    ]);
    const values = [submitted('Be', '10.592', 'H35Cl'), submitted('Be', '5.4485', 'D35Cl')];
    const scheme = schemeFor(['Be'], { isotopologues: ['H35Cl', 'D35Cl'] });
    const marked = mark(submissionOf({}, { isotopologue: null, values }), scheme, file);
    expect(marked.values.map((v) => [v.isotopologue, v.agreement])).toEqual([
      ['H35Cl', 'within'],
      ['D35Cl', 'within'],
    ]);
  });
});

describe('figures', () => {
  it('a number with fewer figures than asked has to agree wherever in its interval it stood', () => {
    expect(value(mark(submissionOf({ ...honest, Be: '10.59' })), 'Be').agreement).toBe('within');
    const rounded = value(mark(submissionOf({ ...honest, Be: '10.6' })), 'Be');
    expect(rounded.agreement).toBe('part credit');
    expect(rounded.reason).toContain('3 figures');
  });

  it('a spreadsheet number has lost its zeros: its figures are unknown, not few', () => {
    const values = [{ ...submitted('Be', '10.6'), figures: null, halfLastDigit: null }];
    expect(value(mark(submissionOf({}, { values })), 'Be').agreement).toBe('within');
  });
});

describe('error carried forward', () => {
  it('a bond length that follows from the student’s own wrong Be earns its credit, shown as such', () => {
    const marked = mark(submissionOf({ ...honest, Be: '10.4400', re: '128.388' }));
    expect(value(marked, 'Be')).toMatchObject({ agreement: 'outside', points: 0, carriedForward: false });
    expect(value(marked, 're')).toMatchObject({ agreement: 'outside', points: 1, carriedForward: true });
    const off = mark(
      submissionOf({ ...honest, Be: '10.4400', re: '128.388' }),
      schemeFor(all, { carryForward: false }),
    );
    expect(value(off, 're')).toMatchObject({ points: 0, carriedForward: false });
  });

  it('a wrong reduced mass in r and in k costs once', () => {
    // Half the reduced mass: r × √2, k × ½.
    const halfMass = submissionOf({ ...honest, re: '180.26', k: '240.35' });
    expect(value(mark(halfMass), 're').points).toBe(0);
    expect(value(mark(halfMass), 'k')).toMatchObject({ carriedForward: true, points: 1 });
    const twice = mark(halfMass, schemeFor(all, { oncePerCause: false }));
    expect(value(twice, 'k')).toMatchObject({ carriedForward: false, points: 0 });
  });

  it('two different slips in r and k both cost', () => {
    const marked = mark(submissionOf({ ...honest, re: '180.26', k: '12.18' }));
    expect([value(marked, 're').points, value(marked, 'k').points]).toEqual([0, 0]);
  });
});

describe('values from the lines handed in', () => {
  // Six lines a side with reading errors of ±0.05 cm-1: of the sign pattern of a cubic, which is what D suffers from.
  const errors = [-0.05, -0.05, 0.05, 0.05, 0.05, 0.05, -0.05, -0.05, -0.05, -0.05, 0.05, 0.05];
  const table = (extra = 0) =>
    [-6, -5, -4, -3, -2, -1, 1, 2, 3, 4, 5, 6].map((m, i) => ({
      isotopologue: null,
      m,
      wavenumberPerCm: wavenumberOf(hydrogenChloride, m) + errors[i]! + (m === 6 ? extra : 0),
    }));
  const own = (lines: ReturnType<typeof table>): string =>
    valuesByMethod(
      lines.map((l) => ({ ...l, uncertaintyPerCm: 0.05 })),
      schemeFor(all).methods[0]!,
      schemeFor(all),
      h35cl,
    ).D!.toPrecision(4);
  const strict = {
    ...schemeFor(['D']),
    quantities: [{ ...schemeFor(['D']).quantities[0]!, full: { relative: 0.01 }, part: null }],
  };

  it('a value that follows from lines that all agree with the file is correct work', () => {
    const D = own(table());
    expect(value(mark(submissionOf({ D }), strict), 'D').agreement).toBe('outside');
    expect(value(mark(submissionOf({ D }, { lines: table() }), strict), 'D')).toMatchObject({
      agreement: 'within',
      points: 1,
    });
  });

  it('a misread line among them does not make its value right', () => {
    const D = own(table(1.5));
    expect(value(mark(submissionOf({ D }, { lines: table(1.5) }), strict), 'D')).toMatchObject({
      agreement: 'outside',
      points: 0,
    });
  });
});

describe('what reading errors alone can do', () => {
  const few = referenceOf([{ isotopologue: 'D35Cl', band: deuteriumChloride }], 6);
  const many = referenceOf([{ isotopologue: 'D35Cl', band: deuteriumChloride }], 14);
  const scheme = schemeFor(['nu0', 'D'], {
    isotopologues: ['D35Cl'],
    lines: { rule: 'up-to', m: 14 },
    readingErrorPerCm: 0.04,
  });
  const agreementOfD = (reference: FileReference): string =>
    value(
      mark(submissionOf({ nu0: '2091.06', D: '6.5e-5' }, { isotopologue: 'D35Cl' }), scheme, reference),
      'D',
    ).agreement;

  it('D of DCl from six lines a side may be off by half for nothing but reading errors: part credit; from fourteen it may not', () => {
    expect(agreementOfD(few)).toBe('part credit');
    expect(agreementOfD(many)).toBe('outside');
  });
});

describe('report', () => {
  it('holds the keys that the table of formats names, and only finite numbers', () => {
    const json = submissionJson(mark(submissionOf({ ...honest, Be: '10.4400' }))) as unknown as {
      reference: { isotopologues: object };
      values: object[];
    };
    expect(Object.keys(json)).toEqual(
      expect.arrayContaining([
        'student',
        'group',
        'attempt',
        'received',
        'isotopologue',
        'spectra',
        'spectrum',
        'reference',
        'values',
        'slips',
        'observations',
        'points',
        'of',
        'open',
      ]),
    );
    expect(json.reference).toMatchObject({ isotopologue: 'H35Cl', prescribed: { method: 'cubic' } });
    expect(Object.keys(json.reference.isotopologues)).toEqual(['H37Cl']);
    expect(JSON.stringify(json)).not.toContain('NaN');
    expect(json.values[3]).toMatchObject({
      quantity: 'Be',
      agreement: 'outside',
      submitted: 10.44,
      of: 1,
    });
  });
});
