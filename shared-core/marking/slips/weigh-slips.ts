import { bondLengthFactor, forceConstantFactor } from '../../molecule/physical-constants.ts';
import { forceConstantWavenumber, type Step, type Values } from '../../reference/methods/derive.ts';
import type { QuantityKey } from '../../units/types.ts';
import { slipCatalogue } from './catalogue.ts';
import type { SlipDefinition, SlipSurroundings, SlipVariant, Steps } from './definition.ts';
import type { Field } from './fields.ts';
import {
  benchOf,
  misfits,
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
  const candidates = singles(input, bench, correctOff.length > 0 || stoodOff(bench) || !settled(found));
  for (const c of candidates) take(c.hypothesis);
  writtenSlips(bench, found, take);
  if (!settled(found)) {
    pairs(input, bench, candidates, take);
    writtenSlips(
      bench,
      found.filter((w) => w.hypothesis.causes.length === 1 && w.hypothesis.meant.size === 0),
      take,
    );
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

/** True where some account without unknown parts already stands far above the rest. */
function settled(found: readonly Weighed[]): boolean {
  const best = found.reduce<Weighed | null>(
    (a, b) => (a === null || b.logWeight > a.logWeight ? b : a),
    null,
  );
  return best !== null && best.unexplained.length === 0 && best.hypothesis.free.size === 0;
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
function singles(input: WeighInput, bench: Bench, withReplays: boolean): Candidate[] {
  const total = slipCatalogue.reduce((sum, d) => sum + d.weight, 0);
  return slipCatalogue.flatMap((definition) => {
    const variants = definition.variants(input.surroundings);
    const all = variants.reduce((sum, v) => sum + (v.often ?? 1), 0);
    return variants.flatMap((variant) => {
      if (variant.replay !== undefined && !withReplays) return [];
      const share = (variant.often ?? 1) / all;
      const logPrior = Math.log(priors.oneSlip * shareOf(definition, total) * share);
      return asCandidates(input, bench, definition, variant, logPrior);
    });
  });
}

function asCandidates(
  input: WeighInput,
  bench: Bench,
  definition: SlipDefinition,
  variant: SlipVariant,
  logPrior: number,
): Candidate[] {
  const slipped = withSlips(input.steps, [variant]);
  const readings =
    variant.replay === undefined ? [input.reading] : replayedReadings(input, bench, variant, slipped);
  return readings.flatMap((reading) => {
    const values = predict(reading.context(reading.mean), slipped);
    const cause = { code: definition.code, formula: variant.formula, moves: moved(bench, values) };
    const hypothesis = plain(input, [cause], slipped, logPrior - Math.log(readings.length), reading);
    const off = misfits(bench, values, hypothesis);
    return cause.moves.size > 0 ? [{ hypothesis, variant, off }] : [];
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
): Reading[] {
  const last = input.groups - 1;
  const coarse = [...new Set([0, Math.floor(last / 2), last])];
  const known = new Map(coarse.map((g) => [g, input.replayed(variant, g)]));
  const samples = [...known.values()].flatMap((r) =>
    r === null ? [] : [predict(r.context(r.mean), slipped)],
  );
  if (samples.length === 0 || outOfReach(bench, samples) > Math.max(2, Math.floor(bench.fields.length / 2)))
    return [];
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

/** Numbers with a slip of the pen, on top of accounts that leave exactly such numbers unexplained. */
function writtenSlips(bench: Bench, found: readonly Weighed[], take: (h: Hypothesis) => void): void {
  const best = [...found]
    .filter((w) => w.unexplained.length > 0)
    .sort((a, b) => b.logWeight - a.logWeight)
    .slice(0, 6);
  for (const { hypothesis, predicted, unexplained } of best) {
    for (const key of unexplained) {
      const i = bench.fields.findIndex((f) => f.key === key);
      const field = bench.fields[i]!;
      for (const meant of meantNumbers(field)) {
        if (Math.abs(meant.value - (predicted[key] ?? Infinity)) > 5 * bench.generous[i]!) continue;
        const weight = meant.code === 'digits-swapped' ? 0.01 : 0.006;
        take({
          ...hypothesis,
          causes: [
            ...hypothesis.causes,
            { code: meant.code, formula: `${field.submitted.text} for ${meant.text}` },
          ],
          logPrior: hypothesis.logPrior + Math.log(weight / meant.among),
          meant: new Map([...hypothesis.meant, [key, meant.value]]),
        });
      }
    }
  }
}

const mostFirstCauses = 14;

/** Two causes together: first ones that explain something, with every second one that explains the rest. */
function pairs(
  input: WeighInput,
  bench: Bench,
  candidates: readonly Candidate[],
  take: (h: Hypothesis, values: Values) => void,
): void {
  const firsts = candidates
    .filter((c) => c.off.length > 0 && c.off.length < bench.fields.length)
    .sort((a, b) => a.off.length - b.off.length || b.hypothesis.logPrior - a.hypothesis.logPrior)
    .slice(0, mostFirstCauses);
  const seconds = distinctVariants(candidates);
  for (const first of firsts) {
    for (const second of seconds) {
      const [a, b] = [first.hypothesis.causes[0]!, second.hypothesis.causes[0]!];
      if (a.code === b.code || sameSteps(first.variant, second.variant)) continue;
      const slipped = withSlips(input.steps, [first.variant, second.variant]);
      const reading = first.hypothesis.reading;
      const logPrior =
        first.hypothesis.logPrior +
        second.hypothesis.logPrior -
        2 * Math.log(priors.oneSlip) +
        Math.log(2 * priors.twoSlips);
      const hypothesis = plain(input, [a, b], slipped, logPrior, reading);
      const values = predict(reading.context(reading.mean), slipped);
      if (misfits(bench, values, hypothesis).length === 0) take(hypothesis, values);
    }
  }
}

/** Step slips, each once; replays enter pairs as first causes only. */
function distinctVariants(candidates: readonly Candidate[]): Candidate[] {
  return candidates.filter((c) => c.variant.replay === undefined);
}

function sameSteps(a: SlipVariant, b: SlipVariant): boolean {
  const keys = Object.keys(a.steps ?? {});
  return a.carried === b.carried && keys.some((key) => key in (b.steps ?? {}));
}

function normalised(found: readonly Weighed[]): (Weighed & { probability: number })[] {
  const total = logSum(found.map((w) => w.logWeight));
  return found
    .map((w) => ({ ...w, probability: Math.exp(w.logWeight - total) }))
    .sort((a, b) => b.probability - a.probability);
}
