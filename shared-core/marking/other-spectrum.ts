import type { MarkedPart } from './marked-part.ts';
import { copyingAdvice } from './observations.ts';
import { benchOf, weigh } from './slips/hypothesis.ts';
import { unknownReadingErrors } from './slips/likelihood.ts';
import { shown } from './slips/numbers.ts';
import { unslipped } from './slips/predict.ts';
import { priors } from './slips/priors.ts';
import { plainHypothesis } from './slips/search.ts';
import type { MarkedSubmission, Observation } from './types.ts';

/** Odds, per file compared, from which another file is mentioned: with many files some fit by chance. */
const oddsPerFile = 300;
/** Fewer values than these cannot point to a file. */
const fewestValues = 4;

interface InParts {
  readonly marked: MarkedSubmission;
  readonly parts: readonly MarkedPart[];
}

/**
 * Values that the own file explains badly under every account, while correct work on another submission's file explains them all.
 * Partners and those who share a file are left out: they share rightly.
 */
export function otherSpectrum(
  marked: MarkedSubmission,
  parts: readonly MarkedPart[],
  all: readonly InParts[],
): Observation[] {
  return parts.flatMap((part) => {
    const { key } = part;
    const verdict = part.verdict?.values ?? null;
    if (verdict === null || verdict.bench.fields.length < fewestValues) return [];
    const own = Math.max(...verdict.accounts.map((a) => a.logWeight));
    const others = all.filter(({ marked: other }) => mayBeOther(marked, other));
    const files = new Map<string, { logWeight: number; student: string }>();
    for (const other of others) {
      const theirs = other.parts.find((p) => p.key.isotopologue === key.isotopologue);
      const file = theirs?.key.source?.file;
      if (theirs?.verdict == null || file === undefined || files.has(file)) continue;
      const reading = theirs.verdict.values.bench.correctReading;
      const bench = benchOf(verdict.bench.fields, reading, unslipped, unknownReadingErrors);
      if (bench === null || bench.fields.length < verdict.bench.fields.length) continue;
      const fit = weigh(
        bench,
        plainHypothesis(unslipped, reading, unknownReadingErrors, Math.log(priors.correct)),
      );
      if (fit === null || fit.unexplained.length > 0) continue;
      files.set(file, { logWeight: fit.logWeight, student: other.marked.submission.student });
    }
    const best = [...files].sort(([, a], [, b]) => b.logWeight - a.logWeight)[0];
    if (best === undefined) return [];
    const [file, { logWeight }] = best;
    const logOdds = logWeight - own;
    if (logOdds < Math.log(oddsPerFile * files.size)) return [];
    return [
      {
        code: 'other-spectrum',
        quantities: verdict.bench.fields.map((f) => f.key),
        text: `All ${verdict.bench.fields.length} values of ${key.isotopologue} are what correct work on ${file} gives, and the own file explains them far worse (odds ${shown(Math.exp(Math.min(logOdds, 60)), 2)} to 1 among ${files.size} other files). Files may have been mixed up when they were matched. ${copyingAdvice}`,
        figures: { logOdds, filesCompared: files.size },
      },
    ];
  });
}

function mayBeOther(own: MarkedSubmission, other: MarkedSubmission): boolean {
  if (other.submission.student === own.submission.student) return false;
  if (own.submission.group !== null && own.submission.group === other.submission.group) return false;
  return !other.submission.spectra.some((file) => own.submission.spectra.includes(file));
}
