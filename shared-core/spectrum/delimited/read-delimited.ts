import type { Reason } from '../../units/types.ts';
import { assembleSpectrum } from '../assemble-spectrum.ts';
import { counted, refuse, RefusedFile } from '../refusal.ts';
import type { Spectrum } from '../types.ts';
import { ordinateOf, abscissaOf } from '../words.ts';
import { chooseColumns, type ColumnPair } from './columns.ts';
import { sectionsOf } from './sections.ts';
import { readNumberTable, type NumberTable } from './table.ts';

const marks = { 9: 'tabs', 32: 'blanks', 44: 'commas', 59: 'semicolons' } as const;

function baseName(fileName: string): string {
  const name = fileName.slice(fileName.lastIndexOf('/') + 1);
  return name.replace(/\.[^.]*$/, '');
}

/** The first header line that is neither a name of the axes nor a bare number. */
function titleFrom(table: NumberTable): string | null {
  const line = table.header
    .slice(0, 20)
    .map((each) => each.replace(/^[\s#%!/;'"]+/, '').replace(/[\s,;"]+$/, ''))
    .find(
      (each) =>
        each !== '' && abscissaOf(each) === null && ordinateOf(each) === null && !/^[-+\d.,]+$/.test(each),
    );
  return line?.replace(/^title\s*[=:]?\s*/i, '').slice(0, 120) ?? null;
}

/** Data in air only where a header line speaks of wavelengths in air. */
function saysInAir(header: readonly string[]): boolean {
  return header.some((line) =>
    /(?:wavelength|wellenl|longueur|longitud|[µμ]m|nm).{0,30}\b(?:in air|air|luft)\b/i.test(line),
  );
}

interface Part {
  readonly pair: ColumnPair;
  readonly from: number;
  readonly to: number;
  readonly title: string;
}

/** One part per column of ordinates and per section of rows. */
function partsOf(fileName: string, table: NumberTable, pairs: readonly ColumnPair[]): Part[] {
  const header = titleFrom(table);
  return pairs.flatMap((pair) => {
    const column = pair.title ?? `${baseName(fileName)}, column ${pair.ordinate + 1}`;
    const title = pairs.length === 1 ? (header ?? baseName(fileName)) : column;
    const sections = sectionsOf(table.columns[pair.abscissa]!);
    return sections.map(({ from, to }) => ({
      pair,
      from,
      to,
      title:
        sections.length === 1
          ? title
          : `${title}, rows from line ${table.lineOfRow[from]!} to ${table.lineOfRow[to - 1]!}`,
    }));
  });
}

function spectrumOf(
  fileName: string,
  table: NumberTable,
  { pair, from, to, title }: Part,
  notes: readonly Reason[],
): Spectrum {
  return assembleSpectrum({
    fileName,
    title,
    x: table.columns[pair.abscissa]!.subarray(from, to),
    y: table.columns[pair.ordinate]!.subarray(from, to),
    abscissaLabel: pair.abscissaLabel,
    ordinateLabel: pair.ordinateLabel,
    inAir: saysInAir(table.header),
    notes,
  });
}

function severalNote(parts: readonly Part[], pairs: number): Reason {
  const what =
    parts.length > pairs
      ? `${parts.length} spectra one below the other`
      : `${counted(pairs, 'column')} of ordinates`;
  return { code: 'several-spectra', text: `The file holds ${what}; each was taken as a spectrum.` };
}

/**
 * The spectra of a delimited text, one per column of ordinates.
 * @throws RefusedFile where the text holds no spectrum or is damaged
 */
export function readDelimited(fileName: string, lines: readonly string[]): Spectrum[] {
  const table = readNumberTable(lines);
  const { pairs, notes } = chooseColumns(table);
  const common = [...table.notes, ...notes];
  if (table.layout.decimalMark === 44) {
    const delimiter = marks[table.layout.delimiter as keyof typeof marks];
    common.push({
      code: 'decimal-comma',
      text: `Decimals are marked by commas, columns set apart by ${delimiter}.`,
    });
  }
  if (pairs.length === 0) {
    refuse(
      'one-column',
      'The file has an abscissa and no column of ordinates that changes: export the spectrum again.',
      null,
    );
  }
  const parts = partsOf(fileName, table, pairs);
  if (parts.length > 1) common.push(severalNote(parts, pairs.length));
  let refused: RefusedFile | null = null;
  const spectra: Spectrum[] = [];
  for (const part of parts) {
    try {
      spectra.push(spectrumOf(fileName, table, part, common));
    } catch (error) {
      if (!(error instanceof RefusedFile)) throw error;
      refused = error;
    }
  }
  if (refused && spectra.length === 0) throw refused;
  if (!refused) return spectra;
  const left = counted(parts.length - spectra.length, 'part');
  const note = {
    code: 'column-left-out',
    text: `${left} could not be read as a spectrum (${refused.message})`,
  };
  return spectra.map((spectrum) => ({ ...spectrum, notes: [...spectrum.notes, note] }));
}
