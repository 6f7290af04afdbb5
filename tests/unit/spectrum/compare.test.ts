import { describe, expect, it } from 'vitest';
import {
  fileStyles,
  writeSpectrum,
  type FileStyleName,
} from '../../../electron/backend/example/file-writer.ts';
import { createRandom } from '../../../electron/backend/example/random.ts';
import { simulateSpectrum, type SimulationOptions } from '../../../electron/backend/example/simulate.ts';
import { compareSpectra } from '../../../shared-core/spectrum/compare.ts';
import { noiseSignature, type NoiseSignature } from '../../../shared-core/spectrum/noise-signature.ts';
import { prepareSpectrum } from '../../../shared-core/spectrum/prepare/prepare-spectrum.ts';
import { readOne } from '../../helpers/spectrum-files.ts';

const options: SimulationOptions = {
  seed: 40,
  gases: [{ gas: 'HCl', peakAbsorbance: 1 }],
  fromPerCm: 2600,
  toPerCm: 3150,
  fringes: { amplitude: 0.01, periodPerCm: 25, phaseRad: 1 },
  foreign: { water: 0.01 },
};
const one = simulateSpectrum(options);
const x = one.wavenumberPerCm;
const t = one.transmittance;

function signature(
  wavenumberPerCm: Float64Array,
  transmittance: Float64Array,
  style: FileStyleName = 'csv-header',
): NoiseSignature {
  const bytes = writeSpectrum(
    { title: 'invented', wavenumberPerCm, transmittance, resolutionPerCm: 0.5 },
    fileStyles[style],
  );
  const prepared = prepareSpectrum(readOne(bytes));
  if ('unusable' in prepared) throw new Error(prepared.unusable.text);
  return noiseSignature(prepared);
}

const original = signature(x, t);

function withNoise(values: Float64Array, size: number): Float64Array {
  const random = createRandom(9, 9);
  return values.map((value) => value + size * random.normal());
}

function resampled(step: number): [Float64Array, Float64Array] {
  const places = Array.from({ length: Math.floor((x.at(-1)! - x[0]!) / step) }, (_, i) => x[0]! + i * step);
  const own = x[1]! - x[0]!;
  const values = places.map((place) => {
    const left = Math.floor((place - x[0]!) / own);
    const part = (place - x[left]!) / own;
    return t[left]! + part * ((t[left + 1] ?? t[left]!) - t[left]!);
  });
  return [Float64Array.from(places), Float64Array.from(values)];
}

describe('one measurement handed in twice', () => {
  it.each<[string, () => NoiseSignature, string[]]>([
    ['as it was, in another format', () => signature(x, t, 'jcamp-difdup'), []],
    ['rounded', () => signature(x, t, 'csv-trailing-rounded'), []],
    ['scaled in absorbance', () => signature(x, t.map((value) => value ** 1.25)), ['scaled']],
    ['shifted by an offset', () => signature(x, t.map((value) => 0.8 * value)), []],
    ['cropped', () => signature(x.slice(600, 3800), t.slice(600, 3800)), ['cropped']],
    ['every second point', () => signature(x.filter((_, i) => i % 2 === 0), t.filter((_, i) => i % 2 === 0)), ['resampled']],
    ['interpolated to another step', () => signature(...resampled(0.1)), ['resampled']],
    ['with as much noise added again', () => signature(x, withNoise(t, 1e-3)), ['noise-added']],
    ['cropped and with noise added', () => signature(x.slice(300), withNoise(t.slice(300), 7e-4)), ['cropped', 'noise-added']],
  ])('is recognised %s', (_, copy, expected) => {
    const comparison = compareSpectra(original, copy());
    expect(comparison.same).toBe(true);
    expect(comparison.significance).toBeGreaterThan(8);
    expect(comparison.alterations).toEqual(expect.arrayContaining(expected));
    expect(comparison.text).toMatch(/^One measurement .*share their lines, never their noise\.$/);
    expect(compareSpectra(copy(), original).same).toBe(true);
  }); // prettier-ignore

  it('tells the factor between the absorbances', () => {
    const comparison = compareSpectra(
      original,
      signature(
        x,
        t.map((value) => value ** 1.25),
      ),
    );
    expect(comparison.absorbanceRatio).toBeCloseTo(1.25, 2);
    expect(comparison.kind).toBe('altered');
    expect(compareSpectra(original, signature(x, t)).kind).toBe('identical');
  });
});

describe('two measurements', () => {
  it.each([
    ['of one gas in one cell, fringes and water alike', {}],
    ['of one gas at another pressure', { gases: [{ gas: 'HCl', peakAbsorbance: 0.7 }] as const }],
    ['with correlated noise', { noiseModel: 'interferogram' as const, zeroFilling: 4 }],
    ['by an instrument without apodisation', { apodisation: 'boxcar' as const }],
    ['with little noise', { noise: 2e-4 }],
    ['at a resolution of 2', { resolutionPerCm: 2 }],
  ])('%s are two', (_, change) => {
    for (let seed = 100; seed < 104; seed++) {
      const [a, b] = [seed, seed + 50].map((each) => simulateSpectrum({ ...options, ...change, seed: each }));
      const comparison = compareSpectra(
        signature(a!.wavenumberPerCm, a!.transmittance),
        signature(b!.wavenumberPerCm, b!.transmittance),
      );
      expect(comparison.same).toBe(false);
      expect(comparison.kind).not.toBe('identical');
    }
  });

  it('in different ranges cannot be compared', () => {
    const comparison = compareSpectra(
      signature(x.slice(0, 2000), t.slice(0, 2000)),
      signature(x.slice(2300), t.slice(2300)),
    );
    expect(comparison).toMatchObject({ same: false, kind: 'not-comparable', noiseCorrelation: null });
  });

  it('a model of another length is refused', () => {
    const prepared = prepareSpectrum(
      readOne(writeSpectrum({ title: 'i', resolutionPerCm: 1, ...one }, fileStyles['csv-header'])),
    );
    if ('unusable' in prepared) throw new Error('unusable');
    expect(() => noiseSignature(prepared, new Float64Array(3))).toThrow(RangeError);
  });
});
