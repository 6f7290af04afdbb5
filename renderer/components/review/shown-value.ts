import type { MarkedValue } from '../../../shared-core/marking/types.ts';

/** What a person ruled on a value, as the review shows it. */
export interface ShownDecision {
  readonly kind: 'accepted' | 'points' | 'excused' | 'deferred';
  readonly points: number | null;
  readonly comment: string | null;
  readonly decidedAt: string | null;
}

/** One value of one submission, with its decision where there is one. */
export interface ShownValue {
  readonly id: string;
  readonly marked: MarkedValue;
  readonly decision: ShownDecision | null;
}

/** A flagged value asks a question that only a person answers. */
export function isFlagged(value: Pick<MarkedValue, 'agreement' | 'points'>): boolean {
  return value.agreement !== 'within' || value.points === null;
}

/** Flagged and neither decided nor excused: still waits. A deferred one waits too. */
export function isWaiting(value: ShownValue): boolean {
  if (!isFlagged(value.marked)) return false;
  return value.decision === null || value.decision.kind === 'deferred';
}

/** Points that count now: the decision's, else the marked ones; null while open. */
export function pointsNow(value: ShownValue): number | null {
  if (value.decision !== null && value.decision.kind !== 'deferred' && value.decision.points !== null)
    return value.decision.points;
  return value.marked.points;
}

/** Points as written: no needless zeros, at most two decimals. */
export function pointsText(points: number | null): string {
  return points === null ? '–' : String(Number(points.toFixed(2)));
}
