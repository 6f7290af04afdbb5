import { bondLengthFactor, forceConstantFactor } from '../../molecule/physical-constants.ts';
import { forceConstantWavenumber } from '../../reference/methods/derive.ts';
import type { QuantityKey } from '../../units/types.ts';
import type { Steps } from './definition.ts';
import type { Field } from './fields.ts';
import type { Hypothesis } from './hypothesis.ts';
import { withSlips } from './predict.ts';
import { priors } from './priors.ts';
import { plain, type Search } from './search.ts';

/** Accounts with an unknown cause: of one value and what follows from it, of the mass, of the lines; and handbook values. */
export function unknownCauses({ input, bench }: Search): Hypothesis[] {
  const has = new Map(bench.fields.map((f) => [f.key, f.value]));
  const carriers = (['nu0', 'B0', 'alphaE', 'Be', 'omegaExe', 'omegaE', 'mu'] as const).filter((k) =>
    has.has(k),
  );
  const list: { free: QuantityKey; steps: Steps }[] = carriers.map((key) => ({
    free: key,
    steps: { [key]: () => has.get(key)! },
  }));
  const implied = impliedMass({ input, bench }, has);
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
  return [...hypotheses, ...handbookHypotheses({ input, bench })];
}

function impliedMass(
  { input, bench }: Pick<Search, 'input' | 'bench'>,
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
function handbookHypotheses({ input, bench }: Pick<Search, 'input' | 'bench'>): Hypothesis[] {
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
export function matchesHandbook(f: Field, handbook: number | undefined): boolean {
  if (handbook === undefined) return false;
  const figures = f.submitted.figures ?? 4;
  return figures >= 4 && Math.abs(f.value - handbook) <= f.halfWidth * 1.001;
}
