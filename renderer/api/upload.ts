import { ask } from './client.ts';

/** A file to take in, with its folders in the name. */
export interface Upload {
  readonly name: string;
  readonly file: Blob;
}

const partBytes = 1_500_000;

function base64(bytes: Uint8Array): string {
  let binary = '';
  const chunk = 32_768;
  for (let i = 0; i < bytes.length; i += chunk)
    binary += String.fromCharCode(...bytes.subarray(i, i + chunk));
  return btoa(binary);
}

/** Sends files part by part; stops between two files where `cancelled` says so. */
export async function upload(
  intakeId: number,
  files: readonly Upload[],
  progress: (done: number) => void,
  cancelled: () => boolean,
): Promise<void> {
  for (const [i, { name, file }] of files.entries()) {
    if (cancelled()) return;
    const size = file.size;
    for (let offset = 0; offset === 0 || offset < size; offset += partBytes) {
      const bytes = new Uint8Array(await file.slice(offset, offset + partBytes).arrayBuffer());
      await ask('intake.putPart', {
        intakeId,
        fileName: name,
        offset,
        base64: base64(bytes),
        last: offset + partBytes >= size,
      });
    }
    progress(i + 1);
  }
}

/** Files of a drop, folders walked through, with their paths. */
export async function filesOfDrop(items: DataTransferItemList): Promise<Upload[]> {
  const entries = Array.from(items).flatMap((item) => item.webkitGetAsEntry() ?? []);
  const found = await Promise.all(entries.map(walk));
  return found.flat();
}

async function walk(entry: FileSystemEntry): Promise<Upload[]> {
  if (entry instanceof FileSystemFileEntry || entry.isFile) {
    const file = await new Promise<File>((resolve, reject) =>
      (entry as FileSystemFileEntry).file(resolve, reject),
    );
    return [{ name: entry.fullPath.replace(/^\//, ''), file }];
  }
  const reader = (entry as FileSystemDirectoryEntry).createReader();
  const all: Upload[] = [];
  for (;;) {
    const batch = await new Promise<FileSystemEntry[]>((resolve, reject) =>
      reader.readEntries(resolve, reject),
    );
    if (batch.length === 0) return all;
    for (const child of batch) all.push(...(await walk(child)));
  }
}
