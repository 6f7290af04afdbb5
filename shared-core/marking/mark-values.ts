import { stackPrimitives, unitOf } from '../reference/methods/constants-by-method.ts';
import { derive, type DeriveContext, type Values } from '../reference/methods/derive.ts';
import type { MethodLine } from '../reference/methods/method-line.ts';
import type { QuantityKey } from '../units/types.ts';
import { bestMethodFor, chooseSets, compareNumber, type ChosenSet } from './compare.ts';
import type { Asked } from './asked.ts';
import { fromOwnValues, impliedReducedMassU, standOnMass } from './carry-forward.ts';
import type { AnswerKey } from './prescribe.ts';
import { withinReading } from './reading-floor.ts';
import { shown } from './slips/numbers.ts';
import type { MarkedValue, MarkingScheme, SubmittedValue } from './types.ts';

type ReadValue = SubmittedValue & { readonly value: number };

/** Values of one isotopologue, marked, and the line set with which they were marked under each method. */
export interface MarkedIsotopologue {
  readonly values: readonly MarkedValue[];
  readonly chosen: readonly ChosenSet[];
}

/**
 * Marks the values of one isotopologue.
 *
 * Points are given only where the reference is sound. With a reference to be checked the agreement is shown and the points stay open,
 * so that the person who looks sees what they would become; an unreadable value stays open too, since only a person can read it.
 *
 * @param submitted all values of the student for this isotopologue.
 */
export function markValues(
  key: AnswerKey,
  asked: readonly Asked[],
  submitted: readonly SubmittedValue[],
  scheme: MarkingScheme,
  ownLines: readonly MethodLine[] | null,
  readingErrorPerCm: number,
): MarkedIsotopologue {
  const given = new Map<QuantityKey, SubmittedValue>(submitted.map((v) => [v.quantity, v]));
  const readable = new Map<QuantityKey, ReadValue>();
  for (const v of submitted) if (isRead(v)) readable.set(v.quantity, v);
  const chosen = key.reliability === 'none' ? [] : chooseSets(key, asked, readable);
  const marked = asked.map((one) =>
    markOne(one, given.get(one.rule.key), key, chosen, scheme, readingErrorPerCm),
  );
  const fromLines = followingFromLines(marked, asked, readable, key, scheme, ownLines);
  if (!scheme.carryForward) return { values: fromLines, chosen };
  return { values: carry(fromLines, asked, readable, key, chosen, scheme), chosen };
}

/** The derivation behind a chosen set; null where its lines do not carry the method. */
export function contextOf(key: AnswerKey, chosen: ChosenSet, scheme: MarkingScheme): DeriveContext | null {
  if (key.molecule === null) return null;
  const stacked = stackPrimitives(
    chosen.set.set.lines,
    chosen.result.method,
    scheme,
    key.molecule,
    key.extra,
  );
  return 'reason' in stacked ? null : stacked.context(stacked.values);
}

function isRead(value: SubmittedValue): value is ReadValue {
  return value.value !== null && Number.isFinite(value.value);
}

function markOne(
  one: Asked,
  submitted: SubmittedValue | undefined,
  key: AnswerKey,
  chosen: readonly ChosenSet[],
  scheme: MarkingScheme,
  readingErrorPerCm: number,
): MarkedValue {
  const quantity = one.rule.key;
  const blank: MarkedValue = {
    isotopologue: one.isotopologue,
    quantity,
    text: submitted?.text ?? '',
    submitted: submitted?.value ?? null,
    uncertainty: submitted?.uncertainty ?? null,
    figures: submitted?.figures ?? null,
    unit: submitted?.standardUnit ?? unitOf(quantity),
    agreement: 'not given',
    reason: null,
    reference: null,
    tolerance: null,
    deviation: null,
    method: null,
    carriedForward: false,
    points: null,
    of: one.rule.points,
  };
  const settled = key.reliability === 'sound';
  if (submitted === undefined || (submitted.value === null && submitted.unreadableBecause === null)) {
    return { ...blank, points: settled ? 0 : null };
  }
  if (!isRead(submitted)) {
    return { ...blank, agreement: 'unreadable', reason: submitted.unreadableBecause ?? 'no finite number' };
  }
  const best = bestMethodFor(quantity, chosen);
  if (best === null) return { ...blank, agreement: 'no reference', reason: whyNoReference(quantity, key) };
  const widened = withinReading(best.comparison, one.rule, best.chosen, key, scheme, readingErrorPerCm);
  const comparison = widened ?? best.comparison;
  const remark =
    widened === null
      ? figuresRemark(one, submitted, comparison)
      : `Reading errors of ${shown(readingErrorPerCm, 2)} cm⁻¹ alone carry this value so far: part credit reaches to ± ${shown(widened.tolerance.part ?? 0, 2)}.`;
  return {
    ...blank,
    agreement: comparison.agreement,
    reason: settled ? remark : 'The reference is to be looked at first; points stay open.',
    reference: comparison.reference,
    tolerance: comparison.tolerance,
    deviation: comparison.deviation,
    method: best.chosen.name,
    points: settled ? comparison.points : null,
  };
}

function figuresRemark(
  { rule }: Asked,
  submitted: ReadValue,
  comparison: { agreement: string; deviation: number; tolerance: { full: number } },
): string | null {
  if (rule.leastFigures === null || submitted.figures === null || submitted.figures >= rule.leastFigures)
    return null;
  if (comparison.agreement === 'within' || Math.abs(comparison.deviation) > comparison.tolerance.full)
    return null;
  return `Given to ${submitted.figures} figures where ${rule.leastFigures} are asked: half of its last digit reaches beyond the tolerance.`;
}

function whyNoReference(quantity: QuantityKey, key: AnswerKey): string {
  if (key.reason !== null) return key.reason;
  const failed = key.methods.flatMap((m) => m.span.reason ?? []);
  if (failed.length === key.methods.length && failed[0] !== undefined) return `No reference: ${failed[0]}.`;
  const names = key.methods.map((m) => m.span.constants.method).join(' or ');
  return `The prescribed method (${names}) yields no ${quantity} of ${key.isotopologue} from this file.`;
}

/** A student's line that stands no further than this from the file's was read correctly, cm-1. */
const readCorrectlyWithinPerCm = 0.3;

/**
 * Where every line handed in agrees with the file's, a value that follows from them by a prescribed method is correct work, however
 * much the method makes of small reading errors.
 */
function followingFromLines(
  marked: readonly MarkedValue[],
  asked: readonly Asked[],
  readable: ReadonlyMap<QuantityKey, ReadValue>,
  key: AnswerKey,
  scheme: MarkingScheme,
  ownLines: readonly MethodLine[] | null,
): MarkedValue[] {
  const { molecule } = key;
  if (ownLines === null || molecule === null || !agreeWithFile(ownLines, key)) return [...marked];
  const contexts = key.methods.flatMap(({ method }) => {
    const stacked = stackPrimitives(ownLines, method, scheme, molecule, key.extra);
    return 'reason' in stacked ? [] : [stacked.context(stacked.values)];
  });
  const derived = contexts.map((c) => derive(c));
  return marked.map((value, i) => {
    if (value.agreement !== 'outside' && value.agreement !== 'part credit') return value;
    const submitted = readable.get(value.quantity);
    if (submitted === undefined || value.reference === null) return value;
    for (const own of derived) {
      const reference = { ...value.reference, value: own[value.quantity] ?? NaN };
      const comparison = compareNumber(asked[i]!, submitted, reference);
      if (comparison.agreement !== 'within') continue;
      return {
        ...value,
        agreement: 'within',
        reference,
        tolerance: comparison.tolerance,
        deviation: comparison.deviation,
        points: value.points === null ? null : comparison.points,
        reason: 'Held against the lines handed in, all of which agree with the file.',
      };
    }
    return value;
  });
}

function agreeWithFile(ownLines: readonly MethodLine[], key: AnswerKey): boolean {
  const file = new Map(key.candidates.map((l) => [l.m, l.wavenumberPerCm]));
  const known = ownLines.filter((l) => file.has(l.m));
  return (
    known.length >= 5 &&
    known.every((l) => Math.abs(l.wavenumberPerCm - file.get(l.m)!) <= readCorrectlyWithinPerCm)
  );
}

/** Gives values that follow correctly from the student's own earlier ones their credit; never takes any away. */
function carry(
  marked: readonly MarkedValue[],
  asked: readonly Asked[],
  readable: ReadonlyMap<QuantityKey, ReadValue>,
  key: AnswerKey,
  chosen: readonly ChosenSet[],
  scheme: MarkingScheme,
): MarkedValue[] {
  const own: Values = {};
  for (const [quantity, v] of readable) own[quantity] = v.value;
  const contexts = chosen.flatMap((c) => contextOf(key, c, scheme) ?? []);
  const carried = marked.map((value, i) => {
    if (value.carriedForward || (value.agreement !== 'outside' && value.agreement !== 'part credit'))
      return value;
    const ways = contexts.flatMap((c) => fromOwnValues(value.quantity, own, c));
    return follows(value, asked[i]!, readable, ways, 'Follows correctly from the values given before it.');
  });
  return scheme.oncePerCause ? oneMassCostsOnce(carried, asked, own, readable, contexts, scheme) : carried;
}

/** Where r and k were both worked out with the same wrong reduced mass, only the first of them pays. */
function oneMassCostsOnce(
  marked: readonly MarkedValue[],
  asked: readonly Asked[],
  own: Values,
  readable: ReadonlyMap<QuantityKey, ReadValue>,
  contexts: readonly DeriveContext[],
  scheme: MarkingScheme,
): MarkedValue[] {
  const context = contexts[0];
  const off = (v: MarkedValue | undefined): v is MarkedValue & { submitted: number } =>
    v?.submitted != null && !v.carriedForward && (v.agreement === 'outside' || v.agreement === 'part credit');
  const inOrder = standOnMass.map((q) => marked.find((v) => v.quantity === q));
  const first = inOrder.find(off);
  if (context === undefined || first === undefined) return [...marked];
  const mass = impliedReducedMassU(first.quantity, first.submitted, own, context, scheme);
  if (mass === null || !(mass > 0)) return [...marked];
  return marked.map((value, i) => {
    if (value === first || !off(value) || !standOnMass.includes(value.quantity)) return value;
    const ways = contexts.flatMap((c) => fromOwnValues(value.quantity, { ...own, mu: mass }, c));
    return follows(
      value,
      asked[i]!,
      readable,
      ways,
      `Follows from the same reduced mass as ${first.quantity}; one cause costs once.`,
    );
  });
}

function follows(
  value: MarkedValue,
  one: Asked,
  readable: ReadonlyMap<QuantityKey, ReadValue>,
  ways: readonly number[],
  sentence: string,
): MarkedValue {
  const submitted = readable.get(value.quantity);
  if (submitted === undefined || value.reference === null) return value;
  for (const way of ways) {
    const comparison = compareNumber(one, submitted, { ...value.reference, value: way });
    if (comparison.agreement !== 'within') continue;
    const points = value.points === null ? null : Math.max(value.points, comparison.points);
    return { ...value, carriedForward: true, points, reason: sentence };
  }
  return value;
}
