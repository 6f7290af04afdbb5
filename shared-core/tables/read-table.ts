import { parse } from 'csv-parse/browser/esm/sync';
import type { Cell, RawTable } from './types.ts';

export type ReadTableOutcome =
  | { readonly ok: true; readonly tables: readonly RawTable[] }
  | { readonly ok: false; readonly code: string; readonly reason: string };

/** Sheets of a spreadsheet as rows of values; the host brings the reader, since unpacking differs between runtimes. */
export type SpreadsheetReader = (
  bytes: Uint8Array,
) => Promise<readonly { readonly sheet: string; readonly rows: readonly (readonly unknown[])[] }[]>;

const mostBytes = 20_000_000;

/** Text of a table: UTF-8, UTF-16 by its mark, else Windows-1252. */
export function decodeTable(bytes: Uint8Array): string {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return new TextDecoder('utf-16le').decode(bytes.subarray(2));
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return new TextDecoder('utf-16be').decode(bytes.subarray(2));
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes).replace(/^\ufeff/, '');
  } catch {
    return new TextDecoder('windows-1252').decode(bytes);
  }
}

/** The sign that separates cells: the one that makes the most rows of one width (comma, semicolon, tab). */
export function separatorOf(text: string): ',' | ';' | '\t' {
  const lines = text
    .split(/\r?\n/)
    .filter((l) => l.trim() !== '')
    .slice(0, 30);
  const score = (separator: string): number => {
    const counts = lines.map((l) => l.replace(/"[^"]*"/g, '').split(separator).length - 1);
    const most = Math.max(0, ...counts);
    return most === 0 ? 0 : counts.filter((c) => c === most).length * 100 + most;
  };
  const ranked = ([';', '\t', ','] as const)
    .map((s) => ({ s, score: score(s) }))
    .sort((a, b) => b.score - a.score);
  return ranked[0]!.score === 0 ? ',' : ranked[0]!.s;
}

/**
 * Reads a table: CSV and TSV of any separator and encoding; XLSX through the reader that the host brings.
 *
 * @returns one table per sheet (one for a text file), or a refusal with a sentence.
 */
export async function readTable(
  bytes: Uint8Array,
  fileName: string,
  spreadsheet?: SpreadsheetReader,
): Promise<ReadTableOutcome> {
  const refuse = (code: string, reason: string): ReadTableOutcome => ({
    ok: false,
    code,
    reason: `${fileName}: ${reason}`,
  });
  if (bytes.length === 0) return refuse('empty', 'the table is empty; hand in the file again.');
  if (bytes.length > mostBytes)
    return refuse(
      'too-large',
      `the table holds ${Math.round(bytes.length / 1e6)} MB; tables of submissions are far smaller.`,
    );
  if (bytes[0] === 0x50 && bytes[1] === 0x4b) {
    if (spreadsheet === undefined)
      return refuse('spreadsheet', 'spreadsheets cannot be read here; save it as CSV.');
    try {
      const sheets = await spreadsheet(bytes);
      return {
        ok: true,
        tables: sheets.map(({ sheet, rows }) => ({ fileName, sheet, rows: rows.map((r) => r.map(cellOf)) })),
      };
    } catch {
      return refuse(
        'spreadsheet-damaged',
        'the spreadsheet is damaged or protected; save it anew, or as CSV.',
      );
    }
  }
  if (bytes.subarray(0, 4000).includes(0) && !(bytes[0] === 0xff || bytes[0] === 0xfe)) {
    return refuse('binary', 'this is no text; save the table as CSV or XLSX.');
  }
  return readTextTable(decodeTable(bytes), fileName);
}

/** The same for a text at hand (pasted, or decoded before). */
export function readTextTable(text: string, fileName: string): ReadTableOutcome {
  try {
    const rows: string[][] = parse(text, {
      delimiter: separatorOf(text),
      relax_column_count: true,
      relax_quotes: true,
      skip_empty_lines: false,
      bom: true,
    });
    const cells = rows.map((row) => row.map((t): Cell => ({ text: t.trim(), storedAsNumber: false })));
    return { ok: true, tables: [{ fileName, sheet: null, rows: cells }] };
  } catch (error) {
    const detail = error instanceof Error ? error.message : String(error);
    return {
      ok: false,
      code: 'not-a-table',
      reason: `${fileName}: the rows cannot be told apart (${detail}).`,
    };
  }
}

function cellOf(value: unknown): Cell {
  if (typeof value === 'number') return { text: String(value), storedAsNumber: true };
  if (value instanceof Date) return { text: value.toISOString(), storedAsNumber: false };
  if (typeof value === 'string') return { text: value.trim(), storedAsNumber: false };
  return { text: typeof value === 'boolean' ? String(value) : '', storedAsNumber: false };
}
