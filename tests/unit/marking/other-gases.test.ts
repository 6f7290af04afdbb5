import { describe, expect, it } from 'vitest';
import { markSubmission } from '../../../shared-core/marking/mark-submission.ts';
import { starterSchemeFor } from '../../../shared-core/marking/starter-scheme.ts';
import { referenceOf, submissionOf } from '../../helpers/marking-cases.ts';
import type { BandForTests } from '../../helpers/term-value-lines.ts';

/** ¹²C¹⁶O 1-0: B_0, B_1 from Be and αe, ν̃0 from ωe, ωexe and ωeye of Huber & Herzberg (1979). */
const carbonMonoxide: BandForTests = {
  origin: 2143.271,
  bLower: 1.922529,
  bUpper: 1.905024,
  dLower: 6.121e-6,
  dUpper: 6.12e-6,
};
/** H79Br 1-0: mass scaling of the published H81Br constants. */
const hydrogenBromide: BandForTests = {
  origin: 2558.92,
  bLower: 8.3508,
  bUpper: 8.1174,
  dLower: 3.457e-4,
  dUpper: 3.42e-4,
};

const mark = (
  isotopologue: string,
  band: BandForTests,
  lines: number,
  variant: 'CO fundamental' | 'HBr fundamental',
  texts: Record<string, string>,
) =>
  markSubmission(
    submissionOf(texts, { isotopologue }),
    [{ file: 'a.csv', reference: referenceOf([{ isotopologue, band }], lines) }],
    starterSchemeFor(variant),
  );

describe('carbon monoxide', () => {
  // re 1.128323 Å (Huber & Herzberg); r0 = re √(Be/B_0) by hand; k = 5.89183e-5 μ ν̃0² with μ = 6.856209 u.
  const honest = {
    nu0: '2143.27',
    B0: '1.92253',
    B1: '1.90502',
    Be: '1.93128',
    alphaE: '0.01750',
    re: '112.832',
    k: '1855.6',
  };
  it('honest work is within, by tolerances cut to the mistake margin', () => {
    const marked = mark('12C16O', carbonMonoxide, 20, 'CO fundamental', honest);
    expect(marked.values.map((v) => v.agreement)).toEqual(Object.keys(honest).map(() => 'within'));
    expect(marked.slips).toEqual([]);
  });
  it('B_0 for Be and r0 for re do not pass', () => {
    const marked = mark('12C16O', carbonMonoxide, 20, 'CO fundamental', {
      ...honest,
      Be: '1.92253',
      re: '113.089',
    });
    expect(marked.values.find((v) => v.quantity === 'Be')!.agreement).toBe('outside');
    expect(marked.slips[0]!.code).toBe('b0-as-be');
  });
});

describe('hydrogen bromide', () => {
  const honest = {
    nu0: '2558.92',
    B0: '8.3507',
    B1: '8.1176',
    Be: '8.4673',
    alphaE: '0.2332',
    re: '141.445',
    k: '383.92',
  };
  it('honest work is within', () => {
    const marked = mark('H79Br', hydrogenBromide, 10, 'HBr fundamental', honest);
    expect(marked.values.map((v) => v.agreement)).toEqual(Object.keys(honest).map(() => 'within'));
    expect(marked.slips).toEqual([]);
  });
  it('the mass of the lighter atom is recognised', () => {
    // μ(H79Br) = 0.995117 u against m(H) = 1.007825 u: r × 0.993675, k × 1.012771.
    const marked = mark('H79Br', hydrogenBromide, 10, 'HBr fundamental', {
      ...honest,
      re: '140.550',
      k: '388.82',
    });
    expect(marked.slips[0]!.code).toBe('mass-light-atom');
  });
});
