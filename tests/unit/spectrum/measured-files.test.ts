import { describe, expect, it } from 'vitest';
import { prepareSpectrum } from '../../../shared-core/spectrum/prepare/prepare-spectrum.ts';
import { codesOf, isPresent, readOne, referenceBytes, refusalOf } from '../../helpers/spectrum-files.ts';

// Measured spectra from a public teaching repository (MIT); see the README of the reference data.
const thin = 'spectra/hcl-thin.csv';
const mixed = 'spectra/hcl-dcl-mixed-cell.csv';

function prepared(path: string) {
  const outcome = prepareSpectrum(readOne(referenceBytes(path), path));
  if ('unusable' in outcome) throw new Error(outcome.unusable.text);
  return outcome;
}

describe.skipIf(!isPresent(thin))('measured HCl, optically thin', () => {
  it('reads 3,601 points and puts them back on the step of 0.125', () => {
    const spectrum = readOne(referenceBytes(thin), thin);
    expect(spectrum.title).toBe('HCl spectrum');
    expect(spectrum.ordinateKind).toBe('absorbance');
    expect(spectrum.wavenumberPerCm.length).toBe(3601);
    spectrum.wavenumberPerCm.forEach((value, i) => expect(value).toBeCloseTo(2650 + 0.125 * i, 9));
    expect(spectrum.ordinate[0]).toBe(0.0244);
    expect(codesOf(spectrum)).toEqual(['grid-recovered']);
  });

  it('is prepared: lines of about half a wavenumber, zero-filled noise of 1 to 2 thousandths', () => {
    const result = prepared(thin);
    expect(result.resolutionPerCm).toBeGreaterThan(0.4);
    expect(result.resolutionPerCm).toBeLessThan(0.7);
    expect(result.noise[1800]).toBeGreaterThan(1e-3);
    expect(result.noise[1800]).toBeLessThan(2.5e-3);
    expect(result.noiseCorrelationPoints).toBeGreaterThan(1.8);
    expect(result.noiseCorrelationPoints).toBeLessThan(5);
    expect(result.inverted).toBe(false);
    // Between the lines the spectrum lies on its baseline.
    const quiet = result.transmittance.slice(0, 80);
    expect(Math.abs(quiet.reduce((sum, value) => sum + value, 0) / 80 - 1)).toBeLessThan(2e-3);
  });
});

describe.skipIf(!isPresent(mixed))('measured HCl and DCl in one cell', () => {
  it('reads 40,001 points with their mark, trailing commas and alternating steps', () => {
    const spectrum = readOne(referenceBytes(mixed), mixed);
    expect(spectrum.wavenumberPerCm.length).toBe(40_001);
    expect(spectrum.wavenumberPerCm[1]).toBe(1000.125);
    expect(spectrum.ordinate.at(-1)).toBe(0.4617);
    expect(spectrum.ordinateKind).toBe('absorbance');
    expect(codesOf(spectrum)).toEqual(['grid-recovered']);
  });

  it('is prepared: the raised baseline gone, every value finite', () => {
    const result = prepared(mixed);
    for (const part of [
      result.transmittance,
      result.absorbance,
      result.noise,
      result.baselineTransmittance,
    ]) {
      expect(part.every(Number.isFinite)).toBe(true);
    }
    const middle = result.absorbance.toSorted()[20_000]!;
    expect(Math.abs(middle)).toBeLessThan(0.01);
    expect(result.resolutionPerCm).toBeGreaterThan(0.3);
    expect(result.resolutionPerCm).toBeLessThan(1.2);
  });
});

describe.skipIf(!isPresent('spectra/submissions.csv'))('tables that are no spectra', () => {
  it.each(['spectra/submissions.csv', 'constants.csv', 'co-lines.csv'])('%s is refused', (path) => {
    expect(['text-without-numbers', 'too-few-points']).toContain(refusalOf(referenceBytes(path)).code);
  });
});
