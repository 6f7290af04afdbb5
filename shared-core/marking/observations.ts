import type { MarkedPart } from './marked-part.ts';
import { copiedKeys, handbookCode, handbookProbability } from './slips/explain.ts';
import { lineName } from './slips/line-table.ts';
import { shown, symbols } from './slips/numbers.ts';
import { handbookValues } from './slips/weigh-submission.ts';
import { checkInvariants } from './invariants.ts';
import type { MarkingScheme, Observation, Submission, SubmittedValue } from './types.ts';

/** Advice that goes with every sign of copying. */
export const copyingAdvice =
  'This is an observation, not a verdict: it proves nothing about where a number came from. Follow your institution’s own procedure.';

/** Observations on one isotopologue of a submission; they never change points. */
export function observationsOf(
  part: MarkedPart,
  submission: Submission,
  submitted: readonly SubmittedValue[],
  explained: boolean,
  scheme: MarkingScheme,
): Observation[] {
  return [
    ...handbook(part, scheme),
    ...oddLines(part),
    ...ownNumbers(part, submitted, explained, scheme),
    ...figures(part, scheme),
    ...uncertainty(part, submission, scheme),
  ];
}

/** Values equal to a handbook to all their digits where the student's own file gives something else. */
function handbook(part: MarkedPart, scheme: MarkingScheme): Observation[] {
  const { key } = part;
  const verdict = part.verdict?.values ?? null;
  if (verdict === null || key.molecule === null) return [];
  const published = handbookValues(key.molecule, scheme);
  const copied = copiedKeys(verdict);
  const equal = verdict.bench.fields.filter((f) => {
    const own = verdict.bench.correct.values[f.key]!;
    return copied.has(f.key) && Math.abs((published[f.key] ?? own) - own) > 3 * f.halfWidth;
  });
  const probability = handbookProbability(verdict);
  if (equal.length === 0 || probability < 0.5) return [];
  const parts = equal.map((f) => {
    const own = verdict.bench.correct.values[f.key]!;
    return `${symbols[f.key]} ${f.submitted.text} equals the published ${shown(published[f.key]!, 8)} to all its digits, the own file gives ${shown(own)}`;
  });
  return [
    {
      code: handbookCode,
      quantities: equal.map((f) => f.key),
      text: `${parts.join('; ')}. ${copyingAdvice}`,
      figures: Object.fromEntries([
        ['probability', probability],
        ...equal.map((f) => [f.key, f.value] as const),
      ]),
    },
  ];
}

/**
 * Relations among the student's own numbers that fail: where there is no sound reference they are what a person can go by, elsewhere
 * they are told where no slip explains the numbers.
 */
function ownNumbers(
  part: MarkedPart,
  submitted: readonly SubmittedValue[],
  explained: boolean,
  scheme: MarkingScheme,
): Observation[] {
  const { molecule, reliability } = part.key;
  if (molecule === null || (reliability === 'sound' && explained)) return [];
  return checkInvariants(submitted, molecule, scheme)
    .filter((r) => !r.passed && !(r.id === 'I5' && withinScatterOfD(r.interval)))
    .map((r) => ({
      code: 'own-numbers-disagree',
      quantities: r.quantities,
      text: `${r.id}: ${r.text}`,
      figures: {
        low: r.interval[0],
        high: r.interval[1],
        expectedLow: r.expected[0],
        expectedHigh: r.expected[1],
      },
    }));
}

/** A fitted D scatters by tens of per cent with the reading error: only a factor is worth telling. */
function withinScatterOfD([low, high]: readonly [number, number]): boolean {
  return low < 1.6 && high > 0.6;
}

/** Single lines of the table that stand away from where the file has them. */
function oddLines(part: MarkedPart): Observation[] {
  const odd = part.verdict?.lines?.odd ?? [];
  if (odd.length === 0) return [];
  const words = odd.map(
    (l) =>
      `${lineName(l.m)} at ${shown(l.wavenumberPerCm, 7)} cm⁻¹ (in the file at ${shown(l.expectedPerCm ?? 0, 7)})`,
  );
  return [
    {
      code: 'line-misread',
      quantities: [],
      text: `Lines of the table that are not where the file has them: ${words.join(', ')}.`,
      figures: { lines: odd.length },
    },
  ];
}

/** Far more figures than the uncertainty of the reference carries. */
function figures(part: MarkedPart, scheme: MarkingScheme): Observation[] {
  const few = part.values.filter((v) => {
    const rule = scheme.quantities.find((q) => q.key === v.quantity);
    return v.figures !== null && rule?.leastFigures != null && v.figures < rule.leastFigures;
  });
  const many = part.values.filter((v) => {
    if (v.submitted === null || v.figures === null || v.tolerance === null) return false;
    const lastDigit = 10 ** (Math.floor(Math.log10(Math.abs(v.submitted))) - v.figures + 1);
    return v.figures > 6 && lastDigit < 1e-4 * v.tolerance.full;
  });
  const say = (code: string, values: MarkedPart['values'], words: string): Observation[] =>
    values.length === 0
      ? []
      : [
          {
            code,
            quantities: values.map((v) => v.quantity),
            text: `${values.map((v) => `${symbols[v.quantity]} ${v.text}`).join(', ')}: ${words}`,
            figures: {},
          },
        ];
  return [
    ...say('figures-few', few, 'fewer figures than the scheme asks for.'),
    ...say('figures-many', many, 'more figures than any of these measurements carries.'),
  ];
}

/** Uncertainty wanted and not given; σ of r not halved against that of B (r ∝ B^−½, so u(r)/r = ½ u(B)/B). */
function uncertainty(part: MarkedPart, submission: Submission, scheme: MarkingScheme): Observation[] {
  const missing = part.values.filter(
    (v) =>
      v.submitted !== null &&
      v.uncertainty === null &&
      scheme.quantities.some((q) => q.key === v.quantity && q.uncertaintyWanted === true),
  );
  const observations: Observation[] = [];
  if (missing.length > 0) {
    observations.push({
      code: 'uncertainty-missing',
      quantities: missing.map((v) => v.quantity),
      text: `No uncertainty given for ${missing.map((v) => symbols[v.quantity]).join(', ')}.`,
      figures: {},
    });
  }
  const of = (key: 'Be' | 're'): number | null => {
    const v = submission.values.find((x) => x.quantity === key);
    return v?.value == null || v.uncertainty === null ? null : v.uncertainty / Math.abs(v.value);
  };
  const [b, r] = [of('Be'), of('re')];
  if (b !== null && r !== null && r > 0 && Math.abs(r / b - 1) < 0.1) {
    observations.push({
      code: 'uncertainty-not-halved',
      quantities: ['re'],
      text: `The relative uncertainty of re (${shown(100 * r, 2)} %) equals that of Be; r ∝ B^−½ makes it half of that.`,
      figures: { relativeOfRe: r, relativeOfBe: b },
    });
  }
  return observations;
}
