import { describe, expect, it } from 'vitest';
import { lineWavenumber } from '../../../electron/backend/example/bands.ts';
import { simulateSpectrum } from '../../../electron/backend/example/simulate.ts';
import type { Course } from '../../../electron/backend/example/student-analysis.ts';
import { fitByMethod, leastSquares } from '../../../electron/backend/example/student-fit.ts';
import { slipCodes, type SlipCode } from '../../../electron/backend/example/student-slips.ts';
import { studentWork } from '../../../electron/backend/example/student.ts';

const spectrum = simulateSpectrum({
  seed: 1,
  gases: [{ gas: 'HCl', peakAbsorbance: 4 }],
  fromPerCm: 2650,
  toPerCm: 3090,
  lorentzHalfWidthPerCm: 0.06,
});
const course: Course = {
  gas: 'HCl',
  isotopologue: 'H35Cl',
  method: 'cubic',
  forceConstantFrom: 'omegaE',
  anharmonicityPerCm: 52.8,
  quantities: ['nu0', 'omegaE', 'B0', 'B1', 'Be', 'alphaE', 'D', 're', 'r0', 'k'],
};
const work = (slips: readonly SlipCode[]) =>
  studentWork({
    seed: 7,
    course,
    spectrum,
    habits: { read: 'parabola', readingErrorPerCm: 0.01, largestM: 10 },
    units: { length: 'pm', forceConstant: 'N/m' },
    slips,
  });

describe('invented student', () => {
  it('solves a linear least-squares problem worked by hand', () => {
    // y = 1 + 2x through (0, 1.1), (1, 2.9), (2, 5.1), (3, 6.9): slope 1.96, intercept 1.06 (by hand).
    const fit = leastSquares([[1, 0], [1, 1], [1, 2], [1, 3]], [1.1, 2.9, 5.1, 6.9]); // prettier-ignore
    expect(fit[0]).toBeCloseTo(1.06, 10);
    expect(fit[1]).toBeCloseTo(1.96, 10);
  });

  it('gets the published bond lengths from exact lines: r0 1.2900 by a quadratic, re 1.2746 by a cubic', () => {
    // Known behaviour of the methods (HCl, 12 lines a side): a quadratic gives r0 near 1.2900, a cubic 1.2839 angstrom.
    const constants = spectrum.truth.bands[0]!.constants;
    const lines = Array.from({ length: 25 }, (_, i) => i - 12)
      .filter((m) => m !== 0)
      .map((m) => ({ m, wavenumberPerCm: lineWavenumber(constants, m) }));
    const r0 = (b0: number): number => Math.sqrt(16.857629 / (0.97959 * b0));
    expect(r0(fitByMethod(lines, 'quadratic').lower)).toBeCloseTo(1.29, 3);
    expect(r0(fitByMethod(lines, 'cubic').lower)).toBeCloseTo(1.2839, 3);
  });

  it('does honest work: every value near the truth', () => {
    const { values } = work([]);
    expect(Math.abs(values.nu0! - 2885.977)).toBeLessThan(0.05);
    expect(Math.abs(values.Be! / 10.5921 - 1)).toBeLessThan(0.001);
    expect(Math.abs(values.re! - 127.46)).toBeLessThan(0.06);
    expect(Math.abs(values.k! - 516.4)).toBeLessThan(0.5);
  });

  it('carries each slip into the values that follow from it, by the known ratio', () => {
    const honest = work([]).values;
    const ratio = (slip: SlipCode, key: 're' | 'k' | 'Be'): number =>
      work([slip]).values[key]! / honest[key]!;
    // Ratios of the catalogue of slips (closed forms).
    expect(ratio('hbar-for-h', 're')).toBeCloseTo(0.3989, 4);
    expect(ratio('pi-eight', 're')).toBeCloseTo(1.7725, 4);
    expect(ratio('k-no-two-pi', 'k')).toBeCloseTo(0.02533, 5);
    expect(ratio('k-one-two-pi', 'k')).toBeCloseTo(0.1592, 4);
    expect(ratio('mass-integer', 're')).toBeCloseTo(1.00378, 4);
    expect(ratio('mass-average', 're')).toBeCloseTo(0.99972, 4);
    expect(ratio('mass-light-atom', 're')).toBeCloseTo(0.98589, 4);
    expect(ratio('mass-sum', 're')).toBeCloseTo(0.16501, 4);
    expect(ratio('c-in-m', 're')).toBeCloseTo(10, 6);
    expect(ratio('b0-as-be', 'Be')).toBeCloseTo(honest.B0! / honest.Be!, 10);
    expect(ratio('b0-as-be', 're')).toBeCloseTo(Math.sqrt(honest.Be! / honest.B0!), 10);
  });

  it('moves the origin by c1 when all lines are numbered one off, and every later value with it', () => {
    const [honest, shifted] = [work([]).values, work(['numbering-all-shift']).values];
    expect(Math.abs(Math.abs(shifted.nu0! - honest.nu0!) - 20.6)).toBeLessThan(0.6);
    expect(shifted.k).not.toBe(honest.k);
    expect(Math.abs(shifted.Be! - honest.Be!)).toBeGreaterThan(0.2);
  });

  it('shows every slip of its catalogue in what is handed in (but k-from-omega, which this course prescribes)', () => {
    const honest = work([]).texts;
    for (const code of slipCodes) {
      if (code === 'k-from-omega') continue;
      expect([code, work([code]).texts]).not.toEqual([code, honest]);
    }
  });
});
