import { quoted, refuse } from '../refusal.ts';
import { point, writtenNumber } from '../text/written-number.ts';

/** What the lines of an X++(Y..Y) table hold, before factors; the checks on the abscissa are the caller's. */
export interface OrdinateTable {
  /** Ordinates in file order; NaN where the file has "?" (no value). */
  readonly ordinates: Float64Array;
  /** Per line: abscissa as written, its decimals, the index of the ordinate it belongs to, the line number. */
  readonly lines: readonly {
    readonly abscissa: number;
    readonly decimals: number;
    readonly index: number;
    readonly repeatsLast: boolean;
    readonly line: number;
  }[];
}

type Form = 'absolute' | 'difference';

function digitOf(code: number): number {
  return code >= 48 && code <= 57 ? code - 48 : -1;
}

/** First digit with sign that a squeezed letter stands for (@ A-I a-i); null: another character. */
function squeezedDigit(code: number): number | null {
  if (code === 64) return 0;
  if (code >= 65 && code <= 73) return code - 64;
  if (code >= 97 && code <= 105) return -(code - 96);
  return null;
}

/** First digit with sign of a difference (% J-R j-r). */
function differenceDigit(code: number): number | null {
  if (code === 37) return 0;
  if (code >= 74 && code <= 82) return code - 73;
  if (code >= 106 && code <= 114) return -(code - 105);
  return null;
}

/** First digit of a repeat count (S-Z s). */
function duplicateDigit(code: number): number | null {
  if (code >= 83 && code <= 90) return code - 82;
  return code === 115 ? 9 : null;
}

/** End of the digits (and one decimal point) that begin at `at`. */
function endOfDigits(text: string, at: number): number {
  let seenPoint = false;
  while (at < text.length) {
    const code = text.charCodeAt(at);
    if (digitOf(code) < 0 && (code !== point || seenPoint)) break;
    if (code === point) seenPoint = true;
    at++;
  }
  return at;
}

/**
 * End of a plain number: an exponent is E with a sign and up to three digits (the standard's rule, which keeps it apart
 * from the squeezed letter E), a small e only behind a decimal point.
 */
function endOfPlainNumber(text: string, at: number): number {
  const signed = text[at] === '+' || text[at] === '-' ? at + 1 : at;
  const end = endOfDigits(text, signed);
  if (end === signed) return at;
  const letter = text[end];
  if (letter !== 'E' && !(letter === 'e' && text.slice(signed, end).includes('.'))) return end;
  if (text[end + 1] !== '+' && text[end + 1] !== '-') return end;
  let last = end + 2;
  while (last < text.length && digitOf(text.charCodeAt(last)) >= 0) last++;
  const digits = last - end - 2;
  return digits >= 1 && digits <= 3 ? last : end;
}

class Ordinates {
  private values = new Float64Array(1024);
  count = 0;
  form: Form = 'absolute';
  step = 0;

  push(value: number): void {
    if (this.count === this.values.length) {
      const larger = new Float64Array(2 * this.values.length);
      larger.set(this.values);
      this.values = larger;
    }
    this.values[this.count++] = value;
  }
  last(): number {
    return this.values[this.count - 1]!;
  }
  all(): Float64Array {
    return this.values.slice(0, this.count);
  }
}

/** More points than this are refused: a repeat count may be damaged, and work stays bounded. */
const mostPoints = 2_000_000;

function damaged(code: string, text: string, line: number): never {
  refuse(code, `${text}: the file is damaged there, export or copy it again.`, line);
}

/** Value behind a letter that stands for sign and first digit. */
function lettered(text: string, at: number, first: number): { value: number; end: number } {
  const end = endOfDigits(text, at + 1);
  const negative = text.charCodeAt(at) >= 97;
  const size = writtenNumber(`${Math.abs(first)}${text.slice(at + 1, end)}`, 0, end - at, point);
  return { value: negative ? -size : size, end };
}

/** One ordinate at `at`, or a repeat count, applied to `into`; returns where it ends. `check`: compare, do not add. */
function readOrdinate(text: string, at: number, into: Ordinates, check: boolean, line: number): number {
  const code = text.charCodeAt(at);
  const difference = differenceDigit(code);
  const repeats = duplicateDigit(code);
  if ((difference !== null || repeats !== null) && (check || into.count === 0)) {
    damaged('jcamp-first-ordinate', `Line ${line} must begin with a full ordinate, but has ${quoted(text.slice(at, at + 12))}`, line); // prettier-ignore
  }
  if (difference !== null) {
    const { value, end } = lettered(text, at, difference);
    into.step = value;
    into.form = 'difference';
    into.push(into.last() + value);
    return end;
  }
  if (repeats !== null) {
    const { value, end } = lettered(text, at, repeats);
    const count = Math.abs(value);
    if (!Number.isInteger(count) || into.count + count > mostPoints) {
      damaged(
        'jcamp-repeat-count',
        `Line ${line} repeats an ordinate ${quoted(text.slice(at, end))} times`,
        line,
      );
    }
    for (let i = 1; i < count; i++) {
      into.push(into.form === 'difference' ? into.last() + into.step : into.last());
    }
    return end;
  }
  let value: number;
  let end: number;
  const squeezed = squeezedDigit(code);
  if (squeezed !== null) ({ value, end } = lettered(text, at, squeezed));
  else if (code === 63) {
    value = NaN;
    end = at + 1;
  } else {
    end = endOfPlainNumber(text, at);
    value = end > at ? writtenNumber(text, at, end, point) : NaN;
    if (Number.isNaN(value)) {
      damaged('jcamp-character', `Line ${line} holds ${quoted(text.slice(at, at + 12))}, which is no JCAMP-DX ordinate`, line); // prettier-ignore
    }
  }
  if (!check) into.push(value);
  else if (value !== into.last()) {
    damaged('jcamp-y-check', `On line ${line} the check value ${value} differs from the last ordinate before it, ${into.last()}`, line); // prettier-ignore
  }
  into.form = 'absolute';
  return end;
}

function isSeparator(code: number): boolean {
  return code === 32 || code === 9 || code === 44 || code === 59;
}

/**
 * Decodes the lines [start, end) of an X++(Y..Y) table in fixed, packed, squeezed, difference and duplicate form, freely
 * mixed. A line that follows a difference begins with the repeated last ordinate (the Y-check), which must be equal.
 * @throws RefusedFile with the line number at the first damage
 */
export function decodeOrdinates(lines: readonly string[], start: number, end: number): OrdinateTable {
  const into = new Ordinates();
  const table: { abscissa: number; decimals: number; index: number; repeatsLast: boolean; line: number }[] =
    [];
  for (let i = start; i < end; i++) {
    const comment = lines[i]!.indexOf('$$');
    const text = (comment < 0 ? lines[i]! : lines[i]!.slice(0, comment)).trim();
    if (text === '') continue;
    const line = i + 1;
    let at = endOfPlainNumber(text, 0);
    const abscissa = at > 0 ? writtenNumber(text, 0, at, point) : NaN;
    if (Number.isNaN(abscissa)) {
      damaged('jcamp-abscissa', `Line ${line} (${quoted(text)}) does not begin with an abscissa`, line);
    }
    const written = text.slice(0, at);
    const decimals = /e/i.test(written) ? 0 : written.includes('.') ? at - text.indexOf('.') - 1 : 0;
    let check = into.form === 'difference';
    table.push({ abscissa, decimals, index: check ? into.count - 1 : into.count, repeatsLast: check, line });
    const before = into.count;
    const repeated = check;
    while (at < text.length) {
      if (isSeparator(text.charCodeAt(at))) at++;
      else {
        at = readOrdinate(text, at, into, check, line);
        check = false;
      }
    }
    if (check || (into.count === before && !repeated)) {
      damaged(
        'jcamp-line-without-ordinates',
        `Line ${line} (${quoted(text)}) holds an abscissa and no ordinate`,
        line,
      );
    }
    if (into.count > mostPoints) {
      refuse(
        'too-many-points',
        `The file has more than ${mostPoints} points: export only the range with the bands.`,
        line,
      );
    }
  }
  return { ordinates: into.all(), lines: table };
}
