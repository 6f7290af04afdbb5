import fc from 'fast-check';
import { jcampText, type JcampForm } from '../../electron/backend/example/jcamp-writer.ts';
import { looksLikeJcamp } from '../../shared-core/spectrum/jcamp/decode-jcamp.ts';
import { prepareSpectrum } from '../../shared-core/spectrum/prepare/prepare-spectrum.ts';
import { readSpectrumFile } from '../../shared-core/spectrum/read-spectrum-file.ts';
import { isInDelimitedText, isInJcampText, textOf } from '../helpers/independent-reading.ts';
import { inventedPoints, isPresent, referenceBytes } from '../helpers/spectrum-files.ts';

/** A stretch of a real file, header included, so that a case costs a millisecond. */
function stretchOf(path: string, header: number, from: number, count: number): string | null {
  if (!isPresent(path)) return null;
  const lines = new TextDecoder().decode(referenceBytes(path)).split('\n');
  return [...lines.slice(0, header), ...lines.slice(header + from, header + from + count)].join('\n');
}

const forms: readonly JcampForm[] = ['affn', 'packed', 'squeezed', 'difdup', 'xypoints'];

function generatedTexts(): string[] {
  const { x, y } = inventedPoints(90, 2700, 0.5);
  const jcamp = forms.map((form) =>
    jcampText(
      {
        title: 'invented',
        xPerCm: Float64Array.from(x),
        y: Float64Array.from(y),
        yUnits: 'ABSORBANCE',
        resolutionPerCm: 0.5,
      },
      form,
    ),
  );
  const compound = [
    '##TITLE= c',
    '##JCAMP-DX= 5',
    '##DATA TYPE= LINK',
    '##BLOCKS= 2',
    jcamp[3]!,
    jcamp[0]!.replace('INFRARED', 'RAMAN'),
    '##END=',
  ].join('\n');
  const table = (separator: string, comma: boolean, header: string, more: (row: string, i: number) => string): string =>
    [header, ...x.map((value, i) => {
      const cells = [value.toFixed(3), y[i]!.toFixed(5)].map((cell) => (comma ? cell.replace('.', ',') : cell));
      return more(cells.join(separator), i);
    })].join('\n'); // prettier-ignore
  const same = (row: string): string => row;
  return [
    ...jcamp,
    compound,
    table(',', false, 'Wavenumber (cm-1),Absorbance', same),
    table(';', true, 'Wellenzahl;Extinktion', same),
    table('\t', false, 'cm-1\t%T', (row, i) => `${row}\t${(y[i]! * 2).toFixed(5)}`),
    table('  ', false, '# blanks', same),
    table(', ', false, 'trailing', (row) => `${row},`),
    x.map((value, i) => `${(value / 1.6).toFixed(2)} ${y[i]!.toFixed(4)}`).join('\r\n'),
    x
      .map((value, i) => `${(1e4 / value).toFixed(6)},${y[i]!.toFixed(4)}`)
      .reverse()
      .join('\n'),
  ];
}

function realTexts(): string[] {
  return [
    stretchOf('spectra/hcl-thin.csv', 5, 1500, 150),
    stretchOf('spectra/hcl-dcl-mixed-cell.csv', 2, 25_000, 150),
    isPresent('jcamp/jcamp-difdup.dx')
      ? new TextDecoder().decode(referenceBytes('jcamp/jcamp-difdup.dx')).slice(0, 30_000)
      : null,
  ].filter((text) => text !== null);
}

const pieces = [
  '',
  '0',
  '7',
  '-',
  '.',
  ',',
  ';',
  '\t',
  ' ',
  '\n',
  '\r',
  '##END=',
  '##',
  '$$',
  'E',
  'e',
  '+',
  'NaN',
  '?',
  'J',
  's9',
  '1e999',
  '\u0000',
  '\uFEFF',
  'µ',
  '"',
  '#',
  '99999999999',
];

/** One alteration of a text: where (0 to 1), what, how much. */
type Mutation = {
  readonly kind: number;
  readonly place: number;
  readonly other: number;
  readonly piece: string;
};

/** Evenly spread: the places of a file are equally likely. */
const share = fc.noBias(fc.nat(999_999)).map((value) => value / 1_000_000);

const mutation: fc.Arbitrary<Mutation> = fc.record({
  kind: fc.noBias(fc.nat(9)),
  place: share,
  other: share,
  piece: fc.noBias(fc.constantFrom(...pieces)),
});

function mutate(text: string, { kind, place, other, piece }: Mutation): string {
  const at = Math.floor(place * (text.length + 1));
  if (kind === 0) return text.slice(0, at) + piece + text.slice(at);
  if (kind === 1) return text.slice(0, at) + piece + text.slice(at + 1);
  if (kind === 2) return text.slice(0, at) + text.slice(at + 1 + Math.floor(other * 8));
  if (kind === 3) return text.slice(0, at);
  if (kind === 4) return text.slice(at);
  if (kind === 5) return text.replace(/\d/g, (digit, index: number) => (Math.abs(index - at) < 2 ? String((Number(digit) + 1) % 10) : digit)); // prettier-ignore
  const lines = text.split('\n');
  const i = Math.floor(place * lines.length);
  const j = Math.floor(other * lines.length);
  if (kind === 6) lines.splice(i, 1);
  else if (kind === 7) lines.splice(i, 0, lines[j]!);
  else if (kind === 8) [lines[i], lines[j]] = [lines[j]!, lines[i]!];
  else lines.splice(i, 0, ...lines.slice(j, j + 30));
  return lines.join('\n');
}

type Encoding = 'utf-8' | 'utf-16le' | 'latin-1' | 'flipped';

function encode(text: string, encoding: Encoding, place: number): Uint8Array {
  if (encoding === 'utf-16le') {
    const bytes = new Uint8Array(2 * text.length + 2);
    const view = new DataView(bytes.buffer);
    view.setUint16(0, 0xfeff, true);
    for (let i = 0; i < text.length; i++) view.setUint16(2 * i + 2, text.charCodeAt(i), true);
    return bytes;
  }
  if (encoding === 'latin-1') return Uint8Array.from(text, (letter) => letter.charCodeAt(0) & 255);
  const bytes = new TextEncoder().encode(text);
  const at = Math.floor(place * bytes.length);
  if (encoding === 'flipped' && bytes.length > 0)
    bytes[at] = bytes[at]! ^ (1 << (Math.floor(place * 1e6) % 8));
  return bytes;
}

export interface FuzzCounts {
  cases: number;
  read: number;
  readUnchanged: number;
  refused: number;
  readonly refusedBy: Record<string, number>;
  slowestMs: number;
}

function checkRefusal(
  outcome: { code: string; reason: string; line: number | null },
  counts: FuzzCounts,
): void {
  counts.refused++;
  counts.refusedBy[outcome.code] = (counts.refusedBy[outcome.code] ?? 0) + 1;
  if (!/^[a-z0-9-]+$/.test(outcome.code) || outcome.reason.length < 40 || !outcome.reason.endsWith('.')) {
    throw new Error(`a refusal without a sentence: ${JSON.stringify(outcome)}`);
  }
  if (outcome.line !== null && !(outcome.line >= 1)) throw new Error(`line ${outcome.line}`);
}

/** Reads bytes and holds the outcome against the second reading; throws where they differ. */
function checkCase(bytes: Uint8Array, counts: FuzzCounts): void {
  const started = performance.now();
  const outcome = readSpectrumFile({ name: 'folder/case.txt', bytes });
  counts.slowestMs = Math.max(counts.slowestMs, performance.now() - started);
  counts.cases++;
  if (!outcome.ok) {
    checkRefusal(outcome, counts);
    return;
  }
  counts.read++;
  const text = textOf(bytes);
  const isSame = looksLikeJcamp(text) ? isInJcampText : isInDelimitedText;
  for (const spectrum of outcome.spectra) {
    const { wavenumberPerCm: x, ordinate: y } = spectrum;
    if (!x.every((value, i) => value > 0 && (i === 0 || value > x[i - 1]!)) || !y.every(Number.isFinite)) {
      throw new Error('not ascending or not finite');
    }
    if (!isSame(text, spectrum)) throw new Error(`points differ from a second reading (${spectrum.title})`);
    const prepared = prepareSpectrum(spectrum);
    if ('unusable' in prepared) continue;
    const parts = [
      prepared.transmittance,
      prepared.absorbance,
      prepared.noise,
      prepared.baselineTransmittance,
    ];
    if (
      !parts.every((part) => part.length === prepared.wavenumberPerCm.length && part.every(Number.isFinite))
    ) {
      throw new Error('prepared with values that are not finite');
    }
  }
}

/**
 * Reads `cases` mutated real and generated files; each must end in a spectrum whose points equal a second, independent
 * reading of the same bytes, or in a refusal with a reason. Throws with the counterexample at the first that does not.
 */
export function fuzzSpectrum(cases: number, seed: number): FuzzCounts {
  const counts: FuzzCounts = { cases: 0, read: 0, readUnchanged: 0, refused: 0, refusedBy: {}, slowestMs: 0 };
  const texts = [...generatedTexts(), ...realTexts()];
  fc.assert(
    fc.property(
      fc.noBias(fc.nat(texts.length - 1)),
      fc.array(mutation, { maxLength: 4 }),
      fc.noBias(fc.constantFrom<Encoding>('utf-8', 'utf-8', 'utf-16le', 'latin-1', 'flipped')),
      share,
      (index, mutations, encoding, place) => {
        const text = mutations.reduce(mutate, texts[index]!);
        checkCase(encode(text, encoding, place), counts);
        if (mutations.length === 0 && encoding !== 'flipped') counts.readUnchanged++;
      },
    ),
    { numRuns: cases, seed, endOnFailure: false },
  );
  return counts;
}
