import { refuse } from '../refusal.ts';
import { byteCensus, refuseKnownFormats } from './sniff.ts';

export type TextEncoding = 'utf-8' | 'utf-16le' | 'utf-16be' | 'windows-1252';

export interface DecodedText {
  readonly text: string;
  readonly encoding: TextEncoding;
}

function encodingByMark(bytes: Uint8Array): TextEncoding | null {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return 'utf-16le';
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return 'utf-16be';
  if (bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf) return 'utf-8';
  return null;
}

function refuseBinary(): never {
  refuse(
    'binary-file',
    'The file is binary, not text: export the spectrum from the instrument as JCAMP-DX or as text with two columns.',
  );
}

/** Encoding from the byte-order mark, else from where zero bytes stand; refuses what no text encoding explains. */
function encodingOf(bytes: Uint8Array): TextEncoding | null {
  const marked = encodingByMark(bytes);
  const census = byteCensus(bytes);
  const zeros = census.zerosAtEven + census.zerosAtOdd;
  if (marked === 'utf-16le' || marked === 'utf-16be') return marked;
  if (zeros > 0.25 * census.looked && bytes.length % 2 === 0) {
    // Plain letters and digits in UTF-16 have a zero in every second place, and always the same one.
    if (census.zerosAtEven < 0.02 * zeros) return 'utf-16le';
    if (census.zerosAtOdd < 0.02 * zeros) return 'utf-16be';
  }
  if (zeros > 0 || census.controls > 0.002 * census.looked) refuseBinary();
  if (bytes.length > 4_000_000 && census.digits < 0.15 * census.looked) {
    refuse(
      'text-without-numbers',
      'The file is a long text with few numbers in it, not a spectrum: export the spectrum as JCAMP-DX or as text with two columns.',
    );
  }
  return marked;
}

/**
 * The text of a file: UTF-8 (with or without mark), UTF-16 of either byte order, else Windows-1252.
 * @throws RefusedFile when the bytes are no text at all
 */
export function decodeText(bytes: Uint8Array): DecodedText {
  refuseKnownFormats(bytes);
  const encoding = encodingOf(bytes);
  let decoded: DecodedText;
  if (encoding === 'utf-16le' || encoding === 'utf-16be') {
    decoded = { text: new TextDecoder(encoding).decode(bytes), encoding };
    if (bytes.length % 2 === 1) {
      refuse(
        'half-a-character',
        'The file is UTF-16 text and ends in the middle of a character, so its end is missing: copy or export it again.',
      );
    }
  } else {
    try {
      decoded = { text: new TextDecoder('utf-8', { fatal: true }).decode(bytes), encoding: 'utf-8' };
    } catch {
      decoded = { text: new TextDecoder('windows-1252').decode(bytes), encoding: 'windows-1252' };
    }
  }
  if (decoded.text.includes('\u0000')) refuseBinary();
  return decoded;
}

const mostLines = 3_000_000;

/** Lines without their ends (LF, CRLF or CR). */
export function linesOf(text: string): string[] {
  const end = text.includes('\n') ? '\n' : '\r';
  let count = 1;
  for (let at = text.indexOf(end); at >= 0; at = text.indexOf(end, at + 1)) count++;
  if (count > mostLines) {
    refuse(
      'too-large',
      `The file has ${count} lines, more than any spectrum here (${mostLines}): export only the range with the bands.`,
    );
  }
  const lines = text.split(/\r\n|\n|\r/);
  // A control-Z was the end mark of text files once; some instruments still write it.
  if (lines.at(-1)?.trim() === '\u001a') lines.pop();
  return lines;
}
