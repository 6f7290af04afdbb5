import type { QuantityKey, StandardUnit } from './types.ts';

/** What a quantity is called and in what it is kept. */
export interface QuantityInfo {
  readonly symbol: string;
  readonly name: string;
  readonly standardUnit: StandardUnit;
  /** Range in which a diatomic's value lies, standard unit: helps to read a number whose decimal sign is unclear. */
  readonly usual: readonly [number, number];
}

const wave = (symbol: string, name: string, low: number, high: number): QuantityInfo => ({
  symbol,
  name,
  standardUnit: 'cm-1',
  usual: [low, high],
});

/** Every quantity that a student may hand in; ranges from common practice (hydrogen halides, CO, NO). */
export const quantities: Readonly<Record<QuantityKey, QuantityInfo>> = {
  nu0: wave('ν̃0', 'band origin', 500, 5000),
  nu02: wave('ν̃0(2←0)', 'origin of the first overtone', 1000, 9000),
  B0: wave('B₀', 'rotational constant of v = 0', 0.3, 65),
  B1: wave('B₁', 'rotational constant of v = 1', 0.3, 65),
  B2: wave('B₂', 'rotational constant of v = 2', 0.3, 65),
  Be: wave('Be', 'equilibrium rotational constant', 0.3, 65),
  alphaE: wave('αe', 'vibration-rotation coupling', 0.001, 4),
  D: wave('D', 'centrifugal constant', 1e-7, 0.1),
  omegaE: wave('ωe', 'harmonic wavenumber', 500, 5000),
  omegaExe: wave('ωexe', 'anharmonicity', 1, 200),
  re: { symbol: 're', name: 'equilibrium bond length', standardUnit: 'pm', usual: [50, 400] },
  r0: { symbol: 'r₀', name: 'bond length from B₀', standardUnit: 'pm', usual: [50, 400] },
  k: { symbol: 'k', name: 'force constant', standardUnit: 'N/m', usual: [50, 3000] },
  I: { symbol: 'I', name: 'moment of inertia', standardUnit: 'kg m2', usual: [1e-48, 1e-44] },
  mu: { symbol: 'μ', name: 'reduced mass', standardUnit: 'u', usual: [0.4, 100] },
  De: wave('De', 'dissociation energy from the minimum', 5000, 120000),
  D0: wave('D0', 'dissociation energy from v = 0', 5000, 120000),
};

/** Units written out, English, German, French, Spanish. */
const spelled: readonly (readonly [string, RegExp])[] = [
  [
    'cm-1',
    /(?:reciprocal|inverse|reziproke|inversos?) ?(?:centim[eèé]t(?:re|er|ro)s?|zentimeter)|wave ?numbers?|wellenzahl(?:en)?/,
  ],
  ['N/m', /newtons? ?(?:per|pro|par|por|\/) ?m[eèé]t(?:re|er|ro)s?/],
  ['dyn/cm', /dyn[eaes]* ?(?:per|pro|par|por|\/) ?(?:centim[eèé]t(?:re|er|ro)s?|zentimeter|cm)/],
  ['pm', /p[ik]+[oó]?m[eèé]t(?:re|er|ro)s?|pic[oó]m[eèé]t(?:re|er|ro)s?/],
  ['nm', /nan[oó]m[eèé]t(?:re|er|ro)s?/],
  ['m', /(?<![a-zèéó])m[eèé]t(?:re|er|ro)s?/],
];
const unitWords = new RegExp(spelled.map(([, pattern]) => `(?:${pattern.source})(?![a-z])`).join('|'), 'gi');
const unitOfWord = (word: string): string =>
  spelled.find(([, pattern]) => new RegExp(`^(?:${pattern.source})$`, 'i').test(word))?.[0] ?? word;

/** A unit as written, reduced to letters, digits and signs that can be compared. */
export function normalUnit(text: string): string {
  return text
    .normalize('NFKC')
    .replace(/[−–—‐‑]/g, '-')
    .replace(/\\(mathrm|text|rm|cdot|,)/g, ' ')
    .replace(/\$/g, '')
    .replace(unitWords, (word) => unitOfWord(word))
    .replace(/[Åå]ngstr(ö|oe|o)ms?|angstr(ö|oe|o)ms?/giu, 'A')
    .replace(/Å/g, 'A')
    .replace(/[µμ]/g, 'u')
    .replace(/\bper\b/gi, '/')
    .replace(/[\^{}()[\]]|\*\*/g, '')
    .replace(/[·⋅.×*]/g, ' ')
    .replace(/\s+/g, ' ')
    .trim();
}

type Factors = Readonly<Record<string, number>>;
const speedOfLightMPerS = 299792458;
/** hc, h·c·N_A and e-volt per cm-1: CODATA 2022. */
const joulePerCm = 6.62607015e-34 * speedOfLightMPerS * 100;
const wavenumberUnits: Factors = {
  'cm-1': 1, '1/cm': 1, '/cm': 1, 'cm -1': 1, 'm-1': 0.01, '1/m': 0.01, '/m': 0.01, 'mm-1': 10, 'nm-1': 1e7,
  GHz: 1e7 / speedOfLightMPerS, MHz: 1e4 / speedOfLightMPerS, THz: 1e10 / speedOfLightMPerS, Hz: 0.01 / speedOfLightMPerS, 's-1': 0.01 / speedOfLightMPerS,
  J: 1 / joulePerCm, eV: 1.602176634e-19 / joulePerCm, meV: 1.602176634e-22 / joulePerCm,
  'kJ/mol': 1000 / 6.02214076e23 / joulePerCm, 'kJ mol-1': 1000 / 6.02214076e23 / joulePerCm, 'kcal/mol': 4184 / 6.02214076e23 / joulePerCm, 'kcal mol-1': 4184 / 6.02214076e23 / joulePerCm,
}; // prettier-ignore
const factors: Readonly<Record<StandardUnit, Factors>> = {
  'cm-1': wavenumberUnits,
  pm: { pm: 1, A: 100, Ang: 100, nm: 1000, m: 1e12, cm: 1e10, a0: 52.917721054, bohr: 52.917721054, um: 1e6 },
  'N/m': {
    'N/m': 1, 'N m-1': 1, 'Nm-1': 1, 'kg/s2': 1, 'kg s-2': 1, 'kgs-2': 1, 'J/m2': 1, 'J m-2': 1, 'dyn/cm': 1e-3, 'dyn cm-1': 1e-3, 'dyne/cm': 1e-3, 'dyne cm-1': 1e-3, 'dynes/cm': 1e-3, 'g/s2': 1e-3, 'g s-2': 1e-3,
    'mdyn/A': 100, 'mdyn A-1': 100, 'mdyne/A': 100, 'N/cm': 100, 'N cm-1': 100, 'kN/m': 1000, 'kN m-1': 1000, 'aJ/A2': 100, 'aJ A-2': 100, 'mN/m': 1e-3,
  },
  'kg m2': { 'kg m2': 1, kgm2: 1, 'g cm2': 1e-7, gcm2: 1e-7, 'u A2': 1.66053906892e-47, 'amu A2': 1.66053906892e-47, uA2: 1.66053906892e-47 },
  u: { u: 1, amu: 1, Da: 1, 'g/mol': 1, 'g mol-1': 1, kg: 1 / 1.66053906892e-27, g: 1 / 1.66053906892e-24 },
}; // prettier-ignore

/**
 * Factor from a written unit to the standard unit of a quantity.
 *
 * @returns null where the unit is not one of this quantity's.
 */
export function unitFactor(unit: string, standard: StandardUnit): number | null {
  const table = factors[standard];
  const scaled = /^(?:x ?)?10 ?([+-]?\d{1,3}) (.+)$/.exec(normalUnit(unit));
  // "10⁻⁴ cm⁻¹" as a unit: the numbers below it are to be multiplied.
  if (scaled !== null) {
    const plainFactor = unitFactor(scaled[2]!, standard);
    return plainFactor === null ? null : Number(`${plainFactor}e${Number(scaled[1])}`);
  }
  const normal = normalUnit(unit);
  const own = (key: string): number | null => (Object.hasOwn(table, key) ? table[key]! : null);
  return (
    own(normal) ??
    own(normal.replace(/ ?\/ ?/g, '/')) ??
    own(normal.replace(/\s/g, '')) ??
    anyCase(table, normal)
  );
}

/** Units whose letters mean the same in capitals ("CM-1", "PM"); those whose prefix would change are left out. */
const caseless = ['cm-1', '1/cm', 'm-1', 'GHz', 'MHz', 'THz', 'kJ/mol', 'pm', 'nm', 'N/m', 'N m-1', 'dyn/cm', 'mdyn/A', 'amu', 'kg m2']; // prettier-ignore
function anyCase(table: Factors, normal: string): number | null {
  const key = caseless.find((k) => k.toLowerCase() === normal.toLowerCase());
  return key !== undefined && Object.hasOwn(table, key) ? table[key]! : null;
}

/** Units in which a quantity is commonly handed in. */
export const commonUnits: Readonly<Record<StandardUnit, readonly string[]>> = {
  'cm-1': ['cm-1', 'GHz', 'm-1'],
  pm: ['pm', 'Å', 'nm', 'm'],
  'N/m': ['N/m', 'dyn/cm', 'mdyn/Å'],
  'kg m2': ['kg m2', 'g cm2'],
  u: ['u', 'kg'],
};

/** Common units in which a number has a usual size for the quantity; wavenumbers without a unit are in cm-1 by common practice where that fits. */
export function unitsThatFit(value: number, key: QuantityKey): readonly string[] {
  const { standardUnit, usual } = quantities[key];
  const fits = commonUnits[standardUnit].filter((unit) => {
    const size = Math.abs(value) * unitFactor(unit, standardUnit)!;
    return size >= usual[0] && size <= usual[1];
  });
  return standardUnit === 'cm-1' && fits.includes('cm-1') ? ['cm-1'] : fits;
}

/** A unit as people write it on screen. */
export function displayUnit(unit: string): string {
  return unit === 'cm-1' ? 'cm⁻¹' : unit === 'kg m2' ? 'kg m²' : unit;
}
