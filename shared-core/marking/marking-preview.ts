import type { QuantityKey } from '../units/types.ts';
import { symbols } from './slips/numbers.ts';
import type { MarkedSubmission, MarkedValue } from './types.ts';

/** A value whose marking would change. */
export interface ValueChange {
  readonly isotopologue: string;
  readonly quantity: QuantityKey;
  readonly before: Pick<MarkedValue, 'agreement' | 'points' | 'of'> | null;
  readonly after: Pick<MarkedValue, 'agreement' | 'points' | 'of'> | null;
  readonly text: string;
}

/** A submission whose marking would change. */
export interface MarkingChange {
  readonly student: string;
  readonly attempt: number;
  readonly pointsBefore: number | null;
  readonly pointsAfter: number | null;
  readonly changes: readonly ValueChange[];
}

/**
 * What a changed scheme would change: who, by how much and why. Submissions are matched by student and attempt; those that stay the
 * same are left out.
 */
export function markingPreview(
  before: readonly MarkedSubmission[],
  after: readonly MarkedSubmission[],
): MarkingChange[] {
  const id = (m: MarkedSubmission): string => JSON.stringify([m.submission.student, m.submission.attempt]);
  const old = new Map(before.map((m) => [id(m), m]));
  return after.flatMap((now) => {
    const then = old.get(id(now));
    const changes = changesOf(then?.values ?? [], now.values);
    if (changes.length === 0 && then?.points === now.points) return [];
    return [
      {
        student: now.submission.student,
        attempt: now.submission.attempt,
        pointsBefore: then?.points ?? null,
        pointsAfter: now.points,
        changes,
      },
    ];
  });
}

function changesOf(before: readonly MarkedValue[], after: readonly MarkedValue[]): ValueChange[] {
  const id = (v: MarkedValue): string => `${v.isotopologue} ${v.quantity}`;
  const ids = [...new Set([...after, ...before].map(id))];
  return ids.flatMap((one) => {
    const then = before.find((v) => id(v) === one) ?? null;
    const now = after.find((v) => id(v) === one) ?? null;
    const value = now ?? then;
    if (
      value === null ||
      (then?.agreement === now?.agreement && then?.points === now?.points && then?.of === now?.of)
    )
      return [];
    const brief = (v: MarkedValue | null): ValueChange['before'] =>
      v === null ? null : { agreement: v.agreement, points: v.points, of: v.of };
    return [
      {
        isotopologue: value.isotopologue,
        quantity: value.quantity,
        before: brief(then),
        after: brief(now),
        text: why(value, then, now),
      },
    ];
  });
}

function why(value: MarkedValue, then: MarkedValue | null, now: MarkedValue | null): string {
  const name = `${symbols[value.quantity]} of ${value.isotopologue}`;
  if (then === null) return `${name} is asked for now.`;
  if (now === null) return `${name} is no longer asked for.`;
  const reasons = [
    ...(then.method !== now.method ? [`method ${then.method ?? 'none'} → ${now.method ?? 'none'}`] : []),
    ...(then.tolerance?.full !== now.tolerance?.full || then.tolerance?.part !== now.tolerance?.part
      ? ['tolerance changed']
      : []),
    ...(then.reference?.value !== now.reference?.value ? ['reference by the prescribed method changed'] : []),
    ...(then.carriedForward !== now.carriedForward
      ? [now.carriedForward ? 'carried forward now' : 'no longer carried forward']
      : []),
    ...(then.of !== now.of ? [`points ${then.of} → ${now.of}`] : []),
  ];
  const points = (v: MarkedValue): string => (v.points === null ? 'open' : String(v.points));
  return `${name}: ${then.agreement} → ${now.agreement}, ${points(then)} → ${points(now)}${reasons.length > 0 ? ` (${reasons.join('; ')})` : ''}.`;
}
