import {
  AppError,
  type InputOf,
  type MethodName,
  type OutputOf,
} from '../../../shared-core/contract/index.ts';
import type { Context } from '../context.ts';
import type { ActionNote } from '../store/journal.ts';

/** What answers a method. */
export type Handlers<M extends MethodName = MethodName> = {
  readonly [K in M]: (context: Context, input: InputOf<K>) => Promise<OutputOf<K>>;
};

/** Name of the one who marks on this computer; a second marker has another. */
export const firstMarker = 'first';

export function note(context: Context, sectionId: number, what: string): ActionNote {
  return { sectionId, at: context.now(), who: context.who, what };
}

export async function mustExist(context: Context, sectionId: number): Promise<void> {
  if ((await context.store.call('getSection', { id: sectionId })) === null) {
    throw new AppError('not-found', 'This section does not exist (any more).');
  }
}

/** Section of a submission. */
export async function sectionOf(context: Context, submissionId: number): Promise<number> {
  const sectionId = await context.store.call('sectionOfSubmission', { id: submissionId });
  if (sectionId === null) throw new AppError('not-found', 'This submission does not exist (any more).');
  return sectionId;
}

/** Something that marks stand on changed. */
export function changed(context: Context, sectionId: number, what: 'marks' | 'decisions'): void {
  context.marks.forget(sectionId, what);
  context.emit({ event: 'changed', sectionId });
}
