import type Database from 'better-sqlite3';
import type { Submission, SubmittedLine, SubmittedValue } from '../../../shared-core/marking/types.ts';
import { journalledAction, type ActionNote } from './journal.ts';

export interface StoredSubmission {
  readonly id: number;
  readonly submission: Submission;
  readonly files: readonly { readonly id: number; readonly name: string }[];
}

export interface DecisionRow {
  readonly id: number;
  readonly submission_id: number;
  readonly isotopologue: string;
  readonly quantity: string;
  readonly marker: string;
  readonly action: 'accept' | 'points' | 'defer' | 'excuse';
  readonly points: number | null;
  readonly comment: string;
  readonly decided_at: string;
}

interface SubmissionRow {
  readonly id: number;
  readonly person_key: string;
  readonly name: string | null;
  readonly group_label: string | null;
  readonly attempt: number;
  readonly received: string | null;
  readonly isotopologue: string | null;
  readonly line_count: number | null;
}

type ValueRow = {
  readonly submission_id: number;
  readonly half_last_digit: number | null;
  readonly standard_unit: string;
  readonly unreadable_because: string | null;
} & Omit<SubmittedValue, 'halfLastDigit' | 'standardUnit' | 'unreadableBecause'>;

const grouped = <T extends { readonly submission_id: number }>(rows: readonly T[]): Map<number, T[]> => {
  const map = new Map<number, T[]>();
  for (const row of rows) {
    const list = map.get(row.submission_id);
    if (list === undefined) map.set(row.submission_id, [row]);
    else list.push(row);
  }
  return map;
};

/** People, submissions, values, decisions. */
export const submissionOperations = {
  /** All submissions of a section, or one, as marking sees them. */
  listSubmissions: (
    db: Database.Database,
    { sectionId, only }: { sectionId: number; only?: number },
  ): StoredSubmission[] => {
    const filter = 'submission_id IN (SELECT id FROM submission WHERE section_id = ?)';
    const rows = db
      .prepare(
        `SELECT s.id, p.person_key, p.name, s.group_label, s.attempt, s.received, s.isotopologue, s.line_count
         FROM submission s JOIN person p ON p.id = s.person_id WHERE s.section_id = ? ORDER BY s.position, s.id`,
      )
      .all(sectionId) as SubmissionRow[];
    const values = grouped(
      db.prepare(`SELECT * FROM submitted_value WHERE ${filter} ORDER BY id`).all(sectionId) as ValueRow[],
    );
    const lines = grouped(
      db
        .prepare(
          `SELECT submission_id, isotopologue, m, wavenumber_per_cm AS wavenumberPerCm FROM submitted_line WHERE ${filter}`,
        )
        .all(sectionId) as (SubmittedLine & { submission_id: number })[],
    );
    const files = grouped(
      db
        .prepare(
          `SELECT l.submission_id, f.id, f.name FROM submission_file l JOIN section_file f ON f.id = l.file_id WHERE l.${filter} ORDER BY l.position`,
        )
        .all(sectionId) as { submission_id: number; id: number; name: string }[],
    );
    return rows
      .filter((r) => only === undefined || r.id === only)
      .map((r) => ({
        id: r.id,
        files: (files.get(r.id) ?? []).map(({ id, name }) => ({ id, name })),
        submission: {
          student: r.person_key,
          name: r.name,
          group: r.group_label,
          attempt: r.attempt,
          received: r.received,
          isotopologue: r.isotopologue,
          lineCount: r.line_count,
          spectra: (files.get(r.id) ?? []).map((f) => f.name),
          values: (values.get(r.id) ?? []).map(valueOf),
          lines: (lines.get(r.id) ?? []).map(({ isotopologue, m, wavenumberPerCm }) => ({
            isotopologue,
            m,
            wavenumberPerCm,
          })),
        },
      }));
  },

  sectionOfSubmission: (db: Database.Database, { id }: { id: number }): number | null =>
    (
      db.prepare('SELECT section_id FROM submission WHERE id = ?').get(id) as
        { section_id: number } | undefined
    )?.section_id ?? null,

  listDecisions: (db: Database.Database, { sectionId }: { sectionId: number }): DecisionRow[] =>
    db
      .prepare(
        'SELECT d.* FROM decision d JOIN submission s ON s.id = d.submission_id WHERE s.section_id = ?',
      )
      .all(sectionId) as DecisionRow[],

  listHandPoints: (
    db: Database.Database,
    { sectionId }: { sectionId: number },
  ): { submission_id: number; item: string; points: number | null }[] =>
    db
      .prepare(
        'SELECT h.submission_id, h.item, h.points FROM hand_points h JOIN submission s ON s.id = h.submission_id WHERE s.section_id = ?',
      )
      .all(sectionId) as { submission_id: number; item: string; points: number | null }[],

  listRemarks: (
    db: Database.Database,
    { sectionId }: { sectionId: number },
  ): { submission_id: number; text: string }[] =>
    db
      .prepare(
        'SELECT r.submission_id, r.text FROM remark r JOIN submission s ON s.id = r.submission_id WHERE s.section_id = ?',
      )
      .all(sectionId) as { submission_id: number; text: string }[],

  /** Decides values, all in one action; `null` as action clears a decision. */
  decide: (
    db: Database.Database,
    {
      note,
      marker,
      values,
      action,
      points,
      comment,
    }: {
      note: ActionNote;
      marker: string;
      values: readonly { submissionId: number; isotopologue: string; quantity: string }[];
      action: DecisionRow['action'] | null;
      points: number | null;
      comment: string;
    },
  ): number =>
    journalledAction(db, note, (write) => {
      for (const v of values) {
        const before = db
          .prepare(
            'SELECT id FROM decision WHERE submission_id = ? AND isotopologue = ? AND quantity = ? AND marker = ?',
          )
          .get(v.submissionId, v.isotopologue, v.quantity, marker) as { id: number } | undefined;
        if (action === null) {
          if (before !== undefined) write.remove('decision', before.id);
          continue;
        }
        const row = { action, points, comment, decided_at: note.at };
        if (before !== undefined) write.update('decision', before.id, row);
        else
          write.insert('decision', {
            submission_id: v.submissionId,
            isotopologue: v.isotopologue,
            quantity: v.quantity,
            marker,
            ...row,
          });
      }
      return values.length;
    }),

  setHandPoints: (
    db: Database.Database,
    {
      note,
      submissionId,
      item,
      points,
    }: { note: ActionNote; submissionId: number; item: string; points: number | null },
  ): void => {
    journalledAction(db, note, (write) => {
      const before = db
        .prepare('SELECT id FROM hand_points WHERE submission_id = ? AND item = ?')
        .get(submissionId, item) as { id: number } | undefined;
      if (before !== undefined) write.update('hand_points', before.id, { points });
      else write.insert('hand_points', { submission_id: submissionId, item, points });
    });
  },

  setRemark: (
    db: Database.Database,
    { note, submissionId, text }: { note: ActionNote; submissionId: number; text: string },
  ): void => {
    journalledAction(db, note, (write) => {
      const before = db.prepare('SELECT id FROM remark WHERE submission_id = ?').get(submissionId) as
        { id: number } | undefined;
      if (before !== undefined) write.update('remark', before.id, { text });
      else write.insert('remark', { submission_id: submissionId, text });
    });
  },
};

function valueOf(row: ValueRow): SubmittedValue {
  return {
    isotopologue: row.isotopologue,
    quantity: row.quantity,
    text: row.text,
    value: row.value,
    uncertainty: row.uncertainty,
    figures: row.figures,
    halfLastDigit: row.half_last_digit,
    unit: row.unit,
    standardUnit: row.standard_unit as SubmittedValue['standardUnit'],
    unreadableBecause: row.unreadable_because,
  };
}
