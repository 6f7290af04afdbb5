import { quoted, refuse } from '../refusal.ts';
import { point, writtenNumber } from '../text/written-number.ts';
import { recordOf, withoutComment, type JcampBlock } from './records.ts';

/** A number in a record of the header, and how finely it is written. */
export interface HeaderNumber {
  readonly value: number;
  /** One unit of the last digit written. */
  readonly unit: number;
  readonly line: number;
}

/** Size of one unit of the last digit of a written number: 0.01 for "3.25", 10 for "2.5E+2". */
export function lastDigitUnit(text: string): number {
  const [mantissa = '', exponent = '0'] = text.toLowerCase().split('e');
  const mark = mantissa.indexOf('.');
  const decimals = mark < 0 ? 0 : mantissa.length - mark - 1;
  return 10 ** (Number(exponent) - decimals);
}

/**
 * The number of a record, null where the block has no such record.
 * @throws RefusedFile when the record holds anything but one number
 */
export function headerNumber(
  block: JcampBlock,
  label: string,
  lines: readonly string[],
): HeaderNumber | null {
  const record = recordOf(block, label);
  if (!record) return null;
  let text = record.value;
  for (let i = record.bodyStart; i < record.bodyEnd; i++) {
    const more = withoutComment(lines[i]!);
    if (more === '') continue;
    if (text !== '') {
      refuse(
        'jcamp-stray-line',
        `Line ${i + 1} (${quoted(more)}) stands below ##${label}= where nothing belongs: the file is damaged, export it again.`,
        i + 1,
      );
    }
    text = more;
  }
  if (text === '') return null;
  const value = writtenNumber(text, 0, text.length, point);
  if (Number.isNaN(value)) {
    refuse(
      'jcamp-header-number',
      `##${label}= on line ${record.line} should be a number and is ${quoted(text)}: the file is damaged, export it again.`,
      record.line,
    );
  }
  return { value, unit: lastDigitUnit(text), line: record.line };
}

/** Refuses a header whose figure contradicts the data. */
export function refuseContradiction(
  code: string,
  label: string,
  stated: HeaderNumber,
  found: number,
  what: string,
): never {
  refuse(
    code,
    `##${label}= on line ${stated.line} says ${stated.value}, but ${what} ${Number(found.toPrecision(9))}: points are missing or altered, export the file again.`,
    stated.line,
  );
}
