import { isotopologue as isotopologueNamed, isotopologuesOf } from '../molecule/index.ts';
import { quantities, unitFactor } from '../units/index.ts';
import type { QuantityKey } from '../units/types.ts';
import { besideWords, quantityWords, roleWords, sentenceRoles, withUncertainty } from './header-words.ts';
import { takeUnit } from './take-unit.ts';
import type { ColumnRole } from './types.ts';

export type QuantityRole = Extract<ColumnRole, { role: 'quantity' }>;

/** What a header alone says. */
export interface HeaderReading {
  readonly role: ColumnRole | null;
  readonly reason: string;
  /** Further readings that fit as well. */
  readonly alternatives: readonly ColumnRole[];
  /** The quantity beside which the column stands (its uncertainty, its literature value, its mark); null for all other columns. */
  readonly beside: QuantityRole | null;
}

/** Reads one header: role, quantity, unit, isotopologue. */
export function understandHeader(header: string): HeaderReading {
  const { text, isotopologue } = takeIsotopologue(plainHeader(header));
  const { text: bare, unit, unitText } = takeUnit(text);
  const plain = roleWords.slice(0, -sentenceRoles).find(([, pattern]) => pattern.test(bare))?.[0];
  if (plain !== undefined && !(plain === 'wavenumber' && unit !== null && /^(ν̃|ν|nu)$/i.test(bare)))
    return { role: { role: plain }, reason: `“${header}” is a word for it`, alternatives: [], beside: null };
  const kind = withUncertainty.test(text) ? undefined : besideWords.find(([, pattern]) => pattern.test(text));
  const inner =
    kind === undefined ? bare : (/\(([^()]+)\)\s*$/.exec(bare)?.[1] ?? bare.replace(/^[δΔσ±]\s*/i, ''));
  const fits = quantityWords.filter(([, pattern]) => pattern.test(inner)).map(([key]) => key);
  const first = chosen(inner, fits, unit);
  const as = (key: QuantityKey): QuantityRole => ({
    role: 'quantity',
    quantity: key,
    unit: ownUnit(key, unit),
    isotopologue,
  });
  if (kind !== undefined) return besideReading(header, kind[0], first === undefined ? null : as(first));
  if (first === undefined) return otherReading(header, bare, unit, as);
  const parts = [`“${bare}” is ${quantities[first].symbol}`];
  if (unit !== null) parts.push(`unit “${unitText}”`);
  if (isotopologue !== null) parts.push(`for ${isotopologue}`);
  const alternatives = vague(inner, first).filter((k) => k !== first);
  return { role: as(first), reason: parts.join(', '), alternatives: alternatives.map(as), beside: null };
}

/** A column beside a value is never taken as the value. */
function besideReading(header: string, kind: string, beside: QuantityRole | null): HeaderReading {
  const role: ColumnRole = { role: kind === 'uncertainty' ? 'uncertainty' : 'ignore' };
  const of = beside === null ? '' : ` of ${quantities[beside.quantity].symbol}`;
  return {
    role,
    reason: `“${header}” is a ${kind}${of}, no submitted value`,
    alternatives: beside === null ? [] : [beside],
    beside,
  };
}

/** Words anywhere in a sentence; else a column with a unit that some quantity has, which is asked about. */
function otherReading(
  header: string,
  bare: string,
  unit: string | null,
  as: (key: QuantityKey) => QuantityRole,
): HeaderReading {
  const role = roleWords.slice(-sentenceRoles).find(([, pattern]) => pattern.test(bare))?.[0];
  if (role !== undefined)
    return { role: { role }, reason: `“${header}” speaks of it`, alternatives: [], beside: null };
  const reason =
    header.trim() === '' ? 'the column has no header' : `“${header}” is no word that is known here`;
  if (unit === null) return { role: null, reason, alternatives: [], beside: null };
  const keys = (Object.keys(quantities) as QuantityKey[]).filter(
    (k) => unitFactor(unit, quantities[k].standardUnit) !== null,
  );
  return { role: null, reason: `${reason}, but it has a unit`, alternatives: keys.map(as), beside: null };
}

/** "De" in reciprocal centimetres is the dissociation energy; a bare "B" or "rotational constant" may be B_0 as well. */
function vague(bare: string, first: QuantityKey): QuantityKey[] {
  const equilibrium = /equilib|gleichg|[ée]quilib/i.test(bare);
  if (/^d_?e$/i.test(bare)) return ['De', 'D'];
  if (/^d_?0$/i.test(bare)) return ['D0', 'D'];
  if (/^b$/i.test(bare)) return ['Be', 'B0'];
  if (first === 'Be' && !equilibrium && !namesSymbol(bare, 'B') && /rotation|rotacional/i.test(bare))
    return ['Be', 'B0'];
  if (first === 're' && !equilibrium && !namesSymbol(bare, 'r')) return ['re', 'r0'];
  if (first === 'omegaE' && /^(ω|omega|w)$|vibration|schwingung/i.test(bare) && !/harmoni/i.test(bare))
    return ['omegaE', 'nu0'];
  return [];
}

const symbolPattern = /(?<![\p{L}\d])(B|r|D|k|I|α|ω|ν̃|ν|ṽ|alpha|omega|nu|omegae?x)_?(e|0|1|2)(?![\p{L}\d])/u;
const namesSymbol = (bare: string, letter: string): boolean =>
  new RegExp(`(?<![A-Za-z])${letter}_?(e|eq)(?![A-Za-z])`, 'i').test(bare);

function chosen(bare: string, fits: readonly QuantityKey[], unit: string | null): QuantityKey | undefined {
  const symbol = symbolPattern.exec(bare)?.[0];
  const named = symbol === undefined ? undefined : quantityWords.find(([, p]) => p.test(symbol))?.[0];
  // A sentence that names the symbol means it: "What is your value for the rotational constant B_0?"
  if (named !== undefined && (bare.includes(' ') || fits.length === 0)) return named;
  if (/^(ν̃|ν|nu)$/i.test(bare) && unit !== null) return 'nu0';
  return fits.find((k) => unit === null || unitFactor(unit, quantities[k].standardUnit) !== null) ?? fits[0];
}

const ownUnit = (key: QuantityKey, unit: string | null): string | null =>
  unit !== null && unitFactor(unit, quantities[key].standardUnit) !== null ? unit : null;

const raised: Readonly<Record<string, string>> = { '⁰': '0', '¹': '1', '²': '2', '³': '3', '⁴': '4', '⁵': '5', '⁶': '6', '⁷': '7', '⁸': '8', '⁹': '9' }; // prettier-ignore
const lowered: Readonly<Record<string, string>> = { '₀': '0', '₁': '1', '₂': '2', ₑ: 'e' };

/** Symbols as plain letters: typeset formulas, subscripts, primes, "ω_e x_e" in one. */
function plainHeader(header: string): string {
  return header
    .normalize('NFC')
    .replace(/\\(mathrm|text|rm|it|tilde|bar|left|right)\b/g, '')
    .replace(/[$\\]/g, '')
    .replace(/([_^])\s*\{\s*([^{}]*?)\s*\}/g, '$1$2')
    .replace(/[{}]/g, '')
    .replace(/[₀₁₂ₑ]/g, (c) => lowered[c]!)
    .replace(/\bB ?(''|"|″|”)/g, 'B0')
    .replace(/\bB ?['′’](?!\w)/g, 'B1')
    .replace(/(ω|\bomega|\bw)_?e?\s?[ *·⋅×]?\s?x_?e(?![a-z])/gi, 'omega_ex_e')
    .replace(/\((required|optional|pflichtfeld|obligatoire|obligatorio)\)|\*$/gi, '')
    .replace(/[“”„"«»]/g, '')
    .replace(/\s+/g, ' ')
    .trim();
}

/** Takes "H35Cl", "H-35Cl", "³⁵Cl", "DCl", "12C16O" out of a header. */
export function takeIsotopologue(header: string): { text: string; isotopologue: string | null } {
  const plain = header.replace(/[⁰¹²³⁴⁵⁶⁷⁸⁹]+(?=[A-Z])/g, (run) =>
    Array.from(run, (c) => c)
      .map((c) => raised[c]!)
      .join(''),
  );
  const spelled = plain.replace(
    /(?<![A-Za-z])([hd])(3[57])cl(?![A-Za-z])/gi,
    (_, a: string, n: string) => `${a.toUpperCase()}${n}Cl`,
  );
  const pattern = /(?<![A-Za-z])(?:(\d{1,3})?(H|D|C|N)[ -]?)(\d{1,3})?(Cl|Br|I|F|O)(?![A-Za-z])/;
  const match = pattern.exec(spelled);
  // "Student NO" and "Group NO." are numbers, no gas.
  if (match === null || (/^NO$/.test(match[0]) && !/\d|cm|\bB|gas/i.test(spelled)))
    return { text: plain, isotopologue: null };
  const name = `${match[1] ?? ''}${match[2]!}${match[3] ?? ''}${match[4]!}`;
  const gas = `${match[2]!}${match[4]!}`;
  const known =
    match[1] === undefined && match[3] === undefined ? isotopologuesOf(gas)[0] : isotopologueNamed(name);
  if (known === null || known === undefined) return { text: plain, isotopologue: null };
  const text = spelled
    .replace(match[0], ' ')
    .replace(/\b(of|for|von|für|de|du|del)\s*(?=$|[,;:(\[?]|\s(?:in|en)\s)/i, '')
    .replace(/\(\s*\)|\[\s*\]/g, '')
    .replace(/\s+/g, ' ')
    .trim();
  return { text: text.replace(/^[-_/,: ]+|[-_/,: ]+$/g, ''), isotopologue: known.name };
}
