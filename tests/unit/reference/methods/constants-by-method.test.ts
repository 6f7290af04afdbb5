import { describe, expect, it } from 'vitest';
import { constantsByMethod } from '../../../../shared-core/reference/methods/constants-by-method.ts';
import type { MethodSettings, PrescribedMethod } from '../../../../shared-core/reference/types.ts';
import {
  d35cl,
  deuteriumChloride,
  h35cl,
  hydrogenChloride,
  hydrogenChlorideOvertone,
  linesOf,
} from '../../../helpers/term-value-lines.ts';

const settings: MethodSettings = {
  masses: 'isotopic',
  bondLengthFrom: 'Be',
  forceConstantFrom: 'nu0',
  anharmonicityFrom: null,
  anharmonicityPerCm: null,
};
const band = hydrogenChloride;
const alphaE = band.bLower - band.bUpper;
const be = band.bLower + alphaE / 2;
const quadratic: PrescribedMethod = { fit: 'polynomial', degree: 2 };
const cubic: PrescribedMethod = { fit: 'polynomial', degree: 3 };
const quartic: PrescribedMethod = { fit: 'polynomial', degree: 4 };
const differences = (intercept: boolean, cubicTerm: boolean): PrescribedMethod => ({
  fit: 'combination-differences',
  intercept,
  cubicTerm,
});
const percentOff = (method: PrescribedMethod, pLines: number, rLines = pLines): number =>
  100 * (constantsByMethod(linesOf(band, pLines, rLines), method, settings, h35cl).Be!.value / be - 1);

describe('methods that hold the exact term values give the constants back', () => {
  it('a quartic with D free returns ν̃0, B_0, B_1, αe and the mean D of the lines it was given', () => {
    const c = constantsByMethod(linesOf(band, 10), quartic, settings, h35cl);
    expect(c.nu0!.value).toBeCloseTo(band.origin, 8);
    expect(c.B0!.value).toBeCloseTo(band.bLower, 8);
    expect(c.B1!.value).toBeCloseTo(band.bUpper, 8);
    expect(c.alphaE!.value).toBeCloseTo(alphaE, 8);
    expect(c.D!.value).toBeCloseTo((band.dLower + band.dUpper) / 2, 10);
  });

  it('combination differences with the cubic term return B_0, B_1 and D', () => {
    const c = constantsByMethod(linesOf(band, 10), differences(false, true), settings, h35cl);
    expect(c.B0!.value).toBeCloseTo(band.bLower, 8);
    expect(c.B1!.value).toBeCloseTo(band.bUpper, 8);
    expect(c.D!.value).toBeCloseTo((band.dLower + band.dUpper) / 2, 10);
  });

  it('the bond lengths of HCl follow: re 1.2746 Å (Huber & Herzberg), r0 1.2839 Å (science of the trade)', () => {
    const c = constantsByMethod(linesOf(band, 10), cubic, settings, h35cl);
    expect(c.re!.value).toBeCloseTo(127.46, 1);
    expect(c.r0!.value).toBeCloseTo(128.39, 2);
    expect(c.k!.value).toBeCloseTo(480.7, 1);
  });
});

describe('methods that leave something out give what the design lists', () => {
  it.each([
    [6, true, -0.54],
    [8, true, -0.85],
    [10, true, -1.24],
    [6, false, -0.3],
    [8, false, -0.49],
    [10, false, -0.73],
  ])(
    'combination differences without D, J to %i, intercept %s: Be off by %f %%',
    (largestJ, intercept, expected) => {
      expect(percentOff(differences(intercept, false), largestJ + 1)).toBeCloseTo(expected, 2);
    },
  );

  it.each([
    [6, -0.25],
    [10, -0.66],
  ])('a quadratic with %i lines a side: Be off by %f %%', (lines, expected) => {
    expect(percentOff(quadratic, lines)).toBeCloseTo(expected, 2);
  });

  it('a quadratic with twelve lines a side gives r0 = 1.2900 Å', () => {
    expect(constantsByMethod(linesOf(band, 12), quadratic, settings, h35cl).r0!.value).toBeCloseTo(129.0, 1);
  });

  it('a quadratic lowers B_0 + B_1 as the formula B − 2D(3N² + 3N − 1)/5 says', () => {
    const N = 10;
    const c = constantsByMethod(linesOf(band, N), quadratic, settings, h35cl);
    const D = (band.dLower + band.dUpper) / 2;
    const mean = (band.bLower + band.bUpper) / 2;
    expect((c.B0!.value + c.B1!.value) / 2).toBeCloseTo(mean - (2 * D * (3 * N * N + 3 * N - 1)) / 5, 8);
  });

  it('a straight line puts ν̃0 too low by αe (N+1)(2N+1)/6 and yields no B', () => {
    const rigid = { ...band, dLower: 0, dUpper: 0 };
    const N = 8;
    const c = constantsByMethod(linesOf(rigid, N), { fit: 'polynomial', degree: 1 }, settings, h35cl);
    expect(c.nu0!.value).toBeCloseTo(band.origin - (alphaE * (N + 1) * (2 * N + 1)) / 6, 8);
    expect(c.B0).toBeUndefined();
    expect(c.Be).toBeUndefined();
    expect(c.re).toBeUndefined();
  });

  it('the midpoint lies αe below the origin and yields no rotational constant', () => {
    const c = constantsByMethod(linesOf(band, 3), { fit: 'midpoint' }, settings, h35cl);
    expect(c.nu0!.value).toBeCloseTo(band.origin - alphaE, 2);
    expect(c.B0).toBeUndefined();
  });

  it.each<PrescribedMethod>([
    quadratic,
    { fit: 'successive-differences' },
    { fit: 'single-branch', branch: 'R' },
    { fit: 'single-branch', branch: 'P' },
    differences(true, false),
    differences(false, false),
  ])('without centrifugal distortion every method gives the same: $fit $branch', (method) => {
    const rigid = { ...band, dLower: 0, dUpper: 0 };
    const c = constantsByMethod(linesOf(rigid, 8), method, settings, h35cl);
    expect(c.nu0!.value).toBeCloseTo(band.origin, 7);
    expect(c.B0!.value).toBeCloseTo(band.bLower, 8);
    expect(c.B1!.value).toBeCloseTo(band.bUpper, 8);
    expect(c.D).toBeUndefined();
  });
});

describe('hand-worked cases', () => {
  it('three lines and a quadratic: the parabola through them', () => {
    // ν̃(−1) = 80, ν̃(1) = 119, ν̃(2) = 137: c2 = −0.5, c1 = 19.5, c0 = 100 by elimination.
    const lines = [[-1, 80], [1, 119], [2, 137]].map(([m, v]) => ({ m: m!, wavenumberPerCm: v!, uncertaintyPerCm: 0.1 })); // prettier-ignore
    const c = constantsByMethod(lines, quadratic, settings, h35cl);
    expect(c.nu0!.value).toBeCloseTo(100, 9);
    expect(c.B0!.value).toBeCloseTo(10, 9);
    expect(c.B1!.value).toBeCloseTo(9.5, 9);
    expect(c.Be!.value).toBeCloseTo(10.25, 9);
  });

  it('the uncertainty of a mean of two lines is that of each over √2', () => {
    const lines = [-1, 1].map((m) => ({ m, wavenumberPerCm: 100 + m, uncertaintyPerCm: 0.2 }));
    expect(constantsByMethod(lines, { fit: 'midpoint' }, settings, h35cl).nu0!.uncertainty).toBeCloseTo(
      0.2 / Math.SQRT2,
      12,
    );
  });

  it('attainable uncertainties: 0.1 cm-1 per line, cubic, ten a side (worked out beforehand, what is attainable)', () => {
    const lines = linesOf(band, 10).map((l) => ({ ...l, uncertaintyPerCm: 0.1 }));
    const c = constantsByMethod(lines, cubic, settings, h35cl);
    const percent = (key: 'Be' | 're' | 'alphaE' | 'D'): number =>
      (100 * c[key]!.uncertainty!) / c[key]!.value;
    expect(percent('Be')).toBeCloseTo(0.043, 2);
    expect(percent('re')).toBeCloseTo(0.022, 2);
    expect(percent('alphaE')).toBeCloseTo(0.23, 1);
    expect(percent('D')).toBeGreaterThan(5);
    expect(percent('D')).toBeLessThan(7);
  });

  it('the order of the lines does not matter', () => {
    const lines = linesOf(band, 7);
    const forward = constantsByMethod(lines, cubic, settings, h35cl);
    const backward = constantsByMethod([...lines].reverse(), cubic, settings, h35cl);
    expect(backward.Be!.value).toBeCloseTo(forward.Be!.value, 10);
  });
});

describe('settings', () => {
  it('the overtone gives ωexe = ν̃1 − ν̃2/2 and ωe = 3ν̃1 − ν̃2', () => {
    const c = constantsByMethod(
      linesOf(band, 8),
      quartic,
      { ...settings, anharmonicityFrom: 'overtone' },
      h35cl,
      {
        overtone: linesOf(hydrogenChlorideOvertone, 8),
      },
    );
    expect(c.omegaExe!.value).toBeCloseTo(band.origin - hydrogenChlorideOvertone.origin / 2, 6);
    expect(c.omegaE!.value).toBeCloseTo(3 * band.origin - hydrogenChlorideOvertone.origin, 6);
    expect(c.nu02!.value).toBeCloseTo(hydrogenChlorideOvertone.origin, 6);
  });

  it('the pair HCl/DCl gives ωe within 0.3 % and ωexe within 4 % of the published ones (the model leaves ωeye out)', () => {
    const c = constantsByMethod(
      linesOf(band, 8),
      quartic,
      { ...settings, anharmonicityFrom: 'isotope-pair' },
      h35cl,
      {
        partner: { isotopologue: d35cl, lines: linesOf(deuteriumChloride, 8) },
      },
    );
    expect(Math.abs(c.omegaE!.value / 2990.9463 - 1)).toBeLessThan(0.003);
    expect(Math.abs(c.omegaExe!.value / 52.8186 - 1)).toBeLessThan(0.04);
  });

  it('a given ωexe gives ωe = ν̃0 + 2ωexe, and k from ωe where the course says so', () => {
    const given = {
      ...settings,
      anharmonicityFrom: 'given',
      anharmonicityPerCm: 52,
      forceConstantFrom: 'omegaE',
    } as const;
    const c = constantsByMethod(linesOf(band, 8), cubic, given, h35cl);
    expect(c.omegaE!.value).toBeCloseTo(c.nu0!.value + 104, 9);
    expect(c.k!.value / constantsByMethod(linesOf(band, 8), cubic, settings, h35cl).k!.value).toBeCloseTo(
      (c.omegaE!.value / c.nu0!.value) ** 2,
      9,
    );
    expect(c.omegaExe!.uncertainty).toBeNull();
  });

  it('without a source of ωexe there is no ωe and k means k(ν̃0)', () => {
    const c = constantsByMethod(linesOf(band, 8), cubic, { ...settings, forceConstantFrom: 'omegaE' }, h35cl);
    expect(c.omegaE).toBeUndefined();
    expect(c.k!.value).toBeCloseTo(480.7, 1);
  });

  it('average and nuclear masses move r by the published factors 0.99972 and 1.00027', () => {
    const r = (masses: 'isotopic' | 'average' | 'nuclear'): number =>
      constantsByMethod(linesOf(band, 8), cubic, { ...settings, masses }, h35cl).re!.value;
    expect(r('average') / r('isotopic')).toBeCloseTo(0.99972, 4);
    expect(r('nuclear') / r('isotopic')).toBeCloseTo(1.00027, 4);
  });

  it('an overtone alone yields r0 and B_2, no k, no Be', () => {
    const c = constantsByMethod(linesOf(hydrogenChlorideOvertone, 8), quartic, settings, h35cl, { upper: 2 });
    expect(c.nu02!.value).toBeCloseTo(hydrogenChlorideOvertone.origin, 6);
    expect(c.r0!.value).toBeCloseTo(128.39, 1);
    expect(c.k).toBeUndefined();
    expect(c.Be).toBeUndefined();
  });
});
