import type { Context } from '../context.ts';
import { enqueue } from '../reference-queue.ts';
import { changed, mustExist, type Handlers } from './handler.ts';

/** After a step everything may have changed; files whose corrections changed are fitted again. */
async function stepped(
  context: Context,
  sectionId: number,
  step: 'undo' | 'redo',
): Promise<{ what: string | null }> {
  await mustExist(context, sectionId);
  const before = await context.store.call('countCorrections', { sectionId });
  const what = await context.store.call(step, { sectionId });
  const after = await context.store.call('countCorrections', { sectionId });
  const count = (list: typeof before, id: number): number => list.find((c) => c.file_id === id)?.count ?? 0;
  const touched = [...new Set([...before, ...after].map((c) => c.file_id))].filter(
    (id) => count(before, id) !== count(after, id),
  );
  changed(context, sectionId, 'marks');
  enqueue(context, sectionId, touched);
  return { what };
}

/** The journal of a section: every change, and the way back. */
export const journalHandlers: Handlers<'journal.list' | 'journal.undo' | 'journal.redo'> = {
  'journal.list': async (context, { sectionId }) => {
    await mustExist(context, sectionId);
    const rows = await context.store.call('listJournal', { sectionId });
    return rows.map((r) => ({ id: r.id, at: r.at, who: r.who, what: r.what, undone: r.undone === 1 }));
  },
  'journal.undo': (context, { sectionId }) => stepped(context, sectionId, 'undo'),
  'journal.redo': (context, { sectionId }) => stepped(context, sectionId, 'redo'),
};
