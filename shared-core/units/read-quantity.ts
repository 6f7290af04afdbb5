import { quantities, unitFactor, unitsThatFit } from './quantities.ts';
import { readNumber } from './read-number.ts';
import type { QuantityKey, StandardUnit } from './types.ts';

/** A quantity as a student wrote it, in its standard unit, or why it is none. */
export interface ReadQuantity {
  readonly text: string;
  readonly value: number | null;
  readonly uncertainty: number | null;
  readonly figures: number | null;
  readonly halfLastDigit: number | null;
  /** Unit in which it was written or which its column or the scheme gave. */
  readonly unit: string;
  readonly standardUnit: StandardUnit;
  readonly unreadableBecause: string | null;
  readonly given: boolean;
}

export interface ReadQuantityOptions {
  /** Unit of the column; a unit in the cell goes before it. */
  readonly headerUnit?: string | null;
  /** Unit of the scheme, where neither cell nor column has one. */
  readonly schemeUnit?: string | null;
  readonly storedAsNumber?: boolean;
  /** Decimal sign that the writer uses elsewhere. */
  readonly decimalSign?: '.' | ',' | null;
}

/**
 * Reads a cell as a quantity: number, unit, uncertainty, figures.
 *
 * The unit is the one in the cell, else of the column, else of the scheme; else cm-1 for wavenumbers and for the rest the only one in which
 * the size is usual. `unit` tells which was taken.
 *
 * @returns value in the standard unit; null with a reason where it cannot be read or its unit is unknown; null without one where nothing was given.
 */
export function readQuantity(
  text: string,
  key: QuantityKey,
  options: ReadQuantityOptions = {},
): ReadQuantity {
  const { standardUnit, usual } = quantities[key];
  const fallback = options.headerUnit ?? options.schemeUnit ?? standardUnit;
  const factorOfColumn = unitFactor(fallback, standardUnit) ?? 1;
  const wide: [number, number] = [usual[0] / factorOfColumn / 30, (usual[1] / factorOfColumn) * 30];
  const read = readNumber(text, {
    storedAsNumber: options.storedAsNumber ?? false,
    expected: wide,
    decimalSign: options.decimalSign ?? null,
  });
  const none = {
    text: text.trim(),
    value: null,
    uncertainty: null,
    figures: null,
    halfLastDigit: null,
    unit: fallback,
    standardUnit,
  };
  if (read.state === 'not given') return { ...none, unreadableBecause: null, given: false };
  if (read.state === 'unreadable') return { ...none, unreadableBecause: read.reason, given: true };
  const { number } = read;
  const written = cleanUnit(number.rest);
  const assumed = options.headerUnit ?? options.schemeUnit ?? unitBySize(number.value, key);
  if (written === '' && assumed === null) {
    const unreadableBecause = `“${text.trim()}” has no unit, and its size does not tell one for ${quantities[key].symbol}`;
    return { ...none, unreadableBecause, given: true };
  }
  const unit = written === '' ? assumed! : written;
  const factor = unitFactor(unit, standardUnit);
  if (factor === null) {
    return {
      ...none,
      unit,
      unreadableBecause: `“${unit}” is no unit of ${quantities[key].symbol}`,
      given: true,
    };
  }
  const scaled = (v: number | null): number | null => (v === null ? null : exact(v * factor, v, factor));
  return {
    text: text.trim(),
    value: scaled(number.value),
    uncertainty: scaled(number.uncertainty),
    figures: number.figures,
    halfLastDigit: scaled(number.halfLastDigit),
    unit,
    standardUnit,
    unreadableBecause: null,
    given: true,
  };
}

/** A product by a power of ten without the dust of binary fractions, so that a change of unit changes nothing. */
function exact(product: number, value: number, factor: number): number {
  const power = Math.log10(factor);
  const rounded = Math.round(power);
  return Math.abs(power - rounded) < 1e-12
    ? Number(
        `${value}e${rounded}`.replace(
          /e([+-]?\d+)e([+-]?\d+)$/,
          (_, a: string, b: string) => `e${Number(a) + Number(b)}`,
        ),
      )
    : product;
}

/** Wavenumbers without any unit are in cm-1 by common practice; else the only unit in which the size is usual. */
function unitBySize(value: number, key: QuantityKey): string | null {
  if (quantities[key].standardUnit === 'cm-1') return 'cm-1';
  const fits = unitsThatFit(value, key);
  return fits.length === 1 ? fits[0]! : null;
}

function cleanUnit(rest: string): string {
  return rest.replace(/^[\s,;()[\]]+|[\s,;()[\]]+$/g, '');
}
