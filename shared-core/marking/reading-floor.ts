import { stackPrimitives } from '../reference/methods/constants-by-method.ts';
import { derive } from '../reference/methods/derive.ts';
import { propagate } from '../reference/propagate.ts';
import type { QuantityKey } from '../units/types.ts';
import type { ChosenSet, Comparison } from './compare.ts';
import type { AnswerKey } from './prescribe.ts';
import type { MarkingScheme, QuantityRule } from './types.ts';

/** Reading error of a line where neither scheme nor sampling says anything, cm-1; limits for one taken from the sampling. */
const usualReadingErrorPerCm = 0.03;
const [leastReadingErrorPerCm, mostReadingErrorPerCm] = [0.01, 0.1];
/** The range for part credit holds so many standard uncertainties of careful reading, up to this share of the value. */
const standardUncertainties = 2.5;
const largestShare = 0.75;

/** Reading error that careful work cannot avoid: the scheme's, else a third of the abscissa step. */
export function unavoidableReadingError(scheme: MarkingScheme, stepPerCm: number | null): number {
  if (scheme.readingErrorPerCm !== null) return scheme.readingErrorPerCm;
  if (stepPerCm === null) return usualReadingErrorPerCm;
  return Math.min(mostReadingErrorPerCm, Math.max(leastReadingErrorPerCm, stepPerCm / 3));
}

/**
 * A value outside, of a quantity that reading errors alone carry so far: part credit.
 *
 * With few lines the method makes much of small reading errors (D of DCl from seven lines a side moves by tens of per cent), and a
 * tolerance below that would punish careful work. Null where the comparison stays what it is.
 */
export function withinReading(
  comparison: Comparison,
  rule: QuantityRule,
  chosen: ChosenSet,
  key: AnswerKey,
  scheme: MarkingScheme,
  readingErrorPerCm: number,
): Comparison | null {
  const { tolerance, reference, deviation } = comparison;
  if (comparison.agreement !== 'outside' || tolerance.part === null) return null;
  const moved = movedByReading(rule.key, chosen, key, scheme);
  if (moved === null) return null;
  const floor = Math.min(
    standardUncertainties * moved * readingErrorPerCm,
    largestShare * Math.abs(reference.value),
  );
  if (floor <= tolerance.part || Math.abs(deviation) > floor) return null;
  return {
    ...comparison,
    agreement: 'part credit',
    points: rule.points / 2,
    tolerance: { ...tolerance, part: floor },
  };
}

/** Standard uncertainty of a quantity for a reading error of 1 cm-1 per line, by the chosen set (the middle one where nothing is known). */
function movedByReading(
  quantity: QuantityKey,
  chosen: ChosenSet,
  key: AnswerKey,
  scheme: MarkingScheme,
): number | null {
  const { sets } = chosen.result.span;
  const middle = sets[Math.floor(sets.length / 2)]!.set;
  const fewer = middle.lines.length < chosen.set.set.lines.length ? middle : chosen.set.set;
  if (key.molecule === null) return null;
  const stacked = stackPrimitives(fewer.lines, chosen.result.method, scheme, key.molecule, key.extra);
  if ('reason' in stacked) return null;
  const f = (v: readonly number[]): number => derive(stacked.context(v))[quantity] ?? NaN;
  // Linear in the lines for all but r and k, and those too over a hundredth of a wavenumber.
  const scaled = stacked.readingCovariance().map((c) => 1e-4 * c);
  const { uncertainty } = propagate(stacked.values, scaled, f);
  return uncertainty === null ? null : 100 * uncertainty;
}
