import {
  AppError,
  type ReviewDetail,
  type Ruling,
  type SameSlipValue,
} from '../../../shared-core/contract/index.ts';
import type { Context } from '../context.ts';
import { reviewRow } from '../settled.ts';
import { changed, firstMarker, mustExist, note, sectionOf, type Handlers } from './handler.ts';

async function detail(context: Context, submissionId: number): Promise<ReviewDetail> {
  const sectionId = await sectionOf(context, submissionId);
  const state = await context.marks.of(sectionId);
  const index = state.stored.findIndex((s) => s.id === submissionId);
  const marked = state.marked.submissions[index];
  if (marked === undefined)
    throw new AppError('conflict', 'This section has no marking scheme yet; set one before the review.');
  const stored = state.stored[index]!;
  return {
    row: reviewRow(state, index),
    marked,
    fileId: stored.files.find((f) => f.name === marked.spectrum)?.id ?? stored.files[0]?.id ?? null,
    comment: state.comments.get(submissionId) ?? '',
    handPoints: state.handPoints.get(submissionId) ?? {},
    handItems: state.scheme?.handItems ?? [],
  };
}

async function rule(
  context: Context,
  values: readonly { submissionId: number; isotopologue: string; quantity: string }[],
  ruling: Ruling,
): Promise<void> {
  if (ruling.action === 'points' && ruling.points === null)
    throw new AppError('bad-input', 'Say how many points the value gets.');
  const sections = new Set(await Promise.all(values.map((v) => sectionOf(context, v.submissionId))));
  const [sectionId] = sections;
  if (sectionId === undefined || sections.size > 1)
    throw new AppError('bad-input', 'Values of one section can be decided together.');
  const words = {
    accept: 'accepted',
    points: `set ${ruling.points ?? 0} points for`,
    defer: 'put off',
    excuse: 'excused',
    clear: 'cleared the decision on',
  }[ruling.action];
  const what = values.length === 1 ? values[0]!.quantity : `${values.length} values`;
  await context.store.call('decide', {
    note: note(context, sectionId, `${words} ${what}`),
    marker: firstMarker,
    values,
    action: ruling.action === 'clear' ? null : ruling.action,
    points: ruling.action === 'points' ? ruling.points : null,
    comment: ruling.comment,
  });
  changed(context, sectionId, 'decisions');
}

/** Going through flagged values; every ruling is a person's. */
export const reviewHandlers: Handlers<
  | 'review.list'
  | 'review.get'
  | 'review.decide'
  | 'review.sameSlip'
  | 'review.decideMany'
  | 'review.handPoints'
  | 'review.comment'
> = {
  'review.list': async (context, { sectionId }) => {
    await mustExist(context, sectionId);
    const state = await context.marks.of(sectionId);
    return state.marked.submissions
      .map((_, i) => reviewRow(state, i))
      .sort((a, b) => b.weight - a.weight || (a.student < b.student ? -1 : 1));
  },
  'review.get': (context, { submissionId }) => detail(context, submissionId),
  'review.decide': async (context, { submissionId, isotopologue, quantity, ruling }) => {
    await rule(context, [{ submissionId, isotopologue, quantity }], ruling);
    return detail(context, submissionId);
  },
  'review.sameSlip': async (context, { sectionId, code }) => {
    await mustExist(context, sectionId);
    const state = await context.marks.of(sectionId);
    return state.marked.submissions.flatMap((marked, i): SameSlipValue[] =>
      reviewRow(state, i)
        .values.filter((v) => v.slip === code)
        .map((v) => ({
          submissionId: state.stored[i]!.id,
          student: marked.submission.student,
          isotopologue: v.isotopologue,
          quantity: v.quantity,
          text:
            marked.values.find((m) => m.isotopologue === v.isotopologue && m.quantity === v.quantity)?.text ??
            '',
          points: v.points,
          of: v.of,
        })),
    );
  },
  'review.decideMany': async (context, { values, ruling }) => {
    await rule(context, values, ruling);
    return { decided: values.length };
  },
  'review.handPoints': async (context, { submissionId, item, points }) => {
    const sectionId = await sectionOf(context, submissionId);
    const { scheme } = await context.marks.of(sectionId);
    const asked = scheme?.handItems.find((h) => h.title === item);
    if (asked === undefined) throw new AppError('not-found', `The scheme has no item “${item}”.`);
    if (points !== null && points > asked.points)
      throw new AppError('bad-input', `“${item}” has at most ${asked.points} points.`);
    await context.store.call('setHandPoints', {
      note: note(context, sectionId, `points for “${item}”`),
      submissionId,
      item,
      points,
    });
    changed(context, sectionId, 'decisions');
    return detail(context, submissionId);
  },
  'review.comment': async (context, { submissionId, comment }) => {
    const sectionId = await sectionOf(context, submissionId);
    await context.store.call('setRemark', {
      note: note(context, sectionId, 'comment on a submission'),
      submissionId,
      text: comment,
    });
    changed(context, sectionId, 'decisions');
    return detail(context, submissionId);
  },
};
