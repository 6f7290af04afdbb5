import type { QuantityKey } from '../../units/types.ts';
import { bondLengthPm } from '../../reference/methods/physical-factors.ts';
import { alone, needing, seldom, type SlipDefinition, type Steps, type SlipVariant } from './definition.ts';

/** Slips of writing down that can be told from predicted values alone (digits are looked at in `written-slips.ts`). */
export const reportingSlips: readonly SlipDefinition[] = [
  {
    code: 'unit-r',
    family: 'reporting',
    weight: 2,
    what: 'The bond length is in another unit than asked',
    variants: ({ submitted }) =>
      lengths([100, 0.01, 10, 0.1, 1000, 0.001, 1e10, 1e-10, 1e12, 1e-12], submitted),
  },
  {
    code: 'unit-k',
    family: 'reporting',
    weight: 2,
    what: 'The force constant is in another unit than asked',
    variants: () =>
      [1000, 100, 0.01, 0.001, 1e5, 1e-5].map((f, i) => seldom(scaledOnly(['k'], f), i < 3 ? 1 : 0.3)),
  },
  {
    code: 'power-of-ten',
    family: 'reporting',
    weight: 2,
    what: 'A power of ten went wrong',
    variants: ({ submitted }) =>
      [...submitted].flatMap((key) =>
        [1, -1, 2, -2, 3, -3, 4, -4].map((n) =>
          seldom(scaledOnly([key], 10 ** n, `${key} × 10^${n}`), 1 / Math.abs(n)),
        ),
      ),
  },
  {
    code: 'sign-lost',
    family: 'reporting',
    weight: 1,
    what: 'The sign is wrong',
    variants: ({ submitted }) =>
      [...submitted]
        .filter((k) => k !== 'alphaE' && k !== 'D')
        .map((key) => scaledOnly([key], -1, `−${key}`)),
  },
  {
    code: 'fields-swapped',
    family: 'reporting',
    weight: 2,
    what: 'Two values stand in each other’s place',
    variants: ({ submitted }) => pairsOf([...submitted]).map(swapped),
  },
  {
    code: 'rounded-too-early',
    family: 'reporting',
    weight: 0.7,
    what: 'A value was rounded before the next step',
    variants: () => [0, 1, 2].flatMap(roundedBefore),
  },
];

function lengths(factors: readonly number[], submitted: ReadonlySet<QuantityKey>): SlipVariant[] {
  const keys = (['re', 'r0'] as const).filter((k) => submitted.has(k));
  return factors.flatMap((f, i) => {
    const often = i < 4 ? 1 : 0.3;
    return [
      seldom(scaledOnly(keys, f), often),
      ...(keys.length > 1 ? keys.map((k) => seldom(scaledOnly([k], f), often / 3)) : []),
    ];
  });
}

function scaledOnly(keys: readonly QuantityKey[], factor: number, formula = `× ${factor}`): SlipVariant {
  const steps: Steps = Object.fromEntries(keys.map((key) => [key, needing([key], (v) => factor * v[key])]));
  return alone(formula, steps);
}

function pairsOf(keys: readonly QuantityKey[]): [QuantityKey, QuantityKey][] {
  return keys.flatMap((a, i) => keys.slice(i + 1).map((b): [QuantityKey, QuantityKey] => [a, b]));
}

function swapped([a, b]: [QuantityKey, QuantityKey]): SlipVariant {
  return alone(`${a} ↔ ${b}`, { [a]: needing([b], (v) => v[b]), [b]: needing([a], (v) => v[a]) });
}

function roundedBefore(decimals: number): SlipVariant[] {
  const round = (v: number): number => Number(v.toFixed(decimals));
  const word = `to ${decimals} decimals`;
  return [
    alone(`Be ${word} before re`, { re: needing(['Be', 'mu'], (v) => bondLengthPm(round(v.Be), v.mu)) }),
    alone(`αe ${word} before Be`, { Be: needing(['B0', 'alphaE'], (v) => v.B0 + round(v.alphaE) / 2) }),
    alone(`B_0 and B_1 ${word} before αe`, {
      alphaE: needing(['B0', 'B1'], (v) => round(v.B0) - round(v.B1)),
    }),
    alone(`μ ${word}`, {
      re: needing(['Be', 'mu'], (v) => bondLengthPm(v.Be, round(v.mu))),
    }),
  ];
}
