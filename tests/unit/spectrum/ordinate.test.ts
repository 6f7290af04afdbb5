import { describe, expect, it } from 'vitest';
import { createRandom } from '../../../electron/backend/example/random.ts';
import { simulateSpectrum, type SimulationOptions } from '../../../electron/backend/example/simulate.ts';
import { decideOrdinate } from '../../../shared-core/spectrum/ordinate.ts';
import { wavenumberOf } from '../../../shared-core/spectrum/abscissa.ts';
import { codesOf, inventedPoints, readOne, rowsOf } from '../../helpers/spectrum-files.ts';

const options: SimulationOptions = {
  seed: 2,
  gases: [{ gas: 'HCl', peakAbsorbance: 1.5 }],
  fromPerCm: 2600,
  toPerCm: 3150,
};
const { transmittance, wavenumberPerCm } = simulateSpectrum(options);
const absorbance = transmittance.map((t) => -Math.log10(Math.max(t, 1e-6)));
const percent = transmittance.map((t) => 100 * t);
const lifted = absorbance.map((a) => a + 0.5);
const dimmed = transmittance.map((t) => 0.32 * t);
const random = createRandom(3, 3);
const beam = percent.map((t, i) => 0.4 * t * (1 + 0.6 * Math.sin(wavenumberPerCm[i]! / 90)));
const burst = Float64Array.from(
  wavenumberPerCm,
  (_, i) => 5 * Math.cos(0.9 * (i - 2000)) * Math.exp(-(((i - 2000) / 12) ** 2)) + 0.02 * random.normal(),
);

describe('ordinate, from label and numbers together', () => {
  it.each<[string, Float64Array, string, string]>([
    ['', absorbance, 'absorbance', ''],
    ['', lifted, 'absorbance', ''],
    ['', transmittance, 'transmittance', ''],
    ['', dimmed, 'transmittance', ''],
    ['', percent, 'percent-transmittance', ''],
    ['Absorbance', absorbance, 'absorbance', ''],
    ['A', lifted, 'absorbance', ''],
    ['Extinktion', absorbance, 'absorbance', ''],
    ['Absorbance [-]', absorbance, 'absorbance', ''],
    ['%T', percent, 'percent-transmittance', ''],
    ['Durchlässigkeit / %', percent, 'percent-transmittance', ''],
    ['Transmission (0-1)', transmittance, 'transmittance', ''],
    ['Transmitancia (%)', percent, 'percent-transmittance', ''],
    ['% TRANSMITTANCE', dimmed.map((t) => 100 * t), 'percent-transmittance', ''],
    ['Absorbance', percent, 'percent-transmittance', 'ordinate-label-contradicts'],
    ['Absorbance', transmittance, 'transmittance', 'ordinate-label-contradicts'],
    ['Transmittance', percent, 'percent-transmittance', 'ordinate-label-contradicts'],
    ['%T', transmittance, 'transmittance', 'ordinate-label-contradicts'],
    ['%T', absorbance, 'absorbance', 'ordinate-label-contradicts'],
    ['Transmittance', absorbance, 'absorbance', 'ordinate-label-contradicts'],
    ['Single beam', percent, 'unusable', ''],
    ['Einkanalspektrum', percent, 'unusable', ''],
    ['Reflectance', percent, 'unusable', ''],
    ['Interferogram (V)', burst, 'unusable', ''],
    ['Absorbance', burst, 'unusable', 'ordinate-label-contradicts'],
    ['', beam, 'unusable', ''],
    ['Intensity', beam.map((value) => 40 * value), 'unusable', ''],
    ['', burst, 'unusable', ''],
  ])('label %j', (label, y, kind, note) => {
    const decision = decideOrdinate(y, label);
    expect(decision.kind).toBe(kind);
    expect(decision.reason).toMatch(/^The file .*\.$/);
    if (note === '') expect(codesOf(decision)).not.toContain('ordinate-label-contradicts');
    else expect(codesOf(decision)).toContain(note);
  });
});

describe('abscissa, from label and numbers together', () => {
  const { x, y } = inventedPoints(300, 2700, 0.5);
  const text = (header: string, places: readonly number[], decimals = 6): string =>
    [header, ...rowsOf({ x: places, y }, { xDecimals: decimals })].join('\n');

  it.each<[string, string, number[], string]>([
    ['wavelengths in µm by label', 'Wavelength (µm),Absorbance', x.map((v) => 1e4 / v), 'wavelength-um'],
    ['micrometres by their size', 'a,b', x.map((v) => 1e4 / v), 'wavelength-um'],
    ['nanometres by label', 'Wellenlänge / nm;', x.map((v) => 1e7 / v), 'wavelength-nm'],
    ['nanometres by their spacing alone', 'a,b', x.map((v) => 1e7 / v), 'wavelength-nm'],
  ])('%s', (_, header, places, kind) => {
    const spectrum = readOne(text(header, places));
    expect(spectrum.abscissaKind).toBe(kind);
    expect(codesOf(spectrum)).toContain('wavelength-converted');
    spectrum.wavenumberPerCm.forEach((value, i) => expect(Math.abs(value - x[i]!)).toBeLessThan(0.02));
    expect(spectrum.ordinate[0]).toBe(Number(y[0]!.toFixed(5)));
  });

  it('says so where the label contradicts the numbers', () => {
    const spectrum = readOne(text('Wavelength (µm),A', x));
    expect(spectrum.abscissaKind).toBe('wavenumber-per-cm');
    expect(codesOf(spectrum)).toContain('abscissa-label-contradicts');
    expect(
      readOne(
        text(
          'cm-1,A',
          x.map((v) => 1e4 / v),
        ),
      ).abscissaKind,
    ).toBe('wavelength-um');
  });

  it('takes wavelengths as vacuum, and by the refractive index where the file says air', () => {
    // n - 1 of standard air at 3.4 µm, worked out by hand from Ciddor 1996, Appl. Opt. 35, 1566, equation 1: 2.7275e-4.
    expect(wavenumberOf(3.4, 'wavelength-um', false)).toBeCloseTo(2941.17647, 4);
    expect(
      wavenumberOf(3.4, 'wavelength-um', false) / wavenumberOf(3.4, 'wavelength-um', true) - 1,
    ).toBeCloseTo(2.7275e-4, 7);
    const inAir = readOne(
      text(
        'wavelength in air (um),A',
        x.map((v) => 1e4 / v),
      ),
    );
    expect(inAir.wavenumberPerCm[0]! / x[0]! - 1).toBeCloseTo(-2.7275e-4, 6);
  });

  it.each([0.125, 0.241, 0.4821, 1 / 3])(
    'puts rounded abscissas of step %f back on their grid, gaps included',
    (step) => {
      const even = Array.from({ length: 400 }, (_, i) => 2600 + i * step).filter(
        (_, i) => i < 100 || i > 117,
      );
      const ordinates = even.map((v) => 0.1 + 0.05 * Math.sin(v));
      const spectrum = readOne(rowsOf({ x: even, y: ordinates }, { xDecimals: 2 }).join('\n'));
      expect(codesOf(spectrum)).toContain('grid-recovered');
      spectrum.wavenumberPerCm.forEach((value, i) => expect(Math.abs(value - even[i]!)).toBeLessThan(1e-3));
    },
  );

  it('leaves abscissas alone that no even grid explains', () => {
    const uneven = x.map((value, i) => value + 0.12 * Math.sin(i));
    const spectrum = readOne(rowsOf({ x: uneven, y }, { xDecimals: 2 }).join('\n'));
    expect(codesOf(spectrum)).not.toContain('grid-recovered');
    expect([...spectrum.wavenumberPerCm]).toEqual(uneven.map((value) => Number(value.toFixed(2))));
  });
});

describe('what a header says', () => {
  const { x, y } = inventedPoints(200, 2700, 0.5);
  const rows = rowsOf({ x, y: y.map((a) => 10 ** -a) }, { separator: '\t' });
  const read = (...header: string[]) => readOne([...header, ...rows].join('\n'));

  it('is taken from lines about the axes', () => {
    const spectrum = read('XUNITS\tcm-1', 'YUNITS\tTransmittance', 'NPOINTS\t200');
    expect(spectrum.abscissaReason).toMatch(/calls its abscissa wavenumbers/);
    expect(spectrum.ordinateReason).toMatch(/calls its ordinate transmittance/);
    expect(read('Data type: single beam').ordinateKind).toBe('unusable');
  });

  it('is not taken from remarks about laser, background and scans', () => {
    const spectrum = read(
      'Laser wavelength: 632.8 nm',
      'Background: 32 scans',
      'Detector counts 5',
      'Energy 7000',
    );
    expect(spectrum.abscissaKind).toBe('wavenumber-per-cm');
    expect(spectrum.ordinateKind).toBe('transmittance');
    expect(spectrum.ordinateReason).toMatch(/does not name its ordinate/);
  });
});
