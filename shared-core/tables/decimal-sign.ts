import type { Cell } from './types.ts';

/**
 * The decimal sign that a row of cells shows beyond doubt: "10,59" and "0,304" show a comma, "10.59" a point; "10,593" may be either.
 *
 * @returns null where no cell shows one, or where they differ.
 */
export function decimalSignOf(cells: readonly Cell[]): '.' | ',' | null {
  const signs = cells.flatMap((c): ('.' | ',')[] => {
    if (c.storedAsNumber) return [];
    const number = /^\s*[≈~+\-−–]?\s*(\d+)([.,])(\d+)(?![.,\d])/.exec(c.text);
    if (number === null || /;|[a-z]{3}/i.test(c.text.slice(number[0].length))) return [];
    const grouped = number[3]!.length === 3 && /^[1-9]\d{0,2}$/.test(number[1]!);
    return grouped && number[2] === ',' ? [] : [number[2] as '.' | ','];
  });
  return signs.length > 0 && signs.every((s) => s === signs[0]) ? signs[0]! : null;
}
