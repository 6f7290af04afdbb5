/** Keys of every quantity that a student may hand in or a file may support. */
export const quantityKeys = [
  'nu0', 'nu02', 'B0', 'B1', 'B2', 'Be', 'alphaE', 'D', 'omegaE', 'omegaExe',
  're', 'r0', 'k', 'I', 'mu', 'De', 'D0',
] as const; // prettier-ignore
export type QuantityKey = (typeof quantityKeys)[number];

/** The unit in which a quantity is kept: cm-1 for wavenumber quantities, pm, N/m, u, kg m2. */
export type StandardUnit = 'cm-1' | 'pm' | 'N/m' | 'kg m2' | 'u';

/** A number with its standard uncertainty (1 sigma; null: unknown) in the unit beside it. */
export interface Measured {
  readonly value: number;
  readonly uncertainty: number | null;
  readonly unit: StandardUnit;
}

/** A remark with a stable code (kebab case) and a sentence for people. */
export interface Reason {
  readonly code: string;
  readonly text: string;
}
