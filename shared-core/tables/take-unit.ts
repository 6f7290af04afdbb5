import { displayUnit, quantities, unitFactor } from '../units/index.ts';

export interface TakenUnit {
  /** The header without its unit. */
  readonly text: string;
  readonly unit: string | null;
  /** As it was written, for people. */
  readonly unitText: string;
}

const places = [
  /[([{]\s*([^()[\]{}]+?)\s*[)\]}]\s*\??\s*$/,
  /\s*\/\s?\(([^()]+)\)$/,
  /\s\/\s?([^/]+(?:\/[^/]+)?)$/,
  /(?<=[\p{L}\d])\/\s?([^/]+(?:\/[^/]+)?)$/u,
  /,\s*([^,]+)$/,
  /\s(?:in|en)\s+(.+?)\s*$/i,
  /_(cm-?1|cm_1|per_cm|inv_?cm|pm|nm|angstrom|A|N_per_m|N\/m|Nm-?1|N_m-?1|GHz|kg_?m2)$/i,
  /\s([^\s]+ [^\s]+ [^\s]+)$/,
  /\s([^\s]+ [^\s]+)$/,
  /\s([^\s]+)$/,
  // Brackets in the middle of a sentence.
  /[([{]\s*([^()[\]{}]+?)\s*[)\]}]/,
  /\s(?:in|en)\s+([^\s,;]+)(?=[\s,;])/i,
];
/** "fundamental wavenumber" names a quantity, "in wavenumbers" a unit. */
const bareWords = places.slice(7, 10);
const spelledKeys: Readonly<Record<string, string>> = {
  cm1: 'cm-1', cm_1: 'cm-1', per_cm: 'cm-1', invcm: 'cm-1', inv_cm: 'cm-1', n_per_m: 'N/m', nm1: 'N m-1', 'nm-1': 'nm-1', n_m1: 'N m-1', 'n_m-1': 'N m-1', kg_m2: 'kg m2',
}; // prettier-ignore

/** Takes a unit in brackets, behind a slash, a comma, an underscore or "in" out of a header. */
export function takeUnit(written: string): TakenUnit {
  const header = written.replace(/[\s?:.]+$/, '');
  for (const pattern of places) {
    const match = pattern.exec(header);
    if (match === null) continue;
    const unitText = match[1]!.replace(/^(in|en|unit|einheit|unit[ée]|unidad)\b[:\s]*/i, '').trim();
    const unit = spelledKeys[unitText.toLowerCase()] ?? unitText;
    if (!isUnit(unit) || (bareWords.includes(pattern) && /wave|wellen/i.test(unit))) continue;
    const behind = header.slice(match.index + match[0].length);
    return {
      text: cleaned(`${header.slice(0, match.index)} ${behind}`),
      unit,
      unitText: displayUnit(unitText),
    };
  }
  return { text: cleaned(header), unit: null, unitText: '' };
}

/** True where some quantity has that unit. */
export function isUnit(unit: string): boolean {
  return Object.values(quantities).some((q) => unitFactor(unit, q.standardUnit) !== null);
}

const cleaned = (text: string): string =>
  text
    .replace(/\(\s*\)|\[\s*\]/g, ' ')
    .replace(/\s+/g, ' ')
    .replace(/^[\s:;,*-]+|[?:.,;*/ ]+$/g, '')
    .trim();
