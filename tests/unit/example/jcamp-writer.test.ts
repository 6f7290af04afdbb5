import { convert } from 'jcampconverter';
import { describe, expect, it } from 'vitest';
import { jcampText, type JcampForm } from '../../../electron/backend/example/jcamp-writer.ts';
import { simulateSpectrum } from '../../../electron/backend/example/simulate.ts';

const simulated = simulateSpectrum({
  seed: 3,
  gases: [{ gas: 'HCl', peakAbsorbance: 3 }],
  fromPerCm: 2700,
  toPerCm: 3050,
  noise: 0,
});
const content = {
  title: 'invented',
  xPerCm: simulated.wavenumberPerCm,
  y: simulated.transmittance,
  yUnits: 'TRANSMITTANCE',
  resolutionPerCm: 0.5,
};

describe('JCAMP-DX writer', () => {
  // Outside check: jcampconverter 10 (MIT) decodes what we wrote.
  it.each<JcampForm>(['affn', 'packed', 'squeezed', 'difdup', 'xypoints'])(
    'writes %s that a general-purpose reader decodes to the same points',
    (form) => {
      for (const order of ['ascending', 'descending'] as const) {
        const x = order === 'ascending' ? content.xPerCm : content.xPerCm.toReversed();
        const y = order === 'ascending' ? content.y : content.y.toReversed();
        // That reader takes pairs under the label XYDATA only.
        const text = jcampText({ ...content, xPerCm: x, y }, form).replace('##XYPOINTS=', '##XYDATA=');
        const result = convert(text, { keepRecordsRegExp: /^$/ });
        const read = result.flatten[0]!.spectra[0]!.data as { x: number[]; y: number[] };
        expect(read.x.length).toBe(x.length);
        for (let i = 0; i < x.length; i += 1) {
          const j = Math.abs(read.x[0]! - x[0]!) < 1e-3 ? i : x.length - 1 - i;
          expect(Math.abs(read.x[i]! - x[j]!)).toBeLessThan(2e-5);
          expect(Math.abs(read.y[i]! - y[j]!)).toBeLessThan(1.1e-6);
        }
      }
    },
  );

  it('keeps its lines within 80 characters and repeats the last ordinate as the check of the next line', () => {
    const lines = jcampText(content, 'difdup').split('\n');
    expect(Math.max(...lines.map((line) => line.length))).toBeLessThanOrEqual(80);
    const data = lines.slice(lines.indexOf('##XYDATA= (X++(Y..Y))') + 1, lines.indexOf('##END='));
    expect(data.length).toBeGreaterThan(50);
    expect(data.at(-1)).toMatch(/^[\d.]+[@A-Ia-i]\d*$/);
  });

  it('compresses runs of equal differences with the letters of the standard', () => {
    const ramp = Float64Array.from({ length: 40 }, (_, i) => i / 40);
    const text = jcampText({ ...content, xPerCm: ramp.map((v) => 2000 + v * 40), y: ramp }, 'difdup');
    // 39 equal differences of 25000 units: K5000 W? and a count of 39 written "U9".
    expect(text).toMatch(/^2000@[J-R]\d+U9$/m);
  });

  it('refuses arrays of unequal length', () => {
    expect(() => jcampText({ ...content, y: content.y.slice(1) }, 'affn')).toThrow(RangeError);
  });
});
