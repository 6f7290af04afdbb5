import type { Tolerance } from './types.ts';

/** A tolerance is never tighter than this many standard uncertainties of the reference. */
const leastInReferenceUncertainties = 2;

/**
 * Half width of an accepted range, in the unit of the value.
 *
 * Absolute: as it stands; relative: of |reference|; sigmas: of √(u² + s²) with u of the reference and s stated by the student.
 * Never less than 2u: a reference cannot judge more finely than it is known.
 *
 * @throws RangeError where the tolerance is not a positive number.
 */
export function toleranceHalfWidth(
  tolerance: Tolerance,
  reference: { readonly value: number; readonly uncertainty: number | null },
  studentUncertainty: number | null = null,
): number {
  const u = reference.uncertainty ?? 0;
  const width = rawWidth(tolerance, reference.value, Math.hypot(u, studentUncertainty ?? 0));
  return Math.max(width, leastInReferenceUncertainties * u);
}

function rawWidth(tolerance: Tolerance, value: number, combined: number): number {
  const [kind, amount] = Object.entries(tolerance)[0] as [string, number];
  if (!(amount > 0)) throw new RangeError(`tolerance: expected a positive number, got ${amount}`);
  switch (kind) {
    case 'absolute':
      return amount;
    case 'relative':
      return amount * Math.abs(value);
    case 'sigmas':
      return amount * combined;
    default:
      throw new RangeError(`tolerance: expected absolute, relative or sigmas, got ${kind}`);
  }
}

/**
 * How far the rounding of a submitted number moves the limit of the accepted range.
 *
 * Every number stands for an interval of half its last digit h on both sides. Down to the least number of figures that the scheme asks
 * for, the interval has to meet the accepted range: limit + h. With fewer figures it has to lie inside, wherever in it the unrounded
 * value stood: limit − h. So who rounds harder than asked gains nothing by it. Zero where the figures are unknown or none are asked.
 */
export function roundingAllowance(
  value: number,
  halfLastDigit: number | null,
  leastFigures: number | null,
): number {
  if (leastFigures === null || halfLastDigit === null || value === 0) return 0;
  const least = halfDigitAt(value, leastFigures);
  return halfLastDigit <= least * (1 + 1e-9) ? halfLastDigit : -halfLastDigit;
}

/** Half of the last digit of a number written to so many significant figures. */
export function halfDigitAt(value: number, figures: number): number {
  return 0.5 * 10 ** (Math.floor(Math.log10(Math.abs(value))) - figures + 1);
}
