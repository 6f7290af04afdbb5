/** A number as it was written. */
export interface WrittenNumber {
  readonly value: number;
  /** Significant figures as written; null where they cannot be known (a spreadsheet number has lost its zeros). */
  readonly figures: number | null;
  /** Half a unit of the last digit, in the unit of the number; null where unknown. */
  readonly halfLastDigit: number | null;
  /** Uncertainty in brackets or behind ±; null where none is given. */
  readonly uncertainty: number | null;
  /** What is left: the unit. */
  readonly rest: string;
}

export type ReadNumberOutcome =
  | { readonly state: 'number'; readonly number: WrittenNumber }
  | { readonly state: 'not given' }
  | { readonly state: 'unreadable'; readonly reason: string };

export interface ReadNumberOptions {
  /** The cell held a number, not a text: its zeros are lost. */
  readonly storedAsNumber?: boolean;
  /** Range in which the value is expected, in the unit in which it is written: settles a comma that may be either sign. */
  readonly expected?: readonly [number, number];
}

const superscripts: Readonly<Record<string, string>> = { '⁰': '0', '¹': '1', '²': '2', '³': '3', '⁴': '4', '⁵': '5', '⁶': '6', '⁷': '7', '⁸': '8', '⁹': '9', '⁻': '-', '⁺': '+' }; // prettier-ignore
const notGiven = /^(|-|–|—|n\/?a|none|keine?|nil|\?|\.|not given|not determined|n\.d\.?|nan|null)$/i;

/** Blanks of every width, real minus signs and raised digits become plain ones; signs for "about" go. */
function plain(text: string): string {
  return text
    .replace(/[⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺]+/g, (run) =>
      Array.from(run, (c) => c)
        .map((c) => superscripts[c]!)
        .join(''),
    )
    .replace(/[\u00a0\u1680\u2000-\u200a\u202f\u205f\u3000]/g, ' ')
    .replace(/[\u200b\ufeff]/g, '')
    .replace(/[−–‒﹣－]/g, '-')
    .replace(/^\s*(≈|~|≃|∼|ca\.?|circa|about|approx\.?|=|:)\s*/i, '')
    .trim();
}

const numberPattern = /^([+-]?)\s*((?:\d{1,3}(?: \d{3})+|\d[\d.,']*|[.,]\d+)(?:[.,]\d+)?)/;
const powerPattern =
  /^\s*(?:[eE]\s*([+-]?\d+)|(?:[x×*·⋅]\s*10\s*(?:\^|\*\*)?\s*\(?\{?\s*([+-]?\d+)\s*\)?\}?))/;

/**
 * Reads a number as people write it: "10,59", "1.2746(3)e-10 m", "≈10.6", "10.59 ± 0.02", "1.2746 × 10⁻¹⁰", thin spaces, real minus.
 *
 * A comma with three digits behind it may be a decimal or a thousands sign; it is read only where `expected` leaves one of them.
 *
 * @returns the number with what stands behind it, 'not given' for an empty cell or a dash, or a reason why it cannot be read.
 */
export function readNumber(text: string, options: ReadNumberOptions = {}): ReadNumberOutcome {
  let rest = plain(text);
  if (notGiven.test(rest)) return { state: 'not given' };
  const match = numberPattern.exec(rest);
  if (match === null) return { state: 'unreadable', reason: `“${text.trim()}” does not begin with a number` };
  rest = rest.slice(match[0].length);
  const mantissa = decimal(match[2]!, text, options.expected);
  if (typeof mantissa === 'string' && mantissa.startsWith('!'))
    return { state: 'unreadable', reason: mantissa.slice(1) };
  const digits = mantissa;
  const sign = match[1] === '-' ? -1 : 1;
  const places = digits.includes('.') ? digits.length - digits.indexOf('.') - 1 : 0;
  const bracket = /^\s?\((\d+)\)/.exec(rest);
  if (bracket !== null) rest = rest.slice(bracket[0].length);
  const plus = /^\s*(?:±|\+\s*\/?\s*-)\s*(\d[\d.,]*(?:[eE][+-]?\d+)?)/.exec(rest);
  if (plus !== null) rest = rest.slice(plus[0].length);
  // "(1.2746 ± 0.0003) × 10⁻¹⁰" has lost its opening bracket by now; the closing one goes too.
  if (plus !== null) rest = rest.replace(/^\s*\)/, '');
  const power = powerPattern.exec(rest);
  if (power !== null) rest = rest.slice(power[0].length);
  const exponent = Number(power?.[1] ?? power?.[2] ?? 0);
  const value = sign * Number(`${digits}e${exponent}`);
  if (!Number.isFinite(value))
    return { state: 'unreadable', reason: `“${text.trim()}” is beyond any number` };
  if (/^\s*[\d]/.test(rest))
    return { state: 'unreadable', reason: `“${text.trim()}” holds more than one number` };
  const last = Number(`1e${exponent - places}`);
  const stored = options.storedAsNumber === true;
  const uncertainty =
    bracket !== null
      ? Number(bracket[1]) * last
      : plus !== null
        ? Number(plus[1]!.replace(',', '.')) * (plus[1]!.includes('e') ? 1 : Number(`1e${exponent}`))
        : null;
  const bare = digits.replace('.', '').replace(/^0+/, '');
  return {
    state: 'number',
    number: {
      value,
      figures: stored ? null : Math.max(1, bare.length),
      halfLastDigit: stored ? null : last / 2,
      uncertainty: uncertainty !== null && Number.isFinite(uncertainty) ? uncertainty : null,
      rest: rest.trim(),
    },
  };
}

/** Digits with one point; a text that begins with "!" says why they cannot be read. */
function decimal(written: string, whole: string, expected: readonly [number, number] | undefined): string {
  const digits = written.replace(/[ ']/g, '');
  const commas = (digits.match(/,/g) ?? []).length;
  const points = (digits.match(/\./g) ?? []).length;
  if (commas === 0 && points <= 1) return digits;
  if (commas === 0) return /^\d{1,3}(\.\d{3})+$/.test(digits) ? digits.replaceAll('.', '') : unclear(whole);
  if (points === 1 && commas >= 1) {
    // Both signs: the last one is the decimal sign, the other groups thousands.
    const decimalIsComma = digits.lastIndexOf(',') > digits.lastIndexOf('.');
    const result = decimalIsComma ? digits.replaceAll('.', '').replace(',', '.') : digits.replaceAll(',', '');
    return (result.match(/[.,]/g) ?? []).length <= 1 ? result.replace(',', '.') : unclear(whole);
  }
  if (commas > 1) return /^\d{1,3}(,\d{3})+$/.test(digits) ? digits.replaceAll(',', '') : unclear(whole);
  const asDecimal = digits.replace(',', '.');
  if (!/^[1-9]\d{0,2},\d{3}$/.test(digits)) return asDecimal;
  const asThousands = digits.replace(',', '');
  const fits = (v: string): boolean =>
    expected !== undefined && Number(v) >= expected[0] && Number(v) <= expected[1];
  if (fits(asDecimal) !== fits(asThousands)) return fits(asDecimal) ? asDecimal : asThousands;
  return `!“${whole.trim()}” may mean ${asDecimal} or ${asThousands}: the comma is unclear`;
}

const unclear = (whole: string): string =>
  `!“${whole.trim()}” holds decimal signs that do not make one number`;
