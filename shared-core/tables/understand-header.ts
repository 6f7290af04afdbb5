import { isotopologue as isotopologueNamed, isotopologuesOf } from '../molecule/index.ts';
import { displayUnit, quantities, unitFactor } from '../units/index.ts';
import type { QuantityKey } from '../units/types.ts';
import { quantityWords, roleWords } from './header-words.ts';
import type { ColumnRole } from './types.ts';

/** What a header alone says. */
export interface HeaderReading {
  readonly role: ColumnRole | null;
  readonly reason: string;
  /** Further readings that fit as well. */
  readonly alternatives: readonly ColumnRole[];
}

const raised: Readonly<Record<string, string>> = { '⁰': '0', '¹': '1', '²': '2', '³': '3', '⁴': '4', '⁵': '5', '⁶': '6', '⁷': '7', '⁸': '8', '⁹': '9' }; // prettier-ignore
const subscripts: Readonly<Record<string, string>> = { '₀': '0', '₁': '1', '₂': '2', ₑ: 'e' };

/** Reads one header: role, quantity, unit, isotopologue. */
export function understandHeader(header: string): HeaderReading {
  const { text, isotopologue } = takeIsotopologue(header.normalize('NFC').trim());
  const { text: bare, unit, unitText } = takeUnit(text);
  const role = roleWords.find(([, pattern]) => pattern.test(bare))?.[0];
  if (role !== undefined) return { role: { role }, reason: `“${header}” is a word for it`, alternatives: [] };
  const fits = quantityWords.filter(([, pattern]) => pattern.test(bare)).map(([key]) => key);
  const first = chosen(bare, fits, unit);
  if (first === undefined) {
    return {
      role: null,
      reason: header === '' ? 'the column has no header' : `“${header}” is no word that is known here`,
      alternatives: [],
    };
  }
  const as = (key: QuantityKey): ColumnRole => ({
    role: 'quantity',
    quantity: key,
    unit: ownUnit(key, unit),
    isotopologue,
  });
  const parts = [`“${bare}” is ${quantities[first].symbol}`];
  if (unit !== null) parts.push(`unit “${unitText}”`);
  if (isotopologue !== null) parts.push(`for ${isotopologue}`);
  const alternatives = vague(bare, first).filter((k) => k !== first);
  return { role: as(first), reason: parts.join(', '), alternatives: alternatives.map(as) };
}

/** "De" in reciprocal centimetres is the dissociation energy, a bare "rotational constant" may be B_0 as well. */
function vague(bare: string, first: QuantityKey): QuantityKey[] {
  if (/^d_?e$/i.test(bare)) return ['De', 'D'];
  if (/^d_?0$/i.test(bare)) return ['D0', 'D'];
  if (first === 'Be' && !/e$|equilib|gleichg|[ée]quilib/i.test(bare) && /rotation|rotacional/i.test(bare))
    return ['Be', 'B0'];
  if (first === 're' && !/^r_?e|equilib|gleichg|[ée]quilib/i.test(bare)) return ['re', 'r0'];
  if (first === 'omegaE' && /^(ω|omega|w)$/i.test(bare)) return ['omegaE', 'nu0'];
  return [];
}

function chosen(bare: string, fits: readonly QuantityKey[], unit: string | null): QuantityKey | undefined {
  const symbol = /\b(B|r|D|k|alpha|omega|nu)_?(e|0|1|2)\b/.exec(bare);
  if (fits.length === 0 && symbol !== null) return quantityWords.find(([, p]) => p.test(symbol[0]))?.[0];
  // A sentence that names the symbol means it: "What is your value for the rotational constant B_0?"
  if (symbol !== null && bare.includes(' ')) {
    const named = quantityWords.find(([, p]) => p.test(symbol[0]))?.[0];
    if (named !== undefined) return named;
  }
  return fits.find((k) => unit === null || unitFactor(unit, quantities[k].standardUnit) !== null) ?? fits[0];
}

const ownUnit = (key: QuantityKey, unit: string | null): string | null =>
  unit !== null && unitFactor(unit, quantities[key].standardUnit) !== null ? unit : null;

/** Takes "H35Cl", "H-35Cl", "³⁵Cl", "DCl", "12C16O" out of a header. */
function takeIsotopologue(header: string): { text: string; isotopologue: string | null } {
  const plain = header.replace(/[⁰¹²³⁴⁵⁶⁷⁸⁹]+(?=[A-Z])/g, (run) =>
    Array.from(run, (c) => c)
      .map((c) => raised[c]!)
      .join(''),
  );
  const pattern = /(?<![A-Za-z])(?:(\d{1,3})?(H|D|C|N)[ -]?)(\d{1,3})?(Cl|Br|I|F|O)(?![A-Za-z])/;
  const match = pattern.exec(plain);
  if (match === null) return { text: plain, isotopologue: null };
  const name = `${match[1] ?? ''}${match[2]!}${match[3] ?? ''}${match[4]!}`;
  const gas = `${match[2]!}${match[4]!}`;
  const known =
    match[1] === undefined && match[3] === undefined ? isotopologuesOf(gas)[0] : isotopologueNamed(name);
  if (known === null || known === undefined) return { text: plain, isotopologue: null };
  const text = plain
    .replace(match[0], ' ')
    .replace(/\b(of|for|von|für|de|du|del)\s*(?=$|[,;:(\[?])/i, '')
    .replace(/\(\s*\)|\[\s*\]/g, '')
    .replace(/\s+/g, ' ')
    .trim();
  return { text: text.replace(/^[-_/,: ]+|[-_/,: ]+$/g, ''), isotopologue: known.name };
}

/** Takes a unit in brackets, behind a slash or behind "in" out of a header. */
function takeUnit(header: string): { text: string; unit: string | null; unitText: string } {
  const isUnit = (u: string): boolean =>
    Object.values(quantities).some((q) => unitFactor(u, q.standardUnit) !== null);
  const cleaned = (t: string): string =>
    t
      .replace(/[₀₁₂ₑ]/g, (c) => subscripts[c]!)
      .replace(/[?:.,; ]+$/g, '')
      .replace(/\s+/g, ' ')
      .trim();
  for (const pattern of [
    /[([{]([^()[\]{}]+)[)\]}]\s*\??\s*$/,
    /\s\/\s?([^/]+(?:\/[^/]+)?)$/,
    /\/\s?([^/\s]+)$/,
    /,\s*([^,]+)$/,
    /\s(?:in|en)\s+([^ ?]+(?: [^ ?]+)?)\s*\??$/i,
    /_(cm-?1|pm|nm|angstrom|A)$/i,
    /\s([^\s]+)$/,
  ]) {
    const match = pattern.exec(header);
    if (match === null) continue;
    const unitText = match[1]!.trim();
    const unit = unitText === 'cm1' ? 'cm-1' : unitText;
    if (isUnit(unit))
      return { text: cleaned(header.slice(0, match.index)), unit, unitText: displayUnit(unitText) };
  }
  return { text: cleaned(header), unit: null, unitText: '' };
}
