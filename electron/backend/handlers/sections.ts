import { AppError, type SectionDetail, type SectionSummary } from '../../../shared-core/contract/index.ts';
import { coreVersion } from '../../../shared-core/version.ts';
import type { FileReference } from '../../../shared-core/reference/types.ts';
import { exampleSection } from '../example/section.ts';
import type { Context } from '../context.ts';
import { reviewRow } from '../settled.ts';
import { changed, mustExist, note, type Handlers } from './handler.ts';

async function summary(
  context: Context,
  row: { id: number; title: string; created_at: string },
): Promise<SectionSummary> {
  const sectionId = row.id;
  const [files, references, exports, state] = await Promise.all([
    context.store.call('listFiles', { sectionId }),
    context.store.call('listReferences', { sectionId }),
    context.store.call('listExports', { sectionId }),
    context.marks.of(sectionId),
  ]);
  const spectra = files.filter((f) => f.kind === 'spectrum');
  const documents = references.map((r) => JSON.parse(r.document) as FileReference);
  return {
    id: row.id,
    title: row.title,
    createdAt: row.created_at,
    submissions: state.stored.length,
    spectra: spectra.length,
    withoutReference:
      spectra.length - references.filter((r) => spectra.some((f) => f.id === r.file_id)).length,
    toCheck: documents.filter((d) => d.reliability !== 'sound').length,
    toDecide: state.marked.submissions.reduce((sum, _, i) => sum + reviewRow(state, i).undecided, 0),
    exportedAt: exports[0]?.at ?? null,
  };
}

/** Sections, settings and what the program is. */
export const sectionHandlers: Handlers<
  | 'app.info'
  | 'settings.get'
  | 'settings.set'
  | 'sections.list'
  | 'sections.create'
  | 'sections.rename'
  | 'sections.copy'
  | 'sections.remove'
  | 'sections.get'
  | 'sections.makeExample'
> = {
  'app.info': async (context) => ({
    version: coreVersion,
    core: coreVersion,
    hasSections: (await context.store.call('listSections', undefined)).length > 0,
  }),
  'settings.get': async (context, { key }) => ({
    value: await context.store.call('getSetting', { name: key }),
  }),
  'settings.set': async (context, { key, value }) => {
    await context.store.call('setSetting', { name: key, value });
    return { value };
  },
  'sections.list': async (context) => {
    const rows = await context.store.call('listSections', undefined);
    return Promise.all(rows.map((row) => summary(context, row)));
  },
  'sections.create': async (context, { title }) => ({
    sectionId: await context.store.call('createSection', { title, at: context.now() }),
  }),
  'sections.rename': async (context, { sectionId, title }) => {
    await mustExist(context, sectionId);
    await context.store.call('renameSection', {
      note: note(context, sectionId, `renamed the section to “${title}”`),
      title,
    });
    changed(context, sectionId, 'decisions');
    return { sectionId };
  },
  'sections.copy': async (context, { sectionId, title }) => {
    await mustExist(context, sectionId);
    return {
      sectionId: await context.store.call('copySection', { id: sectionId, title, at: context.now() }),
    };
  },
  'sections.remove': async (context, { sectionId }) => {
    await mustExist(context, sectionId);
    context.jobs.cancel(sectionId);
    const intakeId = await context.store.call('openIntake', { sectionId });
    if (intakeId !== null) context.staging.drop(intakeId);
    await context.store.call('removeSection', { id: sectionId });
    changed(context, sectionId, 'marks');
    return { removed: true };
  },
  'sections.get': async (context, { sectionId }): Promise<SectionDetail> => {
    const row = await context.store.call('getSection', { id: sectionId });
    if (row === null) throw new AppError('not-found', 'This section does not exist (any more).');
    const state = await context.marks.of(sectionId);
    const people = new Map(
      state.stored.map((s) => [
        s.submission.student,
        { key: s.submission.student, name: s.submission.name, group: s.submission.group },
      ]),
    );
    return {
      ...(await summary(context, row)),
      scheme: state.scheme,
      schemeVersion: state.schemeVersion,
      people: [...people.values()],
      observations: state.marked.observations,
    };
  },
  'sections.makeExample': async (context) => {
    const at = context.now();
    const sectionId = await context.store.call('createSection', { title: 'Example section (invented)', at });
    const intakeId = await context.store.call('beginIntake', { sectionId, at });
    for (const file of exampleSection(1).files) {
      if (file.name === 'what-was-put-in.csv') continue;
      await context.staging.putPart(intakeId, file.name, 0, file.bytes, true);
    }
    return { sectionId, intakeId };
  },
};
