import type { QuantityKey } from '../../units/types.ts';
import type { Hypothesis, Weighed } from './hypothesis.ts';
import { priors } from './priors.ts';
import type { Search } from './search.ts';
import { matchesHandbook } from './unknown-causes.ts';
import { meantNumbers } from './written-slips.ts';

/** Slips of the pen and handbook values, on top of accounts that leave just such numbers unexplained. */
export function takeOnTop(search: Search, of: readonly Weighed[]): void {
  const { input, bench, take } = search;
  const fromHandbook = bench.fields
    .filter((f) => matchesHandbook(f, input.handbook[f.key]))
    .map((f) => f.key);
  const most = of
    .filter((w) => w.unexplained.length > 0)
    .sort((a, b) => b.logWeight - a.logWeight)
    .slice(0, 6);
  for (const { hypothesis, predicted, unexplained } of most) {
    for (const key of unexplained) {
      const i = bench.fields.findIndex((f) => f.key === key);
      const field = bench.fields[i]!;
      const expected = predicted[key];
      if (expected === undefined) continue;
      if (fromHandbook.includes(key)) take(copiedOnTop(hypothesis, fromHandbook));
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

function copiedOnTop(hypothesis: Hypothesis, keys: readonly QuantityKey[]): Hypothesis {
  return {
    ...hypothesis,
    causes: [...hypothesis.causes, { code: 'value-from-literature', formula: 'handbook value' }],
    logPrior: hypothesis.logPrior + Math.log(priors.handbook),
    copied: new Set([...hypothesis.copied, ...keys]),
  };
}
