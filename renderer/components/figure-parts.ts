/** A number cut at its decimal point, so that columns can be aligned on it. */
export interface FigureParts {
  readonly whole: string;
  readonly fraction: string;
  /** Uncertainty as "± 0.0004", empty where unknown. */
  readonly uncertainty: string;
  readonly power: string;
}

const minus = '\u2212';

/** Decimals that show an uncertainty with two figures (at most 9). */
export function decimalsFor(uncertainty: number): number {
  if (!(uncertainty > 0)) return 4;
  const exponent = Math.floor(Math.log10(uncertainty));
  // 0.0996 shown with two figures is 0.10: one decimal fewer.
  const rounds = Number((uncertainty / 10 ** exponent).toFixed(1)) >= 10 ? 1 : 0;
  return Math.min(9, Math.max(0, 1 - exponent - rounds));
}

/** Cuts a value for display: decimals from its uncertainty, else from `figures` significant figures (default 6). */
export function figureParts(value: number, uncertainty: number | null, figures = 6): FigureParts {
  const size = Math.abs(value);
  if (value !== 0 && (size < 1e-5 || size >= 1e7)) return withPower(value, uncertainty, figures);
  const decimals =
    uncertainty !== null && uncertainty > 0
      ? decimalsFor(uncertainty)
      : Math.min(9, Math.max(0, figures - 1 - (value === 0 ? 0 : Math.floor(Math.log10(size)))));
  const [whole = '', fraction = ''] = value.toFixed(decimals).replace('-', minus).split('.');
  return {
    whole,
    fraction: fraction === '' ? '' : `.${fraction}`,
    uncertainty: uncertainty !== null && uncertainty > 0 ? `± ${uncertainty.toFixed(decimals)}` : '',
    power: '',
  };
}

function withPower(value: number, uncertainty: number | null, figures: number): FigureParts {
  const exponent = Math.floor(Math.log10(Math.abs(value)));
  const scale = 10 ** exponent;
  const inner = figureParts(value / scale, uncertainty === null ? null : uncertainty / scale, figures);
  return { ...inner, power: ` × 10${superscript(exponent)}` };
}

const raised: Readonly<Record<string, string>> = {
  '-': '\u207b', '0': '\u2070', '1': '\u00b9', '2': '\u00b2', '3': '\u00b3', '4': '\u2074',
  '5': '\u2075', '6': '\u2076', '7': '\u2077', '8': '\u2078', '9': '\u2079',
}; // prettier-ignore

export function superscript(value: number): string {
  return String(value).replace(/[-\d]/g, (digit) => raised[digit] ?? digit);
}

/** Value with sign, e.g. a deviation: "+0.30", "−0.021"; decimals as given. */
export function signedFigure(value: number, decimals: number): string {
  const written = Math.abs(value).toFixed(decimals);
  return Number(written) === 0 ? written : `${value > 0 ? '+' : minus}${written}`;
}

/** "10.5931 ± 0.0004 cm⁻¹" in one string, for copying, screen readers and titles. */
export function figureText(value: number, uncertainty: number | null, unit: string): string {
  const { whole, fraction, uncertainty: spread, power } = figureParts(value, uncertainty);
  const number = spread === '' ? `${whole}${fraction}` : `${whole}${fraction} ${spread}`;
  return `${spread !== '' && power !== '' ? `(${number})` : number}${power} ${unitText(unit)}`.trim();
}

/** Unit as print shows it. */
export function unitText(unit: string): string {
  return unit.replace(/-1\b/g, '\u207b\u00b9').replace(/\bm2\b/, 'm\u00b2');
}
