import type { DeriveContext, Step } from '../../reference/methods/derive.ts';
import { bondLengthPm } from '../../reference/methods/physical-factors.ts';
import {
  alone,
  bothWays,
  carriedOn,
  needing,
  seldom,
  type SlipDefinition,
  type Steps,
  type SlipVariant,
} from './definition.ts';

/** c1, c2, c3 of ν̃(m) from what the method reads off the lines: B_1 + B_0, B_1 − B_0, −4D. */
interface Coefficients {
  readonly c0: number;
  readonly c1: number;
  readonly c2: number;
  readonly c3: number;
}

/** Slips between the coefficients of the fit and the rotational constants. */
export const coefficientSlips: readonly SlipDefinition[] = [
  simple('bbar-as-be', 2, 'Half the spacing, (B_0 + B_1)/2, was given as Be', 'Be − αe', {
    Be: needing(['B0', 'B1'], ({ B0, B1 }) => (B0 + B1) / 2),
  }),
  simple('b0-as-be', 3, 'B_0 was given as Be', 'Be − αe/2', { Be: needing(['B0'], ({ B0 }) => B0) }),
  simple('b1-as-be', 1.5, 'B_1 was given as Be', 'Be − 3αe/2', { Be: needing(['B1'], ({ B1 }) => B1) }),
  {
    code: 'r0-as-re',
    family: 'coefficients',
    weight: 2.5,
    what: 'The bond length was worked out from B_0 and given as re',
    variants: () => [
      alone('re × √(Be/B_0)', { re: needing(['B0', 'mu'], ({ B0, mu }) => bondLengthPm(B0, mu)) }),
    ],
  },
  {
    code: 'alpha-sign',
    family: 'coefficients',
    weight: 3,
    what: 'αe was taken with the wrong sign',
    variants: () => alphaTimes(-1, 'wrong sign'),
  },
  {
    code: 'alpha-half',
    family: 'coefficients',
    weight: 1.5,
    what: 'αe is half of what it should be',
    variants: () => alphaTimes(0.5, 'half'),
  },
  {
    code: 'alpha-double',
    family: 'coefficients',
    weight: 1.5,
    what: 'αe is twice what it should be',
    variants: () => alphaTimes(2, 'double'),
  },
  simple('be-minus-half-alpha', 2.5, 'Be was taken as B_0 − αe/2', 'B_0 − αe/2 = Be − αe', {
    Be: needing(['B0', 'alphaE'], ({ B0, alphaE }) => B0 - alphaE / 2),
  }),
  simple('be-plus-alpha', 2, 'Be was taken as B_0 + αe', 'B_0 + αe = Be + αe/2', {
    Be: needing(['B0', 'alphaE'], ({ B0, alphaE }) => B0 + alphaE),
  }),
  spacing('spacing-2b-as-b', 2, 2, 'The spacing 2B was taken as B'),
  spacing('spacing-2b-as-4b', 1.5, 0.5, 'The spacing 2B was taken as 4B'),
  {
    code: 'bbar-as-b0',
    family: 'coefficients',
    weight: 1,
    what: 'Half the spacing, (B_0 + B_1)/2, was given as B_0',
    variants: () => [
      ...bothWays('B_0 − αe/2', { B0: meanB, alphaE: trueAlpha }),
      carriedOn('B_0 − αe/2, and B_1 = B_0 − αe from it', {
        B0: meanB,
        alphaE: trueAlpha,
        B1: needing(['B0'], ({ B0 }, c) => B0 - ((c.read.B0 ?? NaN) - (c.read.Bn ?? NaN))),
      }),
    ],
  },
  {
    code: 'differences-wrong-abscissa',
    family: 'coefficients',
    weight: 1,
    what: 'Combination differences were plotted against J or J + 1, not J + ½',
    variants: ({ method, linesASide }) =>
      method.fit !== 'combination-differences'
        ? []
        : linesASide.flatMap((n) => [wrongAbscissa(n - 1, 0), wrongAbscissa(n - 1, 1)]),
  },
  {
    code: 'one-branch-spacing',
    family: 'coefficients',
    weight: 1,
    what: 'B was taken from the mean spacing of one branch only',
    variants: ({ linesASide }) => linesASide.flatMap((n) => [oneBranch(n, 1), oneBranch(n, -1)]),
  },
  {
    code: 'gap-counted-once',
    family: 'coefficients',
    weight: 1,
    what: 'The central gap was counted as one spacing, where it is two',
    variants: ({ linesASide }) =>
      linesASide.flatMap((n) =>
        asSpacingB(
          `B̄ × ${2 * n}/${2 * n - 1}`,
          (c) => ((coefficients(c)?.c1 ?? NaN) / 2) * ((2 * n) / (2 * n - 1)),
        ),
      ),
  },
  {
    code: 'origin-midpoint',
    family: 'coefficients',
    weight: 1.5,
    what: 'ν̃0 was taken as the middle of R(0) and P(1)',
    variants: () =>
      // Half the sum of two lines: their errors add to 1/√2 of one.
      oneLine(
        bothWays('ν̃0 − αe', {
          nu0: (_, c) => sum(c.read.nu0, c.read.Bn, minus(c.read.B0), Math.SQRT1_2 * (c.oneLine ?? 0)),
        }),
      ),
  },
  {
    code: 'origin-line',
    family: 'coefficients',
    weight: 1.5,
    what: 'A line was taken for the band origin',
    variants: () =>
      oneLine([
        ...bothWays('R(0) = ν̃0 + 2B_1', {
          nu0: (_, c) => sum(c.read.nu0, c.read.Bn, c.read.Bn, c.oneLine ?? 0),
        }),
        ...bothWays('P(1) = ν̃0 − 2B_0', {
          nu0: (_, c) => sum(c.read.nu0, minus(c.read.B0), minus(c.read.B0), c.oneLine ?? 0),
        }),
      ]),
  },
  {
    code: 'branch-in-j',
    family: 'coefficients',
    weight: 1.5,
    what: 'The R branch was fitted in J, not in J + 1',
    variants: () => [
      carriedOn('c0 + c1 + c2 + c3; c1 + 2c2 + 3c3; c2 + 3c3', shiftedCoefficients()),
      branchReplay(),
    ],
  },
  {
    code: 'distortion-left-out',
    family: 'coefficients',
    weight: 2,
    what: 'A quadratic was fitted where a cubic is prescribed',
    variants: ({ method }) =>
      method.fit === 'polynomial' && method.degree > 2
        ? [
            {
              formula: 'B − 2D(3N² + 3N − 1)/5',
              carried: true,
              replay: (lines) => ({ lines, method: { fit: 'polynomial', degree: 2 } }),
            },
          ]
        : [],
  },
  {
    code: 'straight-line',
    family: 'coefficients',
    weight: 1,
    what: 'Only a straight line was fitted',
    variants: ({ method, linesASide }) =>
      method.fit === 'polynomial' && method.degree > 1 ? linesASide.map(straightLine) : [],
  },
  {
    code: 'distortion-factor',
    family: 'coefficients',
    weight: 2,
    what: 'D was read off c3 = −4D with a wrong factor or sign, or from D = 4B³/ω² with a wrong B or ω',
    variants: ({ handbook }) => [
      ...[4, 2, 0.5, -1, -4, -2].map((f) => alone(`D × ${f}`, { D: needing(['D'], ({ D }) => f * D) })),
      ...(handbook === null
        ? []
        : [
            alone('4Be³/ν̃0²', { D: needing(['Be', 'nu0'], ({ Be, nu0 }) => (4 * Be ** 3) / nu0 ** 2) }),
            alone('4B_0³/ωe²', { D: needing(['B0'], ({ B0 }) => (4 * B0 ** 3) / handbook.omegaE ** 2) }),
          ]),
    ],
  },
  {
    code: 'coefficients-rounded',
    family: 'coefficients',
    weight: 1,
    what: 'The coefficients were read off a rounded chart label',
    variants: ({ method }) => (method.fit === 'polynomial' ? [2, 3, 4].map(roundedLabel) : []),
  },
  {
    code: 'coefficients-reversed',
    family: 'coefficients',
    weight: 0.5,
    what: 'The coefficients were read in the wrong order, highest power first',
    variants: ({ method }) =>
      method.fit !== 'polynomial' || method.degree < 2 ? [] : [reversed(method.degree)],
  },
];

const trueAlpha: Step = (_, c) => sum(c.read.B0, minus(c.read.Bn));
const meanB: Step = (_, c) => {
  const twice = sum(c.read.B0, c.read.Bn);
  return twice === null ? null : twice / 2;
};

function oneLine(variants: readonly SlipVariant[]): SlipVariant[] {
  return variants.map((v) => ({ ...v, readsOneLine: true }));
}

function simple(code: string, weight: number, what: string, formula: string, steps: Steps): SlipDefinition {
  return { code, family: 'coefficients', weight, what, variants: () => bothWays(formula, steps) };
}

/** αe times a factor: alone, or carried into Be through B_0, through c1/2, or through B_1. */
function alphaTimes(factor: number, word: string): SlipVariant[] {
  const alphaE: Step = needing(['B0', 'B1'], ({ B0, B1 }) => factor * (B0 - B1));
  return [
    alone(`αe ${word}, not carried on`, { alphaE }),
    carriedOn(`αe ${word}, Be = B_0 + αe/2 with it`, { alphaE }),
    carriedOn(`αe ${word}, Be = c1/2 + αe with it`, {
      alphaE,
      Be: needing(['B0', 'B1', 'alphaE'], (v) => (v.B0 + v.B1) / 2 + v.alphaE),
    }),
    seldom(
      carriedOn(`αe ${word}, Be = B_1 + 3αe/2 with it`, {
        alphaE,
        Be: needing(['B1', 'alphaE'], (v) => v.B1 + 1.5 * v.alphaE),
      }),
    ),
  ];
}

function spacing(code: string, weight: number, factor: number, what: string): SlipDefinition {
  const b0: Step = (_, c) => times(factor, c.read.B0);
  const b1: Step = (_, c) => times(factor, c.read.Bn);
  const formula = `B × ${factor}`;
  return {
    code,
    family: 'coefficients',
    weight,
    what,
    variants: () => [
      carriedOn(`${formula}, αe with it`, { B0: b0, B1: b1 }),
      carriedOn(`${formula}, αe right`, { B0: b0, B1: b1, alphaE: trueAlpha }),
      carriedOn(`${formula}, Be too, αe right`, {
        B0: b0,
        B1: b1,
        alphaE: trueAlpha,
        Be: (_, c) => times(factor, sum(c.read.B0, c.read.B0, c.read.B0, minus(c.read.Bn)), 0.5),
      }),
      ...bothWays(`Be × ${factor} only`, {
        Be: (_, c) => times(factor, sum(c.read.B0, c.read.B0, c.read.B0, minus(c.read.Bn)), 0.5),
      }),
      alone(`B_0 × ${factor} only`, { B0: b0 }),
    ],
  };
}

/** Against J (offset 0) or J + 1 (offset 1) through the origin: B × Σxy/Σx² with y ∝ J + ½, J = 1 … largestJ. */
function wrongAbscissa(largestJ: number, offset: 0 | 1): SlipVariant {
  let xy = 0;
  let xx = 0;
  for (let J = 1; J <= largestJ; J++) {
    xy += (J + offset) * (J + 0.5);
    xx += (J + offset) ** 2;
  }
  const factor = xx === 0 ? 1 : xy / xx;
  return carriedOn(
    `plotted against ${offset === 0 ? 'J' : 'J + 1'} up to ${largestJ}: B × ${factor.toFixed(4)}`,
    {
      B0: (_, c) => times(factor, c.read.B0),
      B1: (_, c) => times(factor, c.read.Bn),
    },
  );
}

function oneBranch(n: number, side: 1 | -1): SlipVariant {
  const b = (c: DeriveContext): number => {
    const k = coefficients(c);
    return k === null ? NaN : (k.c1 + side * k.c2 * (n + 1) + k.c3 * (n * n + n + 1)) / 2;
  };
  return asSpacingB(`[c1 ${side > 0 ? '+' : '−'} c2(N+1) + c3(N²+N+1)]/2, N = ${n}`, b)[0]!;
}

/** A single B from a spacing: given as Be, or as B_0. */
function asSpacingB(formula: string, b: (c: DeriveContext) => number): SlipVariant[] {
  return [
    carriedOn(`${formula} as Be`, { Be: (_, c) => b(c) }),
    carriedOn(`${formula} as B_0`, { B0: (_, c) => b(c), alphaE: trueAlpha }),
  ];
}

function shiftedCoefficients(): Steps {
  const shifted = (c: DeriveContext): Coefficients | null => {
    const k = coefficients(c);
    return k === null
      ? null
      : { c0: k.c0 + k.c1 + k.c2 + k.c3, c1: k.c1 + 2 * k.c2 + 3 * k.c3, c2: k.c2 + 3 * k.c3, c3: k.c3 };
  };
  return {
    nu0: (_, c) => shifted(c)?.c0 ?? null,
    B0: (_, c) => (shifted(c) === null ? null : (shifted(c)!.c1 - shifted(c)!.c2) / 2),
    B1: (_, c) => (shifted(c) === null ? null : (shifted(c)!.c1 + shifted(c)!.c2) / 2),
  };
}

/** The R branch alone, by the polynomial prescribed, over J. */
function branchReplay(): SlipVariant {
  return {
    formula: 'R branch alone, fitted over J',
    carried: true,
    replay: (lines) => {
      const r = lines.filter((l) => l.m > 0).map((l) => ({ ...l, m: l.m - 1 }));
      return r.length < 5 ? null : { lines: r, method: null };
    },
  };
}

function straightLine(n: number): SlipVariant {
  const nu0: Step = (_, c) => {
    const k = coefficients(c);
    return k === null ? null : k.c0 + (k.c2 * (n + 1) * (2 * n + 1)) / 6;
  };
  const slope: Step = (_, c) => {
    const k = coefficients(c);
    return k === null ? null : (k.c1 + (k.c3 * (3 * n * n + 3 * n - 1)) / 5) / 2;
  };
  return carriedOn(`ν̃0 − αe(N+1)(2N+1)/6, one B, N = ${n}`, { nu0, B0: slope, Be: slope });
}

/** c1, c2, c3 as a chart label prints them. */
function roundedLabel(decimals: number): SlipVariant {
  const label = (v: number): number => Number(Number(v.toPrecision(5)).toFixed(decimals));
  return carriedOn(`coefficients to ${decimals} decimals`, {
    B0: (_, c) => withCoefficients(c, (k) => (label(k.c1) - label(k.c2)) / 2),
    B1: (_, c) => withCoefficients(c, (k) => (label(k.c1) + label(k.c2)) / 2),
    D: (_, c) => (c.read.D === undefined ? null : withCoefficients(c, (k) => -label(k.c3) / 4)),
  });
}

function reversed(degree: number): SlipVariant {
  const back = (c: DeriveContext): number[] | null => {
    const k = coefficients(c);
    return k === null ? null : [k.c0, k.c1, k.c2, k.c3].slice(0, degree + 1).reverse();
  };
  return carriedOn('c0 ↔ highest coefficient', {
    nu0: (_, c) => back(c)?.[0] ?? null,
    B0: (_, c) => (back(c) === null ? null : (back(c)![1]! - back(c)![2]!) / 2),
    B1: (_, c) => (back(c) === null ? null : (back(c)![1]! + back(c)![2]!) / 2),
    D: (_, c) => (back(c)?.[3] === undefined ? null : -back(c)![3]! / 4),
  });
}

function withCoefficients(c: DeriveContext, f: (k: Coefficients) => number): number | null {
  const k = coefficients(c);
  return k === null ? null : f(k);
}

function coefficients(c: DeriveContext): Coefficients | null {
  const { nu0, B0, Bn, D } = c.read;
  if (nu0 === undefined || B0 === undefined || Bn === undefined) return null;
  return { c0: nu0, c1: B0 + Bn, c2: Bn - B0, c3: -4 * (D ?? 0) };
}

function sum(...terms: readonly (number | null | undefined)[]): number | null {
  let total = 0;
  for (const t of terms) {
    if (t === undefined || t === null) return null;
    total += t;
  }
  return total;
}

function minus(v: number | undefined): number | undefined {
  return v === undefined ? undefined : -v;
}

function times(factor: number, v: number | null | undefined, also = 1): number | null {
  return v === undefined || v === null ? null : factor * v * also;
}
