import Database from 'better-sqlite3';
import { existsSync, readFileSync, readdirSync, renameSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { basename, dirname, join } from 'node:path';

/** Why a store cannot be opened, in a sentence for people. */
export class StoreRefusal extends Error {
  override readonly name = 'StoreRefusal';
  readonly code: 'store-newer' | 'store-damaged' | 'store-busy';
  constructor(code: 'store-newer' | 'store-damaged' | 'store-busy', message: string) {
    super(message);
    this.code = code;
  }
}

export interface OpenStore {
  readonly db: Database.Database;
  readonly close: () => void;
}

/** Backups kept beside the store, the oldest going first. */
const backupsKept = 14;

/**
 * Opens a store for one writer: checks it, backs it up, migrates it.
 *
 * @param file path of the store, or ":memory:". @param migrationsFolder folder of 0001-….sql, applied in order, all in one transaction.
 * @param today date of the daily backup, "2026-12-01".
 * @throws StoreRefusal where another process holds it, it is damaged, a newer version made it or it cannot be migrated; the file is then untouched.
 */
export function openStore(file: string, migrationsFolder: string, today: string): OpenStore {
  const migrations = migrationsIn(migrationsFolder);
  const inMemory = file === ':memory:';
  const existed = !inMemory && existsSync(file) && statSync(file).size > 0;
  const db = opened(file);
  try {
    const version = db.pragma('user_version', { simple: true }) as number;
    if (version > migrations.length) {
      throw new StoreRefusal(
        'store-newer',
        `${basename(file)} was made by a newer version of Rovimark (store version ${version}); nothing was changed. Install that version, or restore an older backup.`,
      );
    }
    if (existed) {
      checkIntegrity(db, file);
      backUp(db, file, version < migrations.length ? `before-${version + 1}` : today);
    }
    migrate(db, file, migrations, version);
    db.pragma('journal_mode = WAL');
    db.pragma('synchronous = FULL');
    db.pragma('foreign_keys = ON');
    db.pragma('secure_delete = ON');
  } catch (error) {
    db.close();
    throw error;
  }
  if (!inMemory) writeFileSync(holderFile(file), String(process.pid));
  return {
    db,
    close: () => {
      db.close();
      if (!inMemory) rmSync(holderFile(file), { force: true });
    },
  };
}

/** Beside the store: number of the process that holds it. It only says who; what keeps others out is the lock of the file itself, which goes with its process. */
const holderFile = (file: string): string => `${file}.lock`;

/** Opens the file and takes its exclusive lock. */
function opened(file: string): Database.Database {
  let db: Database.Database | null = null;
  try {
    db = new Database(file, { timeout: 300 });
    db.pragma('foreign_keys = OFF');
    db.pragma('locking_mode = EXCLUSIVE');
    db.exec('BEGIN EXCLUSIVE; COMMIT');
    return db;
  } catch (error) {
    db?.close();
    throw openingRefusal(file, error);
  }
}

function openingRefusal(file: string, error: unknown): StoreRefusal {
  const code = (error as { code?: unknown }).code;
  const name = basename(file);
  if (typeof code === 'string' && code.startsWith('SQLITE_BUSY')) {
    const holder = existsSync(holderFile(file)) ? ` (process ${readFileSync(holderFile(file), 'utf8')})` : '';
    return new StoreRefusal(
      'store-busy',
      `${name} is open in another Rovimark${holder}. Close that one first.`,
    );
  }
  if (code === 'SQLITE_READONLY' || code === 'SQLITE_CANTOPEN') {
    return new StoreRefusal(
      'store-busy',
      `${name} cannot be written (is its folder writable?). Nothing was changed.`,
    );
  }
  return new StoreRefusal(
    'store-damaged',
    `${name} cannot be opened as a store (${error instanceof Error ? error.message : String(error)}). Nothing was changed; a backup (${name}.backup-…) may lie beside it.`,
  );
}

function checkIntegrity(db: Database.Database, file: string): void {
  const sound = (): boolean => {
    try {
      return db.pragma('quick_check', { simple: true }) === 'ok';
    } catch {
      return false;
    }
  };
  if (sound()) return;
  throw new StoreRefusal(
    'store-damaged',
    `${basename(file)} is damaged. Nothing was changed; restore a backup (${basename(file)}.backup-…), which lies beside it.`,
  );
}

function migrationsIn(folder: string): string[] {
  return readdirSync(folder)
    .filter((f) => /^\d{4}-.*\.sql$/.test(f))
    .sort()
    .map((f) => readFileSync(join(folder, f), 'utf8'));
}

/** All missing migrations in one transaction: a store is at the newest version, or as it was. */
function migrate(db: Database.Database, file: string, migrations: readonly string[], from: number): void {
  if (from === migrations.length) return;
  try {
    db.transaction(() => {
      for (const sql of migrations.slice(from)) db.exec(sql);
      if ((db.pragma('foreign_key_check') as unknown[]).length > 0)
        throw new Error('rows would lose what they refer to');
      db.pragma(`user_version = ${migrations.length}`);
    })();
  } catch (error) {
    throw new StoreRefusal(
      'store-damaged',
      `${basename(file)} could not be brought to this version (${error instanceof Error ? error.message : String(error)}); it was left as it was.`,
    );
  }
}

/** One backup a day and one before each migration; the newest fourteen stay. It is whole or not there: written beside, then renamed. */
export function backUp(db: Database.Database, file: string, label: string): void {
  const target = `${file}.backup-${label}`;
  if (existsSync(target)) return;
  rmSync(`${file}.backup.new`, { force: true });
  // Not by copying the file: closing a second handle of it would drop the lock (POSIX).
  db.prepare('VACUUM INTO ?').run(`${file}.backup.new`);
  renameSync(`${file}.backup.new`, target);
  const own = backupsOf(file);
  for (const old of own.slice(0, Math.max(0, own.length - backupsKept))) rmSync(join(dirname(file), old));
}

/** Backups of a store, oldest first. */
function backupsOf(file: string): string[] {
  const time = (name: string): number => statSync(join(dirname(file), name)).mtimeMs;
  return readdirSync(dirname(file))
    .filter((f) => f.startsWith(`${basename(file)}.backup-`))
    .sort((a, b) => time(a) - time(b) || (a < b ? -1 : 1));
}

/** What a deleted section leaves in backups goes too; a fresh backup of the rest takes their place. */
export function purgeBackups(db: Database.Database, file: string, today: string): void {
  if (file === ':memory:') return;
  for (const f of backupsOf(file)) rmSync(join(dirname(file), f));
  backUp(db, file, today);
}
