import Database from 'better-sqlite3';
import {
  closeSync,
  copyFileSync,
  existsSync,
  openSync,
  readFileSync,
  readdirSync,
  rmSync,
  writeSync,
} from 'node:fs';
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
 * @param file path of the store, or ":memory:". @param migrationsFolder folder of 0001-….sql, applied in order, each in a transaction.
 * @param today date of the daily backup, "2026-12-01".
 * @throws StoreRefusal where another process holds it, it is damaged, or a newer version made it; the file is then untouched.
 */
export function openStore(file: string, migrationsFolder: string, today: string): OpenStore {
  const migrations = migrationsIn(migrationsFolder);
  const inMemory = file === ':memory:';
  const unlock = inMemory ? () => undefined : lock(file);
  try {
    const existed = !inMemory && existsSync(file);
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
        if (db.pragma('quick_check', { simple: true }) !== 'ok') {
          throw new StoreRefusal(
            'store-damaged',
            `${basename(file)} is damaged. Nothing was changed; restore a backup (${basename(file)}.backup-…), which lies beside it.`,
          );
        }
        backUp(db, file, version < migrations.length ? `before-${version + 1}` : today);
      }
      db.pragma('journal_mode = WAL');
      db.pragma('synchronous = FULL');
      db.pragma('foreign_keys = ON');
      db.pragma('secure_delete = ON');
      migrate(db, migrations, version);
      return {
        db,
        close: () => {
          db.close();
          unlock();
        },
      };
    } catch (error) {
      db.close();
      throw error;
    }
  } catch (error) {
    unlock();
    throw error;
  }
}

function opened(file: string): Database.Database {
  try {
    const db = new Database(file);
    db.pragma('schema_version');
    return db;
  } catch (error) {
    throw new StoreRefusal(
      'store-damaged',
      `${basename(file)} cannot be opened as a store (${error instanceof Error ? error.message : String(error)}). Nothing was changed.`,
    );
  }
}

function migrationsIn(folder: string): string[] {
  return readdirSync(folder)
    .filter((f) => /^\d{4}-.*\.sql$/.test(f))
    .sort()
    .map((f) => readFileSync(join(folder, f), 'utf8'));
}

function migrate(db: Database.Database, migrations: readonly string[], from: number): void {
  migrations.slice(from).forEach((sql, i) => {
    db.transaction(() => {
      db.exec(sql);
      db.pragma(`user_version = ${from + i + 1}`);
    })();
  });
}

/** One backup a day and one before each migration; the newest fourteen stay. */
function backUp(db: Database.Database, file: string, label: string): void {
  const target = `${file}.backup-${label}`;
  if (existsSync(target)) return;
  db.pragma('wal_checkpoint(TRUNCATE)');
  copyFileSync(file, target);
  const folder = dirname(file);
  const own = readdirSync(folder)
    .filter((f) => f.startsWith(`${basename(file)}.backup-`))
    .sort();
  for (const old of own.slice(0, Math.max(0, own.length - backupsKept))) rmSync(join(folder, old));
}

/** Backups of a store are purged with a deleted section. */
export function purgeBackups(file: string): void {
  if (file === ':memory:') return;
  for (const f of readdirSync(dirname(file))) {
    if (f.startsWith(`${basename(file)}.backup-`)) rmSync(join(dirname(file), f));
  }
}

/** A lock file that names the process holding the store; one left by a process that is gone is taken over. */
function lock(file: string): () => void {
  const path = `${file}.lock`;
  for (let tries = 0; tries < 2; tries++) {
    try {
      const handle = openSync(path, 'wx');
      writeSync(handle, String(process.pid));
      closeSync(handle);
      return () => rmSync(path, { force: true });
    } catch (error) {
      if ((error as NodeJS.ErrnoException).code !== 'EEXIST') {
        throw new StoreRefusal(
          'store-busy',
          `${basename(file)} cannot be locked for writing (${(error as NodeJS.ErrnoException).code ?? 'unknown'}); is its folder writable?`,
        );
      }
      const holder = Number(readFileSync(path, 'utf8'));
      if (isAlive(holder))
        throw new StoreRefusal(
          'store-busy',
          `${basename(file)} is open in another Rovimark (process ${holder}). Close that one first.`,
        );
      rmSync(path, { force: true });
    }
  }
  throw new StoreRefusal('store-busy', `${basename(file)} cannot be locked for writing.`);
}

function isAlive(pid: number): boolean {
  if (!Number.isInteger(pid) || pid <= 0) return false;
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return (error as NodeJS.ErrnoException).code === 'EPERM';
  }
}
