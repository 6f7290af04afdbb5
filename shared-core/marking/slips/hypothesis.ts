import type { Values } from '../../reference/methods/derive.ts';
import type { QuantityKey } from '../../units/types.ts';
import type { Field } from './fields.ts';
import {
  chiSquared,
  covarianceFactor,
  linearise,
  logProbability,
  standardDeviations,
  type LinearPrediction,
  type ReadingError,
} from './likelihood.ts';
import { predict, type SlippedSteps } from './predict.ts';
import { logUnknownDensity, priors } from './priors.ts';
import type { Reading } from './reading.ts';

/** A named cause within a hypothesis. */
export interface Cause {
  readonly code: string;
  readonly formula: string;
  /** Quantities that it can move by itself; all where absent. */
  readonly moves?: ReadonlySet<QuantityKey>;
  /** The one quantity that it concerns, where it is a slip of the pen. */
  readonly only?: QuantityKey;
}

/** One account of all submitted values. */
export interface Hypothesis {
  readonly causes: readonly Cause[];
  readonly slipped: SlippedSteps;
  readonly reading: Reading;
  readonly errors: readonly ReadingError[];
  readonly logPrior: number;
  /** Fields that are unknown by hypothesis (and may be carried on from). */
  readonly free: ReadonlySet<QuantityKey>;
  /** Fields copied from a handbook to all their digits. */
  readonly copied: ReadonlySet<QuantityKey>;
  /** Numbers taken as meant in place of those written, with their cause among `causes`. */
  readonly meant: ReadonlyMap<QuantityKey, number>;
}

/** A hypothesis weighed. */
export interface Weighed {
  readonly hypothesis: Hypothesis;
  readonly logWeight: number;
  /** What it predicts for every quantity. */
  readonly predicted: Values;
  /** Fields that it leaves unexplained. */
  readonly unexplained: readonly QuantityKey[];
}

/** The submission against which hypotheses are weighed. */
export interface Bench {
  /** Quantities asked for and not handed in. */
  readonly notGiven: readonly QuantityKey[];
  readonly fields: readonly Field[];
  /** Correct work: values, and the standard deviation of each field with a generous reading error. */
  readonly correct: LinearPrediction;
  readonly generous: readonly number[];
  /** The same with a careful reading. */
  readonly careful: readonly number[];
  /** For each reading error: its prior, the standard deviations of the fields, and the highest ln density of all of them together. */
  readonly levels: readonly {
    readonly logPrior: number;
    readonly deviations: readonly number[];
    readonly logPeak: number;
    /** Cholesky factor of their covariance. */
    readonly factor: Float64Array | null;
  }[];
  readonly correctReading: Reading;
}

/** Generous windows decide only what is looked at closely; the weighing itself uses the stated errors. */
const windowSigmas = 7;
const mostUnexplained = 2;
/** ln of the share of students who hand in a value that their own method does not yield. */
const logExtraValue = Math.log(0.1);
/** ln of the share who leave a value blank that their own method yields. */
const logLeftBlank = Math.log(0.1);
/** A careful reading of a line, cm-1 (common practice). */
const carefulPerCm = 0.05;
/** ln of the share of copied numbers that keep just these digits. */
const logCopiedDigits = Math.log(1 / 3);

export function benchOf(
  fields: readonly Field[],
  reading: Reading,
  base: SlippedSteps,
  errors: readonly ReadingError[],
  notGiven: readonly QuantityKey[] = [],
): Bench | null {
  const predicted = predict(reading.context(reading.mean), base);
  const known = fields.filter((f) => predicted[f.key] !== undefined);
  const correct = linearise(reading, base, known);
  if (correct === null || known.length === 0) return null;
  const largest = Math.max(...errors.map((e) => e.perCm));
  const smallest = Math.min(...errors.map((e) => e.perCm));
  const exact = known.map((f) => ({ ...f, value: correct.values[f.key]! }));
  return {
    notGiven,
    fields: known,
    correct,
    levels: errors.map((error) => ({
      logPrior: Math.log(error.prior),
      deviations: standardDeviations(known, correct, reading, error.perCm),
      factor: covarianceFactor(known, correct, reading, error.perCm),
      logPeak: logProbability(exact, correct, reading, [{ ...error, prior: 1 }]),
    })),
    generous: standardDeviations(known, correct, reading, largest),
    careful: standardDeviations(
      known,
      correct,
      reading,
      Math.min(carefulPerCm, Math.sqrt(smallest * largest)),
    ),
    correctReading: reading,
  };
}

/** True where a number of this quantity was handed in and is plainly not this value. */
export function isMisfit(bench: Bench, key: QuantityKey, value: number): boolean {
  for (let i = 0; i < bench.fields.length; i++) {
    const f = bench.fields[i]!;
    if (f.key !== key) continue;
    const scale = Math.max(1, Math.abs(value / bench.correct.values[key]!));
    return Math.abs(f.value - value) > windowSigmas * bench.generous[i]! * scale;
  }
  return false;
}

/** Fields whose number is plainly not what the values say. */
export function misfits(
  bench: Bench,
  values: Values,
  { free, meant }: Pick<Hypothesis, 'free' | 'meant'> = { free: nothingFree, meant: nothingMeant },
): number[] {
  const out: number[] = [];
  for (let i = 0; i < bench.fields.length; i++) {
    const f = bench.fields[i]!;
    if (free.has(f.key)) continue;
    const predicted = values[f.key];
    if (predicted === undefined) continue;
    const expected = bench.correct.values[f.key]!;
    const scale = Math.max(1, Math.abs(predicted / expected));
    const value = meant.get(f.key) ?? f.value;
    if (Math.abs(value - predicted) > windowSigmas * bench.generous[i]! * scale) out.push(i);
  }
  return out;
}

/**
 * About the most that a hypothesis can weigh: for each reading error the peak of the density of correct work, less half of the square of
 * the worst single deviation. Cheap, and good enough to decide what is worth weighing.
 *
 * @param close true where correct work fits: then what competes with it scatters as it does, and chi squared with the covariance of
 * correct work takes the place of the worst deviation.
 */
export function mostWeight(bench: Bench, values: Values, hypothesis: Hypothesis, close = false): number {
  const { fields, correct, levels } = bench;
  const off: number[] = [];
  let sameScale = true;
  for (const f of fields) {
    const predicted = values[f.key];
    const ratio = predicted === undefined ? 1 : predicted / correct.values[f.key]!;
    sameScale &&= ratio > 0.8 && ratio < 1.25;
    off.push(predicted === undefined ? 0 : f.value - predicted);
  }
  let most = -Infinity;
  for (const { logPrior, deviations, logPeak, factor } of levels) {
    const fit =
      close && sameScale && factor !== null
        ? -0.5 * chiSquared(factor, off)
        : fitOfWorst(bench, values, deviations);
    most = Math.max(most, logPrior + logPeak + fit);
  }
  return hypothesis.logPrior + most;
}

/** The worst single deviation, and how much sharper the density is where values scatter at another scale. */
function fitOfWorst(bench: Bench, values: Values, deviations: readonly number[]): number {
  let worst = 0;
  let sharper = 0;
  for (let i = 0; i < bench.fields.length; i++) {
    const f = bench.fields[i]!;
    const predicted = values[f.key];
    if (predicted === undefined) continue;
    // A value at another scale scatters at that scale, down to its last digit.
    const ratio = Math.abs(predicted / bench.correct.values[f.key]!);
    const model = Math.sqrt(Math.max(deviations[i]! ** 2 - f.roundingVariance, 0));
    const deviation = Math.hypot(model * ratio, Math.sqrt(f.roundingVariance));
    worst = Math.max(worst, Math.abs(f.value - predicted) / deviation);
    sharper += Math.log(deviations[i]! / deviation);
  }
  return sharper - 0.5 * worst * worst;
}

/** By how much ln of the probability would rise if every number stood exactly where the account puts it. */
export function couldGain(bench: Bench, { hypothesis, predicted }: Weighed): number {
  const active = bench.fields.filter((f) => predicted[f.key] !== undefined && !hypothesis.copied.has(f.key));
  const asWritten = active.map((f) => ({ ...f, value: hypothesis.meant.get(f.key) ?? f.value }));
  const linear = linearise(hypothesis.reading, hypothesis.slipped, active);
  if (linear === null) return 0;
  const exact = active.map((f) => ({ ...f, value: linear.values[f.key]! }));
  const log = (fields: readonly Field[]): number =>
    logProbability(fields, linear, hypothesis.reading, hypothesis.errors);
  return log(exact) - log(asWritten);
}

/** Weighs a hypothesis; null where it leaves too much unexplained to be worth a closer look. */
export function weigh(bench: Bench, hypothesis: Hypothesis, values?: Values): Weighed | null {
  const predicted =
    values ?? predict(hypothesis.reading.context(hypothesis.reading.mean), hypothesis.slipped);
  const off = misfits(bench, predicted, hypothesis);
  if (
    off.length > mostUnexplained ||
    (off.length > 0 && off.length + hypothesis.free.size >= bench.fields.length)
  ) {
    return null;
  }
  const first = weighWithout(bench, hypothesis, predicted, new Set(off));
  if (off.length >= mostUnexplained || bench.fields.length - off.length < 3) return first;
  // One field further may be better taken as unexplained: the one that stands farthest off is tried.
  const candidates = bench.fields
    .map((f, i) => ({
      i,
      off:
        Math.abs((hypothesis.meant.get(f.key) ?? f.value) - (predicted[f.key] ?? f.value)) /
        bench.generous[i]!,
    }))
    .filter(({ i, off: o }) => o > 0.05 && !off.includes(i) && !hypothesis.free.has(bench.fields[i]!.key))
    .sort((a, b) => b.off - a.off)
    .slice(0, hypothesis.causes.length === 0 && hypothesis.free.size === 0 ? bench.fields.length : 2);
  let best = first;
  for (const { i } of candidates) {
    const other = weighWithout(bench, hypothesis, predicted, new Set([...off, i]));
    if (other.logWeight > best.logWeight) best = other;
  }
  return best;
}

function weighWithout(
  bench: Bench,
  hypothesis: Hypothesis,
  predicted: Values,
  without: ReadonlySet<number>,
): Weighed {
  let logWeight = hypothesis.logPrior;
  for (const key of bench.notGiven) if (predicted[key] !== undefined) logWeight += logLeftBlank;
  const active: Field[] = [];
  bench.fields.forEach((f, i) => {
    const expected = bench.correct.values[f.key]!;
    if (hypothesis.free.has(f.key) || without.has(i)) {
      logWeight += logUnknown(f, expected) + (without.has(i) ? Math.log(priors.unknownValue) : 0);
    } else if (hypothesis.copied.has(f.key)) {
      logWeight += logCopiedDigits;
    } else if (predicted[f.key] === undefined) {
      logWeight += logMarginal(f, expected, bench.generous[i]!) + logExtraValue;
    } else {
      const meant = hypothesis.meant.get(f.key);
      active.push(meant === undefined ? f : { ...f, value: meant });
    }
  });
  const linear = linearise(hypothesis.reading, hypothesis.slipped, active);
  logWeight +=
    linear === null ? -Infinity : logProbability(active, linear, hypothesis.reading, hypothesis.errors);
  return {
    hypothesis,
    logWeight,
    predicted,
    unexplained: [...without].map((i) => bench.fields[i]!.key),
  };
}

/** ln of the probability mass of a number that something unknown produced. */
function logUnknown(f: Field, expected: number): number {
  return logUnknownDensity(f.value, expected) - Math.log(Math.abs(f.value)) + Math.log(2 * f.halfWidth);
}

function logMarginal(f: Field, expected: number, sd: number): number {
  const z = (f.value - expected) / sd;
  return -0.5 * (z * z + Math.log(2 * Math.PI)) - Math.log(sd) + Math.log(2 * f.halfWidth);
}

export const nothingFree: ReadonlySet<QuantityKey> = new Set();
export const nothingMeant: ReadonlyMap<QuantityKey, number> = new Map();
