import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { formatMeasured, readNumber, readQuantity } from '../../shared-core/units/index.ts';

const digits = fc
  .tuple(fc.integer({ min: 1, max: 9 }), fc.array(fc.integer({ min: 0, max: 9 }), { maxLength: 7 }))
  .map(([first, rest]) => `${first}${rest.join('')}`);
const decimals = fc
  .array(fc.integer({ min: 0, max: 9 }), { minLength: 4, maxLength: 8 })
  .map((d) => d.join(''));

const symbols = Array.from('0123456789.,eE+-±×·() %/⁻¹NmcÅpJ−\u2009\u00a0', (c) => c);

describe('numbers written and read', () => {
  it('come back whatever the decimal sign, the power of ten and the minus', () => {
    fc.assert(
      fc.property(
        digits,
        decimals,
        fc.integer({ min: -60, max: 60 }),
        fc.constantFrom('.', ','),
        fc.constantFrom('', '-', '−'),
        fc.constantFrom(
          (n: number) => `e${n}`,
          (n: number) => `E${n < 0 ? n : `+${n}`}`,
          (n: number) => ` × 10^${n}`,
          (n: number) => `·10^{${n}}`,
        ),
        (whole, places, power, sign, minus, writtenPower) => {
          const read = readNumber(`${minus}${whole}${sign}${places}${writtenPower(power)}`);
          const value = Number(`${minus === '' ? '' : '-'}${whole}.${places}e${power}`);
          expect(read).toMatchObject({
            state: 'number',
            number: { value, figures: whole.length + places.length, rest: '' },
          });
        },
      ),
    );
  });

  it('of any text at all end in a number without NaN, in nothing given, or in a reason', () => {
    fc.assert(
      fc.property(
        fc.string({
          unit: fc.constantFrom(...symbols),
          maxLength: 24,
        }),
        (text) => {
          const q = readQuantity(text, 're');
          if (q.value === null) expect(q.given).toBe(q.unreadableBecause !== null);
          for (const n of [q.value, q.uncertainty, q.halfLastDigit])
            expect(n === null || Number.isFinite(n)).toBe(true);
        },
      ),
      { numRuns: 2000 },
    );
  });

  it('are never changed by more than half the last digit when they are shown', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 1e-30, max: 1e12, noNaN: true }),
        fc.double({ min: 1e-7, max: 0.3, noNaN: true }),
        fc.boolean(),
        (size, relative, negative) => {
          const value = negative ? -size : size;
          const shown = formatMeasured(value, size * relative, 'cm-1');
          const read = readQuantity(shown, 'Be');
          expect(Math.abs(read.value! - value)).toBeLessThanOrEqual(read.halfLastDigit! * (1 + 1e-6));
          expect(Math.abs(read.uncertainty! - size * relative)).toBeLessThanOrEqual(
            read.halfLastDigit! * (1 + 1e-6),
          );
        },
      ),
      { numRuns: 1000 },
    );
  });
});
