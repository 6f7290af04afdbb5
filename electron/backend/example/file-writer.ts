import { absorbanceOf } from './artefacts.ts';
import { jcampText, type JcampForm } from './jcamp-writer.ts';

export type WrittenOrdinate = 'absorbance' | 'transmittance' | 'percent-transmittance';

interface CommonStyle {
  readonly ordinate: WrittenOrdinate;
  readonly descending: boolean;
  readonly extension: string;
}
export interface JcampStyle extends CommonStyle {
  readonly format: 'jcamp';
  readonly form: JcampForm;
}
export interface DelimitedStyle extends CommonStyle {
  readonly format: 'delimited';
  readonly separator: ',' | ';' | '\t' | ' ';
  readonly decimalMark: '.' | ',';
  /** Lines above the numbers; {title} is replaced. */
  readonly header: readonly string[];
  readonly encoding: 'utf-8' | 'utf-8-bom' | 'utf-16le';
  readonly lineEnd: '\n' | '\r\n';
  readonly trailingSeparator: boolean;
  readonly xDecimals: number;
  readonly yDecimals: number;
}
export type FileStyle = JcampStyle | DelimitedStyle;

const delimited = {
  format: 'delimited',
  separator: ',',
  decimalMark: '.',
  header: [],
  encoding: 'utf-8',
  lineEnd: '\n',
  trailingSeparator: false,
  xDecimals: 5,
  yDecimals: 6,
  ordinate: 'absorbance',
  descending: false,
  extension: 'csv',
} as const satisfies DelimitedStyle;

/** The ways in which the example writes a spectrum. */
export const fileStyles = {
  'jcamp-affn': {
    format: 'jcamp',
    form: 'affn',
    ordinate: 'absorbance',
    descending: false,
    extension: 'jdx',
  },
  'jcamp-difdup': {
    format: 'jcamp',
    form: 'difdup',
    ordinate: 'transmittance',
    descending: true,
    extension: 'jdx',
  },
  'jcamp-xypoints': {
    format: 'jcamp',
    form: 'xypoints',
    ordinate: 'absorbance',
    descending: false,
    extension: 'dx',
  },
  'jcamp-packed': {
    format: 'jcamp',
    form: 'packed',
    ordinate: 'transmittance',
    descending: false,
    extension: 'dx',
  },
  'jcamp-squeezed': {
    format: 'jcamp',
    form: 'squeezed',
    ordinate: 'absorbance',
    descending: true,
    extension: 'jdx',
  },
  'csv-header': { ...delimited, header: ['Wavenumber (cm-1),Absorbance'], lineEnd: '\r\n' },
  'csv-decimal-comma': {
    ...delimited,
    separator: ';',
    decimalMark: ',',
    header: ['Wellenzahl / cm-1;Transmission / %'],
    encoding: 'utf-8-bom',
    lineEnd: '\r\n',
    ordinate: 'percent-transmittance',
    descending: true,
    yDecimals: 4,
  },
  'tab-percent': {
    ...delimited,
    separator: '\t',
    header: ['cm-1\t%T'],
    ordinate: 'percent-transmittance',
    yDecimals: 4,
    extension: 'txt',
  },
  'blanks-bare': {
    ...delimited,
    separator: ' ',
    ordinate: 'transmittance',
    extension: 'txt',
    descending: true,
  },
  'csv-trailing-rounded': {
    ...delimited,
    header: ['{title} (invented),Sample 1', 'cm-1,A,'],
    encoding: 'utf-8-bom',
    lineEnd: '\r\n',
    trailingSeparator: true,
    xDecimals: 2,
    yDecimals: 4,
    descending: true,
  },
  'tab-utf16': {
    ...delimited,
    separator: '\t',
    header: ['{title}', 'Wavenumber [1/cm]\tAbsorbance [-]'],
    encoding: 'utf-16le',
    lineEnd: '\r\n',
    extension: 'txt',
  },
} as const satisfies Readonly<Record<string, FileStyle>>;
export type FileStyleName = keyof typeof fileStyles;

function encode(text: string, encoding: DelimitedStyle['encoding']): Uint8Array {
  if (encoding !== 'utf-16le')
    return new TextEncoder().encode((encoding === 'utf-8-bom' ? '\uFEFF' : '') + text);
  const bytes = new Uint8Array(2 * text.length + 2);
  const view = new DataView(bytes.buffer);
  view.setUint16(0, 0xfeff, true);
  for (let i = 0; i < text.length; i++) view.setUint16(2 * i + 2, text.charCodeAt(i), true);
  return bytes;
}

function delimitedText(title: string, x: Float64Array, y: Float64Array, style: DelimitedStyle): string {
  const number = (value: number, decimals: number): string =>
    value.toFixed(decimals).replace('.', style.decimalMark);
  const end = style.trailingSeparator ? style.separator : '';
  const lines = style.header.map((line) => line.replace('{title}', title));
  for (let i = 0; i < x.length; i++) {
    lines.push(number(x[i]!, style.xDecimals) + style.separator + number(y[i]!, style.yDecimals) + end);
  }
  return lines.join(style.lineEnd) + style.lineEnd;
}

/** Ordinate as written, from transmittance. */
export function ordinateOf(
  transmittance: Float64Array,
  ordinate: WrittenOrdinate,
  clipAbsorbance = 6,
): Float64Array {
  if (ordinate === 'absorbance') return absorbanceOf(transmittance, clipAbsorbance);
  return ordinate === 'transmittance' ? transmittance : transmittance.map((t) => 100 * t);
}

export interface SpectrumToWrite {
  readonly title: string;
  readonly wavenumberPerCm: Float64Array;
  readonly transmittance: Float64Array;
  readonly resolutionPerCm: number;
  readonly clipAbsorbance?: number;
}

/** The bytes of a spectrum file in one of the styles. */
export function writeSpectrum(spectrum: SpectrumToWrite, style: FileStyle): Uint8Array {
  let x = spectrum.wavenumberPerCm;
  let y = ordinateOf(spectrum.transmittance, style.ordinate, spectrum.clipAbsorbance);
  if (style.descending) {
    x = x.toReversed();
    y = y.toReversed();
  }
  if (style.format === 'delimited') return encode(delimitedText(spectrum.title, x, y, style), style.encoding);
  const yUnits = {
    absorbance: 'ABSORBANCE',
    transmittance: 'TRANSMITTANCE',
    'percent-transmittance': '% TRANSMITTANCE',
  }[style.ordinate];
  const content = { title: spectrum.title, xPerCm: x, y, yUnits, resolutionPerCm: spectrum.resolutionPerCm };
  return new TextEncoder().encode(jcampText(content, style.form));
}
