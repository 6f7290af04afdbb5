import { describe, expect, it } from 'vitest';
import { simulateSpectrum, type SimulationOptions } from '../../../electron/backend/example/simulate.ts';
import { cramerRaoBounds } from '../../bench/bound.ts';

const options: SimulationOptions = {
  seed: 1,
  gases: [{ gas: 'HCl', peakAbsorbance: 1 }],
  fromPerCm: 2700,
  toPerCm: 3040,
  noise: 1e-3,
};
const bound = (changes: Partial<SimulationOptions>) =>
  cramerRaoBounds(simulateSpectrum({ ...options, ...changes })).get('H35Cl/1-0')!;

describe('Cramer-Rao bound of the bench', () => {
  it('grows in proportion to the noise', () => {
    const [one, three] = [bound({}), bound({ noise: 3e-3 })];
    expect(three.bandOriginPerCm / one.bandOriginPerCm).toBeCloseTo(3, 6);
    expect(three.alphaEPerCm / one.alphaEPerCm).toBeCloseTo(3, 6);
  });

  it('halves with four times as many independent points (band-limited signal, so exact but for the ends)', () => {
    const ratio = bound({ zeroFilling: 1 }).bandOriginPerCm / bound({ zeroFilling: 4 }).bandOriginPerCm;
    expect(Math.abs(ratio - 2)).toBeLessThan(0.02);
  });

  it('gains nothing by zero filling when the noise comes from the interferogram', () => {
    const plain = bound({ noiseModel: 'interferogram', zeroFilling: 1, apodisation: 'boxcar' });
    const filled = bound({ noiseModel: 'interferogram', zeroFilling: 4, apodisation: 'boxcar' });
    expect(Math.abs(filled.bandOriginPerCm / plain.bandOriginPerCm - 1)).toBeLessThan(0.01);
    const white = bound({ noiseModel: 'white', zeroFilling: 1, apodisation: 'boxcar' });
    expect(Math.abs(white.bandOriginPerCm / plain.bandOriginPerCm - 1)).toBeLessThan(0.01);
  });
});
