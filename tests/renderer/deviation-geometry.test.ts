import { describe, expect, it } from 'vitest';
import { deviationGeometry } from '../../renderer/components/deviation-geometry.ts';

const base = { reference: 10.59, low: 10.58, high: 10.6, uncertainty: 0.001, full: 0.03, part: 0.07 };

describe('deviationGeometry', () => {
  it('puts the reference in the middle and the tolerance around the span', () => {
    const scale = deviationGeometry({ ...base, submitted: 10.59 });
    expect(scale.submitted).toBe(0.5);
    expect(scale.full[0]).toBeLessThan(scale.span[0]);
    expect(scale.full[1]).toBeGreaterThan(scale.span[1]);
    expect(scale.part![1] - scale.part![0]).toBeGreaterThan(scale.full[1] - scale.full[0]);
  });

  it('places a deviation in proportion to the scale', () => {
    const scale = deviationGeometry({ ...base, submitted: 10.65 });
    expect((scale.submitted - 0.5) * 2 * scale.halfWidth).toBeCloseTo(0.06, 10);
    expect(scale.beyond).toBeNull();
  });

  it('draws what lies far out at the edge, on its own side', () => {
    expect(deviationGeometry({ ...base, submitted: 21.2 })).toMatchObject({ submitted: 1, beyond: 'right' });
    expect(deviationGeometry({ ...base, submitted: 5.3 })).toMatchObject({ submitted: 0, beyond: 'left' });
  });

  it('works without part credit, span and uncertainty', () => {
    const scale = deviationGeometry({
      submitted: 2,
      reference: 1,
      low: 1,
      high: 1,
      uncertainty: null,
      full: 0,
      part: null,
    });
    expect(scale.part).toBeNull();
    expect(Number.isFinite(scale.submitted)).toBe(true);
  });
});
