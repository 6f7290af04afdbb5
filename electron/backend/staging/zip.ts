import { Unzip, UnzipInflate } from 'fflate';

export type UnzipOutcome =
  | { readonly ok: true; readonly files: readonly { readonly name: string; readonly bytes: Uint8Array }[] }
  | { readonly ok: false; readonly reason: string };

/** Bounds of an archive: what a section can reasonably hold. */
export const zipLimits = { entries: 20_000, unpackedBytes: 1_500_000_000, entryBytes: 100_000_000 };

interface Entry {
  readonly name: string;
  readonly method: number;
  readonly encrypted: boolean;
  readonly crc32: number;
  readonly size: number;
}

/**
 * Unpacks a ZIP whole or refuses it whole: names that leave the folder, encryption, archives within, wrong sizes or check sums, and
 * more than the bounds are refused with a sentence.
 *
 * @param bytes the archive. @param archiveName its name, for the sentence.
 */
export function unzip(bytes: Uint8Array, archiveName: string): UnzipOutcome {
  const refuse = (what: string): UnzipOutcome => ({
    ok: false,
    reason: `${archiveName}: ${what} Nothing of it was taken; pack the files anew, or drop the folder itself.`,
  });
  const entries = centralDirectory(bytes);
  if (entries === null) return refuse('the archive is damaged or cut short.');
  if (entries.length > zipLimits.entries)
    return refuse(`the archive holds ${entries.length} entries, more than ${zipLimits.entries}.`);
  const unsafe = entries.find((e) => !isSafe(e.name));
  if (unsafe !== undefined) return refuse(`the entry “${unsafe.name}” points outside the archive.`);
  const wanted = entries.filter((e) => !e.name.endsWith('/') && !isHidden(e.name));
  for (const e of wanted) {
    if (e.encrypted) return refuse('the archive is encrypted.');
    if (/\.(zip|7z|rar|tar|gz)$/i.test(e.name))
      return refuse(`“${e.name}” is an archive within the archive.`);
    if (e.method !== 0 && e.method !== 8)
      return refuse(`“${e.name}” is packed in a way that is not supported.`);
    if (e.size > zipLimits.entryBytes) return refuse(`“${e.name}” is too large.`);
  }
  if (wanted.reduce((sum, e) => sum + e.size, 0) > zipLimits.unpackedBytes)
    return refuse('the archive unpacks to more than 1.5 GB.');
  const files = inflate(bytes, wanted);
  if (typeof files === 'string') return refuse(files);
  return { ok: true, files };
}

function inflate(
  bytes: Uint8Array,
  wanted: readonly Entry[],
): { name: string; bytes: Uint8Array }[] | string {
  const byName = new Map(wanted.map((e) => [e.name, e]));
  const files: { name: string; bytes: Uint8Array }[] = [];
  // Held in an object: it is set inside callbacks, which the compiler does not see.
  const state: { fault: string | null } = { fault: null };
  const archive = new Unzip((file) => {
    const entry = byName.get(file.name);
    if (entry === undefined || state.fault !== null) return;
    const parts: Uint8Array[] = [];
    let size = 0;
    file.ondata = (error, data, final) => {
      if (error !== null) {
        state.fault = `“${file.name}” is damaged.`;
        return;
      }
      size += data.length;
      // A header may lie about the size: what comes out counts.
      if (size > entry.size) {
        state.fault = `“${file.name}” is larger than its header says.`;
        file.terminate();
        return;
      }
      parts.push(data);
      if (!final) return;
      const whole = join(parts, size);
      if (size !== entry.size || crc32(whole) !== entry.crc32)
        state.fault = `“${file.name}” does not match its check sum.`;
      else files.push({ name: file.name, bytes: whole });
    };
    file.start();
  });
  archive.register(UnzipInflate);
  try {
    archive.push(bytes, true);
  } catch {
    return 'the archive is damaged.';
  }
  if (state.fault !== null) return state.fault;
  return files.length === wanted.length ? files : 'some entries could not be unpacked.';
}

function join(parts: readonly Uint8Array[], size: number): Uint8Array {
  const whole = new Uint8Array(size);
  let at = 0;
  for (const part of parts) {
    whole.set(part, at);
    at += part.length;
  }
  return whole;
}

const isHidden = (name: string): boolean =>
  name.split('/').some((p) => p.startsWith('.') || p === '__MACOSX');
const isSafe = (name: string): boolean =>
  name !== '' &&
  !name.startsWith('/') &&
  !name.includes('\\') &&
  !/^[A-Za-z]:/.test(name) &&
  !name.includes('\0') &&
  !name.split('/').includes('..');

/** Entries of the central directory at the end of the archive (APPNOTE of the ZIP format); null where it is not there. */
function centralDirectory(bytes: Uint8Array): Entry[] | null {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  let end = -1;
  for (let i = bytes.length - 22; i >= Math.max(0, bytes.length - 65_557); i--) {
    if (view.getUint32(i, true) === 0x06054b50) {
      end = i;
      break;
    }
  }
  if (end < 0) return null;
  const count = view.getUint16(end + 10, true);
  let at = view.getUint32(end + 16, true);
  const entries: Entry[] = [];
  for (let k = 0; k < count; k++) {
    if (at + 46 > bytes.length || view.getUint32(at, true) !== 0x02014b50) return null;
    const nameLength = view.getUint16(at + 28, true);
    const flags = view.getUint16(at + 8, true);
    entries.push({
      name: new TextDecoder().decode(bytes.subarray(at + 46, at + 46 + nameLength)),
      method: view.getUint16(at + 10, true),
      encrypted: (flags & 1) === 1,
      crc32: view.getUint32(at + 16, true),
      size: view.getUint32(at + 24, true),
    });
    at += 46 + nameLength + view.getUint16(at + 30, true) + view.getUint16(at + 32, true);
  }
  return entries;
}

const crcTable = Uint32Array.from({ length: 256 }, (_, n) => {
  let c = n;
  for (let k = 0; k < 8; k++) c = c & 1 ? 0xedb88320 ^ (c >>> 1) : c >>> 1;
  return c;
});

/** CRC-32 of the ZIP format (polynomial 0xEDB88320). */
export function crc32(bytes: Uint8Array): number {
  let c = 0xffffffff;
  for (const byte of bytes) c = crcTable[(c ^ byte) & 0xff]! ^ (c >>> 8);
  return (c ^ 0xffffffff) >>> 0;
}
