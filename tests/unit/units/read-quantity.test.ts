import { describe, expect, it } from 'vitest';
import {
  formatMeasured,
  readNumber,
  readQuantity,
  type QuantityKey,
} from '../../../shared-core/units/index.ts';

type Case = [
  text: string,
  key: QuantityKey,
  headerUnit: string | null,
  value: number,
  figures: number | null,
  half: number,
];

describe('a quantity as it was written', () => {
  const cases: Case[] = [
    ['10,59', 'Be', 'cm-1', 10.59, 4, 0.005],
    ['1.2746(3)e-10 m', 're', null, 127.46, 5, 0.005],
    ['127.5 pm', 're', 'Å', 127.5, 4, 0.05],
    ['1.275', 're', 'Å', 127.5, 4, 0.05],
    ['0.1275', 're', 'nm', 127.5, 4, 0.05],
    ['516 N m⁻¹', 'k', null, 516, 3, 0.5],
    ['5.16e5 dyn/cm', 'k', null, 516, 3, 0.5],
    ['5.16 mdyn/Å', 'k', 'N/m', 516, 3, 0.5],
    ['≈10.6', 'Be', 'cm-1', 10.6, 3, 0.05],
    ['1.2746 × 10⁻¹⁰', 're', 'm', 127.46, 5, 0.005],
    ['1.2746×10^-10 m', 're', null, 127.46, 5, 0.005],
    ['2 885.98', 'nu0', 'cm-1', 2885.98, 6, 0.005],
    ['2,885.98 cm-1', 'nu0', null, 2885.98, 6, 0.005],
    ['2.885,98', 'nu0', 'cm-1', 2885.98, 6, 0.005],
    ['10,593', 'Be', 'cm-1', 10.593, 5, 0.0005],
    ['2,886', 'nu0', 'cm-1', 2886, 4, 0.5],
    ['−0.307', 'alphaE', 'cm-1', -0.307, 3, 0.0005],
    ['5.3E-4', 'D', 'cm-1', 0.00053, 2, 5e-6],
    ['317.58 GHz', 'Be', null, 10.5933, 5, 0.000167],
  ]; // prettier-ignore
  it.each(cases)('“%s” as %s in %s', (text, key, headerUnit, value, figures, half) => {
    const q = readQuantity(text, key, { headerUnit });
    expect(q.unreadableBecause).toBeNull();
    expect(q.value! / value).toBeCloseTo(1, 5);
    expect(q.figures).toBe(figures);
    expect(q.halfLastDigit! / half).toBeCloseTo(1, 2);
  });

  it('keeps an uncertainty in brackets or behind ±', () => {
    expect(readQuantity('1.2746(3)e-10 m', 're').uncertainty).toBeCloseTo(0.03, 6);
    expect(readQuantity('10.59 +/- 0.02', 'Be').uncertainty).toBe(0.02);
    expect(readQuantity('10,59 ± 0,02 cm⁻¹', 'Be').uncertainty).toBe(0.02);
  });

  it('knows no figures of a number that a spreadsheet stored', () => {
    const q = readQuantity('10.6', 'Be', { storedAsNumber: true });
    expect([q.value, q.figures, q.halfLastDigit]).toEqual([10.6, null, null]);
  });

  it.each(['', '-', 'n/a', '—', '?'])('takes “%s” as not given', (text) => {
    const q = readQuantity(text, 'Be');
    expect([q.given, q.value, q.unreadableBecause]).toEqual([false, null, null]);
  });

  it.each([
    ['see text', /does not begin with a number/],
    ['10.5 10.6', /more than one number/],
    ['127.5 furlongs', /no unit of re/],
    ['1.2.3', /decimal signs/],
  ])('says why “%s” cannot be read', (text, reason) => {
    expect(readQuantity(text, 're').unreadableBecause).toMatch(reason);
  });

  it('asks about a comma that may be either sign', () => {
    const read = readNumber('1,234');
    expect(read.state).toBe('unreadable');
  });
});

describe('a measured value on screen', () => {
  it('is rounded by its uncertainty and carries its unit', () => {
    expect(formatMeasured(10.592371, 0.00021, 'cm-1')).toBe('10.59237 ± 0.00021 cm⁻¹');
    expect(formatMeasured(0.00053194, 0.0000024, 'cm-1')).toBe('0.0005319 ± 0.0000024 cm⁻¹');
    expect(formatMeasured(2.64258e-47, 5.3e-52, 'kg m2')).toBe('(2.642580 ± 0.000053) × 10⁻⁴⁷ kg m²');
    expect(formatMeasured(480.7, null, 'N/m')).toBe('480.7 N/m');
  });
});
