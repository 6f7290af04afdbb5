import { spawn } from 'node:child_process';
import { cpSync, mkdirSync, mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type Database from 'better-sqlite3';
import { openStore } from '../../electron/backend/store/open-store.ts';

/** What was seen over all kills. */
export interface TortureCounts {
  kills: number;
  /** Kills by the last thing that the process had acknowledged. */
  readonly killedAfter: Record<string, number>;
  acknowledged: number;
  /** Sentences about what was lost or damaged: empty is the only good answer. */
  readonly faults: string[];
}

type Fact = Readonly<Record<string, unknown>> & { readonly fact: string };

/** Starts the child, kills it after a random time, and returns what it had acknowledged by then. */
function killedRun(
  store: string,
  migrations: string,
  seed: number,
  from: 'opening' | 'opened',
  afterMs: number,
): Promise<Fact[]> {
  return new Promise((resolve, reject) => {
    const child = spawn(
      process.execPath,
      ['tests/helpers/torture-child.ts', store, migrations, String(seed)],
      {
        stdio: ['ignore', 'pipe', 'pipe'],
      },
    );
    let out = '';
    let errors = '';
    let timer: NodeJS.Timeout | null = null;
    child.stdout.on('data', (part: Buffer) => {
      out += part.toString();
      // The time runs from the moment at which the store is touched, or is open.
      if (out.includes(`"fact":"${from}"`)) timer ??= setTimeout(() => child.kill('SIGKILL'), afterMs);
    });
    child.stderr.on('data', (part: Buffer) => (errors += part.toString()));
    child.on('close', (_, signal) => {
      if (timer !== null) clearTimeout(timer);
      if (signal !== 'SIGKILL') reject(new Error(`the process ended by itself: ${errors}`));
      else
        resolve(
          out
            .split('\n')
            .slice(0, -1)
            .map((line) => JSON.parse(line) as Fact),
        );
    });
  });
}

/** Kills a working program again and again, and looks at the store after each. */
export async function torture(
  kills: number,
  seed: number,
  tell: (counts: TortureCounts) => void = () => undefined,
): Promise<TortureCounts> {
  const folder = mkdtempSync(join(tmpdir(), 'rovimark-torture-'));
  const counts: TortureCounts = { kills: 0, killedAfter: {}, acknowledged: 0, faults: [] };
  let state = seed;
  const random = (): number => {
    state = (state * 48_271) % 2_147_483_647;
    return state / 2_147_483_647;
  };
  const later = laterMigrations(folder);
  const all: Fact[] = [];
  mkdirSync(join(folder, 'store'));
  try {
    for (let k = 0; k < kills; k++) {
      const migrating = k % 5 === 4;
      // A migration is killed on a copy, which is then newer than the rest of the rounds.
      const place = migrating ? join(folder, `migrating-${k}`) : join(folder, 'store');
      if (migrating) cpSync(join(folder, 'store'), place, { recursive: true });
      const file = join(place, 'sections.sqlite');
      const migrations = migrating ? later : 'migrations';
      const from = migrating || random() < 0.15 ? 'opening' : 'opened';
      const afterMs = from === 'opening' ? random() * 300 : random() * random() * 3000;
      const facts = await killedRun(file, migrations, Math.floor(random() * 1e9) + 1, from, afterMs);
      counts.kills++;
      counts.acknowledged += facts.length;
      const last = `${migrating ? 'migrating, ' : ''}${facts.at(-1)?.fact ?? 'start'}`;
      counts.killedAfter[last] = (counts.killedAfter[last] ?? 0) + 1;
      if (!migrating) all.push(...facts);
      counts.faults.push(
        ...inspect(file, migrations, migrating ? [...all, ...facts] : all).map((f) => `kill ${k + 1}: ${f}`),
      );
      if (migrating) rmSync(place, { recursive: true });
      tell(counts);
    }
    if (!readdirSync(join(folder, 'store')).includes('sections.sqlite'))
      counts.faults.push('the store is gone');
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
  return counts;
}

/** The released migrations and two more that rewrite large tables. */
function laterMigrations(folder: string): string {
  const later = join(folder, 'later-migrations');
  cpSync('migrations', later, { recursive: true });
  writeFileSync(
    join(later, '0101-rewrite.sql'),
    'CREATE TABLE copy AS SELECT * FROM original; UPDATE original SET byte_count = byte_count + 0; DROP TABLE copy;',
  );
  writeFileSync(join(later, '0102-column.sql'), 'ALTER TABLE remark ADD COLUMN seen_at TEXT;');
  return later;
}

/** Opens the store as the program does; whole, consistent, and with everything that was acknowledged. */
function inspect(file: string, migrations: string, facts: readonly Fact[]): string[] {
  const faults: string[] = [];
  const { db, close } = openStore(file, migrations, '2026-12-01');
  try {
    if (db.pragma('integrity_check', { simple: true }) !== 'ok') faults.push('integrity check failed');
    if ((db.pragma('foreign_key_check') as unknown[]).length > 0) faults.push('foreign keys broken');
    for (const fact of facts) faults.push(...missing(db, fact));
    faults.push(...lastWritten(db, facts, 'comment', 'SELECT text FROM remark WHERE submission_id = ?'));
    faults.push(
      ...lastWritten(
        db,
        facts,
        'decision',
        "SELECT comment FROM decision WHERE submission_id = ? AND quantity = 'Be'",
      ),
    );
    const exports = facts.filter((f) => f.fact === 'exported').length;
    if ((db.prepare('SELECT COUNT(*) FROM export_record').pluck().get() as number) < exports)
      faults.push('an export is not on record');
  } finally {
    close();
  }
  return faults;
}

function missing(db: Database.Database, fact: Fact): string[] {
  const count = (sql: string): number => db.prepare(sql).pluck().get(fact['sectionId']) as number;
  if (fact.fact === 'section' && count('SELECT COUNT(*) FROM section WHERE id = ?') !== 1)
    return [`section ${String(fact['sectionId'])} is missing`];
  if (fact.fact !== 'committed') return [];
  const whole =
    count('SELECT COUNT(*) FROM submission WHERE section_id = ?') === fact['submissions'] &&
    count(
      "SELECT COUNT(*) FROM section_file f JOIN original o USING (sha256) WHERE f.kind = 'spectrum' AND section_id = ?",
    ) === fact['spectra'] &&
    count(
      'SELECT COUNT(*) FROM submission s JOIN submission_file l ON l.submission_id = s.id WHERE s.section_id = ?',
    ) === fact['spectra'];
  return whole ? [] : [`intake of section ${String(fact['sectionId'])} is not whole`];
}

/** The text kept for a submission is the last acknowledged one, or one that was written after it and not acknowledged any more. */
function lastWritten(db: Database.Database, facts: readonly Fact[], kind: string, sql: string): string[] {
  const last = new Map<unknown, { text: string; at: number }>();
  facts.forEach((f, at) => {
    if (f.fact === kind) last.set(f['submissionId'], { text: String(f['text']), at });
  });
  return [...last].flatMap(([submissionId, { text }]) => {
    const kept = db.prepare(sql).pluck().get(submissionId) as string | undefined;
    if (kept === text) return [];
    const acknowledgedBefore = facts.some((f) => f.fact === kind && f['text'] === kept);
    return kept === undefined || acknowledgedBefore
      ? [`${kind} “${text}” on submission ${String(submissionId)} is lost (kept: ${kept ?? 'nothing'})`]
      : [];
  });
}
