import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { markSubmission } from '../../shared-core/marking/mark-submission.ts';
import { valuesByMethod } from '../../shared-core/reference/methods/constants-by-method.ts';
import type { MarkedSubmission, MarkingScheme, Submission } from '../../shared-core/marking/types.ts';
import type { QuantityKey } from '../../shared-core/units/types.ts';
import { hydrogenChlorideFile, schemeFor, submissionOf, submitted } from '../helpers/marking-cases.ts';
import { h35cl, hydrogenChloride, linesOf } from '../helpers/term-value-lines.ts';

const keys = ['nu0', 'B0', 'B1', 'Be', 'alphaE', 'D', 're', 'k'] as const;
const scheme = schemeFor(keys);
const correct = valuesByMethod(linesOf(hydrogenChloride, 10), scheme.methods[0]!, scheme, h35cl);
const mark = (submission: Submission, by: MarkingScheme = scheme): MarkedSubmission =>
  markSubmission(submission, [{ file: 'a.csv', reference: hydrogenChlorideFile }], by);

/** Values from right to absurd, any number of them, with 1 to 8 figures. */
const texts: fc.Arbitrary<Partial<Record<QuantityKey, string>>> = fc.record(
  Object.fromEntries(
    keys.map((key) => [
      key,
      fc
        .tuple(
          fc.oneof(
            fc.constant(1),
            fc.double({ min: 0.98, max: 1.02, noNaN: true }),
            fc.double({ min: -3, max: 3, noNaN: true }),
          ),
          fc.integer({ min: 1, max: 8 }),
        )
        .filter(([f]) => Math.abs(f) > 1e-3)
        .map(([f, figures]) => (correct[key]! * f).toExponential(figures - 1)),
    ]),
  ) as Record<QuantityKey, fc.Arbitrary<string>>,
  { requiredKeys: [] },
);
const runs = { numRuns: 30 };

describe('marking, whatever is handed in', () => {
  it('points never exceed the scheme, part by part and in sum', () => {
    fc.assert(
      fc.property(texts, (given) => {
        const marked = mark(submissionOf(given));
        for (const v of marked.values) {
          expect(v.points ?? 0).toBeLessThanOrEqual(v.of);
          expect(v.points ?? 0).toBeGreaterThanOrEqual(0);
        }
        expect(marked.points ?? 0).toBeLessThanOrEqual(keys.length);
        expect(marked.slips.every((s) => s.probability >= 0 && s.probability <= 1)).toBe(true);
      }),
      runs,
    );
  });

  it('the order of values changes nothing', () => {
    fc.assert(
      fc.property(texts, (given) => {
        const forward = submissionOf(given);
        const backward = { ...forward, values: [...forward.values].reverse() };
        const [a, b] = [mark(forward), mark(backward)];
        expect(b.values).toEqual(a.values);
        expect(b.slips.map((s) => [s.code, s.probability.toFixed(6)])).toEqual(
          a.slips.map((s) => [s.code, s.probability.toFixed(6)]),
        );
      }),
      { numRuns: 15 },
    );
  });

  it('a change of unit changes nothing', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.9, max: 1.1, noNaN: true }), (f) => {
        // 127.46 pm or 1.2746 Å: the same number in standard units, the same last digit.
        const text = (correct.re! * f).toFixed(2);
        const pm = { ...submitted('re', text) };
        const angstrom = { ...pm, text: (Number(text) / 100).toFixed(4), unit: 'Å' };
        const of = (v: typeof pm) =>
          mark(submissionOf({}, { values: [v] })).values.find((x) => x.quantity === 're')!;
        expect({ ...of(angstrom), text: '' }).toEqual({ ...of(pm), text: '' });
      }),
      runs,
    );
  });

  it('a value equal to the reference is within, to any sufficient number of figures', () => {
    fc.assert(
      fc.property(fc.integer({ min: 5, max: 10 }), fc.integer({ min: 5, max: 10 }), (figures, lines) => {
        const own = valuesByMethod(linesOf(hydrogenChloride, lines), scheme.methods[0]!, scheme, h35cl);
        const marked = mark(
          submissionOf(Object.fromEntries(keys.map((k) => [k, own[k]!.toPrecision(figures)]))),
        );
        expect(marked.values.map((v) => v.agreement)).toEqual(keys.map(() => 'within'));
      }),
      runs,
    );
  });

  it('carried credit never lowers a mark', () => {
    fc.assert(
      fc.property(texts, (given) => {
        const submission = submissionOf(given);
        const without = mark(submission, { ...scheme, carryForward: false });
        const carried = mark(submission);
        carried.values.forEach((v, i) =>
          expect(v.points ?? 0).toBeGreaterThanOrEqual(without.values[i]!.points ?? 0),
        );
      }),
      runs,
    );
  });

  it('rounding harder than the scheme asks never gains points', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...keys),
        fc.double({ min: 0.95, max: 1.05, noNaN: true }),
        fc.integer({ min: 1, max: 3 }),
        (key, f, figures) => {
          const rule = scheme.quantities.find((q) => q.key === key)!;
          fc.pre(figures < rule.leastFigures!);
          const exact = correct[key]! * f;
          expect(pointsOf(key, exact.toPrecision(figures))).toBeLessThanOrEqual(
            pointsOf(key, exact.toPrecision(9)),
          );
        },
      ),
      { numRuns: 50 },
    );
  });

  it('down to the figures asked for, rounding gains at most where the interval of the last digit meets the limit', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.95, max: 1.05, noNaN: true }),
        fc.integer({ min: 4, max: 6 }),
        (f, figures) => {
          const exact = correct.Be! * f;
          const finer = exact * (f > 1 ? 1 - 10 ** (1 - figures) : 1 + 10 ** (1 - figures));
          // One unit of the last digit towards the reference is more than rounding can move a value and widen its interval.
          expect(pointsOf('Be', exact.toPrecision(figures))).toBeLessThanOrEqual(
            Math.max(pointsOf('Be', finer.toPrecision(9)), pointsOf('Be', exact.toPrecision(9))),
          );
        },
      ),
      { numRuns: 50 },
    );
  });
});

function pointsOf(key: QuantityKey, text: string): number {
  const marked = mark(submissionOf({ [key]: text }), { ...scheme, carryForward: false });
  return marked.values.find((v) => v.quantity === key)!.points ?? 0;
}
