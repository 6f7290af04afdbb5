import { averageMassU, nuclearMassU, nuclidesOf } from '../../molecule/nuclides.ts';
import { atomicMassConstantKg, planckJs, speedOfLightMPerS } from '../../molecule/physical-constants.ts';
import type { Isotopologue, Nuclide } from '../../molecule/types.ts';
import type { Step } from '../../reference/methods/derive.ts';
import { standardSteps } from '../../reference/methods/derive.ts';
import { alone, carriedOn, seldom, type SlipDefinition, type Steps, type SlipVariant } from './definition.ts';

const lightCmPerS = 100 * speedOfLightMPerS;

/** Slips in constants, powers and masses on the way to I, r and k. */
export const constantSlips: readonly SlipDefinition[] = [
  {
    code: 'c-in-m',
    family: 'constants',
    weight: 2,
    what: 'c was used in m/s with wavenumbers in cm⁻¹',
    variants: () => together('I × 100, r × 10, k × 10⁻⁴', { I: 100, r: 10, k: 1e-4 }),
  },
  {
    code: 'c-in-cm',
    family: 'constants',
    weight: 1,
    what: 'c was used in cm/s with wavenumbers in m⁻¹',
    variants: () => together('r × 0.1, k × 10⁴', { I: 0.01, r: 0.1, k: 1e4 }),
  },
  rFactor('hbar-for-h', 1.5, 'ħ was used in place of h', [1 / Math.sqrt(2 * Math.PI)]),
  rFactor('h-for-hbar', 0.7, 'h was used in place of ħ, the π left out', [
    Math.sqrt(2 * Math.PI),
    2 * Math.PI,
  ]),
  rFactor('pi-eight', 1.5, '8π was used in place of 8π²', [Math.sqrt(Math.PI)]),
  rFactor('pi-four', 1, '4π² was used in place of 8π²', [Math.SQRT2]),
  kFactor('k-no-two-pi', 2, '4π² was left out of k', [1 / (4 * Math.PI ** 2)]),
  kFactor('k-one-two-pi', 1.5, '2π was used in place of 4π² in k', [1 / (2 * Math.PI)]),
  kFactor('k-extra-two-pi', 1, '4π² enters k twice', [4 * Math.PI ** 2]),
  kFactor('k-pi-unsquared', 1, 'π was not squared in k, or 4 was lost', [1 / Math.PI, 0.25]),
  {
    code: 'k-not-squared',
    family: 'constants',
    weight: 1,
    what: 'The wavenumber or c was not squared in k',
    variants: () => [
      alone('k/ν̃', { k: (have, c) => over(standardSteps.k(have, c), have.omegaE ?? have.nu0) }),
      alone('k/c', { k: (have, c) => over(standardSteps.k(have, c), lightCmPerS) }),
    ],
  },
  {
    code: 'r-root-missed',
    family: 'constants',
    weight: 1.5,
    what: 'The root was not taken: r² was given as r',
    variants: () =>
      ([['Å', 100], ['pm', 1], ['nm', 1000], ['m', 1e12]] as const).map(([unit, pm]) =>
        alone(`r² in ${unit}² given as r in ${unit}`, {
          re: (have, c) => squared(standardSteps.re(have, c), pm),
          r0: (have, c) => squared(standardSteps.r0(have, c), pm),
        }),
      ), // prettier-ignore
  },
  mass('mass-average', 2, 'Average atomic masses were used', (a, b) => [
    ['average masses', product(averageMassU(a), averageMassU(b))],
    ['average mass of the heavier atom only', product(a.massU, averageMassU(b))],
  ]),
  mass('mass-integer', 2, 'Mass numbers were used in place of masses', (a, b) => [
    ['mass numbers', product(a.massNumber, b.massNumber)],
  ]),
  mass('mass-nuclear', 0.5, 'Nuclear masses were used', (a, b) => [
    ['nuclear masses', product(nuclearMassU(a), nuclearMassU(b))],
  ]),
  mass('mass-other-isotope', 2, 'The mass of another isotope was used', (a, b) => [
    ...othersOf(b).map((x) => [`${x.name} in place of ${b.name}`, product(a.massU, x.massU)] as const),
    ...othersOf(a).map((x) => [`${x.name} in place of ${a.name}`, product(x.massU, b.massU)] as const),
  ]),
  mass('mass-sum', 1, 'The sum of the masses was used as reduced mass', (a, b) => [
    ['m₁ + m₂', a.massU + b.massU],
  ]),
  mass('mass-product', 0.7, 'The product of the masses was used as reduced mass', (a, b) => [
    ['m₁m₂', a.massU * b.massU],
  ]),
  mass('mass-inverse', 1, 'The reciprocal of the reduced mass was used', (a, b) => [
    ['1/μ', 1 / product(a.massU, b.massU)],
  ]),
  mass('mass-mean', 0.5, 'The mean of the masses was used as reduced mass', (a, b) => [
    ['(m₁ + m₂)/2', (a.massU + b.massU) / 2],
  ]),
  mass('mass-half', 0.7, 'The reduced mass was halved', (a, b) => [['μ/2', product(a.massU, b.massU) / 2]]),
  mass('mass-light-atom', 1.5, 'The mass of the lighter atom was used as reduced mass', (a, b) => [
    ['m of the lighter atom', Math.min(a.massU, b.massU)],
  ]),
  mass('mass-grams', 1.5, 'The reduced mass was used in grams where kilograms belong', (a, b) => [
    ['μ × 1000', 1000 * product(a.massU, b.massU)],
  ]),
  mass('mass-no-avogadro', 1, 'The molar mass was used without Avogadro’s constant', (a, b) => [
    ['kg mol⁻¹ as kg', (1e-3 * product(a.massU, b.massU)) / atomicMassConstantKg],
    ['g mol⁻¹ as kg', product(a.massU, b.massU) / atomicMassConstantKg],
  ]),
  {
    code: 'mass-u-unconverted',
    family: 'constants',
    weight: 1,
    what: 'The reduced mass was left in u',
    variants: ({ isotopologue }) =>
      massVariants([['u as kg', isotopologue.reducedMassU / atomicMassConstantKg]]),
  },
  {
    code: 'unit-b',
    family: 'constants',
    weight: 0.7,
    what: 'The rotational constant is in another unit',
    variants: () =>
      ([['GHz', 1e-7 * speedOfLightMPerS], ['J', 100 * planckJs * speedOfLightMPerS], ['m⁻¹', 100]] as const).map(([unit, f]) =>
        alone(`in ${unit}`, Object.fromEntries((['B0', 'B1', 'B2', 'Be', 'alphaE'] as const).map((key) => [key, scaled(key, f)]))),
      ), // prettier-ignore
  },
];

const scaled =
  (key: 'B0' | 'B1' | 'B2' | 'Be' | 'alphaE' | 're' | 'r0' | 'k' | 'I', factor: number): Step =>
  (have, c) => {
    const value = standardSteps[key](have, c);
    return value === null ? null : factor * value;
  };

function together(
  formula: string,
  f: { readonly I: number; readonly r: number; readonly k: number },
): SlipVariant[] {
  const r: Steps = { I: scaled('I', f.I), re: scaled('re', f.r), r0: scaled('r0', f.r) };
  return [
    alone(formula, { ...r, k: scaled('k', f.k) }),
    seldom(alone(`${formula}, in r only`, r), 0.5),
    seldom(alone(`${formula}, in k only`, { k: scaled('k', f.k) }), 0.5),
  ];
}

function rFactor(code: string, weight: number, what: string, factors: readonly number[]): SlipDefinition {
  return {
    code,
    family: 'constants',
    weight,
    what,
    variants: () =>
      factors.map((f) =>
        alone(`r × ${f.toPrecision(5)}`, { I: scaled('I', f * f), re: scaled('re', f), r0: scaled('r0', f) }),
      ),
  };
}

function kFactor(code: string, weight: number, what: string, factors: readonly number[]): SlipDefinition {
  return {
    code,
    family: 'constants',
    weight,
    what,
    variants: () => factors.map((f) => alone(`k × ${f.toPrecision(4)}`, { k: scaled('k', f) })),
  };
}

function mass(
  code: string,
  weight: number,
  what: string,
  masses: (a: Nuclide, b: Nuclide) => readonly (readonly [string, number])[],
): SlipDefinition {
  return {
    code,
    family: 'constants',
    weight,
    what,
    variants: ({ isotopologue }) => massVariants(masses(...lightFirst(isotopologue))),
  };
}

/** A wrong reduced mass in everything, in r only, in k only. */
function massVariants(masses: readonly (readonly [string, number])[]): SlipVariant[] {
  return masses.flatMap(([formula, u]) => {
    const shown = `${formula}: μ = ${u.toPrecision(5)} u`;
    const step: Step = () => u;
    const withMass =
      (key: 're' | 'r0' | 'k'): Step =>
      (have, c) =>
        standardSteps[key]({ ...have, mu: u }, c);
    return [
      carriedOn(shown, { mu: step }),
      seldom(alone(`${shown}, in r only`, { re: withMass('re'), r0: withMass('r0') })),
      seldom(alone(`${shown}, in k only`, { k: withMass('k') })),
    ];
  });
}

function lightFirst(isotopologue: Isotopologue): [Nuclide, Nuclide] {
  const [a, b] = isotopologue.nuclides;
  return a.massU <= b.massU ? [a, b] : [b, a];
}

/** Other stable nuclides of the element; H and D count as one element here. */
function othersOf(nuclide: Nuclide): Nuclide[] {
  const same =
    nuclide.element === 'H' || nuclide.element === 'D'
      ? [...nuclidesOf('H'), ...nuclidesOf('D')]
      : [...nuclidesOf(nuclide.element)];
  return same.filter((n) => n.massNumber !== nuclide.massNumber);
}

function product(a: number, b: number): number {
  return (a * b) / (a + b);
}

function over(value: number | null, by: number | undefined): number | null {
  return value === null || by === undefined ? null : value / by;
}

/** r² in the square of a unit, written down as a length in that unit (pm in, pm out). */
function squared(rPm: number | null, unitPm: number): number | null {
  return rPm === null ? null : (rPm / unitPm) ** 2 * unitPm;
}
