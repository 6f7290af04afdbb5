import type Database from 'better-sqlite3';
import { journalledAction, type ActionNote } from './journal.ts';

export interface FileRow {
  readonly id: number;
  readonly section_id: number;
  readonly name: string;
  readonly kind: 'spectrum' | 'table' | 'other';
  readonly sha256: string;
  readonly title: string | null;
}

export interface ReferenceRecord {
  readonly file_id: number;
  readonly core_version: string;
  readonly document: string;
  readonly step_per_cm: number | null;
}

const fileColumns = 'id, section_id, name, kind, sha256, title';

/** Files, originals, references, corrections. */
export const fileOperations = {
  listFiles: (db: Database.Database, { sectionId }: { sectionId: number }): FileRow[] =>
    db
      .prepare(`SELECT ${fileColumns} FROM section_file WHERE section_id = ? ORDER BY name, id`)
      .all(sectionId) as FileRow[],

  getFile: (db: Database.Database, { id }: { id: number }): FileRow | null =>
    (db.prepare(`SELECT ${fileColumns} FROM section_file WHERE id = ?`).get(id) as FileRow | undefined) ??
    null,

  getOriginal: (db: Database.Database, { sha256 }: { sha256: string }): Uint8Array | null => {
    const row = db.prepare('SELECT bytes FROM original WHERE sha256 = ?').get(sha256) as
      { bytes: Buffer } | undefined;
    return row === undefined ? null : new Uint8Array(row.bytes);
  },

  /** The newest reference of every file of a section. */
  listReferences: (db: Database.Database, { sectionId }: { sectionId: number }): ReferenceRecord[] =>
    db
      .prepare(
        `SELECT r.file_id, r.core_version, r.document, r.step_per_cm FROM reference r
         JOIN section_file f ON f.id = r.file_id
         WHERE f.section_id = ? AND r.id = (SELECT MAX(id) FROM reference WHERE file_id = r.file_id)`,
      )
      .all(sectionId) as ReferenceRecord[],

  getReference: (db: Database.Database, { fileId }: { fileId: number }): ReferenceRecord | null =>
    (db
      .prepare(
        'SELECT file_id, core_version, document, step_per_cm FROM reference WHERE file_id = ? ORDER BY id DESC LIMIT 1',
      )
      .get(fileId) as ReferenceRecord | undefined) ?? null,

  addReference: (db: Database.Database, row: ReferenceRecord & { at: string }): void => {
    // The section may have been removed while its file was fitted.
    if (fileOperations.getFile(db, { id: row.file_id }) === null) return;
    db.prepare(
      'INSERT INTO reference (file_id, core_version, document, step_per_cm, made_at) VALUES (?, ?, ?, ?, ?)',
    ).run(row.file_id, row.core_version, row.document, row.step_per_cm, row.at);
  },

  listCorrections: (
    db: Database.Database,
    { fileId }: { fileId: number },
  ): { id: number; document: string; made_at: string }[] =>
    db.prepare('SELECT id, document, made_at FROM correction WHERE file_id = ? ORDER BY id').all(fileId) as {
      id: number;
      document: string;
      made_at: string;
    }[],

  countCorrections: (
    db: Database.Database,
    { sectionId }: { sectionId: number },
  ): { file_id: number; count: number }[] =>
    db
      .prepare(
        'SELECT c.file_id, COUNT(*) AS count FROM correction c JOIN section_file f ON f.id = c.file_id WHERE f.section_id = ? GROUP BY c.file_id',
      )
      .all(sectionId) as { file_id: number; count: number }[],

  addCorrection: (
    db: Database.Database,
    { note, fileId, document }: { note: ActionNote; fileId: number; document: string },
  ): void => {
    journalledAction(db, note, (write) =>
      write.insert('correction', { file_id: fileId, document, made_at: note.at }),
    );
  },

  removeCorrection: (db: Database.Database, { note, id }: { note: ActionNote; id: number }): void => {
    journalledAction(db, note, (write) => {
      write.remove('correction', id);
    });
  },
};
