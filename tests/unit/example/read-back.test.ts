import { describe, expect, it } from 'vitest';
import {
  fileStyles,
  ordinateOf,
  writeSpectrum,
  type FileStyle,
} from '../../../electron/backend/example/file-writer.ts';
import { simulateSpectrum } from '../../../electron/backend/example/simulate.ts';
import { readSpectrumFile } from '../../../shared-core/spectrum/read-spectrum-file.ts';

const simulated = simulateSpectrum({
  seed: 9,
  gases: [{ gas: 'HCl', peakAbsorbance: 4 }],
  fromPerCm: 2650.3,
  toPerCm: 3090,
  resolutionPerCm: 1,
});

describe('files of the example', () => {
  it.each(Object.entries(fileStyles) as [string, FileStyle][])(
    'in the style %s are read back point by point, with the ordinate recognised',
    (name, style) => {
      const bytes = writeSpectrum({ ...simulated, title: 'invented', resolutionPerCm: 1 }, style);
      const outcome = readSpectrumFile({ name: `file.${style.extension}`, bytes });
      expect(outcome.ok ? '' : outcome.reason).toBe('');
      const read = outcome.ok ? outcome.spectra[0]! : null;
      expect(read?.ordinateKind).toBe(style.ordinate);
      expect(read?.wavenumberPerCm.length).toBe(simulated.wavenumberPerCm.length);
      const expected = ordinateOf(simulated.transmittance, style.ordinate);
      const x = simulated.wavenumberPerCm;
      const rounding = name.includes('rounded') ? 0.0051 : 2e-5;
      expected.forEach((y, i) => {
        expect(Math.abs(read!.wavenumberPerCm[i]! - x[i]!)).toBeLessThan(rounding);
        expect(Math.abs(read!.ordinate[i]! - y)).toBeLessThan(1.1e-4);
      });
    },
  );
});
