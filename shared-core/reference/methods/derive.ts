import type { QuantityKey } from '../../units/types.ts';
import type { MethodSettings } from '../types.ts';
import type { Primitives, PrimitiveKey } from './method-line.ts';
import { momentOfInertiaFactor } from '../../molecule/physical-constants.ts';
import { bondLengthPm, forceConstantNPerM } from './physical-factors.ts';

/** Plain numbers in standard units; what a method does not yield is absent. */
export type Values = Partial<Record<QuantityKey, number>>;

/** Everything that the derivation of one isotopologue's constants starts from. */
export interface DeriveContext {
  readonly settings: MethodSettings;
  readonly reducedMassU: number;
  /** Upper vibrational quantum number of the band that was fitted: 1 fundamental, 2 first overtone. */
  readonly upper: number;
  readonly read: Readonly<Partial<Record<PrimitiveKey, number>>>;
  /** First overtone of the same isotopologue, where the submission has it. */
  readonly overtone: Readonly<Partial<Record<PrimitiveKey, number>>> | null;
  /** Fundamental of the isotopologue with the other hydrogen, where the submission has it. */
  readonly partner: { readonly nu0: number; readonly reducedMassU: number } | null;
  /** Error of a single line, cm-1, where a step reads one line and not the fit; 0 where absent. */
  readonly oneLine?: number;
}

/** One step of the derivation: a quantity from those before it; null where it does not exist. */
export type Step = (have: Values, context: DeriveContext) => number | null;

/** Order in which the steps run; each sees only the results before it. */
export const derivationOrder: readonly QuantityKey[] = [
  'mu', 'nu0', 'nu02', 'B0', 'B1', 'B2', 'alphaE', 'Be', 'D', 'omegaExe', 'omegaE', 'I', 'r0', 're', 'k', 'De', 'D0',
]; // prettier-ignore

/** The steps as correct work takes them (science of the trade; formulas beside each). */
export const standardSteps: Readonly<Record<QuantityKey, Step>> = {
  mu: (_, c) => c.reducedMassU,
  nu0: (_, c) => (c.upper === 1 ? (c.read.nu0 ?? null) : null),
  nu02: (_, c) => (c.upper === 2 ? c.read.nu0 : c.overtone?.nu0) ?? null,
  B0: (_, c) => c.read.B0 ?? null,
  B1: (_, c) => (c.upper === 1 ? (c.read.Bn ?? null) : null),
  B2: (_, c) => (c.upper === 2 ? c.read.Bn : c.overtone?.Bn) ?? null,
  // αe = B_0 − B_1; an overtone alone yields none.
  alphaE: ({ B0, B1 }) => (B0 === undefined || B1 === undefined ? null : B0 - B1),
  // Be = B_0 + αe/2
  Be: ({ B0, alphaE }) => (B0 === undefined || alphaE === undefined ? null : B0 + alphaE / 2),
  D: (_, c) => c.read.D ?? null,
  omegaExe: (have, c) => anharmonicity(have, c),
  // ωe = ν̃0 + 2ωexe
  omegaE: ({ nu0, omegaExe }) => (nu0 === undefined || omegaExe === undefined ? null : nu0 + 2 * omegaExe),
  // I = h/(8π²cB)
  I: (have, c) => {
    const b = have[c.settings.bondLengthFrom];
    return b === undefined ? null : momentOfInertiaFactor / b;
  },
  r0: ({ B0, mu }) => (B0 === undefined || mu === undefined ? null : bondLengthPm(B0, mu)),
  re: (have, c) => {
    const b = have[c.settings.bondLengthFrom];
    return b === undefined || have.mu === undefined ? null : bondLengthPm(b, have.mu);
  },
  k: (have, c) => {
    const wavenumber = have[forceConstantWavenumber(c.settings)];
    return wavenumber === undefined || have.mu === undefined ? null : forceConstantNPerM(wavenumber, have.mu);
  },
  // De = ωe²/(4ωexe), D0 = De − ωe/2 + ωexe/4
  De: ({ omegaE, omegaExe }) =>
    omegaE === undefined || omegaExe === undefined || omegaExe === 0 ? null : omegaE ** 2 / (4 * omegaExe),
  D0: ({ De, omegaE, omegaExe }) =>
    De === undefined || omegaE === undefined || omegaExe === undefined
      ? null
      : De - omegaE / 2 + omegaExe / 4,
};

/** Which wavenumber gives k: without a source of ωexe there is no ωe, and k means k(ν̃0). */
export function forceConstantWavenumber(settings: MethodSettings): 'nu0' | 'omegaE' {
  return settings.anharmonicityFrom === null ? 'nu0' : settings.forceConstantFrom;
}

/**
 * Runs the derivation.
 *
 * @param steps the standard ones, or a copy in which some are replaced (a slip).
 * @param given values that stand as they are and are not derived (a student's own numbers carried forward).
 */
export function derive(
  context: DeriveContext,
  steps: Readonly<Record<QuantityKey, Step>> = standardSteps,
  given: Values = {},
): Values {
  const have: Values = {};
  for (const key of derivationOrder) {
    const value = given[key] ?? steps[key](have, context);
    if (value !== null && Number.isFinite(value)) have[key] = value;
  }
  return have;
}

/** Primitives as a record. */
export function readOf(primitives: Primitives): Partial<Record<PrimitiveKey, number>> {
  return Object.fromEntries(primitives.keys.map((key, i) => [key, primitives.values[i]!]));
}

/**
 * ωexe: from the overtone ν̃1 − ν̃2/2; from an H/D pair (ωe = (ρ²ν̃ − ν̃′)/(ρ² − ρ), ωexe = (ωe − ν̃)/2, ρ = √(μ/μ′)); or as given.
 */
function anharmonicity({ nu0, nu02, mu }: Values, c: DeriveContext): number | null {
  switch (c.settings.anharmonicityFrom) {
    case null:
      return null;
    case 'given':
      return c.settings.anharmonicityPerCm;
    case 'overtone':
      return nu0 === undefined || nu02 === undefined ? null : nu0 - nu02 / 2;
    case 'isotope-pair': {
      if (c.partner === null || nu0 === undefined || mu === undefined) return null;
      const rho = Math.sqrt(mu / c.partner.reducedMassU);
      if (Math.abs(rho - 1) < 0.05) return null;
      const omega = (rho * rho * nu0 - c.partner.nu0) / (rho * rho - rho);
      return (omega - nu0) / 2;
    }
  }
}
