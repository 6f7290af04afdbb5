import { describe, expect, it } from 'vitest';
import { writtenNumber } from '../../../shared-core/spectrum/text/written-number.ts';
import { bytesOf, inventedPoints, readOne, refusalOf, rowsOf } from '../../helpers/spectrum-files.ts';

const rows = rowsOf(inventedPoints());
const text = ['Wellenzahl / cm⁻¹,Absorption', ...rows].join('\r\n');

function utf16(content: string, littleEndian: boolean, mark: boolean): Uint8Array {
  const whole = (mark ? '\uFEFF' : '') + content;
  const bytes = new Uint8Array(2 * whole.length);
  const view = new DataView(bytes.buffer);
  for (let i = 0; i < whole.length; i++) view.setUint16(2 * i, whole.charCodeAt(i), littleEndian);
  return bytes;
}

function windows1252(content: string): Uint8Array {
  const codes: Record<string, number> = { '⁻': 0x2d, '¹': 0xb9, µ: 0xb5 };
  return Uint8Array.from(content, (letter) => codes[letter] ?? letter.charCodeAt(0));
}

describe('text decoding', () => {
  it.each<[string, Uint8Array]>([
    ['UTF-8', bytesOf(text)],
    ['UTF-8 with mark', bytesOf(`\uFEFF${text}`)],
    ['UTF-16 LE with mark', utf16(text, true, true)],
    ['UTF-16 BE with mark', utf16(text, false, true)],
    ['UTF-16 LE without mark', utf16(text, true, false)],
    ['UTF-16 BE without mark', utf16(text, false, false)],
    ['Windows-1252', windows1252(text)],
  ])('reads %s to the same points', (_, bytes) => {
    const spectrum = readOne(bytes);
    const { x, y } = inventedPoints();
    expect([...spectrum.wavenumberPerCm]).toEqual(x);
    expect([...spectrum.ordinate]).toEqual(y.map((value) => Number(value.toFixed(5))));
    expect(spectrum.ordinateKind).toBe('absorbance');
  });

  it.each([['\n'], ['\r\n'], ['\r']])('takes the line end %j', (end) => {
    expect(readOne(rows.join(end)).wavenumberPerCm.length).toBe(200);
    expect(readOne(rows.join(end) + end + end).wavenumberPerCm.length).toBe(200);
  });

  it('refuses UTF-16 that ends in the middle of a character', () => {
    const bytes = utf16(text, true, true);
    expect(refusalOf(bytes.subarray(0, bytes.length - 1)).code).toBe('half-a-character');
  });

  it('takes the old end mark of text files for an end', () => {
    expect(readOne(`${rows.join('\n')}\n\u001a`).wavenumberPerCm.length).toBe(200);
  });
});

describe('written numbers', () => {
  const read = (written: string, mark = 46): number => writtenNumber(written, 0, written.length, mark);

  it('reads exactly what the language reads', () => {
    for (const written of ['0', '-0.5', '+12.25', '4000.000000001', '1e-7', '6.02214076E+23', '0.1', '.5', '5.', '123456789012345678', '1.7976931348623157e308', '4.9e-324', '2885.9771234567890123']) {
      expect(read(written)).toBe(Number(written));
    }
  }); // prettier-ignore

  it('takes decimal commas, Fortran exponents and the typographic minus', () => {
    expect(read('2885,977', 44)).toBe(2885.977);
    expect(read('1.5D-03')).toBe(0.0015);
    expect(read('−0.25')).toBe(-0.25);
  });

  it.each([
    '',
    '-',
    '.',
    '1.2.3',
    '1,2',
    '0x10',
    '1_000',
    'Infinity',
    'NaN',
    '1e',
    '1e+',
    '12a',
    '1e99999',
    ' 1',
  ])('reads %j as no number', (written) => {
    expect(read(written)).toBeNaN();
  });
});
