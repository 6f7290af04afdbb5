import { open, stat } from 'node:fs/promises';
import type { SourceFile } from '../../shared-core/spectrum/types.ts';

/** A file larger than this is no spectrum (500,000 points of text take some 15 MB). */
const mostBytes = 100_000_000;

/** A file's bytes, or in one sentence why it is not read; a huge one is refused before it is loaded. */
export async function readSource(
  path: string,
  name: string,
): Promise<{ ok: true; file: SourceFile } | { ok: false; code: string; reason: string }> {
  try {
    const { size, ...info } = await stat(path).then((s) => ({ size: s.size, isFile: s.isFile() }));
    if (!info.isFile)
      return { ok: false, code: 'not-a-file', reason: `${name}: this is a folder, not a file.` };
    if (size > mostBytes) {
      return {
        ok: false,
        code: 'too-large',
        reason: `${name}: ${Math.round(size / 1e6)} MB are too large for a spectrum; export the range of the band alone.`,
      };
    }
    const handle = await open(path);
    try {
      return { ok: true, file: { name, bytes: new Uint8Array(await handle.readFile()) } };
    } finally {
      await handle.close();
    }
  } catch (error) {
    const code = (error as NodeJS.ErrnoException).code ?? 'unknown';
    const why =
      code === 'ENOENT'
        ? 'there is no such file'
        : code === 'EACCES'
          ? 'it may not be read'
          : `it cannot be read (${code})`;
    return { ok: false, code: 'unreadable-file', reason: `${name}: ${why}.` };
  }
}
