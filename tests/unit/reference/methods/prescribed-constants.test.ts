import { describe, expect, it } from 'vitest';
import { admissibleLineSets } from '../../../../shared-core/reference/methods/line-sets.ts';
import { prescribedConstants } from '../../../../shared-core/reference/methods/prescribed-constants.ts';
import type { MethodSettings } from '../../../../shared-core/reference/types.ts';
import { h35cl, hydrogenChloride, linesOf } from '../../../helpers/term-value-lines.ts';

const settings: MethodSettings = {
  masses: 'isotopic',
  bondLengthFrom: 'Be',
  forceConstantFrom: 'nu0',
  anharmonicityFrom: null,
  anharmonicityPerCm: null,
};
const any = { rule: 'any' } as const;

describe('admissibleLineSets', () => {
  it('runs from five a side up to all, the largest first', () => {
    const sets = admissibleLineSets(linesOf(hydrogenChloride, 7), any);
    expect(sets).toHaveLength(9);
    expect(sets[0]!.lines).toHaveLength(14);
    expect(sets.at(-1)!.lines).toHaveLength(10);
  });

  it('leaves gaps only where a line is blended or saturated', () => {
    const lines = linesOf(hydrogenChloride, 6).map((l) => ({ ...l, saturated: l.m === 3 }));
    const sets = admissibleLineSets(lines, any);
    for (const { lines: chosen } of sets) {
      const ms = chosen.map((l) => l.m).filter((m) => m > 0);
      const missing = Array.from({ length: Math.max(...ms) }, (_, i) => i + 1).filter((m) => !ms.includes(m));
      expect(missing.every((m) => m === 3)).toBe(true);
    }
    expect(sets.some((s) => s.lines.every((l) => l.m !== 3))).toBe(true);
    expect(sets.some((s) => s.lines.some((l) => l.m === 3))).toBe(true);
  });

  it('keeps to the range of the scheme, to the number of lines, to the lines handed in', () => {
    const lines = linesOf(hydrogenChloride, 9);
    const upTo = admissibleLineSets(lines, { rule: 'up-to', m: 6 });
    expect(upTo).toHaveLength(1);
    expect(upTo[0]!.lines).toHaveLength(12);
    const counted = admissibleLineSets(lines, any, { known: 'count', count: 13 });
    expect(counted.every((s) => s.lines.length === 13)).toBe(true);
    const own = admissibleLineSets(lines, any, { known: 'lines', ms: [-3, -1, 1, 2, 4] });
    expect(own.map((s) => s.lines.map((l) => l.m))).toEqual([[-3, -1, 1, 2, 4]]);
  });

  it('lines that the reference left out as outliers are in no set', () => {
    const lines = linesOf(hydrogenChloride, 6).map((l) => ({ ...l, used: l.m !== 2 }));
    expect(admissibleLineSets(lines, any).every((s) => s.lines.every((l) => l.m !== 2))).toBe(true);
  });
});

describe('prescribedConstants', () => {
  it('spans a quadratic by far more than a cubic, as the neglected D makes it depend on the lines', () => {
    const lines = linesOf(hydrogenChloride, 12);
    const width = (degree: 2 | 3): number => {
      const { constants } = prescribedConstants(lines, { fit: 'polynomial', degree }, settings, h35cl, any);
      const be = constants.values.Be!;
      expect(be.low).toBeLessThanOrEqual(be.value);
      expect(be.high).toBeGreaterThanOrEqual(be.value);
      return (be.high - be.low) / be.value;
    };
    expect(width(2)).toBeGreaterThan(0.005);
    expect(width(3)).toBeLessThan(0.0005);
  });

  it('keeps each set with its own whole vector', () => {
    const { sets } = prescribedConstants(
      linesOf(hydrogenChloride, 8),
      { fit: 'polynomial', degree: 2 },
      settings,
      h35cl,
      any,
    );
    for (const { values } of sets) expect(values.Be).toBeCloseTo(values.B0! + values.alphaE! / 2, 10);
  });

  it('says why where the lines do not carry the method', () => {
    const oneBranch = linesOf(hydrogenChloride, 0, 8);
    const span = prescribedConstants(oneBranch, { fit: 'midpoint' }, settings, h35cl, any);
    expect(span.sets).toHaveLength(0);
    expect(span.reason).toContain('midpoint');
  });
});
