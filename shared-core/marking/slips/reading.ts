import type { Isotopologue } from '../../molecule/types.ts';
import {
  stackPrimitives,
  type MethodExtra,
  type StackedPrimitives,
} from '../../reference/methods/constants-by-method.ts';
import type { DeriveContext } from '../../reference/methods/derive.ts';
import type { LineSet } from '../../reference/methods/line-sets.ts';
import type { MethodSettings, PrescribedMethod } from '../../reference/types.ts';
import type { SlipVariant } from './definition.ts';

/**
 * What a student who read the lines correctly (or in the way of one slip) would take from them: the primitives of the method, their
 * covariance from the reference and from the choice of lines, and that of one unit of reading error (1 cm-1 on every line).
 */
export interface Reading {
  readonly context: (values: readonly number[]) => DeriveContext;
  readonly mean: readonly number[];
  /** Covariances, worked out when they are first asked for: most readings are dismissed by their values alone. */
  readonly covariances: () => ReadingCovariances;
}

/** Row-major, p × p. */
export interface ReadingCovariances {
  /** From the reference's lines and the choice of lines. */
  readonly fixed: Float64Array;
  /** For a reading error of 1 cm-1. */
  readonly reading: Float64Array;
}

/** Sets that stand for all admissible ones when slips are weighed: the choice of lines moves values little beside a slip. */
const mostSets = 9;

/** At most nine sets, spread evenly over all. */
export function representativeSets(sets: readonly LineSet[]): LineSet[] {
  if (sets.length <= mostSets) return [...sets];
  return Array.from(
    { length: mostSets },
    (_, i) => sets[Math.round((i * (sets.length - 1)) / (mostSets - 1))]!,
  );
}

/** Branches further out of balance than this are left to the scatter among sets: replays look at the likely ones. */
const largestImbalance = 2;
const mostGroups = 60;

/**
 * Sets for replays, each by itself: what wrong numbering gives depends much on the numbers of P and R lines, so no mean over sets will
 * do. Balanced sets, by number of lines; those of the fullest balance alone where there would be too many.
 */
export function groupsForReplays(sets: readonly LineSet[]): LineSet[][] {
  const imbalance = ({ lines }: LineSet): number =>
    Math.abs(lines.reduce((sum, l) => sum + Math.sign(l.m), 0));
  const least = Math.min(...sets.map(imbalance));
  for (let allowed = Math.max(largestImbalance, least); allowed > least; allowed--) {
    const chosen = sets.filter((s) => imbalance(s) <= allowed);
    if (chosen.length <= mostGroups) return sorted(chosen);
  }
  return sorted(sets.filter((s) => imbalance(s) === least).slice(0, mostGroups));
}

function sorted(sets: readonly LineSet[]): LineSet[][] {
  return [...sets].sort((a, b) => b.lines.length - a.lines.length).map((s) => [s]);
}

/**
 * Reading of a group of line sets, with a replay applied to each where there is one.
 *
 * The mean over the sets stands for all; their scatter joins the covariance. Null where no set carries the method.
 */
export function readingOf(
  sets: readonly LineSet[],
  method: PrescribedMethod,
  settings: MethodSettings,
  isotopologue: Isotopologue,
  extra: MethodExtra,
  replay?: SlipVariant['replay'],
): Reading | null {
  const stacks: StackedPrimitives[] = [];
  for (const { lines } of sets) {
    const replayed = replay === undefined ? { lines, method: null } : replay(lines);
    if (replayed === null) continue;
    const stacked = stackPrimitives(replayed.lines, replayed.method ?? method, settings, isotopologue, extra);
    if ('reason' in stacked) continue;
    if (stacks[0] === undefined || stacks[0].values.length === stacked.values.length) stacks.push(stacked);
  }
  const first = stacks[0];
  if (first === undefined) return null;
  const mean = first.values.map((_, i) => average(stacks.map((s) => s.values[i]!)));
  let known: ReadingCovariances | null = null;
  return { context: first.context, mean, covariances: () => (known ??= covariancesOf(stacks, mean)) };
}

/**
 * The same reading with the error of one single line beside it, for steps that read a line and not the fit.
 *
 * @param leastPerCm error of a single line that is there even where the fit is known exactly (a table of lines was handed in).
 */
export function withOneLine(reading: Reading, leastPerCm = 0): Reading {
  const p = reading.mean.length;
  const grown = (covariance: Float64Array, last: number): Float64Array => {
    const out = new Float64Array((p + 1) ** 2);
    for (let i = 0; i < p; i++) for (let j = 0; j < p; j++) out[i * (p + 1) + j] = covariance[i * p + j]!;
    out[(p + 1) ** 2 - 1] = last;
    return out;
  };
  let known: ReadingCovariances | null = null;
  return {
    mean: [...reading.mean, 0],
    context: (values) => ({ ...reading.context(values), oneLine: values[p]! }),
    covariances: () => {
      const { fixed, reading: unit } = reading.covariances();
      return (known ??= { fixed: grown(fixed, leastPerCm ** 2), reading: grown(unit, 1) });
    },
  };
}

function covariancesOf(stacks: readonly StackedPrimitives[], mean: readonly number[]): ReadingCovariances {
  const p = mean.length;
  const fixed = new Float64Array(p * p);
  const reading = new Float64Array(p * p);
  for (const { values, covariance, readingCovariance } of stacks) {
    const [own, unit] = [covariance(), readingCovariance()];
    for (let i = 0; i < p; i++) {
      for (let j = 0; j < p; j++) {
        const scatter = (values[i]! - mean[i]!) * (values[j]! - mean[j]!);
        fixed[i * p + j]! += (own[i * p + j]! + scatter) / stacks.length;
        reading[i * p + j]! += unit[i * p + j]! / stacks.length;
      }
    }
  }
  return { fixed, reading };
}

function average(values: readonly number[]): number {
  return values.reduce((a, b) => a + b, 0) / values.length;
}
