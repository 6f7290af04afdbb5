import { abscissaOf, ordinateOf } from '../words.ts';

const aboutAbscissa =
  /^\W*(?:x\b|x[-_ ]?(?:axis|units?|label|data|min|max|start|end)|abscissa|abszisse|abscisse|wave|wellen|range|bereich|start|end\b|first|last|from|min\b|max\b|nombre|n[uú]mero|longueur|longitud)/i;
const aboutOrdinate =
  /^\W*(?:y\b|y[-_ ]?(?:axis|units?|label|data)|ordinate|ordonn|ordenada|data ?type|display|final|signal|mode\b)/i;

/** What stands behind the first colon, equals sign, comma, semicolon or tab; the whole line where there is none. */
function afterName(line: string): string {
  return line.replace(/^[^=:,;\t]*[=:,;\t]/, '').trim();
}

/**
 * What the header says about the abscissa where no name above the column does: the first line that begins with a word
 * for it and holds a unit or quantity (not one that speaks of the laser).
 */
export function abscissaFromHeader(header: readonly string[]): string {
  const line = header.find(
    (each) => aboutAbscissa.test(each) && !/laser/i.test(each) && abscissaOf(each) !== null,
  );
  return line?.trim().slice(0, 80) ?? '';
}

const usable = ['absorbance', 'transmittance', 'percent-transmittance'];

/**
 * What the header says about the ordinate where no name above the column does: a line that begins with a word for it;
 * else what all lines that name absorbance or transmittance agree on. A remark on a background or on counts of scans
 * is no statement about the ordinate.
 */
export function ordinateFromHeader(header: readonly string[]): string {
  const stated = header.find((each) => aboutOrdinate.test(each) && ordinateOf(afterName(each)) !== null);
  if (stated) return afterName(stated);
  const mentions = header.filter((each) => each.length < 80 && usable.includes(ordinateOf(each) ?? ''));
  const kinds = new Set(mentions.map((each) => ordinateOf(each)));
  return kinds.size === 1 ? mentions[0]!.trim() : '';
}
