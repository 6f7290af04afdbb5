import { derive, type DeriveContext, type Values } from '../../reference/methods/derive.ts';
import type { QuantityKey } from '../../units/types.ts';
import { slipCatalogue } from './catalogue.ts';
import type { SlipDefinition, SlipVariant } from './definition.ts';
import { isMisfit, misfits, mostWeight, type Bench, type Hypothesis } from './hypothesis.ts';
import { predict, withSlips, writtenWith } from './predict.ts';
import { priors, shareOf } from './priors.ts';
import type { Reading } from './reading.ts';
import { plain, type Search } from './search.ts';

/** One way of one slip, with what it predicts held against the fields. */
export interface Candidate {
  readonly hypothesis: Hypothesis;
  readonly variant: SlipVariant;
  readonly off: readonly number[];
  /** False where all that it moves is plainly not there: then it can only be the second of a pair. */
  readonly explains: boolean;
  /** What it predicts. */
  readonly values: Values;
  /** The fields of `off`, and those that it moves, one bit each. */
  readonly offBits: number;
  readonly moveBits: number;
  /** About the most that it can weigh; −∞ where something is left over. */
  readonly most: number;
}

/** Which ways are listed. */
export interface WhichWays {
  readonly replays: 'none' | 'all' | 'only';
  /** True: only ways that leave nothing plainly unexplained. */
  readonly complete: boolean;
  /** Fields that a replay may miss by far. */
  readonly mostOutOfReach: number;
}

/** Every way of every slip that is not plainly out of the question. */
export function candidatesOf(search: Search, which: WhichWays): Candidate[] {
  const total = slipCatalogue.reduce((sum, d) => sum + d.weight, 0);
  const { input, bench } = search;
  const context = input.reading.context(input.reading.mean);
  // What most ways start from: they change only what is written down.
  const unslipped = derive(context, input.steps);
  return input.ways.flatMap(({ definition, variants }) => {
    const all = variants.reduce((sum, v) => sum + (v.often ?? 1), 0);
    return variants.flatMap((variant) => {
      const logPrior = Math.log((priors.oneSlip * shareOf(definition, total) * (variant.often ?? 1)) / all);
      if (variant.replay !== undefined) {
        return which.replays === 'none' ? [] : replayed(search, definition, variant, logPrior, which);
      }
      if (which.replays === 'only') return [];
      if (which.complete && !variant.carried && plainlyOff(bench, variant, unslipped, context)) return [];
      const slipped = withSlips(input.steps, [variant]);
      const values =
        variant.carried || variant.steps === undefined
          ? predict(context, slipped)
          : writtenWith(unslipped, variant.steps, context);
      const reading = variant.readsOneLine === true ? input.oneLineReading : input.reading;
      return asCandidate(search, definition, variant, slipped, logPrior, reading, values, which) ?? [];
    });
  });
}

/** True where a value that the slip writes down is plainly not the one handed in; quicker than the whole prediction. */
function plainlyOff(
  bench: Bench,
  { steps }: SlipVariant,
  unslipped: Values,
  context: DeriveContext,
): boolean {
  for (const key in steps) {
    const quantity = key as QuantityKey;
    const value = steps[quantity]?.(unslipped, context);
    if (value != null && Number.isFinite(value) && isMisfit(bench, quantity, value)) return true;
  }
  return false;
}

function asCandidate(
  { input, bench }: Search,
  definition: SlipDefinition,
  variant: SlipVariant,
  slipped: Hypothesis['slipped'],
  logPrior: number,
  reading: Reading,
  values: Values,
  which: WhichWays,
): Candidate | null {
  const off = misfits(bench, values);
  if (which.complete && off.length > 0) return null;
  const moves = moved(bench, values);
  if (moves.size === 0) return null;
  const cause = { code: definition.code, formula: variant.formula, moves };
  const hypothesis = plain(input, [cause], slipped, logPrior, reading);
  // A slip all of whose effects are plainly not there explains nothing, alone or in a pair.
  const explains =
    off.length === 0 || [...moves].some((key) => !off.some((i) => bench.fields[i]!.key === key));
  const most =
    off.length > 0
      ? -Infinity
      : mostWeight(bench, values, hypothesis, which.complete && variant.replay === undefined);
  const offBits = off.reduce((bits, i) => bits | (1 << i), 0);
  const moveBits = bitsOf(bench, moves);
  return { hypothesis, variant, off, explains, values, offBits, moveBits, most };
}

/**
 * A replay in every group of line sets, unless the values at the least, the middle and the largest number of lines already show that no
 * number in between can fit. Most of the cost of weighing lies here.
 */
function replayed(
  search: Search,
  definition: SlipDefinition,
  variant: SlipVariant,
  logPrior: number,
  which: WhichWays,
): Candidate[] {
  const { input, bench } = search;
  const slipped = withSlips(input.steps, [variant]);
  const valuesOf = (reading: Reading): Values => predict(reading.context(reading.mean), slipped);
  const last = input.groups - 1;
  const coarse = [...new Set([0, Math.floor(last / 2), last])];
  const samples = coarse.flatMap((g) => {
    const reading = input.replayed(variant, g);
    return reading === null ? [] : [valuesOf(reading)];
  });
  if (samples.length === 0 || outOfReach(bench, samples) > which.mostOutOfReach) return [];
  const ofGroup = logPrior - Math.log(input.groups);
  return Array.from({ length: input.groups }, (_, g) => g).flatMap((g) => {
    const reading = input.replayed(variant, g);
    if (reading === null) return [];
    const values = valuesOf(reading);
    if (misfits(bench, values).length > which.mostOutOfReach) return [];
    return asCandidate(search, definition, variant, slipped, ofGroup, reading, values, which) ?? [];
  });
}

/** Quantities as bits in the order of the fields. */
export function bitsOf(bench: Bench, keys: Iterable<QuantityKey>): number {
  let bits = 0;
  for (const key of keys) bits |= 1 << bench.fields.findIndex((f) => f.key === key);
  return bits;
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
