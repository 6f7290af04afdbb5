import { describe, expect, it } from 'vitest';
import { readSpectrumFile } from '../../../shared-core/spectrum/read-spectrum-file.ts';
import {
  bytesOf,
  codesOf,
  inventedPoints,
  readOne,
  refusalOf,
  rowsOf,
} from '../../helpers/spectrum-files.ts';

const points = inventedPoints();
const rows = rowsOf(points);
const yWritten = points.y.map((value) => Number(value.toFixed(5)));

function expectPoints(text: string): ReturnType<typeof readOne> {
  const spectrum = readOne(text, 'folder/S12_hcl.csv');
  expect([...spectrum.wavenumberPerCm]).toEqual(points.x);
  expect([...spectrum.ordinate]).toEqual(yWritten);
  return spectrum;
}

describe('delimited text', () => {
  it.each<[string, string]>([
    ['commas', rows.join('\n')],
    ['commas and blanks', rowsOf(points, { separator: ', ' }).join('\n')],
    ['semicolons', rowsOf(points, { separator: ';' }).join('\n')],
    ['semicolons and decimal commas', rowsOf(points, { separator: ';', decimalComma: true }).join('\n')],
    ['tabs', rowsOf(points, { separator: '\t' }).join('\n')],
    ['tabs and decimal commas', rowsOf(points, { separator: '\t', decimalComma: true }).join('\n')],
    [
      'blanks',
      rowsOf(points, { separator: '   ' })
        .map((row) => `  ${row}`)
        .join('\n'),
    ],
    ['blanks and decimal commas', rowsOf(points, { separator: '  ', decimalComma: true }).join('\n')],
    ['trailing commas', rows.map((row) => `${row},`).join('\n')],
    [
      'several trailing commas in some rows',
      rows.map((row, i) => (i % 3 === 0 ? `${row},,,` : row)).join('\n'),
    ],
    [
      'quoted cells',
      rows
        .map((row) =>
          row
            .split(',')
            .map((cell) => `"${cell}"`)
            .join(','),
        )
        .join('\n'),
    ],
    [
      'quoted decimal commas',
      rowsOf(points, { decimalComma: true, separator: '","' })
        .map((row) => `"${row}"`)
        .join('\n'),
    ],
    ['descending order', rows.toReversed().join('\n')],
    ['blank lines between', rows.join('\n\n')],
    ['comments between', rows.flatMap((row, i) => (i % 50 === 20 ? ['# pause', row] : [row])).join('\n')],
    ['no header', rows.join('\n')],
    ['a header with bare numbers', ['200', '2700 to 2800', 'Scans,32', ...rows].join('\n')],
    ['a column of row numbers', rows.map((row, i) => `${i + 1},${row}`).join('\n')],
    [
      'exponents',
      points.x.map((x, i) => `${x.toExponential(6)}\t${yWritten[i]!.toExponential(6)}`).join('\n'),
    ],
  ])('reads %s', (_, text) => {
    expectPoints(text);
  });

  it('leaves out headers of any length', () => {
    const header = Array.from({ length: 700 }, (_, i) => `Parameter ${i}:\t${i * 1.5}`);
    const spectrum = expectPoints(
      [...header, 'Wavenumber (cm-1)\tAbsorbance', ...rowsOf(points, { separator: '\t' })].join('\n'),
    );
    expect(spectrum.ordinateReason).toMatch(/calls its ordinate absorbance/);
  });

  it('takes the title from the header, else from the file name', () => {
    expect(expectPoints(['HCl of team 4', 'cm-1,A', ...rows].join('\n')).title).toBe('HCl of team 4');
    expect(expectPoints(['cm-1,A', ...rows].join('\n')).title).toBe('S12_hcl');
  });

  it('sorts what is not in order, and says so', () => {
    const shuffled = rows.map((_, i) => rows[(i * 77) % rows.length]!);
    expect(codesOf(expectPoints(shuffled.join('\n')))).toContain('abscissa-unsorted');
  });

  it('averages duplicate abscissas, and says by how much they differed', () => {
    const text = [...rows.slice(0, 10), rows[9]!.replace(/,.*/, ',0.9'), ...rows.slice(10)].join('\n');
    const spectrum = readOne(text);
    expect(spectrum.wavenumberPerCm.length).toBe(200);
    expect(spectrum.ordinate[9]).toBeCloseTo((yWritten[9]! + 0.9) / 2, 12);
    expect(spectrum.notes.find((note) => note.code === 'abscissa-duplicates')?.text).toMatch(
      /1 point .*0\.8/,
    );
  });

  it.each(['', 'NaN', 'n/a', '--', '#N/A', '****', 'inf'])(
    'leaves out a row with %j for its ordinate, and says so',
    (word) => {
      const text = rows
        .map((row, i) => (i === 30 || i === 31 ? row.replace(/,.*/, `,${word}`) : row))
        .join('\n');
      const spectrum = readOne(text);
      expect(spectrum.wavenumberPerCm.length).toBe(198);
      expect([...spectrum.wavenumberPerCm]).not.toContain(points.x[30]);
      expect(spectrum.notes.find((note) => note.code === 'points-without-number')?.text).toMatch(/^2 points/);
    },
  );

  it('leaves out text below the numbers, with a note, but no row that begins with a number', () => {
    const spectrum = expectPoints([...rows, '', 'End of file', 'printed by the spectrometer'].join('\n'));
    expect(codesOf(spectrum)).toContain('text-below-data');
    expect(refusalOf([...rows, 'note', '2800.5,0.4'].join('\n')).line).toBe(201);
  });

  it('reads 500,000 points in a few times what splitting the text takes', () => {
    const lines = Array.from(
      { length: 500_000 },
      (_, i) => `${(400 + i * 0.0072).toFixed(4)},${(0.1 + (i % 97) / 500).toFixed(5)}`,
    );
    const bytes = bytesOf(lines.join('\n'));
    // A second takes this machine's plainest reading about three times, whatever else runs on it.
    const plain = performance.now();
    const numbers = new TextDecoder()
      .decode(bytes)
      .split('\n')
      .map((line) => line.split(',').map(Number));
    const yardstick = performance.now() - plain;
    expect(numbers.length).toBe(500_000);
    const started = performance.now();
    const outcome = readSpectrumFile({ name: 'large.csv', bytes });
    expect(performance.now() - started).toBeLessThan(4 * yardstick + 200);
    expect(outcome.ok && outcome.spectra[0]!.wavenumberPerCm.length).toBe(500_000);
  });
});

describe('several spectra in one text', () => {
  const three = points.x.map(
    (x, i) =>
      `${x},${points.y[i]!.toFixed(4)},${(2 * points.y[i]!).toFixed(4)},${(0.5 * points.y[i]!).toFixed(4)}`,
  );
  const read = (text: string) => {
    const outcome = readSpectrumFile({ name: 'three.csv', bytes: bytesOf(text) });
    if (!outcome.ok) throw new Error(outcome.reason);
    return outcome.spectra;
  };

  it('makes one of each column of ordinates, titled by its name', () => {
    const spectra = read(['Wavenumber (cm-1),team 1,team 2,team 3', ...three].join('\n'));
    expect(spectra.map((spectrum) => spectrum.title)).toEqual(['team 1', 'team 2', 'team 3']);
    expect(spectra[1]!.ordinate[7]).toBe(Number((2 * points.y[7]!).toFixed(4)));
    expect(codesOf(spectra[0]!)).toContain('several-spectra');
  });

  it('titles them by column where they have no name', () => {
    expect(read(three.join('\n')).map((spectrum) => spectrum.title)).toEqual([
      'three, column 2',
      'three, column 3',
      'three, column 4',
    ]);
  });

  it('takes spectra that stand one below the other apart, in whichever direction they run', () => {
    const second = rowsOf({ x: points.x, y: points.y.map((value) => 2 * value) });
    for (const lower of [second, second.toReversed()]) {
      const spectra = read(['cm-1,A', ...rows, ...lower].join('\n'));
      expect(spectra.map((spectrum) => spectrum.title)).toEqual([
        'three, rows from line 2 to 201',
        'three, rows from line 202 to 401',
      ]);
      expect([...spectra[0]!.ordinate]).toEqual(yWritten);
      expect(spectra[1]!.ordinate[7]).toBe(Number((2 * points.y[7]!).toFixed(5)));
    }
  });

  it('takes pieces of one spectrum in any order for one', () => {
    expectPoints([...rows.slice(120), ...rows.slice(50, 120), ...rows.slice(0, 50)].join('\n'));
  });

  it('takes pairs of columns, each with its own abscissa', () => {
    const pairs = points.x.map(
      (x, i) => `${x}\t${points.y[i]!.toFixed(4)}\t${x + 0.25}\t${(2 * points.y[i]!).toFixed(4)}`,
    );
    const spectra = read(['cm-1\tHCl\tcm-1\tDCl', ...pairs].join('\n'));
    expect(spectra.map((spectrum) => spectrum.title)).toEqual(['HCl', 'DCl']);
    expect(spectra[1]!.wavenumberPerCm[0]).toBe(points.x[0]! + 0.25);
  });

  it('passes over uncertainties and columns of one value, with a note', () => {
    const text = ['cm-1,A,sigma,flag', ...rows.map((row, i) => `${row},0.00${(i % 5) + 1},0`)].join('\n');
    const spectra = read(text);
    expect(spectra.length).toBe(1);
    expect(codesOf(spectra[0]!).filter((code) => code === 'column-left-out').length).toBe(2);
  });

  it('finds the abscissa by its name where it stands second', () => {
    const text = [
      'Absorbance,Wavenumber/cm-1',
      ...rows.map((row) => row.split(',').reverse().join(',')),
    ].join('\n');
    expectPoints(text);
  });
});
