import { describe, expect, it } from 'vitest';
import { bandConstantsFrom, isotopologue, publishedConstants } from '../../../shared-core/molecule/index.ts';
import { deriveConstants } from '../../../shared-core/reference/derive-constants.ts';
import type { FittedBand } from '../../../shared-core/reference/fitted-band.ts';
import type { MethodSettings } from '../../../shared-core/reference/types.ts';

const settings: MethodSettings = {
  masses: 'isotopic',
  bondLengthFrom: 'Be',
  forceConstantFrom: 'nu0',
  anharmonicityFrom: null,
  anharmonicityPerCm: null,
};

function band(name: string, upper: number, sigma = 0.001): FittedBand {
  const covariance = new Float64Array(25);
  for (let i = 0; i < 5; i++) covariance[i * 6] = sigma ** 2;
  return {
    isotopologue: isotopologue(name)!,
    band: `${upper}-0`,
    upper,
    constants: bandConstantsFrom(publishedConstants(name)!, upper),
    covariance,
    merged: false,
  };
}

describe('constants from the bands of one isotopologue', () => {
  it('gives re and r0 of H35Cl as published', () => {
    // re 1.27455 Å: Huber & Herzberg 1979; B_0 − B_1 holds γe, so Be from one fundamental lies 0.02 % below the published Be.
    const { constants } = deriveConstants([band('H35Cl', 1)], [], settings);
    expect(constants.re!.value).toBeCloseTo(127.455, 1);
    expect(constants.r0!.value).toBeCloseTo(128.387, 1);
    expect(constants.Be!.value).toBeCloseTo(10.44027 + 0.30364 / 2, 4);
    expect(constants.Be!.uncertainty).toBeCloseTo(0.001 * Math.hypot(1.5, 0.5), 9);
    expect(constants.alphaE!.uncertainty).toBeCloseTo(0.001 * Math.SQRT2, 9);
    expect(constants.D!.uncertainty).toBeCloseTo(0.001 / Math.SQRT2, 9);
  });

  it('takes k from the origin, or from ωe where the settings say so and the file supports it', () => {
    // k(ν̃0) = 480.7 N/m, k(ωe) = 516.3 N/m for H35Cl: from the constants by 4π²c²μν̃².
    const first = deriveConstants([band('H35Cl', 1)], [], settings).constants;
    expect(first.k!.value).toBeCloseTo(480.7, 1);
    expect(first.omegaE).toBeUndefined();
    const both = deriveConstants([band('H35Cl', 1), band('H35Cl', 2)], [], {
      ...settings,
      forceConstantFrom: 'omegaE',
    }).constants;
    expect(both.omegaE!.value).toBeCloseTo(2990.9463, -0.5);
    expect(both.k!.value).toBeCloseTo(516.3, 0);
  });

  it('finds ωe of HCl from the pair with DCl, and not from the pair with H37Cl', () => {
    const pair = deriveConstants([band('H35Cl', 1)], [band('D35Cl', 1)], settings).constants;
    // The pair ignores ωeye, hence 0.1 %.
    expect(Math.abs(pair.omegaE!.value / 2990.9463 - 1)).toBeLessThan(0.001);
    expect(pair.omegaExe!.value).toBeCloseTo(52.2, 0);
    expect(
      deriveConstants([band('H35Cl', 1)], [band('H37Cl', 1)], settings).constants.omegaE,
    ).toBeUndefined();
  });

  it('gives an overtone alone no Be, no k and no ωe', () => {
    const { constants } = deriveConstants([band('H35Cl', 2)], [], settings);
    expect(Object.keys(constants).sort()).toEqual(['B0', 'B2', 'D', 'nu02', 'r0']);
  });
});
