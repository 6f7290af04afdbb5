import { describe, expect, it } from 'vitest';
import { baselineAt } from '../../../electron/backend/example/artefacts.ts';
import {
  fileStyles,
  writeSpectrum,
  type FileStyleName,
} from '../../../electron/backend/example/file-writer.ts';
import { simulateSpectrum, type SimulationOptions } from '../../../electron/backend/example/simulate.ts';
import { prepareSpectrum } from '../../../shared-core/spectrum/prepare/prepare-spectrum.ts';
import type { PreparedSpectrum } from '../../../shared-core/spectrum/types.ts';
import { codesOf, inventedPoints, readOne, rowsOf } from '../../helpers/spectrum-files.ts';

const hcl: SimulationOptions = {
  seed: 11,
  gases: [{ gas: 'HCl', peakAbsorbance: 1 }],
  fromPerCm: 2600,
  toPerCm: 3150,
};

function prepared(options: SimulationOptions, style: FileStyleName = 'csv-header'): PreparedSpectrum {
  const simulated = simulateSpectrum(options);
  const file = writeSpectrum({ title: 'invented', resolutionPerCm: 0.5, ...simulated }, fileStyles[style]);
  const outcome = prepareSpectrum(readOne(file));
  if ('unusable' in outcome) throw new Error(outcome.unusable.text);
  return outcome;
}

/** Error of the baseline, root mean square and largest, relative to the true one. */
function baselineError(
  options: SimulationOptions,
  result: PreparedSpectrum,
): { rms: number; largest: number } {
  const n = result.wavenumberPerCm.length;
  let [squares, largest] = [0, 0];
  for (let i = 0; i < n; i++) {
    const truth = baselineAt((2 * i) / (n - 1) - 1, result.wavenumberPerCm[i]!, options);
    const error = Math.abs(result.baselineTransmittance[i]! / truth - 1);
    squares += error ** 2;
    largest = Math.max(largest, error);
  }
  return { rms: Math.sqrt(squares / n), largest };
}

function medianOf(values: Float64Array): number {
  return values.toSorted()[values.length >> 1]!;
}

describe('baseline', () => {
  it.each<[string, Partial<SimulationOptions>, number]>([
    ['flat', {}, 3e-4],
    [
      'offset by 0.5, sloping and curved',
      { baselineOffset: 0.5, baselineSlope: 0.1, baselineCurvature: 0.1 },
      6e-4,
    ],
    ['with fringes of 2 %, period 30', { fringes: { amplitude: 0.02, periodPerCm: 30, phaseRad: 1 } }, 6e-4],
    ['with fringes of 1 %, period 9', { fringes: { amplitude: 0.01, periodPerCm: 9, phaseRad: 2 } }, 8e-4],
    ['under saturated lines', { gases: [{ gas: 'HCl', peakAbsorbance: 30 }] }, 2e-3],
    [
      'between the lines of DCl',
      { gases: [{ gas: 'DCl', peakAbsorbance: 2 }], fromPerCm: 1900, toPerCm: 2300 },
      8e-4,
    ],
    [
      'between the dense lines of CO',
      { gases: [{ gas: 'CO', peakAbsorbance: 1 }], fromPerCm: 2000, toPerCm: 2280 },
      1.5e-3,
    ],
    ['at a resolution of 4', { gases: [{ gas: 'HCl', peakAbsorbance: 3 }], resolutionPerCm: 4 }, 6e-4],
    ['in noise of 1 %', { noise: 0.01 }, 1.5e-3],
  ])('%s: follows the true one', (_, change, limit) => {
    const options = { ...hcl, ...change };
    expect(baselineError(options, prepared(options)).rms).toBeLessThan(limit);
  });

  it('names fringes with their period and takes none from a comb of lines', () => {
    const fringed = prepared({ ...hcl, fringes: { amplitude: 0.02, periodPerCm: 30, phaseRad: 1 } });
    expect(fringed.notes.find((note) => note.code === 'fringes')?.text).toMatch(/2\.\d? %|2\.0 %.*30\.\d cm/);
    for (const gas of ['HCl', 'DCl', 'CO', 'HBr'] as const) {
      const range = { HCl: [2600, 3150], DCl: [1900, 2300], CO: [2000, 2280], HBr: [2300, 2800] }[gas];
      const plain = prepared({
        ...hcl,
        gases: [{ gas, peakAbsorbance: 1 }],
        fromPerCm: range[0]!,
        toPerCm: range[1]!,
      });
      expect(codesOf(plain)).not.toContain('fringes');
    }
  });
});

describe('noise', () => {
  it.each([
    [1e-3, 1],
    [1e-2, 1],
    [1e-3, 3],
  ])('%f of full transmittance, growing %f times over the range, is found within 25 %%', (noise, noiseRise) => {
    const result = prepared({ ...hcl, noise, noiseRise });
    const at = (share: number): number => medianOf(result.noise.slice(Math.floor((share - 0.1) * result.noise.length), Math.floor((share + 0.1) * result.noise.length)));
    for (const share of [0.15, 0.5, 0.85]) {
      const truth = noise * (1 + (noiseRise - 1) * share);
      expect(at(share) / truth).toBeGreaterThan(0.75);
      expect(at(share) / truth).toBeLessThan(1.25);
    }
    expect(result.noiseCorrelationPoints).toBeLessThan(1.5);
  }); // prettier-ignore

  it.each([2, 4])('of a spectrum zero-filled %i times is not taken for less than it is', (zeroFilling) => {
    const result = prepared({ ...hcl, zeroFilling, noiseModel: 'interferogram', noise: 1e-3 });
    expect(medianOf(result.noise) / 1e-3).toBeGreaterThan(0.75);
    expect(medianOf(result.noise) / 1e-3).toBeLessThan(1.35);
    // Raised-cosine weighting correlates by 8/3 of the factor at frequency zero; the estimate sees a little less.
    expect(result.noiseCorrelationPoints).toBeGreaterThan(0.7 * zeroFilling);
    expect(result.noiseCorrelationPoints).toBeLessThan(3.2 * zeroFilling);
  });

  it('is never below the rounding of the file', () => {
    const { x, y } = inventedPoints(400, 2600, 0.5);
    const result = prepareSpectrum(readOne(['cm-1,A', ...rowsOf({ x, y }, { yDecimals: 2 })].join('\n')));
    if ('unusable' in result) throw new Error('unusable');
    expect(Math.min(...result.noise)).toBeGreaterThan((0.9 * Math.LN10 * 0.01) / Math.sqrt(12));
  });
});

describe('what a prepared spectrum tells', () => {
  it.each([0.25, 0.5, 1, 2])('the width of lines at a resolution of %f', (resolutionPerCm) => {
    const result = prepared({ ...hcl, resolutionPerCm, gases: [{ gas: 'HBr', peakAbsorbance: 1 }], fromPerCm: 2400, toPerCm: 2800, noise: 3e-4 });
    // The full width of the instrument function is the nominal resolution times about one (raised cosine).
    expect(result.resolutionPerCm! / resolutionPerCm).toBeGreaterThan(0.75);
    expect(result.resolutionPerCm! / resolutionPerCm).toBeLessThan(2.4);
  }); // prettier-ignore

  it('no width where nothing stands out of the noise', () => {
    const result = prepared({ ...hcl, gases: [{ gas: 'HCl', peakAbsorbance: 1e-6 }] });
    expect(result.resolutionPerCm).toBeNull();
    expect(result.saturationAbsorbance).toBeNull();
  });

  it.each<[Partial<SimulationOptions>, FileStyleName]>([
    [{ inversion: 'emission' }, 'tab-percent'],
    [{ inversion: 'emission' }, 'blanks-bare'],
    [{ inversion: 'exchanged' }, 'csv-header'],
    [{ inversion: 'exchanged' }, 'csv-decimal-comma'],
  ])('lines that point the other way (%j in %s) are turned over, and it says so', (change, style) => {
    const result = prepared({ ...hcl, ...change }, style);
    const plain = prepared(hcl, style);
    expect(result.inverted).toBe(true);
    expect(plain.inverted).toBe(false);
    expect(codesOf(result)).toContain('lines-inverted');
    let difference = 0;
    for (let i = 0; i < plain.transmittance.length; i++) {
      difference = Math.max(difference, Math.abs(plain.transmittance[i]! - result.transmittance[i]!));
    }
    // 2 - T and 1/T differ where lines are deep, and a file does not tell which of the two it holds.
    expect(difference).toBeLessThan(0.1);
  });

  it('the level at which lines are clipped', () => {
    const simulated = simulateSpectrum({ ...hcl, lorentzHalfWidthPerCm: 0.3, gases: [{ gas: 'HCl', peakAbsorbance: 5 }] });
    const bytes = writeSpectrum({ title: 'clipped', resolutionPerCm: 0.5, ...simulated, clipAbsorbance: 1.5 }, fileStyles['csv-header']);
    const result = prepareSpectrum(readOne(bytes));
    if ('unusable' in result) throw new Error('unusable');
    expect(result.saturationAbsorbance).toBeGreaterThan(1.4);
    expect(result.saturationAbsorbance).toBeLessThan(1.55);
    expect(codesOf(result)).toContain('saturated');
    expect(prepared(hcl).saturationAbsorbance).toBeNull();
  }); // prettier-ignore

  it('single points that jump, which then carry no weight', () => {
    const result = prepared({ ...hcl, spikes: { count: 5, height: 0.3 } });
    expect(result.notes.find((note) => note.code === 'spikes')?.text).toMatch(/^[3-5] single points/);
    expect(codesOf(prepared(hcl))).not.toContain('spikes');
    const jumped = [...result.noise].filter((value) => value > 0.05);
    expect(jumped.length).toBeGreaterThanOrEqual(3);
  });

  it('is the same for absorbance, transmittance and percent, and for either order', () => {
    const [first, ...others] = (
      ['csv-header', 'blanks-bare', 'csv-decimal-comma', 'jcamp-difdup'] as const
    ).map((style) => prepared(hcl, style));
    for (const other of others) {
      for (let i = 0; i < first!.transmittance.length; i += 7) {
        expect(Math.abs(other.transmittance[i]! - first!.transmittance[i]!)).toBeLessThan(1e-4);
      }
    }
  });

  it('keeps to a range and an ordinate that a person chose', () => {
    const simulated = simulateSpectrum(hcl);
    const spectrum = readOne(writeSpectrum({ title: 'x', resolutionPerCm: 0.5, ...simulated }, fileStyles['blanks-bare']));
    const result = prepareSpectrum(spectrum, { fromPerCm: 2700, toPerCm: 2900 });
    if ('unusable' in result) throw new Error('unusable');
    expect(result.wavenumberPerCm[0]).toBe(2700);
    expect(result.wavenumberPerCm.at(-1)).toBe(2900);
    expect(prepareSpectrum(spectrum, { fromPerCm: 2700, toPerCm: 2701 })).toMatchObject({ unusable: { code: 'range-too-short' } });
    expect(prepareSpectrum(spectrum, { ordinateKind: 'unusable' })).toMatchObject({ unusable: { code: 'ordinate-unusable' } });
  }); // prettier-ignore
});
