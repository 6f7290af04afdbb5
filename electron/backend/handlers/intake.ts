import { AppError } from '../../../shared-core/contract/index.ts';
import { commitRequest, openIntake, parseChoices, understandIntake, type IntakeChoices } from '../intake.ts';
import type { Context } from '../context.ts';
import { enqueueMissing } from '../reference-queue.ts';
import { changed, mustExist, type Handlers } from './handler.ts';

async function choose(
  context: Context,
  intakeId: number,
  change: (choices: IntakeChoices) => IntakeChoices,
): Promise<void> {
  const { choices } = await openIntake(context, intakeId);
  await context.store.call('setChoices', {
    id: intakeId,
    choices: JSON.stringify(change(parseChoices(choices))),
  });
}

/** Bringing files in: staged on disk, shown, changed by hand, committed whole. */
export const intakeHandlers: Handlers<
  | 'intake.current'
  | 'intake.begin'
  | 'intake.putPart'
  | 'intake.view'
  | 'intake.setColumn'
  | 'intake.setMatch'
  | 'intake.commit'
  | 'intake.cancel'
> = {
  'intake.current': async (context, { sectionId }) => ({
    intakeId: await context.store.call('openIntake', { sectionId }),
  }),
  'intake.begin': async (context, { sectionId }) => {
    await mustExist(context, sectionId);
    // Several drops go into one intake: an open one goes on.
    const open = await context.store.call('openIntake', { sectionId });
    return { intakeId: open ?? (await context.store.call('beginIntake', { sectionId, at: context.now() })) };
  },
  'intake.putPart': async (context, { intakeId, fileName, offset, base64, last }) => {
    await openIntake(context, intakeId);
    const bytes = new Uint8Array(Buffer.from(base64, 'base64'));
    return { received: await context.staging.putPart(intakeId, fileName, offset, bytes, last) };
  },
  'intake.view': async (context, { intakeId }) => (await understandIntake(context, intakeId)).view,
  'intake.setColumn': async (context, { intakeId, fileName, index, role }) => {
    const { view } = await understandIntake(context, intakeId);
    const column = view.tables.find((t) => t.fileName === fileName)?.columns[index];
    if (column === undefined) throw new AppError('not-found', `${fileName} has no column ${index + 1}.`);
    await choose(context, intakeId, (c) => ({ ...c, columns: { ...c.columns, [column.header]: role } }));
    return (await understandIntake(context, intakeId)).view;
  },
  'intake.setMatch': async (context, { intakeId, fileName, students }) => {
    await choose(context, intakeId, (c) => ({ ...c, matches: { ...c.matches, [fileName]: students } }));
    return (await understandIntake(context, intakeId)).view;
  },
  'intake.commit': async (context, { intakeId }) => {
    const { sectionId, choices } = await openIntake(context, intakeId);
    const understood = await understandIntake(context, intakeId);
    if (understood.view.blockers.length > 0)
      throw new AppError('conflict', understood.view.blockers.join(' '));
    const counts = await context.store.call('commitIntake', commitRequest(context, understood));
    const section = await context.store.call('getSection', { id: sectionId });
    const remembered = {
      ...(JSON.parse(section?.remembered_columns ?? '{}') as object),
      ...parseChoices(choices).columns,
    };
    await context.store.call('rememberColumns', { id: sectionId, columns: JSON.stringify(remembered) });
    context.staging.drop(intakeId);
    changed(context, sectionId, 'marks');
    await enqueueMissing(context, sectionId);
    return counts;
  },
  'intake.cancel': async (context, { intakeId }) => {
    await openIntake(context, intakeId);
    await context.store.call('cancelIntake', { id: intakeId, at: context.now() });
    context.staging.drop(intakeId);
    return { cancelled: true };
  },
};
