import type { QuantityKey } from '../../units/types.ts';
import type { SubmittedValue } from '../types.ts';

/** A submitted number as it is weighed. */
export interface Field {
  readonly key: QuantityKey;
  readonly value: number;
  /** Half of its last digit: the number stands for this interval on both sides. */
  readonly halfWidth: number;
  /** Variance of its own rounding and of that of the submitted numbers it was worked out from. */
  readonly roundingVariance: number;
  /** True for what is computed with physical constants: constants and intermediate results with few digits blur it. */
  readonly computed: boolean;
  readonly submitted: SubmittedValue;
}

const computedKeys: ReadonlySet<QuantityKey> = new Set<QuantityKey>(['re', 'r0', 'k', 'I', 'mu', 'De', 'D0']);

/** No number is taken as known better than this, relative: spreadsheets show more digits than anybody means. */
const finestRelative = 2e-6;

/** Readable values as fields. */
export function fieldsOf(values: readonly SubmittedValue[]): Field[] {
  const readable = values.flatMap((submitted) =>
    submitted.value !== null && Number.isFinite(submitted.value) && submitted.value !== 0
      ? [{ submitted, value: submitted.value, halfWidth: halfWidthOf(submitted, submitted.value) }]
      : [],
  );
  const byKey = new Map(readable.map((r) => [r.submitted.quantity, r]));
  const square = (key: QuantityKey): number => (byKey.get(key)?.halfWidth ?? 0) ** 2 / 3;
  const relative = (key: QuantityKey): number => {
    const r = byKey.get(key);
    return r === undefined ? 0 : square(key) / r.value ** 2;
  };
  return readable.map(({ submitted, value, halfWidth }) => ({
    key: submitted.quantity,
    value,
    halfWidth,
    roundingVariance: halfWidth ** 2 / 3 + upstream(submitted.quantity, value, square, relative),
    computed: computedKeys.has(submitted.quantity),
    submitted,
  }));
}

function halfWidthOf(submitted: SubmittedValue, value: number): number {
  const finest = finestRelative * Math.abs(value);
  if (submitted.halfLastDigit !== null) return Math.max(submitted.halfLastDigit, finest);
  // A spreadsheet number: its zeros are lost, so it is at least as fine as the digits that are left.
  const digits = Number(value.toPrecision(12))
    .toExponential()
    .split('e')[0]!
    .replace('-', '')
    .replace('.', '').length;
  return Math.max(0.5 * 10 ** (Math.floor(Math.log10(Math.abs(value))) - digits + 1), finest);
}

/** Variance that a value takes over when it is worked out from rounded ones. */
function upstream(
  key: QuantityKey,
  value: number,
  square: (key: QuantityKey) => number,
  relative: (key: QuantityKey) => number,
): number {
  switch (key) {
    case 'alphaE':
      return square('B0') + square('B1');
    case 'Be':
      return square('B0') + square('alphaE') / 4;
    case 're':
    case 'I':
      return value ** 2 * relative('Be') * (key === 're' ? 0.25 : 1);
    case 'r0':
      return (value ** 2 * relative('B0')) / 4;
    case 'k':
      return 4 * value ** 2 * Math.max(relative('nu0'), relative('omegaE'));
    case 'omegaE':
      return square('nu0') + 4 * square('omegaExe');
    case 'De':
    case 'D0':
      return value ** 2 * (relative('omegaExe') + 4 * relative('omegaE'));
    default:
      return 0;
  }
}
