import { displayUnit } from './quantities.ts';

/**
 * A value with its standard uncertainty, rounded by it: the uncertainty keeps two figures, the value as many places.
 *
 * formatMeasured(10.59237, 0.00021, 'cm-1') is "10.59237 ± 0.00021 cm⁻¹"; without an uncertainty seven figures are shown.
 */
export function formatMeasured(value: number, uncertainty: number | null, unit: string): string {
  const { number, plusMinus } = measuredParts(value, uncertainty);
  const body = plusMinus === null ? number : `${number} ± ${plusMinus}`;
  const power = powerOf(value);
  return `${power === 0 ? body : `(${body}) × 10${raised(power)}`} ${displayUnit(unit)}`;
}

/** Number and uncertainty as texts of equal places (in units of 10^n where `powerOf` says so). */
export function measuredParts(
  value: number,
  uncertainty: number | null,
): { number: string; plusMinus: string | null } {
  const power = powerOf(value);
  const v = Number(`${value}`) / 10 ** power;
  if (uncertainty === null || !(uncertainty > 0)) return { number: signed(trimmed(v)), plusMinus: null };
  const u = uncertainty / 10 ** power;
  const places = Math.min(12, Math.max(0, 1 - Math.floor(Math.log10(u) + 1e-12)));
  return { number: signed(v.toFixed(places)), plusMinus: u.toFixed(places) };
}

/** Power of ten that is written apart: for values below 1e-4 and above 1e7. */
export function powerOf(value: number): number {
  if (value === 0 || !Number.isFinite(value)) return 0;
  const magnitude = Math.floor(Math.log10(Math.abs(value)));
  return magnitude < -4 || magnitude > 6 ? magnitude : 0;
}

const raisedDigits = '⁰¹²³⁴⁵⁶⁷⁸⁹';
const raised = (n: number): string =>
  `${n < 0 ? '⁻' : ''}${Array.from(String(Math.abs(n)), (d) => d)
    .map((d) => raisedDigits[Number(d)]!)
    .join('')}`;
const trimmed = (v: number): string => String(Number(v.toPrecision(7)));
const signed = (text: string): string => text.replace('-', '−');
