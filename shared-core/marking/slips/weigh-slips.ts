import type { QuantityKey } from '../../units/types.ts';
import { candidatesOf, type Candidate, type WhichWays } from './candidates.ts';
import type { Field } from './fields.ts';
import { benchOf, couldGain, misfits, type Bench, type Weighed } from './hypothesis.ts';
import { logSum } from './likelihood.ts';
import { takeOnTop } from './on-top.ts';
import { takePairs } from './pairs.ts';
import { withSlips } from './predict.ts';
import { priors } from './priors.ts';
import { canMatter, plain, startSearch, type Search, type WeighInput } from './search.ts';
import { unknownCauses } from './unknown-causes.ts';

/** All accounts that were weighed closely, with their posterior probabilities; they add up to one. */
export interface Verdict {
  readonly accounts: readonly (Weighed & { readonly probability: number })[];
  readonly bench: Bench;
}

/** Weighs correct work, every slip of the catalogue, pairs of them, handbook values and unknown causes against each other. */
export function weighSlips(input: WeighInput): Verdict | null {
  const base = withSlips(input.steps, []);
  const bench = benchOf(input.fields, input.reading, base, input.errors, input.notGiven);
  if (bench === null) return null;
  const search = startSearch(input, bench);
  search.take(plain(input, [], base, Math.log(priors.correct)));
  for (const steps of input.alsoCorrect) {
    search.take(plain(input, [], withSlips(steps, []), Math.log(priors.correct), input.oneLineReading));
  }
  for (const h of unknownCauses(search)) search.take(h);
  // Where correct work fits, only slips that fit as well can matter, and no replay comes near it.
  const fits = misfits(bench, bench.correct.values).length === 0 && correctStands(search);
  const steps = candidatesOf(search, { replays: 'none', complete: fits, mostOutOfReach: 0 });
  weighLikeliest(search, steps);
  const replays = linesFit(bench) ? [] : candidatesOf(search, replaysAfter(settled(search)));
  weighLikeliest(search, replays);
  const candidates = [...steps, ...replays];
  if (!correctStands(search)) lookCloser(search, candidates);
  return { accounts: normalised(search.found), bench };
}

/** Once a step explains it all, only replays that explain all too are rivals. */
function replaysAfter(explained: boolean): WhichWays {
  return { replays: 'only', complete: explained, mostOutOfReach: explained ? 0 : 2 };
}

/** Accounts with something left over, with slips of the pen, with two causes: only while one cause does not explain it all. */
function lookCloser(search: Search, candidates: readonly Candidate[]): void {
  if (!settled(search)) {
    for (const c of candidates) if (c.explains && c.off.length > 0) search.take(c.hypothesis);
  }
  takeOnTop(search, search.found);
  if (settled(search) || standingOff(search.bench) < 2) return;
  takePairs(search, candidates, !linesFit(search.bench));
  const oneCause = search.found.filter(
    (w) => w.hypothesis.causes.length === 1 && w.hypothesis.meant.size === 0,
  );
  takeOnTop(search, oneCause);
}

/** Values that come from the lines with nothing but sums: a slip in the lines shows in one of them. */
const fromLines: ReadonlySet<QuantityKey> = new Set<QuantityKey>([
  'nu0',
  'nu02',
  'B0',
  'B1',
  'B2',
  'Be',
  'alphaE',
  'D',
]);

/** True where at least two values from the lines were given, and all of them are what correct lines give: then no replay is needed. */
function linesFit(bench: Bench): boolean {
  const given = bench.fields.flatMap((f, i) => (fromLines.has(f.key) ? [{ f, i }] : []));
  return given.length >= 2 && given.every(({ f, i }) => !standsOff(bench, f, i));
}

function standsOff(bench: Bench, f: Field, i: number): boolean {
  return Math.abs(f.value - bench.correct.values[f.key]!) > 2.5 * bench.careful[i]!;
}

/** How many values stand off correct work by more than a careful reading explains; two causes need two at least. */
function standingOff(bench: Bench): number {
  return bench.fields.filter((f, i) => standsOff(bench, f, i)).length;
}

/** Candidates that leave nothing plainly unexplained, from the likeliest on, until the rest cannot matter. */
function weighLikeliest(search: Search, candidates: readonly Candidate[]): void {
  const complete = candidates.filter((c) => c.off.length === 0).sort((a, b) => b.most - a.most);
  for (const c of complete) {
    if (!canMatter(search, c.most)) return;
    search.take(c.hypothesis);
  }
}

/** True where correct work explains everything, and better than anything weighed so far. */
function correctStands({ bench, best }: Search): boolean {
  const top = best();
  return top !== null && top.hypothesis.causes.length === 0 && complete(top) && standingOff(bench) === 0;
}

/**
 * True where one cause at most explains every value about as closely as any account could: a second cause costs more prior
 * probability than the fit could still gain.
 */
function settled({ bench, best }: Search): boolean {
  const top = best();
  return (
    top !== null &&
    complete(top) &&
    top.hypothesis.causes.length <= 1 &&
    couldGain(bench, top) < costOfSecondCause
  );
}

/** ln of the prior probability that a second cause costs, and of what closer numbers gain by chance. */
const costOfSecondCause = 13;

function complete({ hypothesis, unexplained }: Weighed): boolean {
  return unexplained.length === 0 && hypothesis.free.size === 0;
}

function normalised(found: readonly Weighed[]): (Weighed & { probability: number })[] {
  const total = logSum(found.map((w) => w.logWeight));
  return found
    .map((w) => ({ ...w, probability: Math.exp(w.logWeight - total) }))
    .sort((a, b) => b.probability - a.probability);
}
