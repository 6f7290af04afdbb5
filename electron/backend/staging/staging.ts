import { createHash } from 'node:crypto';
import {
  mkdirSync,
  existsSync,
  openSync,
  closeSync,
  writeSync,
  readFileSync,
  readdirSync,
  rmSync,
  statSync,
  writeFileSync,
  renameSync,
} from 'node:fs';
import { join } from 'node:path';
import { AppError } from '../../../shared-core/contract/index.ts';
import { classify, type Classified } from './classify.ts';
import { unzip } from './zip.ts';

/** A file of an intake that has come in whole. */
export interface StagedFile extends Classified {
  readonly name: string;
  /** Name of the file on disk. */
  readonly stored: string;
  readonly bytes: number;
  readonly sha256: string;
}

/** Uploads that wait on disk until they are committed; they survive a reload and a restart. */
export interface Staging {
  readonly putPart: (
    intakeId: number,
    name: string,
    offset: number,
    bytes: Uint8Array,
    last: boolean,
  ) => Promise<number>;
  readonly list: (intakeId: number) => readonly StagedFile[];
  readonly read: (intakeId: number, file: StagedFile) => Uint8Array;
  readonly drop: (intakeId: number) => void;
  /** Removes what no open intake owns. */
  readonly sweep: (open: readonly number[]) => void;
}

const mostFileBytes = 1_600_000_000;
const mostFiles = 20_000;

/** @param folder a folder of its own; made where it is not there. */
export function createStaging(folder: string): Staging {
  mkdirSync(folder, { recursive: true });
  const partial = new Map<string, string>();
  const cache = new Map<number, StagedFile[]>();
  const folderOf = (id: number): string => join(folder, String(id));
  const indexOf = (id: number): string => join(folderOf(id), 'index.json');

  function list(id: number): readonly StagedFile[] {
    const known = cache.get(id);
    if (known !== undefined) return known;
    const files = existsSync(indexOf(id))
      ? (JSON.parse(readFileSync(indexOf(id), 'utf8')) as StagedFile[])
      : [];
    cache.set(id, files);
    return files;
  }

  async function add(id: number, name: string, bytes: Uint8Array): Promise<void> {
    const sha256 = createHash('sha256').update(bytes).digest('hex');
    const stored = `${sha256}.bin`;
    writeFileSync(join(folderOf(id), stored), bytes);
    const classified = await classify(name, bytes);
    const files = list(id).filter((f) => f.name !== name);
    save(id, [...files, { name, stored, bytes: bytes.length, sha256, ...classified }]);
  }

  function save(id: number, files: StagedFile[]): void {
    if (files.length > mostFiles)
      throw new AppError(
        'too-large',
        `An intake takes at most ${mostFiles} files; bring them in several intakes.`,
      );
    cache.set(id, files);
    writeFileSync(`${indexOf(id)}.new`, JSON.stringify(files));
    renameSync(`${indexOf(id)}.new`, indexOf(id));
  }

  async function finish(id: number, name: string, path: string): Promise<void> {
    const bytes = new Uint8Array(readFileSync(path));
    rmSync(path);
    if (!(bytes[0] === 0x50 && bytes[1] === 0x4b) || !/\.zip$/i.test(name)) {
      await add(id, name, bytes);
      return;
    }
    const archive = unzip(bytes, name);
    if (!archive.ok) {
      const sha256 = createHash('sha256').update(bytes).digest('hex');
      save(id, [
        ...list(id).filter((f) => f.name !== name),
        {
          name,
          stored: '',
          bytes: bytes.length,
          sha256,
          became: 'left out',
          text: archive.reason,
          points: null,
          ordinate: null,
        },
      ]);
      return;
    }
    for (const file of archive.files) await add(id, file.name, file.bytes);
  }

  return {
    putPart: async (id, name, offset, bytes, last) => {
      if (offset + bytes.length > mostFileBytes)
        throw new AppError('too-large', `${name} is too large to be taken in.`);
      mkdirSync(folderOf(id), { recursive: true });
      const key = `${id}\u0000${name}`;
      const path =
        partial.get(key) ??
        join(folderOf(id), `${createHash('sha256').update(name).digest('hex').slice(0, 24)}.part`);
      partial.set(key, path);
      const present = existsSync(path) ? statSync(path).size : 0;
      if (offset !== 0 && offset !== present)
        throw new AppError('conflict', `${name}: a part of the upload is missing; drop the file again.`, {
          present,
        });
      const handle = openSync(path, offset === 0 ? 'w' : 'r+');
      try {
        writeSync(handle, bytes, 0, bytes.length, offset);
      } finally {
        closeSync(handle);
      }
      if (last) {
        partial.delete(key);
        await finish(id, name, path);
      }
      return offset + bytes.length;
    },
    list,
    read: (id, file) => {
      if (!/^[0-9a-f]{64}\.bin$/.test(file.stored)) return new Uint8Array(0);
      return new Uint8Array(readFileSync(join(folderOf(id), file.stored)));
    },
    drop: (id) => {
      cache.delete(id);
      rmSync(folderOf(id), { recursive: true, force: true });
    },
    sweep: (open) => {
      for (const entry of readdirSync(folder)) {
        if (!open.includes(Number(entry))) rmSync(join(folder, entry), { recursive: true, force: true });
      }
    },
  };
}
