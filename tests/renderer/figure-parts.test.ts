import { describe, expect, it } from 'vitest';
import {
  decimalsFor,
  figureParts,
  figureText,
  signedFigure,
  unitText,
} from '../../renderer/components/figure-parts.ts';

describe('figureParts', () => {
  it('shows an uncertainty with two figures and the value with the same decimals', () => {
    expect(figureText(10.593456, 0.00042, 'cm-1')).toBe('10.59346 ± 0.00042 cm⁻¹');
    expect(figureText(127.456, 0.012, 'pm')).toBe('127.456 ± 0.012 pm');
    expect(figureText(516.2, 3.4, 'N/m')).toBe('516.2 ± 3.4 N/m');
  });

  it('drops a decimal where the uncertainty rounds up to the next power of ten', () => {
    expect(decimalsFor(0.0996)).toBe(2);
    expect(decimalsFor(0.00994)).toBe(4);
    expect(decimalsFor(12)).toBe(0);
  });

  it('writes a negative number with the minus sign of print, and very small ones with a power of ten', () => {
    expect(figureParts(-0.3012, 0.002).whole).toBe('−0');
    expect(figureText(2.643e-47, 0.004e-47, 'kg m2')).toBe('(2.6430 ± 0.0040) × 10⁻⁴⁷ kg m²');
  });

  it('shows no uncertainty where none is known', () => {
    expect(figureText(10.593, null, 'cm-1')).toBe('10.5930 cm⁻¹');
    expect(figureParts(0, null).fraction).toBe('.00000');
  });

  it('signs a deviation, but not a zero', () => {
    expect(signedFigure(-0.3, 2)).toBe('−0.30');
    expect(signedFigure(0.004, 3)).toBe('+0.004');
    expect(signedFigure(-0.0001, 2)).toBe('0.00');
    expect(unitText('cm-1')).toBe('cm⁻¹');
  });
});
