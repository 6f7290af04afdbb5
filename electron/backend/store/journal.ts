import type Database from 'better-sqlite3';

type Row = Readonly<Record<string, unknown>>;
interface Change {
  readonly table: JournalledTable;
  readonly id: number;
  readonly before: Row | null;
  readonly after: Row | null;
}

/** Tables whose rows people change; each has an INTEGER PRIMARY KEY named id. */
const journalled = ['section', 'scheme', 'correction', 'decision', 'hand_points', 'remark'] as const;
export type JournalledTable = (typeof journalled)[number];

/** Writes rows inside a journalled action. */
export interface JournalledWriter {
  /** Inserts a row; returns its id. */
  readonly insert: (table: JournalledTable, row: Row) => number;
  readonly update: (table: JournalledTable, id: number, row: Row) => void;
  readonly remove: (table: JournalledTable, id: number) => void;
}

export interface ActionNote {
  readonly sectionId: number;
  readonly at: string;
  readonly who: string;
  readonly what: string;
}

/** One user action: all its row changes in one transaction, with their before and after in the journal; what was undone is dropped. */
export function journalledAction<T>(
  db: Database.Database,
  note: ActionNote,
  action: (write: JournalledWriter) => T,
): T {
  return db.transaction(() => {
    const changes: Change[] = [];
    const result = action(writer(db, changes));
    if (changes.length > 0) {
      db.prepare('DELETE FROM journal WHERE section_id = ? AND undone = 1').run(note.sectionId);
      db.prepare('INSERT INTO journal (section_id, at, who, what, changes) VALUES (?, ?, ?, ?, ?)').run(
        note.sectionId,
        note.at,
        note.who,
        note.what,
        JSON.stringify(changes),
      );
    }
    return result;
  })();
}

/** Takes the last action back (or does the last undone one again); returns what it was, or null. */
export function stepJournal(
  db: Database.Database,
  sectionId: number,
  direction: 'undo' | 'redo',
): string | null {
  const undo = direction === 'undo';
  return db.transaction(() => {
    const entry = db
      .prepare(
        `SELECT id, what, changes FROM journal WHERE section_id = ? AND undone = ? ORDER BY id ${undo ? 'DESC' : 'ASC'} LIMIT 1`,
      )
      .get(sectionId, undo ? 0 : 1) as { id: number; what: string; changes: string } | undefined;
    if (entry === undefined) return null;
    const changes = JSON.parse(entry.changes) as Change[];
    for (const change of undo ? changes.reverse() : changes)
      restore(db, change.table, change.id, undo ? change.before : change.after);
    db.prepare('UPDATE journal SET undone = ? WHERE id = ?').run(undo ? 1 : 0, entry.id);
    return entry.what;
  })();
}

function writer(db: Database.Database, changes: Change[]): JournalledWriter {
  return {
    insert: (table, row) => {
      const id = Number(insertRow(db, table, row));
      changes.push({ table, id, before: null, after: rowOf(db, table, id) });
      return id;
    },
    update: (table, id, row) => {
      const before = rowOf(db, table, id);
      const keys = Object.keys(row);
      db.prepare(`UPDATE ${checked(table)} SET ${keys.map((k) => `${k} = ?`).join(', ')} WHERE id = ?`).run(
        ...keys.map((k) => row[k]),
        id,
      );
      changes.push({ table, id, before, after: rowOf(db, table, id) });
    },
    remove: (table, id) => {
      const before = rowOf(db, table, id);
      db.prepare(`DELETE FROM ${checked(table)} WHERE id = ?`).run(id);
      changes.push({ table, id, before, after: null });
    },
  };
}

function restore(db: Database.Database, table: JournalledTable, id: number, row: Row | null): void {
  // The section row is parent of everything: it is changed in place, never replaced.
  if (row !== null && rowOf(db, table, id) !== null) {
    const keys = Object.keys(row).filter((k) => k !== 'id');
    db.prepare(`UPDATE ${checked(table)} SET ${keys.map((k) => `${k} = ?`).join(', ')} WHERE id = ?`).run(
      ...keys.map((k) => row[k]),
      id,
    );
  } else if (row !== null) insertRow(db, table, row);
  else db.prepare(`DELETE FROM ${checked(table)} WHERE id = ?`).run(id);
}

function insertRow(db: Database.Database, table: JournalledTable, row: Row): number | bigint {
  const keys = Object.keys(row);
  return db
    .prepare(`INSERT INTO ${checked(table)} (${keys.join(', ')}) VALUES (${keys.map(() => '?').join(', ')})`)
    .run(...keys.map((k) => row[k])).lastInsertRowid;
}

function rowOf(db: Database.Database, table: JournalledTable, id: number): Row | null {
  return (db.prepare(`SELECT * FROM ${checked(table)} WHERE id = ?`).get(id) as Row | undefined) ?? null;
}

/** Table names go into SQL text: only those of the list may. */
function checked(table: string): string {
  if (!(journalled as readonly string[]).includes(table))
    throw new RangeError(`table: ${table} is not journalled`);
  return table;
}
