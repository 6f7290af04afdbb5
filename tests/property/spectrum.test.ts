import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { jcampText, type JcampForm } from '../../electron/backend/example/jcamp-writer.ts';
import { writtenNumber } from '../../shared-core/spectrum/text/written-number.ts';
import { readOne } from '../helpers/spectrum-files.ts';
import { fuzzSpectrum } from './fuzz-spectrum.ts';

describe('reading of spectrum files, properties', () => {
  it('ends every mutated file in the points of a second reading or in a refusal with a reason', () => {
    const counts = fuzzSpectrum(1500, 20_261_201);
    expect(counts.cases).toBe(1500);
    expect(counts.read).toBeGreaterThan(300);
    expect(counts.refused).toBeGreaterThan(300);
    expect(counts.slowestMs).toBeLessThan(2000);
  });

  it('gives back what was written in any JCAMP-DX form', () => {
    fc.assert(
      fc.property(
        fc.constantFrom<JcampForm>('affn', 'packed', 'squeezed', 'difdup', 'xypoints'),
        fc.array(fc.integer({ min: -50_000, max: 1_000_000 }), { minLength: 50, maxLength: 300 }),
        fc.double({ min: 500, max: 6000, noNaN: true }),
        fc.double({ min: 0.01, max: 4, noNaN: true }),
        fc.boolean(),
        (form, whole, from, step, descending) => {
          const first = Number(from.toFixed(3));
          const x = Float64Array.from(whole, (_, i) => first + i * Number(step.toFixed(4)));
          // One value sets the scale, so that every other is written without rounding.
          const y = Float64Array.from(whole, (value, i) => (i === 0 ? 1 : value / 1_000_000));
          const order = descending ? [x.toReversed(), y.toReversed()] : [x, y];
          const text = jcampText({ title: 't', xPerCm: order[0]!, y: order[1]!, yUnits: 'ABSORBANCE', resolutionPerCm: 1 }, form); // prettier-ignore
          const spectrum = readOne(text);
          expect(spectrum.wavenumberPerCm.length).toBe(whole.length);
          for (let i = 0; i < x.length; i++) {
            expect(Math.abs(spectrum.wavenumberPerCm[i]! - x[i]!)).toBeLessThan(2e-5);
            expect(Math.abs(spectrum.ordinate[i]! - y[i]!)).toBeLessThan(1e-9);
          }
        },
      ),
      { numRuns: 150, seed: 5 },
    );
  });

  it('gives back what was written as text, whatever the layout', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(
          [',', false],
          [';', false],
          [';', true],
          ['\t', false],
          ['\t', true],
          ['  ', false],
          ['  ', true],
        ),
        fc.array(fc.double({ min: -0.2, max: 4, noNaN: true }), { minLength: 50, maxLength: 200 }),
        fc.integer({ min: 2, max: 6 }),
        fc.boolean(),
        ([separator, comma], y, decimals, descending) => {
          const x = y.map((_, i) => Number((2000 + i * 0.5).toFixed(1)));
          const rows = x.map((value, i) => {
            const cells = [value.toFixed(1), y[i]!.toFixed(decimals)].map((cell) => (comma ? cell.replace('.', ',') : cell));
            return cells.join(separator);
          }); // prettier-ignore
          const spectrum = readOne(
            ['Wavenumber Absorbance', ...(descending ? rows.toReversed() : rows)].join('\n'),
          );
          expect([...spectrum.wavenumberPerCm]).toEqual(x);
          expect([...spectrum.ordinate].map((value) => value + 0)).toEqual(
            y.map((value) => Number(value.toFixed(decimals)) + 0),
          );
        },
      ),
      { numRuns: 150, seed: 6 },
    );
  });

  it('reads every written double as the language does', () => {
    fc.assert(
      fc.property(
        fc.double({ noNaN: true, noDefaultInfinity: true, min: -1e300, max: 1e300 }),
        fc.nat(3),
        (value, style) => {
          const written = [
            String(value),
            value.toExponential(9),
            value.toPrecision(17),
            value.toPrecision(8),
          ][style]!;
          expect(writtenNumber(written, 0, written.length, 46) + 0).toBe(Number(written) + 0);
        },
      ),
      { numRuns: 2000, seed: 7 },
    );
  });
});
