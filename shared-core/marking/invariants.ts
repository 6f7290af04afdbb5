import { reducedMassU } from '../molecule/isotopologue.ts';
import {
  bondLengthFactor,
  forceConstantFactor,
  momentOfInertiaFactor,
} from '../molecule/physical-constants.ts';
import type { Isotopologue } from '../molecule/types.ts';
import type { MethodSettings } from '../reference/types.ts';
import type { QuantityKey } from '../units/types.ts';
import { fieldsOf } from './slips/fields.ts';
import { shown, symbols } from './slips/numbers.ts';
import type { SubmittedValue } from './types.ts';

export type InvariantId = 'I1' | 'I2' | 'I3' | 'I4' | 'I5' | 'I6' | 'I7' | 'I8';

/** One relation among a student's own numbers, each taken as the interval of its last digit. */
export interface InvariantResult {
  readonly id: InvariantId;
  readonly passed: boolean;
  readonly quantities: readonly QuantityKey[];
  /** The interval that the numbers allow, and the one that it has to meet. */
  readonly interval: readonly [number, number];
  readonly expected: readonly [number, number];
  readonly text: string;
}

type Interval = readonly [number, number];
type Intervals = ReadonlyMap<QuantityKey, Interval>;

/** Constants and intermediate results with few digits, relative: below this no relation is called broken. */
const computingSlack = 4e-4;
/** A fitted D lies about 2 % below the equilibrium one. */
const distortionWindow = 0.025;

const failureIsolates: Readonly<Record<InvariantId, string>> = {
  I1: 'the step to the bond length: mass, π, h, c or unit',
  I2: 'the step to the force constant',
  I3: 'the sign of αe, or an exchanged or mislabelled B',
  I4: 'the algebra of the anharmonicity',
  I5: 'a factor in D, or B_0 used for Be',
  I6: 'the algebra or the unit of the dissociation energies',
  I7: 'mixed-up isotopologues',
  I8: 'the moment of inertia against the bond length',
};

/**
 * Relations I1 to I6 and I8 among the values of one isotopologue; only those whose quantities were given.
 *
 * A relation fails only if no numbers inside the rounding intervals can satisfy it.
 */
export function checkInvariants(
  values: readonly SubmittedValue[],
  isotopologue: Isotopologue,
  settings: MethodSettings,
): InvariantResult[] {
  const intervals: Intervals = new Map(
    fieldsOf(values).map((f) => [f.key, [f.value - f.halfWidth, f.value + f.halfWidth]]),
  );
  const mass = reducedMassU(isotopologue, settings.masses);
  const masses = widened([mass, mass], computingSlack);
  const test = relation(intervals);
  const results = [
    test('I1', [settings.bondLengthFrom, 're'], ([b, r]) => bondLengthFactor / (b! * r! * r!), masses),
    test('I1', ['B0', 'r0'], ([b, r]) => bondLengthFactor / (b! * r! * r!), masses),
    forceConstant(test, masses),
    test('I3', ['Be', 'B0', 'alphaE'], ([be, b0, a]) => be! - b0! - a! / 2, zero),
    test('I3', ['Be', 'B1', 'alphaE'], ([be, b1, a]) => be! - b1! - 1.5 * a!, zero),
    test('I3', ['alphaE', 'B0', 'B1'], ([a, b0, b1]) => a! - b0! + b1!, zero),
    test('I4', ['omegaE', 'nu0', 'omegaExe'], ([w, n, x]) => w! - n! - 2 * x!, zero),
    test('I4', ['nu02', 'omegaE', 'omegaExe'], ([n2, w, x]) => n2! - 2 * w! + 6 * x!, zero),
    test('I5', ['D', 'Be', 'omegaE'], ([d, b, w]) => (d! * w! * w!) / (4 * b! ** 3), [
      1 - 2 * distortionWindow,
      1 + distortionWindow,
    ]),
    test(
      'I6',
      ['De', 'omegaE', 'omegaExe'],
      ([de, w, x]) => (4 * de! * x!) / (w! * w!),
      widened([1, 1], computingSlack),
    ),
    test(
      'I6',
      ['D0', 'De', 'omegaE', 'omegaExe'],
      ([d0, de, w, x]) => (d0! + w! / 2 - x! / 4) / de!,
      widened([1, 1], computingSlack),
    ),
    test(
      'I8',
      ['I', settings.bondLengthFrom],
      ([i, b]) => (i! * b!) / momentOfInertiaFactor,
      widened([1, 1], computingSlack),
    ),
  ];
  return results.filter((r) => r !== null);
}

/**
 * I7: two isotopologues of one molecule have the same re, and the same k where it is worked out from ωe.
 *
 * @param settings decide whether k has to agree: k(ν̃0) and r0 rightly differ between H and D.
 */
export function checkAcrossIsotopologues(
  a: readonly SubmittedValue[],
  b: readonly SubmittedValue[],
  settings: MethodSettings,
): InvariantResult[] {
  const keys: readonly { key: QuantityKey; slack: number }[] = [
    ...(settings.bondLengthFrom === 'Be' ? [{ key: 're' as const, slack: 1e-3 }] : []),
    ...(settings.forceConstantFrom === 'omegaE' && settings.anharmonicityFrom !== null
      ? [{ key: 'k' as const, slack: 3e-3 }]
      : []),
  ];
  const of = (values: readonly SubmittedValue[], key: QuantityKey): Interval | null => {
    const field = fieldsOf(values).find((f) => f.key === key);
    return field === undefined ? null : [field.value - field.halfWidth, field.value + field.halfWidth];
  };
  return keys.flatMap(({ key, slack }) => {
    const [first, second] = [of(a, key), of(b, key)];
    return first === null || second === null ? [] : [result('I7', [key], first, widened(second, slack))];
  });
}

const zero: Interval = [0, 0];

function relation(intervals: Intervals) {
  return (
    id: InvariantId,
    keys: readonly QuantityKey[],
    f: (values: readonly number[]) => number,
    expected: Interval,
  ): InvariantResult | null => {
    const own = keys.map((k) => intervals.get(k));
    if (own.some((i) => i === undefined)) return null;
    const corners = cornersOf(own as readonly Interval[]).map(f);
    return result(id, keys, [Math.min(...corners), Math.max(...corners)], expected);
  };
}

/** I2 holds with ν̃0 or with ωe; the better of the two counts. */
function forceConstant(test: ReturnType<typeof relation>, masses: Interval): InvariantResult | null {
  const mass = ([k, w]: readonly number[]): number => k! / (forceConstantFactor * w! * w!);
  const both = [test('I2', ['k', 'nu0'], mass, masses), test('I2', ['k', 'omegaE'], mass, masses)].filter(
    (r) => r !== null,
  );
  return both.find((r) => r.passed) ?? both[0] ?? null;
}

function result(
  id: InvariantId,
  keys: readonly QuantityKey[],
  interval: Interval,
  expected: Interval,
): InvariantResult {
  const passed = interval[0] <= expected[1] && expected[0] <= interval[1];
  const names = keys.map((k) => symbols[k]).join(', ');
  const range = ([low, high]: Interval): string =>
    low === high ? shown(low, 5) : `${shown(low, 5)} to ${shown(high, 5)}`;
  const text = passed
    ? `${names} agree with each other.`
    : `${names} do not agree with each other (${range(interval)} where ${range(expected)} is needed): that points at ${failureIsolates[id]}.`;
  return { id, passed, quantities: keys, interval, expected, text };
}

/** All corners of a box: the relations are monotonous in each number over its last digit. */
function cornersOf(box: readonly Interval[]): number[][] {
  return box.reduce<number[][]>((corners, [low, high]) => corners.flatMap((c) => [[...c, low], [...c, high]]), [[]]); // prettier-ignore
}

function widened([low, high]: Interval, relative: number): Interval {
  return [low - relative * Math.abs(low), high + relative * Math.abs(high)];
}
