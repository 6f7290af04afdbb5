import { markSection, type MarkedSection } from '../../shared-core/marking/mark-section.ts';
import type { MarkingScheme } from '../../shared-core/marking/types.ts';
import type { FileReference } from '../../shared-core/reference/types.ts';
import type { DecisionRow, StoredSubmission } from './store/submissions.ts';
import type { Store } from './store/store.ts';

/** A section as it stands: submissions with their marks and what people decided. */
export interface MarkedState {
  readonly scheme: MarkingScheme | null;
  readonly schemeVersion: number;
  readonly stored: readonly StoredSubmission[];
  readonly marked: MarkedSection;
  readonly decisions: ReadonlyMap<number, readonly DecisionRow[]>;
  readonly handPoints: ReadonlyMap<number, Readonly<Record<string, number | null>>>;
  readonly comments: ReadonlyMap<number, string>;
}

/** Marks of sections, kept until something that they stand on changes. */
export interface SectionMarks {
  readonly of: (sectionId: number) => Promise<MarkedState>;
  /** With another scheme, not kept. */
  readonly under: (sectionId: number, scheme: MarkingScheme) => Promise<MarkedState>;
  /** Something changed: `marks` where references, scheme or submissions did, `decisions` where only rulings did. */
  readonly forget: (sectionId: number, what: 'marks' | 'decisions') => void;
}

const byId = <T extends { readonly submission_id: number }, V>(
  rows: readonly T[],
  add: (before: V | undefined, row: T) => V,
): Map<number, V> => {
  const map = new Map<number, V>();
  for (const row of rows) map.set(row.submission_id, add(map.get(row.submission_id), row));
  return map;
};

type Machine = Pick<MarkedState, 'scheme' | 'schemeVersion' | 'stored' | 'marked'>;

export function createSectionMarks(store: Store): SectionMarks {
  const machine = new Map<number, Promise<Machine>>();

  async function marksOf(sectionId: number, other: MarkingScheme | null): Promise<Machine> {
    const [latest, stored, references] = await Promise.all([
      store.call('latestScheme', { sectionId }),
      store.call('listSubmissions', { sectionId }),
      store.call('listReferences', { sectionId }),
    ]);
    const scheme = other ?? (latest === null ? null : (JSON.parse(latest.document) as MarkingScheme));
    const files = await store.call('listFiles', { sectionId });
    const names = new Map(files.map((f) => [f.id, f.name]));
    const byFile = new Map(
      references.map((r) => [names.get(r.file_id) ?? '', JSON.parse(r.document) as FileReference]),
    );
    const steps = new Map(references.map((r) => [names.get(r.file_id) ?? '', r.step_per_cm]));
    const marked =
      scheme === null
        ? { submissions: [], observations: [] }
        : markSection(
            stored.map((s) => s.submission),
            byFile,
            scheme,
            { stepPerCmOf: (file) => steps.get(file) ?? null },
          );
    return { scheme, schemeVersion: latest?.version ?? 0, stored, marked };
  }

  async function withDecisions(sectionId: number, base: Machine): Promise<MarkedState> {
    const [decisions, hand, remarks] = await Promise.all([
      store.call('listDecisions', { sectionId }),
      store.call('listHandPoints', { sectionId }),
      store.call('listRemarks', { sectionId }),
    ]);
    return {
      ...base,
      decisions: byId(decisions, (before: DecisionRow[] | undefined, row) => [...(before ?? []), row]),
      handPoints: byId(hand, (before: Record<string, number | null> | undefined, row) => ({
        ...before,
        [row.item]: row.points,
      })),
      comments: byId(remarks, (_: string | undefined, row) => row.text),
    };
  }

  return {
    of: async (sectionId) => {
      const known = machine.get(sectionId) ?? marksOf(sectionId, null);
      machine.set(sectionId, known);
      try {
        return await withDecisions(sectionId, await known);
      } catch (error) {
        machine.delete(sectionId);
        throw error;
      }
    },
    under: async (sectionId, scheme) => withDecisions(sectionId, await marksOf(sectionId, scheme)),
    forget: (sectionId, what) => {
      if (what === 'marks') machine.delete(sectionId);
    },
  };
}
