const powersOfTen = Float64Array.from({ length: 23 }, (_, i) => Number(`1e${i}`));

export const comma = 44;
export const point = 46;
const zero = 48;
const nine = 57;
const minus = 45;
const plus = 43;
const minusSign = 0x2212;

function isDigit(code: number): boolean {
  return code >= zero && code <= nine;
}

/** Slow and exact: for more digits than a double holds, and large exponents. */
function byLibrary(text: string, start: number, end: number, decimalMark: number): number {
  let plain = text.slice(start, end).replace('\u2212', '-').replace(/[dD]/, 'e');
  if (decimalMark === comma) plain = plain.replace(',', '.');
  const value = Number(plain);
  return Number.isFinite(value) ? value : NaN;
}

/**
 * The number written in text[start, end), or NaN where that is not exactly one number: sign, digits, one decimal mark
 * (the code of "." or ","), exponent with e or d. Correctly rounded: up to 15 digits and powers to 22 are exact in
 * double arithmetic (one rounding), the rest goes through the library.
 */
export function writtenNumber(text: string, start: number, end: number, decimalMark: number): number {
  let at = start;
  let negative = false;
  const sign = text.charCodeAt(at);
  if (at < end && (sign === minus || sign === plus || sign === minusSign)) {
    negative = sign !== plus;
    at++;
  }
  let mantissa = 0;
  let digits = 0;
  let significant = 0;
  let decimals = 0;
  let seenMark = false;
  for (; at < end; at++) {
    const code = text.charCodeAt(at);
    if (isDigit(code)) {
      mantissa = mantissa * 10 + (code - zero);
      digits++;
      if (mantissa > 0) significant++;
      if (seenMark) decimals++;
    } else if (code === decimalMark && !seenMark) seenMark = true;
    else break;
  }
  if (digits === 0) return NaN;
  let exponent = 0;
  if (at < end) {
    const letter = text.charCodeAt(at) | 32;
    if (letter !== 101 && letter !== 100) return NaN;
    at++;
    const exponentSign = text.charCodeAt(at);
    const negativeExponent = exponentSign === minus || exponentSign === minusSign;
    if (at < end && (negativeExponent || exponentSign === plus)) at++;
    const from = at;
    while (at < end && isDigit(text.charCodeAt(at))) exponent = exponent * 10 + text.charCodeAt(at++) - zero;
    if (at === from || at < end || at - from > 4) return NaN;
    if (negativeExponent) exponent = -exponent;
  }
  const power = exponent - decimals;
  if (significant > 15 || power > 22 || power < -22) return byLibrary(text, start, end, decimalMark);
  const value = power < 0 ? mantissa / powersOfTen[-power]! : mantissa * powersOfTen[power]!;
  return negative ? -value : value;
}
