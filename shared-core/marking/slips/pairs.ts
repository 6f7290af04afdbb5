import type { DeriveContext } from '../../reference/methods/derive.ts';
import { reportingSlips } from './catalogue-reporting.ts';
import { bitsOf, candidatesOf, type Candidate } from './candidates.ts';
import { misfits, mostWeight } from './hypothesis.ts';
import { predict, withSlips, writtenWith } from './predict.ts';
import { priors } from './priors.ts';
import { withOneLine } from './reading.ts';
import { canMatter, plain, type Search } from './search.ts';

/** First causes that are tried with every second one. */
const mostFirstCauses = 24;

/**
 * Two causes together: first ones that explain something, with every second one that explains the rest.
 *
 * Firsts are ranked by their weight with unexplained values taken as unknown; those with more of them follow by their number.
 */
export function takePairs(search: Search, candidates: readonly Candidate[], withReplays: boolean): void {
  const { bench, found } = search;
  const weights = new Map(found.map((w) => [w.hypothesis, w.logWeight]));
  const score = (c: Candidate): number =>
    weights.get(c.hypothesis) ?? -1e4 * (1 + c.off.length) + c.hypothesis.logPrior;
  const firsts = candidates
    .filter((c) => c.explains)
    .sort((a, b) => score(b) - score(a))
    .slice(0, mostFirstCauses);
  const replays = !withReplays
    ? []
    : candidatesOf(search, {
        replays: 'only',
        complete: false,
        mostOutOfReach: Math.max(1, bench.fields.length - 3),
      });
  const seconds = [...candidates.filter((c) => c.variant.replay === undefined), ...replays];
  const unexplained = new Map(found.map((w) => [w.hypothesis, bitsOf(bench, w.unexplained)]));
  for (const first of firsts) {
    const open = unexplained.get(first.hypothesis) ?? 0;
    const context = first.hypothesis.reading.context(first.hypothesis.reading.mean);
    for (const second of seconds) {
      // A second cause has to move all that the first plainly leaves open, and something of what it leaves unexplained.
      if ((second.moveBits & first.offBits) !== first.offBits) continue;
      if (open !== 0 && (second.moveBits & open) === 0) continue;
      tryPair(search, first, second, context);
    }
  }
}

function tryPair(search: Search, first: Candidate, second: Candidate, context: DeriveContext): void {
  const { input, bench } = search;
  const [a, b] = [first.hypothesis.causes[0]!, second.hypothesis.causes[0]!];
  if (a.code === b.code || !canCombine(first, second)) return;
  const firstIsWriting = isReporting(a.code);
  const { variant } = second;
  const onlyWritten =
    variant.replay === undefined && !variant.carried && !firstIsWriting && variant.steps !== undefined;
  if (onlyWritten && misfits(bench, writtenWith(first.values, variant.steps, context)).length > 0) return;
  // What is written down goes wrong last.
  const inOrder = firstIsWriting ? [variant, first.variant] : [first.variant, variant];
  const slipped = withSlips(input.steps, inOrder);
  const reading = variant.replay === undefined ? first.hypothesis.reading : second.hypothesis.reading;
  const values = predict(reading.context(reading.mean), slipped);
  if (misfits(bench, values).length > 0) return;
  const logPrior =
    first.hypothesis.logPrior +
    second.hypothesis.logPrior -
    2 * Math.log(priors.oneSlip) +
    Math.log(2 * priors.twoSlips);
  const needsOneLine = variant.readsOneLine === true && first.variant.readsOneLine !== true;
  const hypothesis = plain(input, [a, b], slipped, logPrior, needsOneLine ? withOneLine(reading) : reading);
  if (canMatter(search, mostWeight(bench, values, hypothesis))) search.take(hypothesis, values);
}

/** One of two replays would undo the other; two causes at one step likewise, unless one of them only concerns the writing down. */
function canCombine(first: Candidate, second: Candidate): boolean {
  if (first.variant.replay !== undefined && second.variant.replay !== undefined) return false;
  if (isReporting(first.hypothesis.causes[0]!.code) !== isReporting(second.hypothesis.causes[0]!.code))
    return true;
  const keys = Object.keys(first.variant.steps ?? {});
  const others = second.variant.steps ?? {};
  return first.variant.carried !== second.variant.carried || !keys.some((key) => key in others);
}

const reporting: ReadonlySet<string> = new Set(reportingSlips.map((s) => s.code));

function isReporting(code: string): boolean {
  return reporting.has(code);
}
