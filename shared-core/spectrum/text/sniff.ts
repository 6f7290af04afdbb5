import { refuse } from '../refusal.ts';

/** Files beyond this are refused unread: 500,000 points in ten columns stay below it. */
export const largestFileBytes = 128 * 1024 * 1024;

interface Signature {
  readonly bytes: readonly number[];
  readonly code: string;
  readonly what: string;
}

const advice = 'export the spectrum as JCAMP-DX or as text with two columns and hand that in';

/** First bytes of common formats (from their public specifications). */
const signatures: readonly Signature[] = [
  { bytes: [0x89, 0x50, 0x4e, 0x47], code: 'image-file', what: 'an image (PNG)' },
  { bytes: [0xff, 0xd8, 0xff], code: 'image-file', what: 'an image (JPEG)' },
  { bytes: [0x47, 0x49, 0x46, 0x38], code: 'image-file', what: 'an image (GIF)' },
  { bytes: [0x49, 0x49, 0x2a, 0x00], code: 'image-file', what: 'an image (TIFF)' },
  { bytes: [0x4d, 0x4d, 0x00, 0x2a], code: 'image-file', what: 'an image (TIFF)' },
  { bytes: [0x25, 0x50, 0x44, 0x46], code: 'pdf-file', what: 'a PDF document' },
  { bytes: [0x1f, 0x8b], code: 'archive-file', what: 'a compressed file (gzip)' },
  { bytes: [0x37, 0x7a, 0xbc, 0xaf], code: 'archive-file', what: 'an archive (7z)' },
  { bytes: [0x52, 0x61, 0x72, 0x21, 0x1a, 0x07], code: 'archive-file', what: 'an archive (RAR)' },
  { bytes: [0x42, 0x5a, 0x68], code: 'archive-file', what: 'a compressed file (bzip2)' },
  { bytes: [0xfd, 0x37, 0x7a, 0x58, 0x5a], code: 'archive-file', what: 'a compressed file (xz)' },
  { bytes: [0xd0, 0xcf, 0x11, 0xe0], code: 'spreadsheet-file', what: 'an office document of the old binary kind' },
  { bytes: [0x7b, 0x5c, 0x72, 0x74, 0x66], code: 'document-file', what: 'a word-processor document (RTF)' },
]; // prettier-ignore

function startsWith(bytes: Uint8Array, start: readonly number[]): boolean {
  return start.every((byte, i) => bytes[i] === byte);
}

function latin(bytes: Uint8Array, from: number, to: number): string {
  let text = '';
  for (let i = from; i < Math.min(to, bytes.length); i++) text += String.fromCharCode(bytes[i]!);
  return text;
}

function refuseZip(bytes: Uint8Array): never {
  const ends = latin(bytes, 0, 4000) + latin(bytes, Math.max(4000, bytes.length - 4000), bytes.length);
  if (ends.includes('xl/') || ends.includes('[Content_Types].xml') || ends.includes('opendocument')) {
    refuse(
      'spreadsheet-file',
      `This is a spreadsheet or office document, not a spectrum file: save the sheet with the spectrum as CSV, or ${advice}.`,
    );
  }
  refuse(
    'archive-file',
    'This is a ZIP archive, not a spectrum file: hand in the files inside it, or drop the archive on the intake as a whole.',
  );
}

/** Refuses what its first bytes show to be another kind of file. */
export function refuseKnownFormats(bytes: Uint8Array): void {
  if (bytes.length === 0) {
    refuse('empty-file', `The file is empty (0 bytes): ${advice}.`);
  }
  if (startsWith(bytes, [0x50, 0x4b, 0x03, 0x04]) || startsWith(bytes, [0x50, 0x4b, 0x05, 0x06])) {
    refuseZip(bytes);
  }
  const known = signatures.find((signature) => startsWith(bytes, signature.bytes));
  if (known) refuse(known.code, `This is ${known.what}, not a spectrum file: ${advice}.`);
  if (latin(bytes, 0, 2) === 'BM' && bytes.length > 26 && bytes[14] === 40 && bytes[15] === 0) {
    refuse('image-file', `This is an image (BMP), not a spectrum file: ${advice}.`);
  }
  if (latin(bytes, 0, 4) === 'RIFF') {
    refuse('binary-file', `This is an image, sound or video file, not a spectrum file: ${advice}.`);
  }
  if (bytes.length > largestFileBytes) {
    const size = Math.round(bytes.length / (1024 * 1024));
    refuse(
      'too-large',
      `The file is too large for a spectrum (${size} MB; the limit is ${largestFileBytes / (1024 * 1024)} MB): ${advice}.`,
    );
  }
}

/** Up to 32 stretches of 1 KB, spread evenly: what a look at any size of file costs. */
function samplesOf(bytes: Uint8Array): Uint8Array[] {
  const stretch = 1024;
  const count = Math.min(32, Math.ceil(bytes.length / stretch));
  return Array.from({ length: count }, (_, i) => {
    const from = count === 1 ? 0 : Math.floor(((bytes.length - stretch) * i) / (count - 1));
    return bytes.subarray(Math.max(0, from), Math.max(0, from) + stretch);
  });
}

export interface ByteCensus {
  readonly looked: number;
  readonly zerosAtEven: number;
  readonly zerosAtOdd: number;
  readonly controls: number;
  readonly digits: number;
}

/** Counts over samples of the file; even and odd are offsets from the file's beginning. */
export function byteCensus(bytes: Uint8Array): ByteCensus {
  let looked = 0;
  let zerosAtEven = 0;
  let zerosAtOdd = 0;
  let controls = 0;
  let digits = 0;
  for (const sample of samplesOf(bytes)) {
    const odd = (sample.byteOffset - bytes.byteOffset) & 1;
    for (let i = 0; i < sample.length; i++) {
      const byte = sample[i]!;
      if (byte === 0) {
        if ((i + odd) & 1) zerosAtOdd++;
        else zerosAtEven++;
      } else if (byte < 32 && byte !== 9 && byte !== 10 && byte !== 13 && byte !== 12 && byte !== 26) {
        controls++;
      } else if (byte >= 48 && byte <= 57) digits++;
    }
    looked += sample.length;
  }
  return { looked, zerosAtEven, zerosAtOdd, controls, digits };
}
