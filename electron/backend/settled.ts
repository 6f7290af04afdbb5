import type { ReviewRow, ValueState } from '../../shared-core/contract/index.ts';
import type { MarkedSubmission, MarkedValue } from '../../shared-core/marking/types.ts';
import type { GradesRow } from '../../shared-core/tables/index.ts';
import { firstMarker } from './handlers/handler.ts';
import type { MarkedState } from './section-marks.ts';
import type { DecisionRow } from './store/submissions.ts';

const worth: Readonly<Record<MarkedValue['agreement'], number>> = {
  outside: 4,
  unreadable: 4,
  'no reference': 3,
  'part credit': 2,
  'not given': 1,
  within: 0,
};

const ownDecisions = (state: MarkedState, id: number): readonly DecisionRow[] =>
  (state.decisions.get(id) ?? []).filter((d) => d.marker === firstMarker);

/** Points of a value after a ruling: accepted ones keep theirs, excused ones leave the total, deferred ones stay open. */
function pointsAfter(value: MarkedValue, decision: DecisionRow | undefined): number | null {
  if (decision === undefined || decision.action === 'accept') return value.points;
  return decision.action === 'points' ? decision.points : null;
}

export function valueState(
  value: MarkedValue,
  marked: MarkedSubmission,
  decisions: readonly DecisionRow[],
): ValueState {
  const decision = decisions.find(
    (d) => d.isotopologue === value.isotopologue && d.quantity === value.quantity,
  );
  const slip = marked.slips.find(
    (s) =>
      s.quantities.includes(value.quantity) &&
      (s.isotopologue === null || s.isotopologue === value.isotopologue),
  );
  const flagged = value.agreement !== 'within' || value.points === null || slip !== undefined;
  return {
    isotopologue: value.isotopologue,
    quantity: value.quantity,
    agreement: value.agreement,
    points: pointsAfter(value, decision),
    of: value.of,
    slip: slip?.code ?? null,
    flagged,
    ruling:
      decision === undefined
        ? null
        : {
            action: decision.action,
            points: decision.points,
            comment: decision.comment,
            at: decision.decided_at,
          },
  };
}

/** One submission as the review lists it. */
export function reviewRow(state: MarkedState, index: number): ReviewRow {
  const marked = state.marked.submissions[index]!;
  const stored = state.stored[index]!;
  const decisions = ownDecisions(state, stored.id);
  const values = marked.values.map((v) => valueState(v, marked, decisions));
  const undecided = values.filter(
    (v) => v.flagged && (v.ruling === null || v.ruling.action === 'defer'),
  ).length;
  const open = values.some((v) => v.points === null && v.ruling?.action !== 'excuse');
  const of = values.reduce((sum, v) => sum + (v.ruling?.action === 'excuse' ? 0 : v.of), 0);
  const { submission } = marked;
  return {
    submissionId: stored.id,
    student: submission.student,
    name: submission.name,
    group: submission.group,
    attempt: submission.attempt,
    isotopologue: submission.isotopologue,
    reliability: marked.reference?.reliability ?? 'none',
    counts: counts(state, index),
    values,
    undecided,
    points: open ? null : values.reduce((sum, v) => sum + (v.points ?? 0), 0),
    of,
    weight: values.reduce((sum, v) => sum + worth[v.agreement], 0),
  };
}

/** Whether this attempt is the one that counts, by the scheme's rule. */
function counts(state: MarkedState, index: number): boolean {
  const own = state.marked.submissions[index]!.submission;
  const others = state.marked.submissions.filter(
    (m) => m.submission.student === own.student && m.submission.isotopologue === own.isotopologue,
  );
  if (others.length < 2) return true;
  const best = state.scheme?.attempts === 'best';
  const rank = (m: MarkedSubmission): number => (best ? (m.points ?? 0) * 1000 : 0) + m.submission.attempt;
  return others.every((m) => rank(m) <= rank(state.marked.submissions[index]!));
}

/** One row of the grades file with what people decided. */
export function gradesRow(state: MarkedState, index: number): GradesRow {
  const marked = state.marked.submissions[index]!;
  const stored = state.stored[index]!;
  const decisions = ownDecisions(state, stored.id);
  const decided: Record<string, number | null> = {};
  for (const value of marked.values) {
    const decision = decisions.find(
      (d) => d.isotopologue === value.isotopologue && d.quantity === value.quantity,
    );
    if (decision !== undefined)
      decided[`${value.isotopologue}/${value.quantity}`] = pointsAfter(value, decision);
  }
  const excused = decisions
    .filter((d) => d.action === 'excuse')
    .map((d) => `${d.isotopologue}/${d.quantity}`);
  return {
    marked: {
      ...marked,
      values: marked.values.filter((v) => !excused.includes(`${v.isotopologue}/${v.quantity}`)),
      of: marked.of - excusedOf(marked, excused),
    },
    decided,
    handPoints: state.handPoints.get(stored.id) ?? {},
    comment: commentOf(state, stored.id, decisions),
  };
}

function excusedOf(marked: MarkedSubmission, excused: readonly string[]): number {
  return marked.values
    .filter((v) => excused.includes(`${v.isotopologue}/${v.quantity}`))
    .reduce((sum, v) => sum + v.of, 0);
}

function commentOf(state: MarkedState, id: number, decisions: readonly DecisionRow[]): string {
  const own = decisions.filter((d) => d.comment !== '').map((d) => `${d.quantity}: ${d.comment}`);
  return [state.comments.get(id) ?? '', ...own].filter((t) => t !== '').join('; ');
}
