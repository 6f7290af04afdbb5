import type { Isotopologue } from '../../molecule/types.ts';
import type { QuantityKey } from '../../units/types.ts';
import type {
  LineRule,
  MethodSettings,
  PrescribedConstants,
  PrescribedMethod,
  PrescribedValue,
} from '../types.ts';
import { constantsByMethod, valuesByMethod, type MethodExtra } from './constants-by-method.ts';
import type { Values } from './derive.ts';
import { admissibleLineSets, type CandidateLine, type KnownChoice, type LineSet } from './line-sets.ts';
import { methodName } from './primitives.ts';

/** Constants by one line set; all values of one student must agree with one and the same set. */
export interface LineSetValues {
  readonly set: LineSet;
  readonly values: Values;
}

/** The prescribed method over all admissible line sets. */
export interface MethodSpan {
  readonly constants: PrescribedConstants;
  readonly sets: readonly LineSetValues[];
  /** Why there is nothing, where there is nothing. */
  readonly reason: string | null;
}

/**
 * Constants by a prescribed method, with the span over the line sets that correct work may have used.
 *
 * `value` and `uncertainty` belong to the largest set, `low` and `high` span all sets; standard units.
 *
 * @param candidates lines of one band of one isotopologue of the file reference.
 * @param choice what is known of the student's own choice of lines.
 */
export function prescribedConstants(
  candidates: readonly CandidateLine[],
  method: PrescribedMethod,
  settings: MethodSettings,
  isotopologue: Isotopologue,
  rule: LineRule,
  choice: KnownChoice = { known: 'nothing' },
  extra: MethodExtra = {},
): MethodSpan {
  const name = methodName(method);
  const sets = admissibleLineSets(candidates, rule, choice)
    .map((set) => ({ set, values: valuesByMethod(set.lines, method, settings, isotopologue, extra) }))
    .filter(({ values }) => Object.keys(values).some((key) => key !== 'mu'));
  const first = sets[0];
  if (first === undefined) {
    return {
      constants: { method: name, values: {} },
      sets: [],
      reason: `the lines of ${isotopologue.name} in this file do not carry the method "${name}"`,
    };
  }
  const measured = constantsByMethod(first.set.lines, method, settings, isotopologue, extra);
  const values: Partial<Record<QuantityKey, PrescribedValue>> = {};
  for (const [key, value] of Object.entries(measured) as [QuantityKey, PrescribedValue][]) {
    const all = sets.flatMap((s) => s.values[key] ?? []);
    values[key] = { ...value, low: Math.min(value.value, ...all), high: Math.max(value.value, ...all) };
  }
  return { constants: { method: name, values }, sets, reason: null };
}
