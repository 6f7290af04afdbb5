import { describe, expect, it } from 'vitest';
import { parseScheme } from '../../../shared-core/marking/parse-scheme.ts';
import {
  starterSchemeFor,
  starterVariants,
  type StarterVariant,
} from '../../../shared-core/marking/starter-scheme.ts';

const smallest = {
  version: 1,
  isotopologues: ['H35Cl'],
  methods: [{ fit: 'polynomial', degree: 3 }],
  quantities: [{ key: 'Be', unit: 'cm-1', full: { relative: 0.003 }, points: 1 }],
};
const problems = (json: unknown): string => {
  const outcome = parseScheme(json);
  return outcome.ok ? '' : outcome.problems.join(' | ');
};

describe('parseScheme', () => {
  it('fills in what the smallest scheme leaves out', () => {
    const outcome = parseScheme(smallest);
    expect(outcome.ok && outcome.scheme).toMatchObject({
      masses: 'isotopic',
      lines: { rule: 'any' },
      bondLengthFrom: 'Be',
      carryForward: true,
      lateness: null,
    });
  });

  it.each(Object.keys(starterVariants) as StarterVariant[])(
    'reads back the starter scheme "%s" unchanged',
    (variant) => {
      const scheme = starterSchemeFor(variant);
      const outcome = parseScheme(JSON.parse(JSON.stringify(scheme)));
      expect(outcome).toEqual({ ok: true, scheme });
    },
  );

  it.each([
    ['another version', { ...smallest, version: 2 }, 'version'],
    ['no isotopologue', { ...smallest, isotopologues: [] }, 'isotopologues'],
    ['a name that is none', { ...smallest, isotopologues: ['hcl'] }, 'isotopologues[0]'],
    ['a fifth degree', { ...smallest, methods: [{ fit: 'polynomial', degree: 5 }] }, 'methods[0].degree'],
    [
      'D free in a cubic',
      { ...smallest, methods: [{ fit: 'polynomial', degree: 3, distortion: 'free' }] },
      'degree 4',
    ],
    [
      'a tolerance of nothing',
      { ...smallest, quantities: [{ ...smallest.quantities[0], full: { relative: 0 } }] },
      'quantities[0].full',
    ],
    [
      'part narrower than full',
      { ...smallest, quantities: [{ ...smallest.quantities[0], part: { relative: 0.001 } }] },
      'narrower',
    ],
    [
      'a quantity twice',
      { ...smallest, quantities: [smallest.quantities[0], smallest.quantities[0]] },
      'twice',
    ],
    ['given without a value', { ...smallest, anharmonicityFrom: 'given' }, 'anharmonicityPerCm'],
    ['an unknown key', { ...smallest, colour: 'red' }, 'colour'],
    ['a due date without an offset', { ...smallest, due: '2026-03-01' }, 'due'],
    ['no object', 'text', 'scheme'],
  ])('refuses %s and names the place', (_, json, place) => {
    expect(problems(json)).toContain(place);
  });
});
