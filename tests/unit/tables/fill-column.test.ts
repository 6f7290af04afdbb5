import { describe, expect, it } from 'vitest';
import { fillColumn } from '../../../shared-core/tables/index.ts';

const bytesOf = (text: string): Uint8Array => Uint8Array.from(text, (c) => c.charCodeAt(0));
const textOf = (bytes: Uint8Array): string => Array.from(bytes, (b) => String.fromCharCode(b)).join('');
const request = (values: Record<string, string>, separator: ',' | ';' = ',') => ({
  keyColumn: 'ID', targetColumn: 'Lab 4', values: new Map(Object.entries(values)), separator,
}); // prettier-ignore

describe('the instructor’s own file', () => {
  it('gets one column filled and keeps every other byte', () => {
    const before =
      '\xef\xbb\xbfterm 2,,,\r\n"ID",Name,"Lab 4",note\r\nS1,"M\xfcller, ""Ida""",,"two\r\nlines"\nS2,B, ,\r\nS3,C,old,x';
    const outcome = fillColumn(bytesOf(before), request({ S1: '4.5', S3: '-1', S9: '3' }));
    if (!outcome.ok) throw new Error(outcome.reason);
    expect(textOf(outcome.bytes)).toBe(
      '\xef\xbb\xbfterm 2,,,\r\n"ID",Name,"Lab 4",note\r\nS1,"M\xfcller, ""Ida""",4.5,"two\r\nlines"\nS2,B, ,\r\nS3,C,-1,x',
    );
    expect([outcome.filled, outcome.missing]).toEqual([['S1', 'S3'], ['S9']]);
  });

  it('gets decimal commas quoted where the comma separates, and formulas made harmless', () => {
    const filled = fillColumn(bytesOf('ID,Lab 4\nS1,\nS2,\n'), request({ S1: '4,5', S2: '=1+1' }));
    expect(filled.ok && textOf(filled.bytes)).toBe('ID,Lab 4\nS1,"4,5"\nS2,\'=1+1\n');
    const semicolons = fillColumn(bytesOf('ID;Lab 4\nS1;\n'), request({ S1: '4,5' }, ';'));
    expect(semicolons.ok && textOf(semicolons.bytes)).toBe('ID;Lab 4\nS1;4,5\n');
  });

  it.each([
    ['ID,Lab\nS1,\n', /No row of the file/],
    ['ID,Lab 4,Lab 4\nS1,,\n', /Two columns/],
    ['ID,Lab 4\nS1,\nS1,\n', /Two rows/],
    ['ID,Name,Lab 4\nS1\n', /ends before the column/],
    ['ID,Lab 4\n"S1,\n', /does not end/],
    ['I\0D', /UTF-16/],
  ])('is left alone with a sentence where it cannot be filled surely: %j', (text, reason) => {
    const outcome = fillColumn(bytesOf(text), request({ S1: '1' }));
    expect(outcome.ok ? '' : outcome.reason).toMatch(reason);
  });
});
