import type Database from 'better-sqlite3';
import { journalledAction, stepJournal, type ActionNote } from './journal.ts';

export interface SectionRow {
  readonly id: number;
  readonly title: string;
  readonly created_at: string;
  readonly remembered_columns: string;
}

/** Sections, schemes and the journal. */
export const sectionOperations = {
  listSections: (db: Database.Database): SectionRow[] =>
    db
      .prepare('SELECT id, title, created_at, remembered_columns FROM section ORDER BY id DESC')
      .all() as SectionRow[],

  getSection: (db: Database.Database, { id }: { id: number }): SectionRow | null =>
    (db.prepare('SELECT id, title, created_at, remembered_columns FROM section WHERE id = ?').get(id) as
      SectionRow | undefined) ?? null,

  createSection: (db: Database.Database, { title, at }: { title: string; at: string }): number =>
    Number(
      db.prepare('INSERT INTO section (title, created_at) VALUES (?, ?)').run(title, at).lastInsertRowid,
    ),

  renameSection: (db: Database.Database, { note, title }: { note: ActionNote; title: string }): void => {
    journalledAction(db, note, (write) => write.update('section', note.sectionId, { title }));
  },

  /** A section for the next year: scheme and column choices, no people and no files. */
  copySection: (
    db: Database.Database,
    { id, title, at }: { id: number; title: string; at: string },
  ): number =>
    db.transaction(() => {
      const source = sectionOperations.getSection(db, { id });
      const created = Number(
        db
          .prepare('INSERT INTO section (title, created_at, remembered_columns) VALUES (?, ?, ?)')
          .run(title, at, source?.remembered_columns ?? '{}').lastInsertRowid,
      );
      const scheme = sectionOperations.latestScheme(db, { sectionId: id });
      if (scheme !== null)
        db.prepare('INSERT INTO scheme (section_id, version, document, created_at) VALUES (?, 1, ?, ?)').run(
          created,
          scheme.document,
          at,
        );
      return created;
    })(),

  /** Removes a section for good: rows, originals that no other section holds, and what is left of them in the file. */
  removeSection: (db: Database.Database, { id }: { id: number }): void => {
    db.transaction(() => {
      db.prepare('DELETE FROM section WHERE id = ?').run(id);
      db.prepare('DELETE FROM original WHERE sha256 NOT IN (SELECT sha256 FROM section_file)').run();
    })();
    db.pragma('wal_checkpoint(TRUNCATE)');
    db.exec('VACUUM');
    db.pragma('wal_checkpoint(TRUNCATE)');
  },

  rememberColumns: (db: Database.Database, { id, columns }: { id: number; columns: string }): void => {
    db.prepare('UPDATE section SET remembered_columns = ? WHERE id = ?').run(columns, id);
  },

  latestScheme: (
    db: Database.Database,
    { sectionId }: { sectionId: number },
  ): { version: number; document: string } | null =>
    (db
      .prepare('SELECT version, document FROM scheme WHERE section_id = ? ORDER BY version DESC LIMIT 1')
      .get(sectionId) as { version: number; document: string } | undefined) ?? null,

  saveScheme: (db: Database.Database, { note, document }: { note: ActionNote; document: string }): number =>
    journalledAction(db, note, (write) => {
      const version = (sectionOperations.latestScheme(db, note)?.version ?? 0) + 1;
      write.insert('scheme', { section_id: note.sectionId, version, document, created_at: note.at });
      return version;
    }),

  listJournal: (
    db: Database.Database,
    { sectionId }: { sectionId: number },
  ): { id: number; at: string; who: string; what: string; undone: number }[] =>
    db
      .prepare(
        'SELECT id, at, who, what, undone FROM journal WHERE section_id = ? ORDER BY id DESC LIMIT 500',
      )
      .all(sectionId) as { id: number; at: string; who: string; what: string; undone: number }[],

  undo: (db: Database.Database, { sectionId }: { sectionId: number }): string | null =>
    stepJournal(db, sectionId, 'undo'),
  redo: (db: Database.Database, { sectionId }: { sectionId: number }): string | null =>
    stepJournal(db, sectionId, 'redo'),

  getSetting: (db: Database.Database, { name }: { name: string }): string | null =>
    (db.prepare('SELECT value FROM setting WHERE name = ?').get(name) as { value: string } | undefined)
      ?.value ?? null,

  setSetting: (db: Database.Database, { name, value }: { name: string; value: string }): void => {
    db.prepare(
      'INSERT INTO setting (name, value) VALUES (?, ?) ON CONFLICT (name) DO UPDATE SET value = excluded.value',
    ).run(name, value);
  },

  recordExport: (
    db: Database.Database,
    row: { sectionId: number; at: string; kind: string; options: string; sha256: string },
  ): void => {
    db.prepare(
      'INSERT INTO export_record (section_id, at, kind, options, sha256) VALUES (?, ?, ?, ?, ?)',
    ).run(row.sectionId, row.at, row.kind, row.options, row.sha256);
  },

  listExports: (
    db: Database.Database,
    { sectionId }: { sectionId: number },
  ): { at: string; kind: string; options: string; sha256: string }[] =>
    db
      .prepare('SELECT at, kind, options, sha256 FROM export_record WHERE section_id = ? ORDER BY id DESC')
      .all(sectionId) as { at: string; kind: string; options: string; sha256: string }[],
};
