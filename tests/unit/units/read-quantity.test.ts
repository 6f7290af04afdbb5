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
    ['(1.2746 ± 0.0003) × 10⁻¹⁰ m', 're', null, 127.46, 5, 0.005],
    ['1,275E-10', 're', 'm', 127.5, 4, 0.05],
    ['2’885.98', 'nu0', 'cm-1', 2885.98, 6, 0.005],
    ['5.3', 'D', '10^-4 cm-1', 0.00053, 2, 5e-6],
    ['480 Newton pro Meter', 'k', null, 480, 3, 0.5],
    ['127.5 picometres', 're', null, 127.5, 4, 0.05],
    ['10.59 CM-1', 'Be', null, 10.59, 4, 0.005],
    ['1.275', 're', null, 127.5, 4, 0.05],
    ['480700', 'k', null, 480.7, 6, 0.0005],
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
    expect(readQuantity('10.59 cm-1 ± 0.02', 'Be').uncertainty).toBe(0.02);
    expect(readQuantity('127.46(0.05) pm', 're').uncertainty).toBe(0.05);
    expect(readQuantity('10.59 ± 2 %', 'Be').uncertainty).toBeCloseTo(0.2118, 12);
    expect(readQuantity('5.3e-4 ± 0.2e-4', 'D').uncertainty).toBeCloseTo(2e-5, 12);
  });

  it('gives a power of ten behind ± to both numbers, to the uncertainty, or asks', () => {
    const shared = readQuantity('1.2746 ± 0.0003 × 10⁻¹⁰ m', 're');
    expect([shared.value, shared.uncertainty]).toEqual([127.46, 0.03]);
    const own = readQuantity('10.59 ± 2e-2', 'Be');
    expect([own.value, own.uncertainty]).toEqual([10.59, 0.02]);
    expect(readQuantity('10.59 ± 3e-4', 'Be').unreadableBecause).toMatch(/one number or to both/);
  });

  it('tells the unit that it took, and none where nothing settles it', () => {
    expect(readQuantity('1.275', 're').unit).toBe('Å');
    expect(readQuantity('1.275', 're', { schemeUnit: 'nm' }).unit).toBe('nm');
    expect(readQuantity('1.275 Å', 're', { headerUnit: 'pm', schemeUnit: 'nm' }).unit).toBe('Å');
    expect(readQuantity('9000', 're').unreadableBecause).toMatch(/no unit/);
  });

  it('reads an unclear comma as the writer writes it elsewhere', () => {
    const value = (decimalSign: '.' | ',') => readQuantity('1,234', 'Be', { decimalSign }).value;
    expect([value(','), value('.')]).toEqual([1.234, 1234]);
  });

  it('knows no figures of a number that a spreadsheet stored', () => {
    const q = readQuantity('10.6', 'Be', { storedAsNumber: true });
    expect([q.value, q.figures, q.halfLastDigit]).toEqual([10.6, null, null]);
  });

  it.each(['', '-', '--', 'n/a', '—', '?', 'k. A.', 's/d'])('takes “%s” as not given', (text) => {
    const q = readQuantity(text, 'Be');
    expect([q.given, q.value, q.unreadableBecause]).toEqual([false, null, null]);
  });

  it.each([
    ['see text', /does not begin with a number/],
    ['10.5 10.6', /more than one number/],
    ['127.5 furlongs', /no unit of re/],
    ['1.2.3', /decimal signs/],
    ['5 %', /no unit/],
    ['1/2', /no unit/],
    ['#DIV/0!', /does not begin with a number/],
    ['10.59, 10.44', /more than one number/],
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
