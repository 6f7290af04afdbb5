import { describe, expect, it } from 'vitest';
import { findLines } from '../../../shared-core/lines/find-lines.ts';
import { smooth } from '../../../shared-core/lines/smooth.ts';
import { createRandom } from '../../../electron/backend/example/random.ts';
import { prepareSimulated } from '../../helpers/forward-input.ts';

const hydrogenChloride = {
  seed: 5,
  gases: [{ gas: 'HCl', peakAbsorbance: 1.2 }],
  fromPerCm: 2650,
  toPerCm: 3090,
} as const;

describe('findLines', () => {
  it('finds every line that stands well above the noise, where it is', () => {
    const { simulated, prepared } = prepareSimulated({ ...hydrogenChloride, resolutionPerCm: 0.5 });
    const found = findLines(prepared);
    const strong = simulated.truth.bands.flatMap((b) => b.lines).filter((l) => l.peakAbsorbance > 0.1);
    expect(strong.length).toBeGreaterThan(25);
    for (const line of strong) {
      const distances = found.map((f) => Math.abs(f.wavenumberPerCm - line.wavenumberPerCm));
      expect(Math.min(...distances)).toBeLessThan(0.03);
    }
  });

  it('finds hardly anything that is not there', () => {
    const { simulated, prepared } = prepareSimulated({ ...hydrogenChloride, resolutionPerCm: 0.5 });
    const centres = simulated.truth.bands.flatMap((b) => b.lines.map((l) => l.wavenumberPerCm));
    const spurious = findLines(prepared).filter(
      (f) => Math.min(...centres.map((c) => Math.abs(c - f.wavenumberPerCm))) > 0.3,
    );
    expect(spurious.length).toBeLessThanOrEqual(2);
  });

  it('sees both partners of a half-resolved doublet', () => {
    const { simulated, prepared } = prepareSimulated({
      ...hydrogenChloride,
      resolutionPerCm: 1,
      noise: 5e-4,
    });
    const found = findLines(prepared);
    const heavy = simulated.truth.bands.find((b) => b.isotopologue === 'H37Cl')!;
    const strong = heavy.lines.filter((l) => l.peakAbsorbance > 0.15);
    const seen = strong.filter((l) =>
      found.some((f) => Math.abs(f.wavenumberPerCm - l.wavenumberPerCm) < 0.4 && f.blended),
    );
    expect(seen.length).toBeGreaterThanOrEqual(strong.length - 1);
  });

  it('flags black lines and makes their uncertainty larger', () => {
    const { prepared } = prepareSimulated({
      ...hydrogenChloride,
      gases: [{ gas: 'HCl', peakAbsorbance: 60 }],
      resolutionPerCm: 0.25,
    });
    const found = findLines(prepared);
    const black = found.filter((f) => f.saturated);
    const fine = found.filter((f) => !f.saturated && f.peakAbsorbance > 0.3);
    expect(black.length).toBeGreaterThan(5);
    const mean = (lines: typeof found): number =>
      lines.reduce((sum, l) => sum + l.uncertaintyPerCm, 0) / lines.length;
    if (fine.length > 0) expect(mean(black)).toBeGreaterThan(mean(fine));
  });

  it('gives lines in ascending order with uncertainties above 0', () => {
    const found = findLines(prepareSimulated(hydrogenChloride).prepared);
    found.forEach((f, i) => {
      expect(f.uncertaintyPerCm).toBeGreaterThan(0);
      if (i > 0) expect(f.wavenumberPerCm).toBeGreaterThan(found[i - 1]!.wavenumberPerCm);
    });
  });
});

describe('smooth', () => {
  it('keeps a constant and has the curvature of a parabola', () => {
    const parabola = Float64Array.from({ length: 101 }, (_, i) => 3 - 0.5 * (i - 50) ** 2);
    expect(smooth(parabola, 2).curvature[50]).toBeCloseTo(1, 1);
    expect(smooth(new Float64Array(50).fill(7), 2).value[25]).toBeCloseTo(7, 12);
    expect(smooth(new Float64Array(50).fill(7), 2).curvature[25]).toBeCloseTo(0, 12);
  });

  it('states the noise of its results', () => {
    const random = createRandom(3, 1);
    const noise = Float64Array.from({ length: 20000 }, () => random.normal());
    const { value, curvature, valueGain, curvatureGain } = smooth(noise, 1.5);
    const spread = (v: Float64Array): number => Math.sqrt(v.reduce((s, x) => s + x * x, 0) / v.length);
    expect(spread(value) / valueGain).toBeCloseTo(1, 1);
    expect(spread(curvature) / curvatureGain).toBeCloseTo(1, 1);
  });

  it('refuses a width that is not above 0', () => {
    expect(() => smooth(new Float64Array(9), 0)).toThrow(RangeError);
  });
});
