import { describe, expect, it } from 'vitest';
import { bytesOf, inventedPoints, refusalOf, rowsOf } from '../../helpers/spectrum-files.ts';

function bytesFrom(start: readonly number[], length = 2000, seed = 1): Uint8Array {
  const bytes = new Uint8Array(length);
  let state = seed;
  for (let i = 0; i < length; i++) {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    bytes[i] = state >>> 24;
  }
  bytes.set(start);
  return bytes;
}

const zip = [0x50, 0x4b, 0x03, 0x04];

describe('files that hold no spectrum', () => {
  // First bytes from the formats' public specifications.
  it.each<[string, string, Uint8Array]>([
    ['nothing', 'empty-file', new Uint8Array(0)],
    ['blanks only', 'empty-file', bytesOf(' \r\n\t\r\n')],
    ['a PNG image', 'image-file', bytesFrom([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a])],
    ['a JPEG image', 'image-file', bytesFrom([0xff, 0xd8, 0xff, 0xe0])],
    ['a PDF document', 'pdf-file', bytesOf('%PDF-1.7\n1 0 obj\n')],
    ['a ZIP archive', 'archive-file', bytesFrom([...zip, ...bytesOf('      spectra/a.csv')])],
    ['a spreadsheet', 'spreadsheet-file', bytesFrom([...zip, ...bytesOf('    [Content_Types].xml')])],
    ['an old spreadsheet', 'spreadsheet-file', bytesFrom([0xd0, 0xcf, 0x11, 0xe0])],
    ['a gzip file', 'archive-file', bytesFrom([0x1f, 0x8b, 0x08])],
    ['random bytes', 'binary-file', bytesFrom([])],
    ['a web page', 'document-file', bytesOf('<!DOCTYPE html><html><body>2900 0.1</body></html>')],
    ['a JSON document', 'document-file', bytesOf('{"wavenumber": [2900, 2901]}')],
    [
      'prose',
      'text-without-numbers',
      bytesOf('The cell was filled to 50 mbar.\nThen we waited for 5 minutes.\n'),
    ],
    [
      'a table of results',
      'too-few-points',
      bytesOf('Be,re\n10.59,127.4\n10.44,128.3\n10.2,129\n10.1,129\n10.0,130\n'),
    ],
    ['one column of numbers', 'text-without-numbers', bytesOf(inventedPoints().y.join('\n'))],
  ])('%s is refused as %s with a sentence that says what to do', (_, code, bytes) => {
    const refusal = refusalOf(bytes);
    expect(refusal.code).toBe(code);
    expect(refusal.reason).toMatch(/^[A-Z].{30,}\.$/);
    expect(refusal.reason).toMatch(/export|hand in|check|save/i);
  });

  it('looks at samples only: 300 MB of noise, of random text and of prose end at once', () => {
    const noise = new Uint8Array(300 * 1024 * 1024);
    const piece = bytesFrom([], 1 << 20, 7);
    for (let at = 0; at < noise.length; at += piece.length) noise.set(piece, at);
    const started = performance.now();
    expect(refusalOf(noise).code).toBe('too-large');
    expect(refusalOf(noise.subarray(0, 100 * 1024 * 1024)).code).toBe('binary-file');
    expect(performance.now() - started).toBeLessThan(500);
    const letters = piece.map((byte) => 97 + (byte % 26));
    for (let at = 0; at < 100 * 1024 * 1024; at += letters.length) noise.set(letters, at);
    const again = performance.now();
    expect(refusalOf(noise.subarray(0, 100 * 1024 * 1024)).code).toBe('text-without-numbers');
    expect(performance.now() - again).toBeLessThan(500);
  });

  it('refuses a huge text of digits without rows in bounded time', () => {
    const digits = new Uint8Array(20 * 1024 * 1024).map((_, i) => 48 + ((i * 7) % 10));
    const started = performance.now();
    expect(refusalOf(digits).code).toBe('text-without-numbers');
    expect(performance.now() - started).toBeLessThan(3000);
  });

  it('names the line of the first damaged row', () => {
    const rows = rowsOf(inventedPoints());
    const header = ['Wavenumber,Absorbance'];
    const withRow = (row: string): string =>
      [...header, ...rows.slice(0, 120), row, ...rows.slice(120)].join('\n');
    expect(refusalOf(withRow('2759.9,0.1,0.3'))).toMatchObject({ code: 'wrong-column-count', line: 122 });
    expect(refusalOf(withRow('2759.9'))).toMatchObject({ code: 'wrong-column-count', line: 122 });
    expect(refusalOf(withRow('2759.9,0.1x'))).toMatchObject({ code: 'row-not-numeric', line: 122 });
    expect(refusalOf(withRow('saved by the instrument'))).toMatchObject({
      code: 'row-not-numeric',
      line: 122,
    });
  });

  it('takes a damaged row near the beginning for damage, not for a header', () => {
    const rows = rowsOf(inventedPoints());
    const text = ['cm-1,A', ...rows.slice(0, 3), '27O1.5,0.1', ...rows.slice(4)].join('\n');
    expect(refusalOf(text)).toMatchObject({ code: 'row-not-numeric', line: 5 });
  });

  it('refuses a last row that was cut off', () => {
    const rows = rowsOf(inventedPoints());
    expect(refusalOf([...rows, '2800.0'].join('\n'))).toMatchObject({
      code: 'wrong-column-count',
      line: 201,
    });
  });

  it('refuses commas that both separate columns and mark decimals', () => {
    const rows = rowsOf(inventedPoints(200, 2700, 0.3), { decimalComma: true, separator: ',' });
    expect(refusalOf(rows.join('\n')).code).toBe('decimal-comma-ambiguous');
  });

  it('refuses an abscissa that only counts the points, and ranges that are no infrared', () => {
    const { y } = inventedPoints();
    expect(refusalOf(y.map((value, i) => `${i},${value}`).join('\n')).code).toBe('abscissa-counts-points');
    expect(
      refusalOf(
        y
          .map((value, i) => `${40 + 0.01 * i},${value}`)
          .join('\n')
          .replaceAll('4', '9'),
      ).code,
    ).toBe('abscissa-not-infrared');
  });
});
