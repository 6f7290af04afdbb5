import type { StandardUnit } from '../../units/types.ts';

/** A number in a sentence: seven significant figures at most, no trailing zeros, powers of ten where needed; real minus sign. */
export function shown(value: number, figures = 6): string {
  const text = Number(value.toPrecision(figures));
  const abs = Math.abs(text);
  const plain = abs !== 0 && (abs < 1e-3 || abs >= 1e7) ? text.toExponential() : String(text);
  return plain.replace('-', '−').replace(/e\+?(.+)$/, (_, n: string) => ` × 10^${n.replace('-', '−')}`);
}

/** With its unit. */
export function shownWithUnit(value: number, unit: StandardUnit, figures = 6): string {
  return `${shown(value, figures)} ${unit === 'cm-1' ? 'cm⁻¹' : unit === 'kg m2' ? 'kg m²' : unit}`;
}

/** Symbols of the quantities in sentences. */
export const symbols = {
  nu0: 'ν̃0', nu02: 'ν̃0(2←0)', B0: 'B_0', B1: 'B_1', B2: 'B_2', Be: 'Be', alphaE: 'αe', D: 'D', omegaE: 'ωe', omegaExe: 'ωexe',
  re: 're', r0: 'r0', k: 'k', I: 'I', mu: 'μ', De: 'De', D0: 'D0',
} as const; // prettier-ignore
