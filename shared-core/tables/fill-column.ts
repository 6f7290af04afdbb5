import { harmless } from './write-grades.ts';

export interface FillColumnRequest {
  /** Header of the column that holds the student key. */
  readonly keyColumn: string;
  /** Header of the column to fill. */
  readonly targetColumn: string;
  /** What to write, by student key. */
  readonly values: ReadonlyMap<string, string>;
  /** Sign between cells of the file. */
  readonly separator: ',' | ';' | '\t';
}

export type FillColumnOutcome =
  | {
      readonly ok: true;
      readonly bytes: Uint8Array;
      /** Keys whose cell was filled. */
      readonly filled: readonly string[];
      /** Keys that no row has. */
      readonly missing: readonly string[];
    }
  | { readonly ok: false; readonly reason: string };

interface Field {
  readonly start: number;
  readonly end: number;
}

/**
 * Fills one column of the instructor's own CSV and leaves every other byte as it is: encoding, quotes, line ends, other columns, order.
 *
 * @param bytes UTF-8 or a single-byte encoding; UTF-16 is refused. @returns the new bytes, or why the column cannot be filled.
 */
export function fillColumn(bytes: Uint8Array, request: FillColumnRequest): FillColumnOutcome {
  if (bytes.includes(0))
    return { ok: false, reason: 'The file is UTF-16 or no text; save it as CSV (UTF-8) first.' };
  const rows = fieldsOf(bytes, request.separator.charCodeAt(0));
  if (rows === null) return { ok: false, reason: 'A quoted cell of the file does not end; save it anew.' };
  const text = (field: Field | undefined): string =>
    field === undefined ? '' : cellText(bytes.subarray(field.start, field.end));
  const header = rows.findIndex(
    (r) => r.some((f) => text(f) === request.keyColumn) && r.some((f) => text(f) === request.targetColumn),
  );
  if (header < 0)
    return {
      ok: false,
      reason: `No row of the file holds both “${request.keyColumn}” and “${request.targetColumn}”.`,
    };
  const columnsNamed = (name: string): number[] =>
    rows[header]!.flatMap((f, i) => (text(f) === name ? [i] : []));
  const [key, ...moreKeys] = columnsNamed(request.keyColumn);
  const [target, ...moreTargets] = columnsNamed(request.targetColumn);
  if (moreKeys.length > 0 || moreTargets.length > 0)
    return { ok: false, reason: 'Two columns of the file have that header; rename one of them.' };
  const body = rows.slice(header + 1);
  const keys = body.map((r) => text(r[key!])).filter((k) => request.values.has(k));
  const twice = keys.find((k, i) => keys.indexOf(k) !== i);
  if (twice !== undefined)
    return { ok: false, reason: `Two rows of the file have the key ${twice}; leave one of them.` };
  const short = body.find((r) => request.values.has(text(r[key!])) && r[target!] === undefined);
  if (short !== undefined)
    return {
      ok: false,
      reason: `The row of ${text(short[key!])} ends before the column “${request.targetColumn}”.`,
    };
  const edits = body.flatMap((r) => {
    const value = request.values.get(text(r[key!]));
    return value === undefined ? [] : [{ field: r[target!]!, cell: quoted(value, request.separator) }];
  });
  return {
    ok: true,
    bytes: spliced(bytes, edits),
    filled: keys,
    missing: [...request.values.keys()].filter((k) => !keys.includes(k)),
  };
}

/** Fields of every row as ranges of bytes (RFC 4180); null where a quote stays open. */
function fieldsOf(bytes: Uint8Array, separator: number): Field[][] | null {
  const [quote, cr, lf] = [0x22, 0x0d, 0x0a];
  const rows: Field[][] = [];
  let row: Field[] = [];
  let start = bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf ? 3 : 0;
  let inQuotes = false;
  for (let i = start; i <= bytes.length; i++) {
    const byte = bytes[i];
    if (inQuotes && byte !== undefined) {
      if (byte === quote) inQuotes = false;
      continue;
    }
    if (inQuotes) return null;
    // A quote opens a cell at its start, and again behind a doubled one.
    if (byte === quote && (i === start || bytes[i - 1] === quote)) inQuotes = true;
    const ends = byte === undefined || byte === cr || byte === lf;
    if (byte !== separator && !ends) continue;
    row.push({ start, end: i });
    if (ends) {
      if (row.length > 1 || row[0]!.end > row[0]!.start) rows.push(row);
      row = [];
      if (byte === cr && bytes[i + 1] === lf) i++;
    }
    start = i + 1;
  }
  return rows;
}

function cellText(bytes: Uint8Array): string {
  let text: string;
  try {
    text = new TextDecoder('utf-8', { fatal: true }).decode(bytes);
  } catch {
    text = new TextDecoder('windows-1252').decode(bytes);
  }
  const inner = text.trim();
  return inner.startsWith('"') && inner.endsWith('"') && inner.length > 1
    ? inner.slice(1, -1).replaceAll('""', '"').trim()
    : inner;
}

/** What is written is made harmless for spreadsheets; only signs of ASCII are written, so that any encoding of the file holds. */
function quoted(value: string, separator: string): Uint8Array {
  const cell = /^-?\d+([.,]\d+)?$/.test(value) ? value : harmless(value);
  if (/[^\x20-\x7e]/.test(cell))
    throw new TypeError(`values: “${value}” holds signs that are not plain ASCII`);
  const text = cell.includes(separator) || cell.includes('"') ? `"${cell.replaceAll('"', '""')}"` : cell;
  return Uint8Array.from(Array.from(text, (c) => c.charCodeAt(0)));
}

function spliced(
  bytes: Uint8Array,
  edits: readonly { readonly field: Field; readonly cell: Uint8Array }[],
): Uint8Array {
  const change = edits.reduce((sum, e) => sum + e.cell.length - (e.field.end - e.field.start), 0);
  const result = new Uint8Array(bytes.length + change);
  let from = 0;
  let to = 0;
  for (const { field, cell } of edits) {
    result.set(bytes.subarray(from, field.start), to);
    to += field.start - from;
    result.set(cell, to);
    to += cell.length;
    from = field.end;
  }
  result.set(bytes.subarray(from), to);
  return result;
}
