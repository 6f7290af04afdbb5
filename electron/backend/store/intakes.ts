import type Database from 'better-sqlite3';
import type { Submission } from '../../../shared-core/marking/types.ts';

export interface IntakeRow {
  readonly id: number;
  readonly section_id: number;
  readonly state: 'open' | 'committed' | 'cancelled';
  readonly choices: string;
}

export interface CommitFile {
  readonly name: string;
  readonly kind: 'spectrum' | 'table' | 'other';
  readonly sha256: string;
  readonly title: string | null;
  readonly bytes: Uint8Array;
}

export interface CommitRequest {
  readonly intakeId: number;
  readonly at: string;
  readonly files: readonly CommitFile[];
  readonly submissions: readonly Submission[];
  /** Scheme for a section that has none yet. */
  readonly scheme: string | null;
  readonly record: string;
}

export interface CommitCounts {
  readonly newSubmissions: number;
  readonly newFiles: number;
  readonly alreadyThere: number;
}

/** Intakes: begun, changed by hand, committed whole. */
export const intakeOperations = {
  beginIntake: (db: Database.Database, { sectionId, at }: { sectionId: number; at: string }): number =>
    Number(
      db.prepare("INSERT INTO intake (section_id, state, began_at) VALUES (?, 'open', ?)").run(sectionId, at)
        .lastInsertRowid,
    ),

  getIntake: (db: Database.Database, { id }: { id: number }): IntakeRow | null =>
    (db.prepare('SELECT id, section_id, state, choices FROM intake WHERE id = ?').get(id) as
      IntakeRow | undefined) ?? null,

  openIntake: (db: Database.Database, { sectionId }: { sectionId: number }): number | null =>
    (
      db
        .prepare("SELECT id FROM intake WHERE section_id = ? AND state = 'open' ORDER BY id DESC LIMIT 1")
        .get(sectionId) as { id: number } | undefined
    )?.id ?? null,

  listOpenIntakes: (db: Database.Database): number[] =>
    (db.prepare("SELECT id FROM intake WHERE state = 'open'").all() as { id: number }[]).map((r) => r.id),

  /** Which submissions are in the section already. */
  whichAreKnown: (
    db: Database.Database,
    { sectionId, submissions }: { sectionId: number; submissions: readonly Submission[] },
  ): boolean[] => knownSubmissions(db, sectionId, submissions).map((id) => id !== null),

  setChoices: (db: Database.Database, { id, choices }: { id: number; choices: string }): void => {
    db.prepare('UPDATE intake SET choices = ? WHERE id = ?').run(choices, id);
  },

  cancelIntake: (db: Database.Database, { id, at }: { id: number; at: string }): void => {
    db.prepare("UPDATE intake SET state = 'cancelled', ended_at = ? WHERE id = ?").run(at, id);
  },

  /** Everything of an intake in one transaction; identical bytes are stored once, a submission that is already there stays one. */
  commitIntake: (db: Database.Database, request: CommitRequest): CommitCounts =>
    db.transaction(() => {
      const intake = intakeOperations.getIntake(db, { id: request.intakeId });
      if (intake === null || intake.state !== 'open') throw new RangeError('intake: not open');
      const sectionId = intake.section_id;
      const { ids, fresh } = addFiles(db, sectionId, request);
      if (
        request.scheme !== null &&
        db.prepare('SELECT 1 FROM scheme WHERE section_id = ?').get(sectionId) === undefined
      ) {
        db.prepare('INSERT INTO scheme (section_id, version, document, created_at) VALUES (?, 1, ?, ?)').run(
          sectionId,
          request.scheme,
          request.at,
        );
      }
      const knownIds = knownSubmissions(db, sectionId, request.submissions);
      let added = 0;
      request.submissions.forEach((s, i) => {
        const known = knownIds[i] ?? null;
        if (known !== null) {
          attachFirstSpectra(db, known, s, ids);
          return;
        }
        addSubmission(db, sectionId, s, ids, request.at, added);
        added++;
      });
      db.prepare("UPDATE intake SET state = 'committed', ended_at = ?, record = ? WHERE id = ?").run(
        request.at,
        request.record,
        request.intakeId,
      );
      return { newSubmissions: added, newFiles: fresh, alreadyThere: request.files.length - fresh };
    })(),
};

function addFiles(
  db: Database.Database,
  sectionId: number,
  request: CommitRequest,
): { ids: Map<string, number>; fresh: number } {
  const ids = new Map<string, number>();
  let fresh = 0;
  for (const file of request.files) {
    db.prepare(
      'INSERT INTO original (sha256, byte_count, bytes) VALUES (?, ?, ?) ON CONFLICT (sha256) DO NOTHING',
    ).run(file.sha256, file.bytes.length, Buffer.from(file.bytes));
    const before = db
      .prepare('SELECT id FROM section_file WHERE section_id = ? AND name = ? AND sha256 = ?')
      .get(sectionId, file.name, file.sha256) as { id: number } | undefined;
    if (before !== undefined) ids.set(file.name, before.id);
    else {
      fresh++;
      const { lastInsertRowid } = db
        .prepare(
          'INSERT INTO section_file (section_id, name, kind, sha256, title, added_at) VALUES (?, ?, ?, ?, ?, ?)',
        )
        .run(sectionId, file.name, file.kind, file.sha256, file.title, request.at);
      ids.set(file.name, Number(lastInsertRowid));
    }
  }
  return { ids, fresh };
}

/**
 * For each submission the id of the one in the section that it repeats, or null: same student and isotopologue, every value as written,
 * and not said to be a later attempt than any that is there.
 */
function knownSubmissions(
  db: Database.Database,
  sectionId: number,
  submissions: readonly Submission[],
): (number | null)[] {
  const key = (student: string, isotopologue: string | null): string =>
    JSON.stringify([student, isotopologue]);
  const rows = db
    .prepare(
      'SELECT p.person_key AS student, s.isotopologue, s.attempt, s.id FROM submission s JOIN person p ON p.id = s.person_id WHERE s.section_id = ?',
    )
    .all(sectionId) as { student: string; isotopologue: string | null; attempt: number; id: number }[];
  const texts = db.prepare('SELECT text FROM submitted_value WHERE submission_id = ? ORDER BY id').pluck();
  const lastAttempt = new Map<string, number>();
  const byContent = new Map<string, number>();
  for (const r of rows) {
    const own = key(r.student, r.isotopologue);
    lastAttempt.set(own, Math.max(lastAttempt.get(own) ?? 0, r.attempt));
    byContent.set(own + JSON.stringify(texts.all(r.id)), r.id);
  }
  return submissions.map((s) => {
    const own = key(s.student, s.isotopologue);
    if (s.attempt > (lastAttempt.get(own) ?? 0)) return null;
    return byContent.get(own + JSON.stringify(s.values.map((v) => v.text))) ?? null;
  });
}

/** A table that comes again with its spectra brings them to submissions that had none. */
function attachFirstSpectra(
  db: Database.Database,
  submissionId: number,
  s: Submission,
  fileIds: ReadonlyMap<string, number>,
): void {
  const has = db.prepare('SELECT 1 FROM submission_file WHERE submission_id = ?').get(submissionId);
  if (has === undefined) attachSpectra(db, submissionId, s, fileIds);
}

function attachSpectra(
  db: Database.Database,
  submissionId: number,
  s: Submission,
  fileIds: ReadonlyMap<string, number>,
): void {
  const link = db.prepare(
    'INSERT OR IGNORE INTO submission_file (submission_id, file_id, position) VALUES (?, ?, ?)',
  );
  s.spectra.forEach((name, i) => {
    const fileId = fileIds.get(name);
    if (fileId !== undefined) link.run(submissionId, fileId, i);
  });
}

function addSubmission(
  db: Database.Database,
  sectionId: number,
  s: Submission,
  fileIds: ReadonlyMap<string, number>,
  at: string,
  position: number,
): void {
  db.prepare(
    `INSERT INTO person (section_id, person_key, name, group_label) VALUES (?, ?, ?, ?)
     ON CONFLICT (section_id, person_key) DO UPDATE SET name = COALESCE(excluded.name, name), group_label = COALESCE(excluded.group_label, group_label)`,
  ).run(sectionId, s.student, s.name, s.group);
  const { id: personId } = db
    .prepare('SELECT id FROM person WHERE section_id = ? AND person_key = ?')
    .get(sectionId, s.student) as { id: number };
  // A later hand-in of the same student and isotopologue is the next attempt.
  const { last } = db
    .prepare('SELECT MAX(attempt) AS last FROM submission WHERE person_id = ? AND isotopologue IS ?')
    .get(personId, s.isotopologue) as { last: number | null };
  const attempt = last !== null && s.attempt <= last ? last + 1 : s.attempt;
  const submissionId = Number(
    db
      .prepare(
        'INSERT INTO submission (section_id, person_id, attempt, received, isotopologue, group_label, line_count, position, added_at) VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?)',
      )
      .run(sectionId, personId, attempt, s.received, s.isotopologue, s.group, s.lineCount, position, at)
      .lastInsertRowid,
  );
  db.prepare('INSERT INTO submission_person (submission_id, person_id) VALUES (?, ?)').run(
    submissionId,
    personId,
  );
  attachSpectra(db, submissionId, s, fileIds);
  const value = db.prepare(
    'INSERT INTO submitted_value (submission_id, isotopologue, quantity, text, value, uncertainty, figures, half_last_digit, unit, standard_unit, unreadable_because) VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?)',
  );
  for (const v of s.values) {
    value.run(
      submissionId,
      v.isotopologue,
      v.quantity,
      v.text,
      v.value,
      v.uncertainty,
      v.figures,
      v.halfLastDigit,
      v.unit,
      v.standardUnit,
      v.unreadableBecause,
    );
  }
  const line = db.prepare(
    'INSERT INTO submitted_line (submission_id, isotopologue, m, wavenumber_per_cm) VALUES (?, ?, ?, ?)',
  );
  for (const l of s.lines) line.run(submissionId, l.isotopologue, l.m, l.wavenumberPerCm);
}
