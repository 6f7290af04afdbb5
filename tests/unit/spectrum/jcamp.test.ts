import { convert } from 'jcampconverter';
import { describe, expect, it } from 'vitest';
import { decodeJcamp } from '../../../shared-core/spectrum/jcamp/decode-jcamp.ts';
import { readSpectrumFile } from '../../../shared-core/spectrum/read-spectrum-file.ts';
import { jcampText, type JcampForm } from '../../../electron/backend/example/jcamp-writer.ts';
import {
  bytesOf,
  codesOf,
  inventedPoints,
  isPresent,
  readOne,
  referenceBytes,
  refusalOf,
} from '../../helpers/spectrum-files.ts';

const forms: JcampForm[] = ['affn', 'packed', 'squeezed', 'difdup', 'xypoints'];
const { x, y } = inventedPoints(400, 2700, 0.5);
const content = {
  title: 'invented gas',
  xPerCm: Float64Array.from(x),
  y: Float64Array.from(y),
  yUnits: 'ABSORBANCE',
  resolutionPerCm: 0.5,
};
const written = Object.fromEntries(forms.map((form) => [form, jcampText(content, form)])) as Record<
  JcampForm,
  string
>;

/** A small block by hand: values 100 110 120 130 140 150 … in whatever data lines. */
function block(dataLines: readonly string[], count: number, header: readonly string[] = []): string {
  return [
    '##TITLE= by hand',
    '##JCAMP-DX= 4.24 $$ by hand',
    '##DATA TYPE= INFRARED SPECTRUM',
    '##XUNITS= 1/CM',
    '##YUNITS= ABSORBANCE',
    '##XFACTOR= 1',
    '##YFACTOR= 0.001',
    '##FIRSTX= 2000',
    `##LASTX= ${2000 + count - 1}`,
    `##NPOINTS= ${count}`,
    ...header,
    '##XYDATA= (X++(Y..Y))',
    ...dataLines,
    '##END=',
  ].join('\n');
}
const decodedByHand = (lines: readonly string[], count: number): number[] =>
  [...decodeJcamp(block(lines, count))[0]!.y].map((value) => Math.round(value * 1000));

describe('JCAMP-DX reader', () => {
  it.each(forms)('reads %s to the points that were written', (form) => {
    const spectrum = readOne(written[form]);
    expect(spectrum.title).toBe('invented gas');
    expect(spectrum.ordinateKind).toBe('absorbance');
    expect(spectrum.wavenumberPerCm.length).toBe(400);
    for (let i = 0; i < 400; i++) {
      expect(Math.abs(spectrum.wavenumberPerCm[i]! - x[i]!)).toBeLessThan(1e-6);
      expect(Math.abs(spectrum.ordinate[i]! - y[i]!)).toBeLessThan(1.1e-6);
    }
  });

  // Outside check: jcampconverter 10 (MIT), on undamaged files.
  it.each(forms)('agrees with a general-purpose reader on %s', (form) => {
    const result = convert(written[form].replace('##XYPOINTS=', '##XYDATA='), { keepRecordsRegExp: /^$/ });
    const theirs = result.flatten[0]!.spectra[0]!.data as { x: number[]; y: number[] };
    const ours = decodeJcamp(written[form])[0]!;
    expect(ours.y.length).toBe(theirs.y.length);
    for (let i = 0; i < theirs.y.length; i++) {
      expect(Math.abs(ours.x[i]! - theirs.x[i]!)).toBeLessThan(1e-6);
      expect(Math.abs(ours.y[i]! - theirs.y[i]!)).toBeLessThan(1e-12);
    }
  });

  // The examples follow the definition of the forms in McDonald and Wilks, Appl. Spectrosc. 42 (1988) 151.
  it.each<[string, string[], number[]]>([
    ['fixed', ['2000 100 110 120', '2003 -130 140'], [100, 110, 120, -130, 140]],
    ['packed', ['2000+100+110-120', '2003+130+140'], [100, 110, -120, 130, 140]],
    ['squeezed', ['2000A00A10a20', '2003A30@A40'], [100, 110, -120, 130, 0, 140]],
    ['difference', ['2000A00J0J0', '2002A20J0j0', '2004A20'], [100, 110, 120, 130, 120]],
    ['duplicate of a difference', ['2000A00J0U', '2003A30%T', '2005A30'], [100, 110, 120, 130, 130, 130]],
    ['duplicate of an ordinate', ['2000A00V', '2004B50S'], [100, 100, 100, 100, 250]],
    ['nine times', ['2000A00s'], [100, 100, 100, 100, 100, 100, 100, 100, 100]],
    ['mixed', ['2000 100+110A20J0', '2003A30 -50%', '2005e0'], [100, 110, 120, 130, -50, -50]],
    ['comments and blank lines', ['2000 100 $$ first', '', '2001 110'], [100, 110]],
  ])('decodes the %s form', (_, lines, expected) => {
    expect(decodedByHand(lines, expected.length)).toEqual(expected);
  });

  it('keeps a point without a value ("?") as a gap and says so', () => {
    const lines = x.slice(0, 100).map((_, i) => `${2000 + i} ${i === 50 ? '?' : 100 + (i % 7)}`);
    const spectrum = readOne(block(lines, 100));
    expect(spectrum.wavenumberPerCm.length).toBe(99);
    expect(codesOf(spectrum)).toContain('points-without-number');
  });

  it('tells exponents from squeezed letters', () => {
    const text = block(['2000 1.5E+02 2.5E-01', '2002E00'], 3);
    expect([...decodeJcamp(text)[0]!.y].map((value) => Number((1000 * value).toPrecision(9)))).toEqual([
      150, 0.25, 500,
    ]);
  });

  const jcamp = ['fix', 'packed', 'squeezed', 'difdup'].map((name) => `jcamp/jcamp-${name}.dx`);
  it.skipIf(!jcamp.every(isPresent))(
    'decodes the four encodings of one spectrum to the same 16,384 ordinates',
    () => {
      const decode = (path: string) => decodeJcamp(new TextDecoder().decode(referenceBytes(path)))[0]!;
      const [first, ...others] = jcamp.map(decode);
      expect(first!.y.length).toBe(16_384);
      expect(first!.y[0]).toBe(-10_247);
      for (const other of others) {
        expect(other.y).toEqual(first!.y);
        expect(other.x).toEqual(first!.x);
      }
      const theirs = convert(new TextDecoder().decode(referenceBytes(jcamp[0]!)), {
        keepRecordsRegExp: /^$/,
      });
      expect([...first!.y]).toEqual([...(theirs.flatten[0]!.spectra[0]!.data as { y: number[] }).y]);
      // As a spectrum of a lab it is refused: it is no infrared spectrum.
      expect(refusalOf(referenceBytes(jcamp[0]!))).toMatchObject({ code: 'not-infrared', line: 3 });
    },
  );
});

describe('damaged JCAMP-DX files are refused with the line', () => {
  const lineOf = (text: string, start: string): number =>
    text.split('\n').findIndex((line) => line.startsWith(start)) + 1;
  const edit = (form: JcampForm, change: (lines: string[], data: number) => void): string => {
    const lines = written[form].split('\n');
    change(lines, lines.findIndex((line) => line.startsWith('##XY')) + 1);
    return lines.join('\n');
  };

  it('half a file', () => {
    for (const form of forms) {
      const text = written[form];
      expect(refusalOf(text.slice(0, text.length / 2)).code).toBe('jcamp-end-missing');
      expect(['jcamp-start-missing', 'jcamp-stray-line']).toContain(
        refusalOf(text.slice(text.length / 2)).code,
      );
    }
  });

  it('a lost line', () => {
    for (const form of forms) {
      const text = edit(form, (lines, data) => lines.splice(data + 4, 1));
      const { code, line } = refusalOf(text);
      expect(['jcamp-npoints', 'jcamp-y-check']).toContain(code);
      expect(line).not.toBeNull();
    }
  });

  it('a line that stands twice', () => {
    for (const form of forms) {
      const text = edit(form, (lines, data) => lines.splice(data + 4, 0, lines[data + 4]!));
      expect(['jcamp-npoints', 'jcamp-y-check']).toContain(refusalOf(text).code);
    }
  });

  it('two lines exchanged', () => {
    for (const form of forms.filter((each) => each !== 'xypoints')) {
      const text = edit(form, (lines, data) => {
        [lines[data + 4], lines[data + 5]] = [lines[data + 5]!, lines[data + 4]!];
      });
      const { code, line } = refusalOf(text);
      expect(['jcamp-x-check', 'jcamp-y-check']).toContain(code);
      expect(line).toBe(lineOf(text, '##XYDATA') + 5);
    }
  });

  it('a difference altered', () => {
    const text = edit('difdup', (lines, data) => {
      lines[data + 3] = lines[data + 3]!.replace(/J/, 'K');
    });
    expect(refusalOf(text)).toMatchObject({ code: 'jcamp-y-check', line: lineOf(text, '##XYDATA') + 5 });
  });

  it('an abscissa altered', () => {
    const text = edit('affn', (lines, data) => {
      lines[data + 3] = lines[data + 3]!.replace(/^27/, '28');
    });
    expect(refusalOf(text)).toMatchObject({ code: 'jcamp-x-check', line: lineOf(text, '##XYDATA') + 4 });
  });

  it('a letter that stands for nothing', () => {
    const text = edit('squeezed', (lines, data) => {
      lines[data + 2] = `${lines[data + 2]!}~`;
    });
    expect(refusalOf(text)).toMatchObject({ code: 'jcamp-character', line: lineOf(text, '##XYDATA') + 3 });
  });

  it.each([
    ['NPOINTS', '399', 'jcamp-npoints'],
    ['FIRSTX', '2710', 'jcamp-deltax'],
    ['LASTX', '2950', 'jcamp-deltax'],
    ['DELTAX', '0.4', 'jcamp-deltax'],
    ['FIRSTY', '0.7', 'jcamp-firsty'],
    ['MAXY', '0.95', 'jcamp-maxy'],
    ['MINY', '0.01', 'jcamp-miny'],
    ['YFACTOR', '2e-6', 'jcamp-firsty'],
    ['MAXX', '3000', 'jcamp-maxx'],
  ])('%s that contradicts the data', (label, value, code) => {
    const text = written.affn.replace(new RegExp(`##${label}=.*`), `##${label}= ${value}`);
    // The line is that of the record which does not fit the others, here the altered one or the one it was held against.
    const { code: found, line, reason } = refusalOf(text);
    expect(found).toBe(code);
    expect(reason).toContain(`on line ${line}`);
    expect(text.split('\n')[line! - 1]).toMatch(/^##[A-Z]+=/);
    const broken = written.affn.replace(new RegExp(`##${label}=.*`), `##${label}= 12x`);
    expect(refusalOf(broken)).toMatchObject({
      code: 'jcamp-header-number',
      line: lineOf(broken, `##${label}`),
    });
  });

  it('FIRSTX and LASTX both moved, so that only the X-check can tell', () => {
    const text = written.affn
      .replace(/##FIRSTX=.*/, '##FIRSTX= 2710')
      .replace(/##LASTX=.*/, '##LASTX= 2909.5');
    expect(refusalOf(text)).toMatchObject({ code: 'jcamp-x-check', line: lineOf(text, '##XYDATA') + 1 });
  });

  it('a label twice with different values, a record without =, text where nothing belongs', () => {
    expect(refusalOf(written.affn.replace('##NPOINTS=', '##NPOINTS= 3\n##NPOINTS=')).code).toBe(
      'jcamp-record-twice',
    );
    expect(refusalOf(written.affn.replace('##OWNER=', '##OWNER')).code).toBe('jcamp-record');
    expect(refusalOf(written.affn.replace(/(##NPOINTS=.*)/, '$1\n17')).code).toBe('jcamp-stray-line');
    expect(refusalOf(`${written.affn}2700 1 2 3\n`).code).toBe('jcamp-stray-line');
  });

  it('no factor for the ordinate and nothing to bear one out', () => {
    const text = written.affn.replace(/##(?:YFACTOR|MAXY|MINY|FIRSTY)=.*\n/g, '');
    expect(refusalOf(text).code).toBe('jcamp-yfactor-missing');
  });

  it('pairs with a partner missing', () => {
    const text = edit('xypoints', (lines, data) => {
      lines[data + 7] = lines[data + 7]!.split(',')[0]!;
    });
    expect(refusalOf(text)).toMatchObject({ code: 'jcamp-pair', line: lineOf(text, '##XYPOINTS') + 8 });
  });

  it('a repeat count gone wild, in bounded time', () => {
    const started = performance.now();
    expect(refusalOf(block(['2000A00Z99999999999'], 5)).code).toBe('jcamp-repeat-count');
    expect(performance.now() - started).toBeLessThan(200);
  });
});

describe('kinds of JCAMP-DX files', () => {
  const other = (type: string, title: string): string =>
    written.affn.replace('INFRARED SPECTRUM', type).replace('##TITLE= invented gas', `##TITLE= ${title}`);
  const compound = (blocks: readonly string[]): string =>
    [
      '##TITLE= all of it',
      '##JCAMP-DX= 5.01',
      '##DATA TYPE= LINK',
      `##BLOCKS= ${blocks.length}`,
      ...blocks,
      '##END=',
    ].join('\n');

  it('picks the infrared block of a compound file and says so', () => {
    const text = compound([other('MASS SPECTRUM', 'mass'), written.difdup, other('NMR SPECTRUM', 'nmr')]);
    const spectrum = readOne(text);
    expect(spectrum.title).toBe('invented gas');
    expect(spectrum.notes.find((note) => note.code === 'jcamp-block-picked')?.text).toMatch(
      /3 blocks; taken: line \d+ \(infrared\); passed over: line \d+ \(mass spectrum\), line \d+ \(nmr spectrum\)/,
    );
  });

  it('takes every infrared block where there are several', () => {
    const outcome = readSpectrumFile({
      name: 'two.dx',
      bytes: bytesOf(compound([written.affn, other('INFRARED SPECTRUM', 'second')])),
    });
    expect(outcome.ok && outcome.spectra.map((spectrum) => spectrum.title)).toEqual([
      'invented gas',
      'second',
    ]);
  });

  it('refuses a compound file whose infrared block is damaged, and not one whose other block is', () => {
    const damaged = (text: string): string => text.replace(/##NPOINTS=.*/, '##NPOINTS= 5');
    expect(refusalOf(compound([other('MASS SPECTRUM', 'mass'), damaged(written.affn)])).code).toBe(
      'jcamp-npoints',
    );
    expect(readOne(compound([damaged(other('MASS SPECTRUM', 'mass')), written.affn])).title).toBe(
      'invented gas',
    );
  });

  it.each([
    ['RAMAN SPECTRUM', 'not-infrared'],
    ['NMR SPECTRUM', 'not-infrared'],
    ['INFRARED INTERFEROGRAM', 'interferogram'],
    ['INFRARED PEAK TABLE', 'not-infrared'],
  ])('refuses %s', (type, code) => {
    expect(refusalOf(other(type, 'x')).code).toBe(code);
  });

  it('takes wavelengths and percent, and a file without an ordinate unit by its data', () => {
    const percent = jcampText(
      { ...content, y: content.y.map((a) => 100 * 10 ** -a), yUnits: 'TRANSMITTANCE' },
      'affn',
    );
    const spectrum = readOne(percent);
    expect(spectrum.ordinateKind).toBe('percent-transmittance');
    expect(codesOf(spectrum)).toContain('ordinate-label-contradicts');
    expect(readOne(written.affn.replace(/##YUNITS=.*\n/, '')).ordinateKind).toBe('absorbance');
    const micrometres = jcampText(
      { ...content, xPerCm: content.xPerCm.map((v) => v / 1000) },
      'xypoints',
    ).replace('1/CM', 'MICROMETERS');
    const converted = readOne(micrometres);
    expect(converted.abscissaKind).toBe('wavelength-um');
    expect(converted.wavenumberPerCm.at(-1)).toBeCloseTo(1e4 / 2.7, 3);
  });
});
