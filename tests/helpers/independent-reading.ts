import type { Spectrum } from '../../shared-core/spectrum/types.ts';

/**
 * A second reading of spectrum files, written apart from the reader and in another way (split, regular expressions,
 * Number), for tests: what it finds in the bytes must be what the reader returned.
 */

const missing = /^(?:nan|n\/?a|#n\/a|#num!|#value!|null|none|[-+]?inf|-+|\?|\*+|\.|#+|)$/i;
const written = /^[-+−]?(?:\d+\.?\d*|\.\d+)(?:[eEdD][-+−]?\d{1,4})?$/;

export function textOf(bytes: Uint8Array): string {
  const [a, b] = bytes;
  if (a === 0xff && b === 0xfe) return new TextDecoder('utf-16le').decode(bytes);
  if (a === 0xfe && b === 0xff) return new TextDecoder('utf-16be').decode(bytes);
  const zeros = [0, 1].map((odd) => bytes.filter((byte, i) => i % 2 === odd && byte === 0).length);
  if (zeros[0]! + zeros[1]! > bytes.length / 4) {
    return new TextDecoder(zeros[0]! < zeros[1]! ? 'utf-16le' : 'utf-16be').decode(bytes);
  }
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes);
  } catch {
    return new TextDecoder('windows-1252').decode(bytes);
  }
}

function numberOf(cell: string, comma: boolean): number {
  const trimmed = cell.trim();
  const plain = /^".*"$/.test(trimmed) ? trimmed.slice(1, -1).trim() : trimmed;
  const dotted = comma ? plain.replace(',', '.') : plain;
  if ((comma && plain.includes('.')) || !written.test(dotted)) return missing.test(plain) ? NaN : Infinity;
  const value = Number(dotted.replace(/[dD]/, 'e').replaceAll('−', '-'));
  return Number.isFinite(value) ? value : Infinity;
}

type Row = readonly number[];

/** Longest stretch of rows of numbers, comments and blank lines aside; and how many rows lie outside of it. */
function tableOf(
  lines: readonly string[],
  separator: RegExp,
  comma: boolean,
): { rows: Row[]; outside: number } {
  const cut = lines.map((line): { cells: Row; raw: number } | 'skip' => {
    if (/^[\s,;"]*$/.test(line)) return 'skip';
    if (/^\s*(?:#|%(?!\s*T)|!|\/\/|'|\$\$|\*|--)/.test(line)) return 'skip';
    if (separator.source !== ';' && line.trimStart().startsWith(';')) return 'skip';
    const cells = (separator.source.includes('+') ? line.trim() : line)
      .split(separator)
      .map((c) => numberOf(c, comma));
    const raw = cells.length;
    while (cells.length > 2 && Number.isNaN(cells.at(-1)!)) cells.pop();
    return { cells, raw };
  });
  const tally = new Map<number, number>();
  for (const each of cut) {
    if (each !== 'skip' && !each.cells.includes(Infinity))
      tally.set(each.cells.length, (tally.get(each.cells.length) ?? 0) + 1);
  }
  const width = [...tally].sort((a, b) => b[1] - a[1])[0]?.[0] ?? 0;
  const parsed = cut.map((each): Row | 'skip' | 'text' => {
    if (each === 'skip') return 'skip';
    const { cells, raw } = each;
    const isRow =
      raw >= width &&
      cells.length <= width &&
      cells.length >= 2 &&
      !cells.includes(Infinity) &&
      !cells.every(Number.isNaN);
    return isRow ? cells : 'text';
  });
  const runs: Row[][] = [[]];
  for (const each of parsed) {
    if (each === 'text') runs.push([]);
    else if (each !== 'skip') runs.at(-1)!.push(each);
  }
  const longest = runs.reduce((a, b) => (b.length > a.length ? b : a));
  return { rows: longest, outside: runs.reduce((sum, run) => sum + run.length, 0) - longest.length };
}

function grouped(pairs: readonly (readonly [number, number])[]): [number, number][] {
  const sorted = pairs
    .filter(([x, y]) => Number.isFinite(x) && Number.isFinite(y))
    .sort((a, b) => a[0] - b[0]);
  const result: [number, number][] = [];
  for (let i = 0; i < sorted.length;) {
    let end = i;
    while (end < sorted.length && sorted[end]![0] === sorted[i]![0]) end++;
    const ys = sorted.slice(i, end).map((pair) => pair[1]);
    result.push([sorted[i]![0], ys.length === 1 ? ys[0]! : ys.reduce((a, b) => a + b, 0) / ys.length]);
    i = end;
  }
  return result;
}

/** Whether the points of the spectrum are these pairs, by the conversions that its notes name. */
export function equalsPoints(spectrum: Spectrum, pairs: readonly (readonly [number, number])[]): boolean {
  const factor =
    spectrum.abscissaKind === 'wavelength-um' ? 1e4 : spectrum.abscissaKind === 'wavelength-nm' ? 1e7 : 0;
  const points = grouped(pairs);
  const converted: [number, number][] =
    factor === 0
      ? points.filter(([x]) => x > 0)
      : points.map(([x, y]): [number, number] => [factor / x, y]).reverse();
  const { wavenumberPerCm: x, ordinate: y } = spectrum;
  if (converted.length !== x.length) return false;
  const recovered = spectrum.notes.some((note) => note.code === 'grid-recovered');
  const digits = Math.max(...points.map(([value]) => (String(value).split('.')[1] ?? '').length));
  return converted.every(([wavenumber, ordinate], i) => {
    const unit = recovered ? 0.61 * 10 ** -digits : 0;
    const slack = (factor === 0 ? unit : (unit * wavenumber ** 2) / factor) + 3e-9 * wavenumber;
    return (
      Math.abs(wavenumber - x[i]!) <= slack &&
      Math.abs(ordinate - y[i]!) <= 1e-12 + 1e-12 * Math.abs(ordinate)
    );
  });
}

/** Whether a second reading of a delimited text finds these points in two of its columns. */
export function isInDelimitedText(text: string, spectrum: Spectrum): boolean {
  const section = /, rows from line (\d+) to (\d+)$/.exec(spectrum.title);
  const all = text
    .replace(/\s*\u001a\s*$/, '')
    .replace(/^\uFEFF/, '')
    .split(/\r\n|\n|\r/);
  const lines = section ? all.slice(Number(section[1]) - 1, Number(section[2])) : all;
  for (const separator of [/\t/, /;/, /,/, /[ \t\u00a0\u202f\ufeff]+/]) {
    for (const comma of [false, true]) {
      if (comma && separator.source === ',') continue;
      const { rows, outside } = tableOf(lines, separator, comma);
      const width = Math.max(0, ...rows.slice(0, 300).map((row) => row.length));
      if (rows.length < spectrum.wavenumberPerCm.length || outside > 8) continue;
      for (let i = 0; i < Math.min(width, 8); i++) {
        for (let j = 0; j < Math.min(width, 8); j++) {
          if (
            i !== j &&
            equalsPoints(
              spectrum,
              rows.map((row) => [row[i] ?? NaN, row[j] ?? NaN]),
            )
          )
            return true;
        }
      }
    }
  }
  return false;
}

const letters: Record<string, { kind: 'value' | 'step' | 'times'; digit: number }> = {};
'@ABCDEFGHI'.split('').forEach((letter, digit) => (letters[letter] = { kind: 'value', digit }));
'abcdefghi'.split('').forEach((letter, i) => (letters[letter] = { kind: 'value', digit: -i - 1 }));
'%JKLMNOPQR'.split('').forEach((letter, digit) => (letters[letter] = { kind: 'step', digit }));
'jklmnopqr'.split('').forEach((letter, i) => (letters[letter] = { kind: 'step', digit: -i - 1 }));
'STUVWXYZs'.split('').forEach((letter, i) => (letters[letter] = { kind: 'times', digit: i + 1 }));

function decodeLines(lines: readonly string[]): number[] {
  const token =
    /[@A-Za-z%](?![-+]\d{1,3}(?!\d))\d*\.?\d*|[-+]?(?:\d+\.?\d*|\.\d+)(?:E[-+]\d{1,3}|(?<=\.\d*)e[-+]\d{1,3})?|\?/g;
  const values: number[] = [];
  let step: number | null = null;
  for (const line of lines) {
    const tokens = line.match(token)?.slice(1) ?? [];
    tokens.forEach((each, position) => {
      const letter = letters[each[0]!];
      const size = letter
        ? Number(`${Math.abs(letter.digit)}${each.slice(1)}`)
        : Number(each === '?' ? NaN : each);
      const isNegative = letter !== undefined && letter.digit < 0;
      if (letter?.kind === 'times') {
        for (let i = 1; i < size; i++) values.push(values.at(-1)! + (step ?? 0));
      } else if (letter?.kind === 'step') {
        step = isNegative ? -size : size;
        values.push(values.at(-1)! + step);
      } else {
        if (position > 0 || step === null) values.push(isNegative ? -size : size);
        step = null;
      }
    });
  }
  return values;
}

function field(block: string, label: string): number {
  const spaced = label.split('').join('[\\s\\-/_]*');
  const found = new RegExp(`^[ \\t]*##[\\s\\-/_]*${spaced}[\\s\\-/_]*=([^\\n$]*)`, 'im').exec(block);
  const value = found?.[1]!.trim() ?? '';
  return value === '' ? NaN : Number(value.replace(/[dD]/, 'e'));
}

/** Whether a second reading of a JCAMP-DX text finds these points in one of its blocks. */
export function isInJcampText(text: string, spectrum: Spectrum): boolean {
  const blocks = text.replaceAll(/\r\n?/g, '\n').split(/^[ \t]*##[\s\-/_]*END[\s\-/_]*=.*$/im);
  return blocks.some((whole) => {
    const titles = [...whole.matchAll(/^[ \t]*##[\s\-/_]*TITLE[\s\-/_]*=/gim)];
    const block = whole.slice(titles.at(-1)?.index ?? 0);
    const found =
      /^[ \t]*##[\s\-/_]*X[\s\-/_]*Y[\s\-/_]*(?:D[\s\-/_]*A[\s\-/_]*T[\s\-/_]*A|P[\s\-/_]*O[\s\-/_]*I[\s\-/_]*N[\s\-/_]*T[\s\-/_]*S)[\s\-/_]*=([^\n]*)\n([^#]*)/im.exec(
        block,
      );
    if (!found) return false;
    const lines = found[2]!.split('\n').map((line) => line.replace(/\$\$.*/, ''));
    const [xFactor, yFactor] = ['XFACTOR', 'YFACTOR'].map((label) => field(block, label) || 1) as [
      number,
      number,
    ];
    if (/XY\.\.XY/i.test(found[1]!.replaceAll(/\s/g, ''))) {
      const numbers =
        lines
          .join(' ')
          .match(/[-+]?(?:\d+\.?\d*|\.\d+)(?:[eEdD][-+]?\d+)?|\?/g)
          ?.map((each) => Number(each.replace(/[dD]/, 'e'))) ?? [];
      const pairs = Array.from(
        { length: numbers.length / 2 },
        (_, i) => [xFactor * numbers[2 * i]!, yFactor * numbers[2 * i + 1]!] as const,
      );
      return equalsPoints(spectrum, pairs);
    }
    const values = decodeLines(lines);
    const stated = field(block, 'FIRSTX');
    const first = Number.isNaN(stated) ? xFactor * Number(/[-+]?[\d.]+/.exec(lines.join(' '))?.[0]) : stated;
    const last = field(block, 'LASTX');
    const delta = Number.isNaN(last) ? field(block, 'DELTAX') : (last - first) / (values.length - 1);
    return equalsPoints(
      spectrum,
      values.map((value, i) => [first + i * delta, yFactor * value] as const),
    );
  });
}
