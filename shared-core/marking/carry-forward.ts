import { bondLengthFactor, forceConstantFactor } from '../molecule/physical-constants.ts';
import {
  derive,
  forceConstantWavenumber,
  type DeriveContext,
  type Values,
} from '../reference/methods/derive.ts';
import type { QuantityKey } from '../units/types.ts';
import type { MarkingScheme } from './types.ts';

/** Values each quantity is worked out from, directly or by way of others; what is read off the lines has none. */
const ancestors: Readonly<Partial<Record<QuantityKey, readonly QuantityKey[]>>> = {
  alphaE: ['B0', 'B1'],
  Be: ['B0', 'B1', 'alphaE'],
  omegaExe: ['nu0', 'nu02'],
  omegaE: ['nu0', 'nu02', 'omegaExe'],
  I: ['B0', 'B1', 'alphaE', 'Be'],
  r0: ['mu', 'B0'],
  re: ['mu', 'B0', 'B1', 'alphaE', 'Be'],
  k: ['mu', 'nu0', 'nu02', 'omegaExe', 'omegaE'],
  De: ['nu0', 'nu02', 'omegaExe', 'omegaE'],
  D0: ['nu0', 'nu02', 'omegaExe', 'omegaE', 'De'],
};

/** Quantities that stand on the reduced mass, in the order in which a slip in it costs: the first of them only. */
export const standOnMass: readonly QuantityKey[] = ['mu', 're', 'r0', 'k'];

/**
 * What a quantity would be, worked out correctly from the student's own values before it (the reference fills what was not given).
 *
 * Several values where there are several correct ways: Be = B_0 + αe/2 = B_1 + 3αe/2 = (B_0 + B_1)/2 + αe. Empty for what is read
 * off the lines.
 */
export function fromOwnValues(quantity: QuantityKey, own: Values, context: DeriveContext): number[] {
  const before = ancestors[quantity];
  if (before === undefined) return [];
  const given: Values = {};
  for (const key of before) if (own[key] !== undefined) given[key] = own[key];
  if (Object.keys(given).length === 0) return [];
  const derived = derive(context, undefined, given);
  const ways = [derived[quantity]];
  const { B0, B1, alphaE } = { ...derived, ...given };
  if (quantity === 'Be' && B0 !== undefined && B1 !== undefined && alphaE !== undefined) {
    ways.push(B1 + 1.5 * alphaE, (B0 + B1) / 2 + alphaE);
  }
  return ways.filter((v): v is number => v !== undefined);
}

/** Reduced mass (u) that a student must have used for r or k, from the student's own values where given; null for other quantities. */
export function impliedReducedMassU(
  quantity: QuantityKey,
  value: number,
  own: Values,
  context: DeriveContext,
  scheme: MarkingScheme,
): number | null {
  const have = { ...derive(context), ...own };
  switch (quantity) {
    case 'mu':
      return value;
    case 're':
    case 'r0': {
      const b = quantity === 'r0' ? have.B0 : have[scheme.bondLengthFrom];
      return b === undefined ? null : bondLengthFactor / (b * value ** 2);
    }
    case 'k': {
      const wavenumber = have[forceConstantWavenumber(scheme)];
      return wavenumber === undefined ? null : value / (forceConstantFactor * wavenumber ** 2);
    }
    default:
      return null;
  }
}
