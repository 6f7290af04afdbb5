import { quoted, refuse } from '../refusal.ts';
import { point, writtenNumber } from '../text/written-number.ts';

/**
 * Decodes the lines [start, end) of an (XY..XY) list: plain numbers, the two of a pair separated by a comma or blanks,
 * pairs by a semicolon, blanks or a new line.
 * @throws RefusedFile with the line number where a number is damaged or lacks its partner
 */
export function decodePairs(
  lines: readonly string[],
  start: number,
  end: number,
): { abscissas: Float64Array; ordinates: Float64Array } {
  const abscissas: number[] = [];
  const ordinates: number[] = [];
  for (let i = start; i < end; i++) {
    const comment = lines[i]!.indexOf('$$');
    const text = comment < 0 ? lines[i]! : lines[i]!.slice(0, comment);
    const line = i + 1;
    for (const group of text.split(';')) {
      const cells = group.trim().split(/\s*,\s*|\s+/);
      if (cells.length === 1 && cells[0] === '') continue;
      if (cells.length % 2 === 1) {
        refuse(
          'jcamp-pair',
          `Line ${line} (${quoted(group)}) does not hold pairs of abscissa and ordinate: the file is damaged there, export it again.`,
          line,
        );
      }
      cells.forEach((cell, k) => {
        const missing = k % 2 === 1 && cell === '?';
        const value = writtenNumber(cell, 0, cell.length, point);
        if (Number.isNaN(value) && !missing) {
          refuse(
            'jcamp-character',
            `Line ${line} holds ${quoted(cell)} where a number belongs: the file is damaged there, export it again.`,
            line,
          );
        }
        (k % 2 === 0 ? abscissas : ordinates).push(value);
      });
    }
  }
  return { abscissas: Float64Array.from(abscissas), ordinates: Float64Array.from(ordinates) };
}
