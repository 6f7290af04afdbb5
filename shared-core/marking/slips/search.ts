import type { Step, Values } from '../../reference/methods/derive.ts';
import type { QuantityKey } from '../../units/types.ts';
import type { SlipDefinition, SlipSurroundings, SlipVariant } from './definition.ts';
import type { Field } from './fields.ts';
import { nothingFree, nothingMeant, weigh, type Bench, type Hypothesis, type Weighed } from './hypothesis.ts';
import type { ReadingError } from './likelihood.ts';
import type { Reading } from './reading.ts';

/** Everything that the weighing of one isotopologue's values needs. */
export interface WeighInput {
  readonly fields: readonly Field[];
  /** Quantities asked for and not handed in. */
  readonly notGiven: readonly QuantityKey[];
  /** Reading of correct lines. */
  readonly reading: Reading;
  /** The same with the error of a single line beside it. */
  readonly oneLineReading: Reading;
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
  /** Other steps that an accepted method allows as well. */
  readonly alsoCorrect: readonly Readonly<Record<QuantityKey, Step>>[];
  /** Handbook values of the isotopologue, where there are. */
  readonly handbook: Values;
}

/** A search for accounts of one isotopologue's values. */
export interface Search {
  readonly input: WeighInput;
  readonly bench: Bench;
  readonly found: readonly Weighed[];
  /** Weighs a hypothesis and keeps it, unless it explains nothing. */
  readonly take: (hypothesis: Hypothesis, values?: Values) => void;
  /** The heaviest account so far. */
  readonly best: () => Weighed | null;
}

/** ln of the odds beyond which an account is not worth weighing; generous, since the most it can weigh is only about known. */
const cannotMatter = 11;

export function startSearch(input: WeighInput, bench: Bench): Search {
  const found: Weighed[] = [];
  let best: Weighed | null = null;
  return {
    input,
    bench,
    found,
    take: (hypothesis, values) => {
      const weighed = weigh(bench, hypothesis, values);
      if (weighed === null || !everyCauseExplains(weighed)) return;
      found.push(weighed);
      if (best === null || weighed.logWeight > best.logWeight) best = weighed;
    },
    best: () => best,
  };
}

/** True where something that can weigh so much at most may still matter. */
export function canMatter(search: Search, most: number): boolean {
  return most >= (search.best()?.logWeight ?? -Infinity) - cannotMatter;
}

/** A named cause that leaves all that it moves unexplained explains nothing. */
function everyCauseExplains({ hypothesis, unexplained }: Weighed): boolean {
  return hypothesis.causes.every(
    ({ moves }) => moves === undefined || [...moves].some((key) => !unexplained.includes(key)),
  );
}

/** A hypothesis without unknown, copied or miswritten values. */
export function plain(
  input: WeighInput,
  causes: Hypothesis['causes'],
  slipped: Hypothesis['slipped'],
  logPrior: number,
  reading: Reading = input.reading,
): Hypothesis {
  return { ...plainHypothesis(slipped, reading, input.errors, logPrior), causes };
}

/** The same without a cause. */
export function plainHypothesis(
  slipped: Hypothesis['slipped'],
  reading: Reading,
  errors: readonly ReadingError[],
  logPrior: number,
): Hypothesis {
  return {
    causes: [],
    slipped,
    reading,
    errors,
    logPrior,
    free: nothingFree,
    copied: nothingFree,
    meant: nothingMeant,
  };
}
