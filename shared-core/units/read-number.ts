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
  /** Decimal sign that the writer uses elsewhere: settles the same. */
  readonly decimalSign?: '.' | ',' | null;
}

const superscripts: Readonly<Record<string, string>> = { '⁰': '0', '¹': '1', '²': '2', '³': '3', '⁴': '4', '⁵': '5', '⁶': '6', '⁷': '7', '⁸': '8', '⁹': '9', '⁻': '-', '⁺': '+' }; // prettier-ignore
const notGiven =
  /^(|-+|[–—]+|\/|n\/?a|n\. ?a\.?|none|keine?|k\. ?a\.?|nil|\?+|\.+|not (given|determined|measured)|n\.? ?d\.?|s\/d|nan|null)$/i;

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
    .replace(/[’‘ʼ]/g, "'")
    .replace(/[，]/g, ',')
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
  const written = plain(text);
  const unreadable = (reason: string): ReadNumberOutcome => ({ state: 'unreadable', reason });
  if (notGiven.test(written)) return { state: 'not given' };
  const parts = partsOf(written);
  if (parts === null) return unreadable(`“${text.trim()}” does not begin with a number`);
  if (parts === 'unclear power')
    return unreadable(`“${text.trim()}”: the power of ten may belong to one number or to both`);
  const digits = decimal(parts.mantissa, text, options, parts.power !== null);
  if (digits.startsWith('!')) return unreadable(digits.slice(1));
  const exponent = parts.power ?? 0;
  const value = parts.sign * Number(`${digits}e${exponent}`);
  if (!Number.isFinite(value)) return unreadable(`“${text.trim()}” is beyond any number`);
  if (/^\s*\d/.test(parts.rest)) return unreadable(`“${text.trim()}” holds more than one number`);
  const places = digits.includes('.') ? digits.length - digits.indexOf('.') - 1 : 0;
  const uncertainty = uncertaintyOf(parts, value, places);
  if (uncertainty !== null && !Number.isFinite(uncertainty))
    return unreadable(`the uncertainty in “${text.trim()}” cannot be read`);
  const stored = options.storedAsNumber === true;
  const bare = digits.replace('.', '').replace(/^0+/, '');
  return {
    state: 'number',
    number: {
      value,
      figures: stored ? null : Math.max(1, bare.length),
      halfLastDigit: stored ? null : Number(`1e${exponent - places}`) / 2,
      uncertainty,
      rest: parts.rest.trim(),
    },
  };
}

interface Parts {
  readonly sign: 1 | -1;
  readonly mantissa: string;
  readonly power: number | null;
  /** In brackets behind the digits: "(3)" counts last digits, "(0.03)" is a number of its own. */
  readonly bracket: string | null;
  readonly plusMinus: string | null;
  /** Power of ten behind the uncertainty. */
  readonly plusMinusPower: number;
  readonly rest: string;
}

const bracketPattern = /^\s?\((\d+(?:[.,]\d+)?)\)/;
const plusMinusPattern = /^\s*(?:±|\+\s*\/?\s*-)\s*((?:\d[\d.,]*|[.,]\d+)\s?%?)/;

function partsOf(written: string): Parts | 'unclear power' | null {
  // "(1.2746 ± 0.0003) × 10⁻¹⁰": the outer brackets go, what is behind them belongs to both numbers.
  const enclosed = /^\(([^()]*(?:±|\+\s*\/?\s*-)[^()]*)\)/.exec(written);
  let rest = enclosed === null ? written : `${enclosed[1]!.trim()} ${written.slice(enclosed[0].length)}`;
  const take = (pattern: RegExp): RegExpExecArray | null => {
    const match = pattern.exec(rest);
    if (match !== null) rest = rest.slice(match[0].length);
    return match;
  };
  const number = take(numberPattern);
  if (number === null) return null;
  const bracket = take(bracketPattern);
  const powerBefore = take(powerPattern);
  let plus = take(plusMinusPattern);
  const powerBehind = powerBefore === null ? take(powerPattern) : plus === null ? null : take(powerPattern);
  if (plus === null && bracket === null) {
    // "10.59 cm-1 ± 0.02": the unit stands between.
    const between = /^(\s*[^\d\s±][^±]*?)(\s*(?:±|\+\s*\/?\s*-)\s*.*)$/.exec(rest);
    const late = between === null ? null : plusMinusPattern.exec(between[2]!);
    if (between !== null && late !== null) {
      plus = late;
      const behind = between[2]!.slice(late[0].length).trim();
      rest = behind === '' || behind === between[1]!.trim() ? between[1]! : `${between[1]!} ${behind}`;
    }
  }
  const shared =
    powerBefore === null && powerBehind !== null
      ? enclosed !== null || plus === null || isShared(number[2]!, plus[1]!, exponentOf(powerBehind))
      : false;
  if (shared === null) return 'unclear power';
  const power = powerBefore ?? (shared ? powerBehind : null);
  return {
    sign: number[1] === '-' ? -1 : 1,
    mantissa: number[2]!,
    power: power === null ? null : exponentOf(power),
    bracket: bracket?.[1] ?? null,
    plusMinus: plus?.[1]!.trim() ?? null,
    plusMinusPower: plus === null || powerBehind === null ? 0 : exponentOf(powerBehind),
    rest,
  };
}

/**
 * "1.2746 ± 0.0003 × 10⁻¹⁰": the power belongs to both numbers where the uncertainty alone would be far below the last digit given;
 * "10.59 ± 2 × 10⁻²": to the uncertainty where that is of the size of the last digit; null between.
 */
function isShared(mantissa: string, plusMinus: string, power: number): boolean | null {
  const places = /[.,](\d+)$/.exec(mantissa)?.[1]!.length ?? 0;
  const inLastDigits = Number(plusMinus.replace(',', '.').replace('%', '')) * 10 ** (power + places);
  if (inLastDigits < 0.01) return true;
  return inLastDigits >= 0.1 && inLastDigits < 10 ** (places + 1) ? false : null;
}

const exponentOf = (match: RegExpExecArray): number => Number(match[1] ?? match[2]);

/** The uncertainty in the unit of the number; null where none is written, NaN where it cannot be read. */
function uncertaintyOf(parts: Parts, value: number, places: number): number | null {
  const power = parts.power ?? 0;
  const number = (t: string): number => Number(t.trim().replace(',', '.'));
  if (parts.bracket !== null) {
    if (/[.,]/.test(parts.bracket)) return number(`${parts.bracket.replace(',', '.')}e${power}`);
    return Number(`${parts.bracket}e${power - places}`);
  }
  if (parts.plusMinus === null) return null;
  if (parts.plusMinus.endsWith('%')) return (Math.abs(value) * number(parts.plusMinus.slice(0, -1))) / 100;
  return number(`${parts.plusMinus.replace(',', '.')}e${parts.plusMinusPower}`);
}

/** Digits with one point; a text that begins with "!" says why they cannot be read. */
function decimal(
  written: string,
  whole: string,
  { expected, decimalSign }: ReadNumberOptions,
  hasPower: boolean,
): string {
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
  // Nobody groups thousands before a power of ten.
  if (hasPower || decimalSign === ',') return asDecimal;
  const asThousands = digits.replace(',', '');
  if (decimalSign === '.') return asThousands;
  const fits = (v: string): boolean =>
    expected !== undefined && Number(v) >= expected[0] && Number(v) <= expected[1];
  if (fits(asDecimal) !== fits(asThousands)) return fits(asDecimal) ? asDecimal : asThousands;
  return `!“${whole.trim()}” may mean ${asDecimal} or ${asThousands}: the comma is unclear`;
}

const unclear = (whole: string): string =>
  `!“${whole.trim()}” holds decimal signs that do not make one number`;
