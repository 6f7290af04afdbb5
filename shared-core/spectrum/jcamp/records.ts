import { quoted, refuse } from '../refusal.ts';

/** A labelled data record: "##LABEL= value", and the lines below it down to the next label. */
export interface JcampRecord {
  /** Upper case without blanks, hyphens, slashes and underscores, as the standard compares labels. */
  readonly label: string;
  /** What stands behind "=" on the first line, without comment. */
  readonly value: string;
  /** Counted from 1. */
  readonly line: number;
  /** Lines below, as indices into the lines of the file: [bodyStart, bodyEnd). */
  readonly bodyStart: number;
  bodyEnd: number;
}

export interface JcampBlock {
  readonly line: number;
  readonly records: JcampRecord[];
  readonly children: JcampBlock[];
}

export function withoutComment(text: string): string {
  const comment = text.indexOf('$$');
  return (comment < 0 ? text : text.slice(0, comment)).trim();
}

export function normalisedLabel(label: string): string {
  return label.toUpperCase().replace(/[\s\-/_]/g, '');
}

function isLink(block: JcampBlock): boolean {
  return block.records.some(
    (record) =>
      record.label === 'BLOCKS' || (record.label === 'DATATYPE' && normalisedLabel(record.value) === 'LINK'),
  );
}

function refuseCut(block: JcampBlock, lineCount: number): never {
  refuse(
    'jcamp-end-missing',
    `The JCAMP-DX block that begins on line ${block.line} has no ##END=, so the end of the file is missing: copy or export the file again.`,
    lineCount,
  );
}

function readRecord(text: string, index: number): JcampRecord {
  const equals = text.indexOf('=');
  if (equals < 0) {
    refuse(
      'jcamp-record',
      `Line ${index + 1} begins with ## but is no JCAMP-DX record (${quoted(text)} has no =): the file is damaged, export it again.`,
      index + 1,
    );
  }
  return {
    label: normalisedLabel(text.slice(2, equals)),
    value: withoutComment(text.slice(equals + 1)),
    line: index + 1,
    bodyStart: index + 1,
    bodyEnd: index + 1,
  };
}

/**
 * The blocks of a JCAMP-DX text (McDonald and Wilks, Appl. Spectrosc. 42 (1988) 151; compound files: Lampen et al.,
 * Appl. Spectrosc. 45 (1991) 1545), outermost first, compound blocks with their children.
 * @throws RefusedFile where records or block ends are damaged
 */
export function readBlocks(lines: readonly string[]): JcampBlock[] {
  const outermost: JcampBlock[] = [];
  const open: JcampBlock[] = [];
  let record: JcampRecord | null = null;
  for (let i = 0; i < lines.length; i++) {
    const text = lines[i]!.trimStart();
    if (!text.startsWith('##')) {
      if (record) record.bodyEnd = i + 1;
      else if (withoutComment(text) !== '') {
        refuse(
          'jcamp-stray-line',
          `Line ${i + 1} (${quoted(text)}) stands outside every JCAMP-DX block: the file is damaged, export it again.`,
          i + 1,
        );
      }
      continue;
    }
    const next = readRecord(text, i);
    if (next.label === '') {
      // "##=" is a comment; it ends the record above it all the same.
      record = record && { ...next };
      continue;
    }
    if (next.label === 'END') {
      if (!open.pop()) {
        refuse(
          'jcamp-start-missing',
          `Line ${i + 1} ends a JCAMP-DX block that never began: the beginning of the file is missing, export it again.`,
          i + 1,
        );
      }
      record = null;
      continue;
    }
    record = next;
    const current = open.at(-1);
    if (!current || next.label === 'TITLE') {
      if (current && !isLink(current)) refuseCut(current, i + 1);
      const block: JcampBlock = { line: i + 1, records: [next], children: [] };
      (current ? current.children : outermost).push(block);
      open.push(block);
    } else current.records.push(next);
  }
  if (open.length > 0) refuseCut(open.at(-1)!, lines.length);
  return outermost;
}

/** The record with this (normalised) label; two that differ are refused. */
export function recordOf(block: JcampBlock, label: string): JcampRecord | null {
  const found = block.records.filter((record) => record.label === label);
  const [first, second] = found;
  if (first && second && found.some((record) => record.value !== first.value)) {
    refuse(
      'jcamp-record-twice',
      `##${label}= stands twice with different values, on lines ${first.line} and ${second.line}: export the file again.`,
      second.line,
    );
  }
  return first ?? null;
}
