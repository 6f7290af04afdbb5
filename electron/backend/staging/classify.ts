import { parseScheme } from '../../../shared-core/marking/parse-scheme.ts';
import { readSpectrumFile } from '../../../shared-core/spectrum/index.ts';
import { readTable, understandTable } from '../../../shared-core/tables/index.ts';
import type { TableKind } from '../../../shared-core/tables/types.ts';
import type { IntakeFile } from '../../../shared-core/contract/index.ts';
import { readSpreadsheet } from '../read-spreadsheet.ts';

export type Classified = Pick<IntakeFile, 'became' | 'text' | 'points' | 'ordinate'>;

const tableKinds: Readonly<Partial<Record<TableKind, IntakeFile['became']>>> = {
  'submissions-wide': 'table of submissions',
  'submissions-long': 'table of submissions',
  lines: 'table of lines',
  roster: 'roster',
};
const mostTableBytes = 5_000_000;
const leftOut = (text: string): Classified => ({ became: 'left out', text, points: null, ordinate: null });

/** What a file of an intake is: a table that names submissions, lines or students; a scheme; a spectrum; or nothing, with the reason. */
export async function classify(name: string, bytes: Uint8Array): Promise<Classified> {
  const base = name.slice(name.lastIndexOf('/') + 1);
  if (/^(what-was-put-in\.csv|readme(\..*)?|grades\.csv|report\.json)$/i.test(base))
    return leftOut('a file beside the section, no part of it');
  if (/\.json$/i.test(base)) return classifyScheme(bytes);
  if (/\.(csv|tsv|txt|xlsx)$/i.test(base) && bytes.length < mostTableBytes) {
    const table = await classifyTable(name, bytes);
    if (table !== null) return table;
  }
  const read = readSpectrumFile({ name, bytes });
  if (!read.ok) return leftOut(read.line === null ? read.reason : `${read.reason} (line ${read.line})`);
  const first = read.spectra[0]!;
  const several = read.spectra.length > 1 ? `; ${read.spectra.length} spectra in the file` : '';
  return {
    became: 'spectrum',
    text: `${first.title === '' ? base : first.title}${several}; ${first.ordinateReason}`,
    points: first.wavenumberPerCm.length,
    ordinate: first.ordinateKind,
  };
}

function classifyScheme(bytes: Uint8Array): Classified {
  try {
    const parsed = parseScheme(JSON.parse(new TextDecoder().decode(bytes)));
    return parsed.ok
      ? { became: 'scheme', text: parsed.scheme.title, points: null, ordinate: null }
      : leftOut(`no marking scheme: ${parsed.problems[0] ?? ''}`);
  } catch {
    return leftOut('no JSON that can be read');
  }
}

async function classifyTable(name: string, bytes: Uint8Array): Promise<Classified | null> {
  const read = await readTable(bytes, name, readSpreadsheet);
  if (!read.ok) return /\.xlsx$/i.test(name) ? leftOut(read.reason) : null;
  for (const table of read.tables) {
    const understanding = understandTable({ ...table, rows: table.rows.slice(0, 200) });
    const became = tableKinds[understanding.kind];
    if (became !== undefined) return { became, text: understanding.reason, points: null, ordinate: null };
  }
  return /\.xlsx$/i.test(name)
    ? leftOut('no sheet of it is a table of submissions, lines or students')
    : null;
}
