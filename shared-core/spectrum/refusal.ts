/**
 * A file that cannot be taken as a spectrum. The readers throw it from deep inside a line, and the one door,
 * `readSpectrumFile`, turns it into the returned outcome; it never leaves this folder.
 */
export class RefusedFile extends Error {
  readonly code: string;
  readonly line: number | null;

  constructor(code: string, reason: string, line: number | null) {
    super(reason);
    this.code = code;
    this.line = line;
  }
}

/** Ends the reading: `reason` says what, where and what to do; `line` counts from 1 (null: the file as a whole). */
export function refuse(code: string, reason: string, line: number | null = null): never {
  throw new RefusedFile(code, reason, line);
}

/** A piece of the file for a sentence: short, on one line, in quotation marks. */
export function quoted(text: string): string {
  const plain = text.replace(/[\u0000-\u001f\u007f-\u009f\ufffd]+/g, ' ').trim();
  return `“${plain.length > 40 ? `${plain.slice(0, 40)}…` : plain}”`;
}

/** "1 point", "2 points". */
export function counted(count: number, noun: string): string {
  return `${count} ${noun}${count === 1 ? '' : 's'}`;
}
