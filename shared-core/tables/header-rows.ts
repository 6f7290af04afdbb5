import type { RawTable } from './types.ts';
import { isUnit } from './take-unit.ts';
import { takeIsotopologue, understandHeader } from './understand-header.ts';

/** Where the header stands and what it says of each column. */
export interface HeaderRows {
  /** Last row of the header; -1 where there is none. */
  readonly last: number;
  readonly texts: readonly string[];
}

/** Rows at the top among which the header is looked for. */
const headerRows = 15;

/**
 * Finds the header: the row with the most words that are known, with merged headings above it ("H35Cl" over "B0", "Be"), and rows of
 * units or isotopologues below it.
 */
export function findHeader(table: RawTable, width: number): HeaderRows {
  const rows = table.rows.map((row) => Array.from({ length: width }, (_, i) => row[i]?.text ?? ''));
  const best = bestRow(rows);
  if (best < 0) return { last: -1, texts: Array.from({ length: width }, () => '') };
  const own = rows[best]!;
  const above = best > 0 && isHeading(rows[best - 1]!) ? filled(rows[best - 1]!, own) : null;
  const below = best + 1 < rows.length ? belowOf(own, rows[best + 1]!) : null;
  const texts = own.map((text, i) => {
    const heading = above?.[i] ?? '';
    const named = text === '' ? heading : belongs(text, heading) ? `${text} ${heading}` : text;
    if (below === null || below[i] === '') return named;
    const base =
      named === '' && below.some((t) => takeIsotopologue(t).isotopologue !== null)
        ? filled(own, below)[i]!
        : named;
    return isUnit(below[i]!) ? `${base} (${below[i]!})` : `${base} ${below[i]!}`.trim();
  });
  return { last: below === null ? best : best + 1, texts };
}

function bestRow(rows: readonly (readonly string[])[]): number {
  let best = -1;
  let most = 1;
  rows.slice(0, headerRows).forEach((row, i) => {
    const known = row.filter((t) => t !== '' && understandHeader(t).role !== null).length;
    if (known > most) {
      most = known;
      best = i;
    }
  });
  return best;
}

/** A title row holds one cell that names no gas; a row of merged headings several, or gases. */
function isHeading(row: readonly string[]): boolean {
  const texts = row.filter((t) => t !== '');
  return texts.length >= 2 || texts.some((t) => takeIsotopologue(t).isotopologue !== null && t.length < 30);
}

/** A heading reaches to the right as far as its cells are blank and the row below goes on. */
function filled(heading: readonly string[], below: readonly string[]): string[] {
  let last = '';
  return heading.map((text, i) => {
    if (text !== '') last = text;
    return below[i] === '' ? text : last;
  });
}

/** Gas or quantity above a header belong to it; other headings ("Results") do not. */
function belongs(text: string, heading: string): boolean {
  if (heading === '' || heading === text) return false;
  const own = understandHeader(text);
  if (takeIsotopologue(heading).isotopologue !== null)
    return own.role?.role === 'quantity' || own.beside !== null;
  return (
    own.role?.role !== 'quantity' &&
    own.beside === null &&
    understandHeader(heading).role?.role === 'quantity'
  );
}

/** The row below the header, where it holds nothing but units, gases or words for value and uncertainty. */
function belowOf(header: readonly string[], row: readonly string[]): readonly string[] | null {
  const texts = row.filter((t) => t !== '');
  const fits = texts.filter(
    (t) => isUnit(bare(t)) || isGas(t) || /^(value|wert|valeur|valor|±|u|σ|uncertainty|error)$/i.test(t),
  );
  const bracketed = texts.filter((t) => /^[([].*[)\]]$/.test(t));
  const rest = texts.filter((t) => !fits.includes(t) && !bracketed.includes(t));
  if (fits.length < 2 || rest.length > 0) return null;
  // A long table may hold a gas and a unit in its first row of values.
  if (row.filter((t, i) => isUnit(bare(t)) && header[i] !== '').length === 0 && !texts.every(isGas))
    return null;
  return row[0] === '' || /^[([].*[)\]]$/.test(row[0]!) ? row.map(bare) : null;
}

const isGas = (text: string): boolean => {
  const taken = takeIsotopologue(text);
  return taken.isotopologue !== null && taken.text === '';
};

const bare = (text: string): string => text.replace(/^[([]|[)\]]$/g, '');
