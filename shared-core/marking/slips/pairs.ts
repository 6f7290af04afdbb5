import { slipNamed } from './catalogue.ts';
import { candidatesOf, type Candidate } from './candidates.ts';
import { misfits, mostWeight } from './hypothesis.ts';
import { predict, withSlips } from './predict.ts';
import { priors } from './priors.ts';
import { canMatter, plain, type Search } from './search.ts';

/** First causes that are tried with every second one. */
const mostFirstCauses = 24;

/**
 * Two causes together: first ones that explain something, with every second one that explains the rest.
 *
 * Firsts are ranked by their weight with unexplained values taken as unknown; those with more of them follow by their number.
 */
export function takePairs(search: Search, candidates: readonly Candidate[]): void {
  const { bench, found } = search;
  const weights = new Map(found.map((w) => [w.hypothesis, w.logWeight]));
  const score = (c: Candidate): number =>
    weights.get(c.hypothesis) ?? -1e4 * (1 + c.off.length) + c.hypothesis.logPrior;
  const firsts = candidates
    .filter((c) => c.explains)
    .sort((a, b) => score(b) - score(a))
    .slice(0, mostFirstCauses);
  const replays = candidatesOf(search, {
    replays: 'only',
    complete: false,
    mostOutOfReach: bench.fields.length - 1,
  });
  const seconds = [...candidates.filter((c) => c.variant.replay === undefined), ...replays];
  const unexplained = new Map(found.map((w) => [w.hypothesis, w.unexplained]));
  for (const first of firsts) {
    const open = unexplained.get(first.hypothesis) ?? first.off.map((i) => bench.fields[i]!.key);
    for (const second of seconds) {
      // A second cause has to touch what the first leaves open.
      if (open.length > 0 && !open.some((key) => second.hypothesis.causes[0]!.moves!.has(key))) continue;
      tryPair(search, first, second);
    }
  }
}

function tryPair(search: Search, first: Candidate, second: Candidate): void {
  const { input, bench } = search;
  const [a, b] = [first.hypothesis.causes[0]!, second.hypothesis.causes[0]!];
  if (a.code === b.code || !canCombine(first, second)) return;
  // What is written down goes wrong last.
  const inOrder = isReporting(a.code) ? [second.variant, first.variant] : [first.variant, second.variant];
  const slipped = withSlips(input.steps, inOrder);
  const reading = second.variant.replay === undefined ? first.hypothesis.reading : second.hypothesis.reading;
  const logPrior =
    first.hypothesis.logPrior +
    second.hypothesis.logPrior -
    2 * Math.log(priors.oneSlip) +
    Math.log(2 * priors.twoSlips);
  const hypothesis = plain(input, [a, b], slipped, logPrior, reading);
  const values = predict(reading.context(reading.mean), slipped);
  if (misfits(bench, values).length > 0) return;
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

function isReporting(code: string): boolean {
  return slipNamed(code)?.family === 'reporting';
}
