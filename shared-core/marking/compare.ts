import type { Values } from '../reference/methods/derive.ts';
import type { LineSetValues } from '../reference/methods/prescribed-constants.ts';
import type { QuantityKey } from '../units/types.ts';
import type { Asked } from './asked.ts';
import { pointsFor } from './points.ts';
import type { AnswerKey, MethodResult } from './prescribe.ts';
import { roundingAllowance, toleranceHalfWidth } from './tolerance.ts';
import type { Agreement, MarkedValue, SubmittedValue } from './types.ts';

/** A value held against one method with one line set. */
export interface Comparison {
  readonly agreement: Extract<Agreement, 'within' | 'part credit' | 'outside'>;
  readonly points: number;
  readonly deviation: number;
  readonly tolerance: { readonly full: number; readonly part: number | null };
  readonly reference: NonNullable<MarkedValue['reference']>;
}

/** A method with the one line set with which the student's values agree best. */
export interface ChosenSet {
  readonly result: MethodResult;
  readonly name: string;
  readonly set: LineSetValues;
  readonly comparisons: ReadonlyMap<QuantityKey, Comparison>;
}

/**
 * Holds one number against one value: within the full tolerance, within the part tolerance, or outside; both moved by what rounding
 * allows (`roundingAllowance`).
 */
export function compareNumber(
  asked: Asked,
  submitted: SubmittedValue & { readonly value: number },
  reference: Comparison['reference'],
): Comparison {
  const { rule } = asked;
  const full = toleranceHalfWidth(rule.full, reference, submitted.uncertainty);
  const part =
    rule.part === null
      ? null
      : Math.max(full, toleranceHalfWidth(rule.part, reference, submitted.uncertainty));
  const allowance = roundingAllowance(reference.value, submitted.halfLastDigit, rule.leastFigures);
  const deviation = submitted.value - reference.value;
  const off = Math.abs(deviation) - allowance;
  // A hair for the rounding of binary fractions: 2.09 stands inside 2 ± 0.09.
  const hair = 1e-9 * Math.abs(reference.value);
  const agreement =
    off <= full + hair ? 'within' : part !== null && off <= part + hair ? 'part credit' : 'outside';
  const tolerance = { full, part };
  return { agreement, points: pointsFor(rule, agreement, off, tolerance), deviation, tolerance, reference };
}

/**
 * For each accepted method the line set with which all values together earn most (the least deviations where several earn the same):
 * the values of one student must agree with one and the same set.
 */
export function chooseSets(
  key: AnswerKey,
  asked: readonly Asked[],
  submitted: ReadonlyMap<QuantityKey, SubmittedValue & { readonly value: number }>,
): ChosenSet[] {
  return key.methods.flatMap((result) => {
    let best: ChosenSet | null = null;
    let bestScore: readonly [number, number] = [-1, Infinity];
    for (const set of result.span.sets) {
      const comparisons = compareWithSet(result, set.values, asked, submitted);
      const score = scoreOf(comparisons);
      if (score[0] > bestScore[0] + 1e-9 || (score[0] > bestScore[0] - 1e-9 && score[1] < bestScore[1])) {
        best = { result, name: result.span.constants.method, set, comparisons };
        bestScore = score;
      }
    }
    return best === null ? [] : [best];
  });
}

/** The method under which a value stands best; the first accepted one where several do. */
export function bestMethodFor(
  quantity: QuantityKey,
  chosen: readonly ChosenSet[],
): { readonly chosen: ChosenSet; readonly comparison: Comparison } | null {
  let best: { chosen: ChosenSet; comparison: Comparison } | null = null;
  for (const candidate of chosen) {
    const comparison = candidate.comparisons.get(quantity);
    if (comparison === undefined) continue;
    if (best === null || order[comparison.agreement] > order[best.comparison.agreement]) {
      best = { chosen: candidate, comparison };
    }
  }
  return best;
}

const order = { within: 2, 'part credit': 1, outside: 0 } as const;

function compareWithSet(
  result: MethodResult,
  values: Values,
  asked: readonly Asked[],
  submitted: ReadonlyMap<QuantityKey, SubmittedValue & { readonly value: number }>,
): Map<QuantityKey, Comparison> {
  const comparisons = new Map<QuantityKey, Comparison>();
  for (const one of asked) {
    const key = one.rule.key;
    const given = submitted.get(key);
    const value = values[key];
    const spread = result.span.constants.values[key];
    if (given === undefined || value === undefined || spread === undefined) continue;
    const reference = { value, low: spread.low, high: spread.high, uncertainty: spread.uncertainty };
    comparisons.set(key, compareNumber(one, given, reference));
  }
  return comparisons;
}

/** A value far off does not pull the choice of lines towards itself. */
const farOff = 4;

/** Points, and the sum of squared deviations in full tolerances, each up to a limit. */
function scoreOf(comparisons: ReadonlyMap<QuantityKey, Comparison>): readonly [number, number] {
  let points = 0;
  let off = 0;
  for (const c of comparisons.values()) {
    points += c.agreement === 'within' ? 1 : c.agreement === 'part credit' ? 0.5 : 0;
    off += Math.min(farOff, (c.deviation / c.tolerance.full) ** 2);
  }
  return [points, off];
}
