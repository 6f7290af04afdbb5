import type { SlipFinding } from '../types.ts';
import { benchOf, weigh, type Weighed } from './hypothesis.ts';
import { unknownReadingErrors } from './likelihood.ts';
import { unslipped } from './predict.ts';
import { priors } from './priors.ts';
import { shown, symbols } from './numbers.ts';
import { plainHypothesis } from './search.ts';
import type { Verdict } from './weigh-slips.ts';

/** Prior probability that the columns of two isotopologues stand in each other's place. */
const priorOfExchange = 0.01;
/** Below this the exchange is not worth a line. */
const shownFrom = 0.5;

/** The values of one isotopologue and what was made of them. */
export interface SubmissionPart {
  readonly isotopologue: string;
  readonly verdict: Verdict;
}

/**
 * Values of two isotopologues in each other's columns: correct work on the one explains the numbers given for the other, both ways,
 * better than anything explains them where they stand. Null where that is not so.
 */
export function columnsSwapped(a: SubmissionPart, b: SubmissionPart): SlipFinding | null {
  const [aAsB, bAsA] = [exchanged(a, b), exchanged(b, a)];
  if (aAsB === null || bAsA === null) return null;
  const inPlace = total(a.verdict) + total(b.verdict);
  const swapped = aAsB.logWeight + bAsA.logWeight + Math.log(priorOfExchange) - Math.log(priors.correct);
  const probability = 1 / (1 + Math.exp(inPlace - swapped));
  if (probability < shownFrom) return null;
  const example = a.verdict.bench.fields[0]!;
  return {
    code: 'isotope-columns-swapped',
    probability,
    isotopologue: null,
    quantities: a.verdict.bench.fields.map((f) => f.key),
    text: `The values of ${a.isotopologue} and ${b.isotopologue} stand in each other’s columns. For example ${symbols[example.key]} ${shown(example.value)} is given for ${a.isotopologue}, and ${b.isotopologue} has ${shown(aAsB.predicted[example.key] ?? NaN)}.`,
    tellApart: null,
  };
}

function exchanged(own: SubmissionPart, other: SubmissionPart): Weighed | null {
  const reading = other.verdict.bench.correctReading;
  const { fields } = own.verdict.bench;
  const bench = benchOf(fields, reading, unslipped, unknownReadingErrors);
  if (bench === null || bench.fields.length < fields.length || fields.length < 2) return null;
  const fit = weigh(
    bench,
    plainHypothesis(unslipped, reading, unknownReadingErrors, Math.log(priors.correct)),
  );
  return fit === null || fit.unexplained.length > 0 ? null : fit;
}

/** ln of the weight of the likeliest account where the values stand. */
function total({ accounts }: Verdict): number {
  return accounts[0]?.logWeight ?? -Infinity;
}
