import { describe, expect, it } from 'vitest';
import { pointsFor } from '../../../shared-core/marking/points.ts';
import {
  halfDigitAt,
  roundingAllowance,
  toleranceHalfWidth,
} from '../../../shared-core/marking/tolerance.ts';
import { schemeFor } from '../../helpers/marking-cases.ts';

const reference = { value: 10.59, uncertainty: 0.001 };

describe('toleranceHalfWidth', () => {
  it('is absolute, relative, or a multiple of the combined uncertainty', () => {
    expect(toleranceHalfWidth({ absolute: 0.5 }, reference)).toBe(0.5);
    expect(toleranceHalfWidth({ relative: 0.003 }, reference)).toBeCloseTo(0.03177, 12);
    expect(toleranceHalfWidth({ sigmas: 2 }, { value: 10, uncertainty: 0.03 }, 0.04)).toBeCloseTo(0.1, 12);
  });

  it('is never tighter than twice the uncertainty of the reference', () => {
    expect(toleranceHalfWidth({ absolute: 1e-6 }, reference)).toBe(0.002);
    expect(toleranceHalfWidth({ sigmas: 1 }, reference)).toBe(0.002);
  });

  it('refuses what is no tolerance', () => {
    expect(() => toleranceHalfWidth({ relative: 0 }, reference)).toThrow(RangeError);
    expect(() => toleranceHalfWidth({ relative: NaN }, reference)).toThrow(RangeError);
  });
});

describe('roundingAllowance', () => {
  it('is half the last digit down to the figures asked for, and turns against fewer', () => {
    expect(roundingAllowance(10.59, 0.005, 4)).toBe(0.005);
    expect(roundingAllowance(10.59, 0.00005, 4)).toBe(0.00005);
    expect(roundingAllowance(10.59, 0.05, 4)).toBe(-0.05);
  });

  it('is nothing where figures are unknown or not asked for', () => {
    expect(roundingAllowance(10.59, null, 4)).toBe(0);
    expect(roundingAllowance(10.59, 0.05, null)).toBe(0);
  });

  it('half of the last digit of a number written to so many figures', () => {
    expect(halfDigitAt(10.59, 4)).toBeCloseTo(0.005, 15);
    expect(halfDigitAt(5.3e-4, 2)).toBeCloseTo(5e-6, 18);
  });
});

describe('pointsFor', () => {
  const rule = { ...schemeFor(['Be']).quantities[0]!, points: 4 };
  const tolerance = { full: 0.1, part: 0.3 };
  it('gives all, half, none', () => {
    expect(pointsFor(rule, 'within', 0.05, tolerance)).toBe(4);
    expect(pointsFor(rule, 'part credit', 0.2, tolerance)).toBe(2);
    expect(pointsFor(rule, 'outside', 0.5, tolerance)).toBe(0);
  });
  it('slides from all at the full tolerance to none at the part tolerance', () => {
    const sliding = { ...rule, partCredit: 'sliding' as const };
    expect(pointsFor(sliding, 'part credit', 0.1, tolerance)).toBe(4);
    expect(pointsFor(sliding, 'part credit', 0.2, tolerance)).toBe(2);
    expect(pointsFor(sliding, 'part credit', 0.3, tolerance)).toBe(0);
  });
});
