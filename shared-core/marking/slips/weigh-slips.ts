import { bondLengthFactor, forceConstantFactor } from '../../molecule/physical-constants.ts';
import { forceConstantWavenumber, type Step, type Values } from '../../reference/methods/derive.ts';
import type { QuantityKey } from '../../units/types.ts';
import { slipCatalogue, slipNamed } from './catalogue.ts';
import type { SlipDefinition, SlipSurroundings, SlipVariant, Steps } from './definition.ts';
import type { Field } from './fields.ts';
import {
  benchOf,
  couldGain,
  misfits,
  mostWeight,
  nothingFree,
  nothingMeant,
  weigh,
  type Bench,
  type Hypothesis,
  type Weighed,
} from './hypothesis.ts';
import { logSum, type ReadingError } from './likelihood.ts';
import { predict, withSlips } from './predict.ts';
import { priors, shareOf } from './priors.ts';
import type { Reading } from './reading.ts';
import { meantNumbers } from './written-slips.ts';

/** Everything that the weighing of one isotopologue's values needs. */
export interface WeighInput {
  readonly fields: readonly Field[];
  /** Reading of correct lines. */
  readonly reading: Reading;
  /** The catalogue with the ways in which each slip can have happened here. */
  readonly ways: readonly {
    readonly definition: SlipDefinition;
    readonly variants: readonly SlipVariant[];
  }[];
  /** Number of groups of line sets, by number of lines; a replay depends much on that number. */
  readonly groups: number;
  /** Reading of the replayed lines of one group; null where they do not carry the method. */
  readonly replayed: (variant: SlipVariant, group: number) => Reading | null;
  readonly errors: readonly ReadingError[];
  readonly surroundings: SlipSurroundings;
  /** Correct steps: the standard ones, or what an accepted method allows in their place. */
  readonly steps: Readonly<Record<QuantityKey, Step>>;
  /** Handbook values of the isotopologue, where there are. */
  readonly handbook: Values;
}

/** All accounts that were weighed closely, with their posterior probabilities; they add up to one. */
export interface Verdict {
  readonly accounts: readonly (Weighed & { readonly probability: number })[];
  readonly bench: Bench;
}

interface Candidate {
  readonly hypothesis: Hypothesis;
  readonly variant: SlipVariant;
  readonly off: readonly number[];
  /** False where all that it moves is plainly not there: then it can only be the second of a pair. */
  readonly explains: boolean;
  /** About the most that it can weigh. */
  readonly most: number;
}

/** Weighs correct work, every slip of the catalogue, pairs of them, handbook values and unknown causes against each other. */
export function weighSlips(input: WeighInput): Verdict | null {
  const base = withSlips(input.steps, []);
  const bench = benchOf(input.fields, input.reading, base, input.errors);
  if (bench === null) return null;
  const found: Weighed[] = [];
  const take = (h: Hypothesis, values?: Values): Weighed | null => {
    const weighed = weigh(bench, h, values);
    if (weighed !== null && everyCauseExplains(weighed)) found.push(weighed);
    return weighed;
  };
  const correct = plain(input, [], base, Math.log(priors.correct));
  take(correct);
  const correctOff = misfits(bench, bench.correct.values, correct);
  for (const h of unknowns(input, bench)) take(h);
  const candidates = singles(input, bench, correctOff.length > 0 || !correctStands(bench, found));
  weighLikeliest(candidates, found, take);
  if (!correctStands(bench, found)) {
    if (!settled(bench, found))
      for (const c of candidates) if (c.explains && c.off.length > 0) take(c.hypothesis);
    onTop(input, bench, found, take);
    if (!settled(bench, found)) {
      pairs(input, bench, candidates, found, take);
      onTop(
        input,
        bench,
        found.filter((w) => w.hypothesis.causes.length === 1 && w.hypothesis.meant.size === 0),
        take,
      );
    }
  }
  return { accounts: normalised(found), bench };
}

/** A named cause that leaves all that it moves unexplained explains nothing. */
function everyCauseExplains({ hypothesis, unexplained }: Weighed): boolean {
  return hypothesis.causes.every(
    ({ moves }) => moves === undefined || [...moves].some((key) => !unexplained.includes(key)),
  );
}

/** True where some value stands off correct work by more than a careful reading explains. */
function stoodOff(bench: Bench): boolean {
  return bench.fields.some(
    (f, i) => Math.abs(f.value - bench.correct.values[f.key]!) > 2.5 * bench.careful[i]!,
  );
}

/** Candidates that leave nothing plainly unexplained, from the likeliest on, until the rest cannot matter. */
function weighLikeliest(
  candidates: readonly Candidate[],
  found: readonly Weighed[],
  take: (h: Hypothesis) => void,
): void {
  const complete = candidates.filter((c) => c.off.length === 0).sort((a, b) => b.most - a.most);
  for (const c of complete) {
    if (c.most < (best(found)?.logWeight ?? -Infinity) - cannotMatter) return;
    take(c.hypothesis);
  }
}

/** ln of the odds beyond which an account is not worth weighing; generous, since the most it can weigh is only about known. */
const cannotMatter = 14;

function best(found: readonly Weighed[]): Weighed | null {
  return found.reduce<Weighed | null>((a, b) => (a === null || b.logWeight > a.logWeight ? b : a), null);
}

/** True where correct work explains everything, and better than anything weighed so far. */
function correctStands(bench: Bench, found: readonly Weighed[]): boolean {
  const top = best(found);
  return top !== null && top.hypothesis.causes.length === 0 && complete(top) && !stoodOff(bench);
}

/**
 * True where one cause at most explains every value about as closely as any account could: a second cause costs more prior
 * probability than the fit could still gain.
 */
function settled(bench: Bench, found: readonly Weighed[]): boolean {
  const top = best(found);
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

function plain(
  input: WeighInput,
  causes: Hypothesis['causes'],
  slipped: Hypothesis['slipped'],
  logPrior: number,
  reading: Reading = input.reading,
): Hypothesis {
  return {
    causes,
    slipped,
    reading,
    errors: input.errors,
    logPrior,
    free: nothingFree,
    copied: nothingFree,
    meant: nothingMeant,
  };
}

/** Every way of every slip that is not plainly out of the question. */
function singles(
  input: WeighInput,
  bench: Bench,
  withReplays: boolean,
  mostOutOfReach = Math.max(2, Math.floor(bench.fields.length / 2)),
): Candidate[] {
  const total = slipCatalogue.reduce((sum, d) => sum + d.weight, 0);
  return input.ways.flatMap(({ definition, variants }) => {
    const all = variants.reduce((sum, v) => sum + (v.often ?? 1), 0);
    return variants.flatMap((variant) => {
      if (variant.replay !== undefined && !withReplays) return [];
      const share = (variant.often ?? 1) / all;
      const logPrior = Math.log(priors.oneSlip * shareOf(definition, total) * share);
      return asCandidates(input, bench, definition, variant, logPrior, mostOutOfReach);
    });
  });
}

function asCandidates(
  input: WeighInput,
  bench: Bench,
  definition: SlipDefinition,
  variant: SlipVariant,
  logPrior: number,
  mostOutOfReach: number,
): Candidate[] {
  const slipped = withSlips(input.steps, [variant]);
  const readings =
    variant.replay === undefined
      ? [input.reading]
      : replayedReadings(input, bench, variant, slipped, mostOutOfReach);
  return readings.flatMap((reading) => {
    const values = predict(reading.context(reading.mean), slipped);
    const cause = { code: definition.code, formula: variant.formula, moves: moved(bench, values) };
    const hypothesis = plain(input, [cause], slipped, logPrior - Math.log(readings.length), reading);
    const off = misfits(bench, values, hypothesis);
    // A slip all of whose effects are plainly not there explains nothing, alone or in a pair.
    const explains = [...cause.moves].some((key) => !off.some((i) => bench.fields[i]!.key === key));
    if (cause.moves.size === 0) return [];
    return [{ hypothesis, variant, off, explains, most: mostWeight(bench, values, hypothesis) }];
  });
}

/**
 * Readings of all groups, unless the values at the least, the middle and the largest number of lines already show that no number in
 * between can fit: most of the cost of weighing lies here.
 */
function replayedReadings(
  input: WeighInput,
  bench: Bench,
  variant: SlipVariant,
  slipped: Hypothesis['slipped'],
  mostOutOfReach: number,
): Reading[] {
  const last = input.groups - 1;
  const coarse = [...new Set([0, Math.floor(last / 2), last])];
  const known = new Map(coarse.map((g) => [g, input.replayed(variant, g)]));
  const samples = [...known.values()].flatMap((r) =>
    r === null ? [] : [predict(r.context(r.mean), slipped)],
  );
  if (samples.length === 0 || outOfReach(bench, samples) > mostOutOfReach) return [];
  return Array.from({ length: input.groups }, (_, g) => known.get(g) ?? input.replayed(variant, g)).filter(
    (r) => r !== null,
  );
}

/** Fields whose number lies beyond the range of the samples, widened. */
function outOfReach(bench: Bench, samples: readonly Values[]): number {
  let count = 0;
  bench.fields.forEach((f, i) => {
    const values = samples.flatMap((s) => s[f.key] ?? []);
    if (values.length === 0) return;
    const [low, high] = [Math.min(...values), Math.max(...values)];
    const scale = Math.max(1, Math.abs(high / bench.correct.values[f.key]!));
    const room = 0.3 * (high - low) + 7 * bench.generous[i]! * scale;
    if (f.value < low - room || f.value > high + room) count++;
  });
  return count;
}

/** Submitted values that a slip moves by more than their last digits; one that moves none explains nothing. */
function moved(bench: Bench, values: Values): Set<QuantityKey> {
  const changed = bench.fields.filter((f) => {
    const value = values[f.key];
    return (
      value !== undefined &&
      Math.abs(value - bench.correct.values[f.key]!) > f.halfWidth + 1e-6 * Math.abs(value)
    );
  });
  return new Set(changed.map((f) => f.key));
}

/** Accounts with an unknown cause: of one value and what follows from it, of the mass, of the lines; and handbook values. */
function unknowns(input: WeighInput, bench: Bench): Hypothesis[] {
  const has = new Map(bench.fields.map((f) => [f.key, f.value]));
  const carriers = (['nu0', 'B0', 'alphaE', 'Be', 'omegaExe', 'omegaE', 'mu'] as const).filter((k) =>
    has.has(k),
  );
  const list: { free: QuantityKey; steps: Steps }[] = carriers.map((key) => ({
    free: key,
    steps: { [key]: () => has.get(key)! },
  }));
  const implied = impliedMass(input, bench, has);
  if (implied !== null) list.push({ free: implied.from, steps: { mu: () => implied.mass } });
  const hypotheses = list.map(({ free, steps }) => ({
    ...plain(
      input,
      [],
      withSlips(input.steps, [{ steps, carried: true }]),
      Math.log(priors.unknownCarried / Math.max(1, list.length)),
    ),
    free: new Set([free]),
  }));
  const anyLines = plain(input, [], withSlips(input.steps, []), Math.log(priors.unknownLines));
  hypotheses.push({ ...anyLines, errors: [{ perCm: 1, prior: 0.6 }, { perCm: 5, prior: 0.4 }], free: new Set() }); // prettier-ignore
  return [...hypotheses, ...handbookHypotheses(input, bench)];
}

function impliedMass(
  input: WeighInput,
  bench: Bench,
  has: ReadonlyMap<QuantityKey, number>,
): { from: QuantityKey; mass: number } | null {
  const { settings } = input.surroundings;
  const correct = bench.correct.values;
  const b = has.get(settings.bondLengthFrom) ?? correct[settings.bondLengthFrom];
  const re = has.get('re');
  if (re !== undefined && b !== undefined)
    return { from: 're', mass: bondLengthFactor / (Math.abs(b) * re ** 2) };
  const wavenumber = forceConstantWavenumber(settings);
  const omega = has.get(wavenumber) ?? correct[wavenumber];
  const k = has.get('k');
  return k !== undefined && omega !== undefined
    ? { from: 'k', mass: k / (forceConstantFactor * omega ** 2) }
    : null;
}

/** One or all of the values that equal a handbook's, taken from it, the later ones following from them or not. */
function handbookHypotheses(input: WeighInput, bench: Bench): Hypothesis[] {
  const keys = bench.fields.filter((f) => matchesHandbook(f, input.handbook[f.key])).map((f) => f.key);
  if (keys.length === 0) return [];
  const choices = keys.length === 1 ? [keys] : [keys, ...keys.map((k) => [k])];
  const prior = Math.log(priors.handbook / (2 * choices.length));
  return choices.flatMap((chosen) => {
    const steps: Steps = Object.fromEntries(chosen.map((key) => [key, () => input.handbook[key] ?? null]));
    const cause = [{ code: 'value-from-literature', formula: 'handbook value' }];
    return [true, false].map((carried) => ({
      ...plain(input, cause, withSlips(input.steps, [{ steps, carried }]), prior),
      copied: new Set(chosen),
    }));
  });
}

/** Equal to the handbook in every digit that was written, with at least four of them. */
function matchesHandbook(f: Field, handbook: number | undefined): boolean {
  if (handbook === undefined) return false;
  const figures = f.submitted.figures ?? 4;
  return figures >= 4 && Math.abs(f.value - handbook) <= f.halfWidth * 1.001;
}

/** Slips of the pen and handbook values, on top of accounts that leave just such numbers unexplained. */
function onTop(
  input: WeighInput,
  bench: Bench,
  found: readonly Weighed[],
  take: (h: Hypothesis) => void,
): void {
  const most = [...found]
    .filter((w) => w.unexplained.length > 0)
    .sort((a, b) => b.logWeight - a.logWeight)
    .slice(0, 6);
  for (const { hypothesis, predicted, unexplained } of most) {
    for (const key of unexplained) {
      const i = bench.fields.findIndex((f) => f.key === key);
      const field = bench.fields[i]!;
      const expected = predicted[key];
      if (expected === undefined) continue;
      if (matchesHandbook(field, input.handbook[key])) take(copiedOnTop(hypothesis, key));
      for (const meant of meantNumbers(field)) {
        const off = Math.abs(meant.value - expected);
        // What is no nearer than the number as it stands is no slip of the pen.
        if (off > 5 * bench.generous[i]! || 3 * off > Math.abs(field.value - expected)) continue;
        const weight = meant.code === 'digits-swapped' ? priors.digitsSwapped : priors.digitLost;
        const cause = { code: meant.code, formula: `${field.submitted.text} for ${meant.text}`, only: key };
        take({
          ...hypothesis,
          causes: [...hypothesis.causes, cause],
          logPrior: hypothesis.logPrior + Math.log(weight / meant.among),
          meant: new Map([...hypothesis.meant, [key, meant.value]]),
        });
      }
    }
  }
}

function copiedOnTop(hypothesis: Hypothesis, key: QuantityKey): Hypothesis {
  return {
    ...hypothesis,
    causes: [...hypothesis.causes, { code: 'value-from-literature', formula: 'handbook value' }],
    logPrior: hypothesis.logPrior + Math.log(priors.handbook),
    copied: new Set([...hypothesis.copied, key]),
  };
}

const mostFirstCauses = 24;

/**
 * Two causes together: first ones that explain something, with every second one that explains the rest.
 *
 * Firsts are ranked by their weight with unexplained values taken as unknown; those with more of them follow by their number.
 */
function pairs(
  input: WeighInput,
  bench: Bench,
  candidates: readonly Candidate[],
  found: readonly Weighed[],
  take: (h: Hypothesis, values: Values) => void,
): void {
  const weights = new Map(found.map((w) => [w.hypothesis, w.logWeight]));
  const score = (c: Candidate): number =>
    weights.get(c.hypothesis) ?? -1e4 * (1 + c.off.length) + c.hypothesis.logPrior;
  const firsts = candidates
    .filter((c) => c.explains)
    .sort((a, b) => score(b) - score(a))
    .slice(0, mostFirstCauses);
  const replays = singles(input, bench, true, bench.fields.length - 1).filter(
    (c) => c.variant.replay !== undefined,
  );
  const seconds = [...candidates.filter((c) => c.variant.replay === undefined), ...replays];
  const unexplained = new Map(found.map((w) => [w.hypothesis, w.unexplained]));
  for (const first of firsts) {
    const open = unexplained.get(first.hypothesis) ?? first.off.map((i) => bench.fields[i]!.key);
    for (const second of seconds) {
      // A second cause has to touch what the first leaves open.
      if (open.length > 0 && !open.some((key) => second.hypothesis.causes[0]!.moves!.has(key))) continue;
      tryPair(input, bench, first, second, found, take);
    }
  }
}

function tryPair(
  input: WeighInput,
  bench: Bench,
  first: Candidate,
  second: Candidate,
  found: readonly Weighed[],
  take: (h: Hypothesis, values: Values) => void,
): void {
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
  if (misfits(bench, values, hypothesis).length > 0) return;
  if (mostWeight(bench, values, hypothesis) > (best(found)?.logWeight ?? -Infinity) - cannotMatter)
    take(hypothesis, values);
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

function normalised(found: readonly Weighed[]): (Weighed & { probability: number })[] {
  const total = logSum(found.map((w) => w.logWeight));
  return found
    .map((w) => ({ ...w, probability: Math.exp(w.logWeight - total) }))
    .sort((a, b) => b.probability - a.probability);
}
