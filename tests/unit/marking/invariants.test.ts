import { describe, expect, it } from 'vitest';
import {
  checkAcrossIsotopologues,
  checkInvariants,
  type InvariantId,
} from '../../../shared-core/marking/invariants.ts';
import { schemeFor, submitted } from '../../helpers/marking-cases.ts';
import { h35cl } from '../../helpers/term-value-lines.ts';
import type { QuantityKey } from '../../../shared-core/units/types.ts';

const settings = schemeFor(['Be'], { anharmonicityFrom: 'overtone', forceConstantFrom: 'omegaE' });
/** H35Cl: Be, αe, ωe, ωexe, De, re of Huber & Herzberg (1979); the others by the formulas of the trade, by hand. */
const published: Partial<Record<QuantityKey, string>> = {
  Be: '10.5934', alphaE: '0.30718', B0: '10.4398', B1: '10.1326', omegaE: '2990.95', omegaExe: '52.819', nu0: '2885.31', nu02: '5665.0',
  D: '5.319e-4', re: '127.455', r0: '128.39', k: '516.31', De: '42342', D0: '40860', I: '2.6425e-47',
}; // prettier-ignore
const failures = (changed: Partial<Record<QuantityKey, string>>): InvariantId[] => {
  const values = Object.entries({ ...published, ...changed }).map(([key, text]) =>
    submitted(key as QuantityKey, text),
  );
  return [
    ...new Set(
      checkInvariants(values, h35cl, settings)
        .filter((r) => !r.passed)
        .map((r) => r.id),
    ),
  ];
};

describe('checkInvariants', () => {
  it('published numbers agree with each other in every relation', () => {
    const values = Object.entries(published).map(([key, text]) => submitted(key as QuantityKey, text));
    const results = checkInvariants(values, h35cl, settings);
    expect(results.filter((r) => !r.passed).map((r) => r.text)).toEqual([]);
    expect(new Set(results.map((r) => r.id))).toEqual(new Set(['I1', 'I2', 'I3', 'I4', 'I5', 'I6', 'I8']));
  });

  it.each<[InvariantId, Partial<Record<QuantityKey, string>>]>([
    ['I1', { re: '128.39' }],
    ['I2', { k: '13.08' }],
    ['I3', { Be: '10.2862' }],
    ['I4', { omegaE: '3043.77' }],
    ['I5', { D: '2.128e-3' }],
    ['I6', { De: '39400' }],
    ['I8', { I: '2.6425e-45' }],
  ])('%s fails when its step is wrong', (id, changed) => {
    expect(failures(changed)).toContain(id);
  });

  it('a relation holds as long as the rounding intervals can meet', () => {
    expect(failures({ Be: '10.6', B0: '10.4', B1: '10.1', alphaE: '0.3', re: '127', I: '2.6e-47' })).toEqual(
      [],
    );
  });

  it('k fits ν̃0 as well as ωe', () => {
    expect(failures({ k: '480.5' })).toEqual([]);
  });
});

describe('checkAcrossIsotopologues', () => {
  it('re has to agree between H and D', () => {
    const of = (re: string) => [submitted('re', re)];
    expect(checkAcrossIsotopologues(of('127.46'), of('127.46'), settings).every((r) => r.passed)).toBe(true);
    expect(
      checkAcrossIsotopologues(of('127.46'), of('128.39'), settings).map((r) => [r.id, r.passed]),
    ).toEqual([['I7', false]]);
  });
});
