import { existsSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { bandConstants, lineWavenumber } from '../../../electron/backend/example/bands.ts';
import { gasNames, isotopologuesOf } from '../../../electron/backend/example/constants.ts';
import { simulateSpectrum, type SimulationOptions } from '../../../electron/backend/example/simulate.ts';

const thin: SimulationOptions = {
  seed: 5,
  gases: [{ gas: 'HCl', peakAbsorbance: 0.001, shares: { H35Cl: 1, H37Cl: 0 } }],
  fromPerCm: 2660,
  toPerCm: 3080,
  noise: 0,
};
const deviation = (values: readonly number[]): number =>
  Math.sqrt(values.reduce((sum, v) => sum + v * v, 0) / values.length);

describe('simulated spectrum', () => {
  it('is the same for the same seed and differs for another', () => {
    const options = { ...thin, noise: 1e-3 };
    expect(simulateSpectrum(options)).toStrictEqual({
      ...simulateSpectrum(options),
      exactModel: expect.any(Function) as unknown,
    });
    const other = simulateSpectrum({ ...options, seed: 6 });
    expect(other.transmittance[100]).not.toBe(simulateSpectrum(options).transmittance[100]);
  });

  it('keeps the area of a thin band through every apodisation: ln 10 x sum of the line areas', () => {
    for (const apodisation of ['boxcar', 'triangular', 'raised-cosine', 'squared-parabola'] as const) {
      const s = simulateSpectrum({ ...thin, fromPerCm: 2560, toPerCm: 3180, apodisation });
      const step = s.wavenumberPerCm[1]! - s.wavenumberPerCm[0]!;
      const area = s.transmittance.reduce((sum, t) => sum + (1 - t) * step, 0);
      // Area of a Voigt line over its height; Lorentz 0.03, Doppler 0.003: close to pi x 0.03 (1.007 from memory of the ratio).
      const lines = s.truth.bands[0]!.lines.reduce((sum, line) => sum + line.peakAbsorbance, 0);
      expect(area / (Math.LN10 * lines * Math.PI * 0.03)).toBeGreaterThan(1);
      expect(area / (Math.LN10 * lines * Math.PI * 0.03)).toBeLessThan(1.02);
    }
  });

  it('shows the side lobe of an unapodised instrument: -21.7 % of the line at 1.4303/(2L)', () => {
    const L = 2;
    const s = simulateSpectrum({
      ...thin,
      gases: [
        {
          gas: 'HCl',
          peakAbsorbance: 0.001,
          shares: { H35Cl: 1, H37Cl: 0 },
          missing: Array.from({ length: 121 }, (_, i) => i - 60).filter((m) => m !== 3),
        },
      ],
      lorentzHalfWidthPerCm: 0.0005,
      maximumPathDifferenceCm: L,
      apodisation: 'boxcar',
      stepPerCm: 1 / (2 * L) / 16,
    });
    const centre = s.truth.bands[0]!.lines[0]!.wavenumberPerCm;
    const deficit = (offset: number): number =>
      1 - s.transmittance[Math.round((centre + offset - 2660) / (1 / (2 * L) / 16))]!;
    // sinc(x): first minimum at x = 1.4303, value -0.2172 (closed form tan(pi x) = pi x).
    expect(deficit(1.4303 / (2 * L)) / deficit(0)).toBeCloseTo(-0.217, 1);
    expect(Math.abs(deficit(1 / (2 * L)) / deficit(0))).toBeLessThan(0.06);
  });

  it('has the noise asked for, white by default and correlated where it comes from the interferogram', () => {
    const empty = { ...thin, gases: [], noise: 0.002, fromPerCm: 2000, toPerCm: 3000 };
    for (const [noiseModel, zeroFilling, expected] of [
      ['white', 2, 0],
      ['interferogram', 1, 0.667],
      ['interferogram', 2, 0.87],
      ['interferogram', 4, 0.965],
    ] as const) {
      const noise = [...simulateSpectrum({ ...empty, noiseModel, zeroFilling }).transmittance].map(
        (t) => t - 1,
      );
      expect(deviation(noise) / 0.002).toBeGreaterThan(0.94);
      expect(deviation(noise) / 0.002).toBeLessThan(1.06);
      const next = noise.slice(1).reduce((sum, v, i) => sum + v * noise[i]!, 0) / (noise.length * 0.002 ** 2);
      expect(Math.abs(next - expected)).toBeLessThan(0.07);
    }
  });

  it('scales every constant and every position with the error of the axis', () => {
    const plain = simulateSpectrum(thin).truth.bands[0]!;
    const off = simulateSpectrum({ ...thin, scaleErrorPpm: 200 });
    expect(off.truth.bands[0]!.constants.bandOriginPerCm / plain.constants.bandOriginPerCm).toBeCloseTo(
      1.0002,
      9,
    );
    expect(off.truth.bands[0]!.lines[4]!.wavenumberPerCm).toBeCloseTo(
      lineWavenumber(off.truth.bands[0]!.constants, off.truth.bands[0]!.lines[4]!.m),
      8,
    );
  });

  it('is converged in its fine grid, saturated lines included', () => {
    const s = simulateSpectrum({ ...thin, gases: [{ gas: 'HCl', peakAbsorbance: 40 }], stepPerCm: 0.125 });
    const finer = simulateSpectrum({
      ...thin,
      gases: [{ gas: 'HCl', peakAbsorbance: 40 }],
      stepPerCm: 0.125 / 8,
    });
    let largest = 0;
    s.transmittance.forEach(
      (t, i) => (largest = Math.max(largest, Math.abs(t - finer.transmittance[8 * i]!))),
    );
    expect(largest).toBeLessThan(2e-5);
  });

  it('knows eight gases and gives each a band of at least 12 lines', () => {
    for (const gas of gasNames) {
      const origin = bandConstants(isotopologuesOf(gas)[0]!.constants, 1).bandOriginPerCm;
      const s = simulateSpectrum({
        seed: 1,
        gases: [{ gas, peakAbsorbance: 1 }],
        fromPerCm: origin - 300,
        toPerCm: origin + 300,
      });
      expect(
        s.truth.bands[0]!.lines.filter((line) => line.peakAbsorbance > 0.02).length,
      ).toBeGreaterThanOrEqual(12);
      expect(s.transmittance.every(Number.isFinite)).toBe(true);
    }
  });
});

describe('published constants in the generator', () => {
  it('gives the published fundamentals of H35Cl and D35Cl', () => {
    // Published constants of the fundamental: H35Cl 2885.977, 10.44025, 10.13623; D35Cl 2091.061, 5.39227, 5.27981.
    for (const [gas, origin, lower, upper] of [
      ['HCl', 2885.977, 10.44025, 10.13623],
      ['DCl', 2091.061, 5.39227, 5.27981],
    ] as const) {
      const c = bandConstants(isotopologuesOf(gas)[0]!.constants, 1);
      expect(Math.abs(c.bandOriginPerCm - origin)).toBeLessThan(0.002);
      expect(Math.abs(c.rotationalConstantLowerPerCm - lower)).toBeLessThan(5e-4);
      expect(Math.abs(c.rotationalConstantUpperPerCm - upper)).toBeLessThan(5e-4);
    }
  });

  const path = '../shared/reference-data/co-lines.csv';
  it.skipIf(!existsSync(path))(
    'places the lines of CO where HITRAN has them, within 0.002 cm-1 up to J = 25',
    () => {
      const c = bandConstants(isotopologuesOf('CO')[0]!.constants, 1);
      const rows = readFileSync(path, 'utf8')
        .split('\n')
        .map((row) => row.split(','))
        .filter((row) => row[0] === '12C16O' && row[1] === '1-0' && Number(row[2]) <= 25);
      expect(rows.length).toBeGreaterThan(40);
      for (const [, , j, branch, wavenumber] of rows) {
        const m = branch === 'R' ? Number(j) + 1 : -Number(j);
        expect(Math.abs(lineWavenumber(c, m) - Number(wavenumber))).toBeLessThan(2e-3);
      }
    },
  );
});
