import Database from 'better-sqlite3';
import { cpSync, existsSync, mkdtempSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { openStore } from '../../electron/backend/store/open-store.ts';
import { operations } from '../../electron/backend/store/operations.ts';

let folder: string;
let file: string;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'rovimark-store-'));
  file = join(folder, 'sections.sqlite');
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

const open = (day = '2026-12-01', migrations = 'migrations'): ReturnType<typeof openStore> =>
  openStore(file, migrations, day);
const at = '2026-12-01T10:00:00.000Z';
const backups = (): string[] => readdirSync(folder).filter((f) => f.includes('.backup-'));

function madeOnce(): void {
  const store = open();
  operations.createSection(store.db, { title: 'Gas phase', at });
  store.close();
}

describe('a store', () => {
  it('opens with write-ahead log, full synchronisation, foreign keys and secure deletion', () => {
    const { db, close } = open();
    expect(db.pragma('journal_mode', { simple: true })).toBe('wal');
    expect(db.pragma('synchronous', { simple: true })).toBe(2);
    expect(db.pragma('foreign_keys', { simple: true })).toBe(1);
    expect(db.pragma('secure_delete', { simple: true })).toBe(1);
    const loose = db
      .prepare("SELECT name FROM sqlite_schema WHERE type = 'table' AND sql NOT LIKE '%STRICT'")
      .all();
    expect(loose).toEqual([]);
    close();
  });

  it('is refused while another one holds it, with the process that does; nothing is lost', () => {
    const first = open();
    operations.createSection(first.db, { title: 'Gas phase', at });
    expect(() => open()).toThrow(new RegExp(`another Rovimark \\(process ${process.pid}\\)`));
    operations.createSection(first.db, { title: 'Second', at });
    expect(operations.listSections(first.db)).toHaveLength(2);
    first.close();
    const again = open();
    expect(operations.listSections(again.db)).toHaveLength(2);
    again.close();
  });

  it('opens although a stopped process left its note, whoever has that process number now', () => {
    madeOnce();
    writeFileSync(`${file}.lock`, String(process.ppid));
    const store = open();
    expect(operations.listSections(store.db)).toHaveLength(1);
    store.close();
    expect(existsSync(`${file}.lock`)).toBe(false);
  });

  it('of a newer version is refused untouched', () => {
    madeOnce();
    const db = new Database(file);
    db.pragma('user_version = 99');
    db.close();
    const before = readFileSync(file);
    expect(() => open()).toThrow(/newer version of Rovimark \(store version 99\)/);
    expect(readFileSync(file).equals(before)).toBe(true);
    expect(backups()).toEqual([]);
  });

  it('that is no database, or is cut short, is refused untouched', () => {
    writeFileSync(file, 'a text of somebody else, long enough to be looked at as a header of a file');
    const text = readFileSync(file);
    expect(() => open()).toThrow(/cannot be opened as a store/);
    expect(readFileSync(file).equals(text)).toBe(true);
    rmSync(file);
    madeOnce();
    const half = readFileSync(file).subarray(0, 40_000);
    writeFileSync(file, half);
    expect(() => open('2027-01-01')).toThrow(/damaged|cannot be opened/);
    expect(readFileSync(file).equals(half)).toBe(true);
  });

  it('whose migration fails stays as it was, byte for byte, even when an earlier migration went through', () => {
    madeOnce();
    const folderOfMigrations = join(folder, 'migrations');
    cpSync('migrations', folderOfMigrations, { recursive: true });
    const next = readdirSync(folderOfMigrations).length + 1;
    const name = (k: number): string => join(folderOfMigrations, `${String(k).padStart(4, '0')}-test.sql`);
    writeFileSync(name(next), 'ALTER TABLE section ADD COLUMN colour TEXT;');
    writeFileSync(name(next + 1), 'DELETE FROM section; ALTER TABLE nowhere ADD COLUMN x TEXT;');
    const before = readFileSync(file);
    expect(() => open('2026-12-01', folderOfMigrations)).toThrow(/left as it was/);
    expect(readFileSync(file).equals(before)).toBe(true);
    // Backed up before the attempt, and the same version still opens it.
    expect(backups()).toEqual([`sections.sqlite.backup-before-${next}`]);
    const store = open();
    expect(operations.listSections(store.db)).toHaveLength(1);
    store.close();
  });

  it('is backed up once a day, whole, and the newest fourteen stay', () => {
    madeOnce();
    for (let day = 1; day <= 17; day++) {
      for (let time = 0; time < 2; time++) open(`2026-12-${String(day).padStart(2, '0')}`).close();
    }
    expect(backups()).toHaveLength(14);
    expect(backups()).not.toContain('sections.sqlite.backup-2026-12-03');
    expect(backups()).toContain('sections.sqlite.backup-2026-12-17');
    const backup = new Database(join(folder, 'sections.sqlite.backup-2026-12-17'), { readonly: true });
    expect(backup.pragma('integrity_check', { simple: true })).toBe('ok');
    expect(backup.prepare('SELECT title FROM section').all()).toEqual([{ title: 'Gas phase' }]);
    expect(backup.pragma('user_version', { simple: true })).toBe(1);
    backup.close();
  });
});
