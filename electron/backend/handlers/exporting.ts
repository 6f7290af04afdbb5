import {
  AppError,
  type ExportedFile,
  type FeedbackSheet,
  type SectionReport,
} from '../../../shared-core/contract/index.ts';
import { reportJson } from '../../../shared-core/marking/report-json.ts';
import type { Agreement, MarkingScheme } from '../../../shared-core/marking/types.ts';
import { gradesTable, writeGrades, type GradesOptions } from '../../../shared-core/tables/index.ts';
import { displayUnit } from '../../../shared-core/units/index.ts';
import { coreVersion } from '../../../shared-core/version.ts';
import type { Context } from '../context.ts';
import { sha256 } from '../intake.ts';
import type { MarkedState } from '../section-marks.ts';
import { gradesRow, reviewRow } from '../settled.ts';
import { mustExist, type Handlers } from './handler.ts';

async function stateWithScheme(
  context: Context,
  sectionId: number,
): Promise<MarkedState & { scheme: MarkingScheme }> {
  await mustExist(context, sectionId);
  const state = await context.marks.of(sectionId);
  if (state.scheme === null)
    throw new AppError('conflict', 'This section has no marking scheme yet; set one before the export.');
  return { ...state, scheme: state.scheme };
}

const rowsOf = (state: MarkedState): ReturnType<typeof gradesRow>[] =>
  state.marked.submissions.map((_, i) => gradesRow(state, i));

/** Options without keys that are absent, as the exact optional types want them. */
function optionsOf(input: Readonly<Record<string, unknown>>): GradesOptions {
  return Object.fromEntries(Object.entries(input).filter(([, v]) => v !== undefined));
}

async function recorded(
  context: Context,
  sectionId: number,
  kind: string,
  options: unknown,
  file: ExportedFile,
): Promise<ExportedFile> {
  await context.store.call('recordExport', {
    sectionId,
    at: context.now(),
    kind,
    options: JSON.stringify(options),
    sha256: sha256(file.text),
  });
  context.emit({ event: 'changed', sectionId });
  return file;
}

function sheets(state: MarkedState, withReference: boolean, withNames: boolean): FeedbackSheet[] {
  return state.marked.submissions.map((marked, i) => {
    const row = reviewRow(state, i);
    const { submission } = marked;
    return {
      student: submission.student,
      name: withNames ? submission.name : null,
      isotopologue: submission.isotopologue,
      spectrum: marked.spectrum,
      values: marked.values.map((v) => {
        const own = row.values.find((r) => r.isotopologue === v.isotopologue && r.quantity === v.quantity)!;
        const slip = marked.slips.find((s) => s.code === own.slip);
        return {
          quantity: v.quantity,
          isotopologue: v.isotopologue,
          submitted: v.text,
          agreement: v.agreement,
          points: own.points,
          of: v.of,
          reference:
            withReference && v.reference !== null
              ? `${Number(v.reference.value.toPrecision(7))} ${displayUnit(v.unit)}`
              : null,
          comment: own.ruling?.comment ?? '',
          // The arithmetic of a slip names the correct value: without reference values it stays out.
          slip: slip === undefined || !withReference ? null : slip.text,
        };
      }),
      points: row.points,
      of: row.of,
      comment: state.comments.get(row.submissionId) ?? '',
    };
  });
}

function summaryOf(title: string, state: MarkedState): SectionReport {
  const none = (): Record<Agreement, number> => ({
    within: 0,
    'part credit': 0,
    outside: 0,
    'not given': 0,
    unreadable: 0,
    'no reference': 0,
  });
  const perQuantity = new Map<
    string,
    { quantity: SectionReport['perQuantity'][number]['quantity']; agreements: Record<Agreement, number> }
  >();
  const slips = new Map<string, number>();
  for (const marked of state.marked.submissions) {
    for (const v of marked.values) {
      const entry = perQuantity.get(v.quantity) ?? { quantity: v.quantity, agreements: none() };
      entry.agreements[v.agreement]++;
      perQuantity.set(v.quantity, entry);
    }
    const first = marked.slips[0];
    if (first !== undefined) slips.set(first.code, (slips.get(first.code) ?? 0) + 1);
  }
  return {
    title,
    submissions: state.stored.length,
    perQuantity: [...perQuantity.values()],
    slips: [...slips].map(([code, count]) => ({ code, count })).sort((a, b) => b.count - a.count),
    observations: state.marked.observations,
    points: state.marked.submissions.map((_, i) => reviewRow(state, i).points),
  };
}

/** Grades, feedback, summary. */
export const exportHandlers: Handlers<
  | 'export.preview'
  | 'export.grades'
  | 'export.report'
  | 'export.feedback'
  | 'export.summary'
  | 'export.records'
> = {
  'export.preview': async (context, { sectionId, options }) => {
    const state = await stateWithScheme(context, sectionId);
    return { rows: gradesTable(rowsOf(state), state.scheme, optionsOf(options)) };
  },
  'export.grades': async (context, { sectionId, options }) => {
    const state = await stateWithScheme(context, sectionId);
    const text = writeGrades(rowsOf(state), state.scheme, optionsOf(options));
    return recorded(context, sectionId, 'grades', options, {
      fileName: 'grades.csv',
      mimeType: 'text/csv',
      text,
    });
  },
  'export.report': async (context, { sectionId }) => {
    const state = await stateWithScheme(context, sectionId);
    const report = reportJson(state.marked.submissions, state.marked.observations, state.scheme, coreVersion);
    return recorded(
      context,
      sectionId,
      'report',
      {},
      { fileName: 'report.json', mimeType: 'application/json', text: `${JSON.stringify(report, null, 1)}\n` },
    );
  },
  'export.feedback': async (context, { sectionId, withReference, withNames }) =>
    sheets(await stateWithScheme(context, sectionId), withReference, withNames),
  'export.summary': async (context, { sectionId }) => {
    const state = await stateWithScheme(context, sectionId);
    const section = await context.store.call('getSection', { id: sectionId });
    return summaryOf(section?.title ?? '', state);
  },
  'export.records': async (context, { sectionId }) => {
    const state = await stateWithScheme(context, sectionId);
    const records = await context.store.call('listExports', { sectionId });
    return records.map((r) => {
      const now =
        r.kind === 'grades'
          ? sha256(writeGrades(rowsOf(state), state.scheme, JSON.parse(r.options) as GradesOptions))
          : r.sha256;
      return { at: r.at, kind: r.kind, sha256: r.sha256, changedSince: now !== r.sha256 };
    });
  },
};
