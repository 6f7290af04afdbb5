import { describe, expect, it } from 'vitest';
import { propagate } from '../../../shared-core/reference/propagate.ts';

describe('propagate', () => {
  it('gives the variance of a linear combination exactly, correlation included', () => {
    // u² = 1.5²·4 + 0.5²·9 − 2·1.5·0.5·3 = 9 + 2.25 − 4.5
    const { value, uncertainty } = propagate([10, 20], [4, 3, 3, 9], (v) => 1.5 * v[0]! - 0.5 * v[1]!);
    expect(value).toBe(5);
    expect(uncertainty).toBeCloseTo(Math.sqrt(6.75), 12);
  });

  it('takes the derivative of a power at the fitted value', () => {
    const { uncertainty } = propagate([4], [1e-6], (v) => Math.sqrt(v[0]!));
    expect(uncertainty).toBeCloseTo(1e-3 / 4, 9);
  });

  it('says null where the covariance is not finite', () => {
    expect(propagate([1], [Number.NaN], (v) => v[0]!).uncertainty).toBeNull();
  });

  it('refuses a covariance of another size', () => {
    expect(() => propagate([1, 2], [1], (v) => v[0]!)).toThrow(/covariance: expected 4/);
  });
});
