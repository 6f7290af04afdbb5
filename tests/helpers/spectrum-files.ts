import { existsSync, readFileSync } from 'node:fs';
import { readSpectrumFile } from '../../shared-core/spectrum/read-spectrum-file.ts';
import type { Spectrum } from '../../shared-core/spectrum/types.ts';

export const referenceData = '../shared/reference-data';

/** Whether a file of the reference data is there; tests that need it are skipped where it is not. */
export function isPresent(path: string): boolean {
  return existsSync(`${referenceData}/${path}`);
}

export function referenceBytes(path: string): Uint8Array {
  return new Uint8Array(readFileSync(`${referenceData}/${path}`));
}

export function bytesOf(text: string): Uint8Array {
  return new TextEncoder().encode(text);
}

/** Smooth invented lines: absorbance on an even grid, enough points for a spectrum. */
export function inventedPoints(count = 200, first = 2700, step = 0.5): { x: number[]; y: number[] } {
  const x = Array.from({ length: count }, (_, i) => first + i * step);
  const y = x.map((value) => 0.05 + 0.8 * Math.exp(-(((value % 20) - 10) ** 2)));
  return { x, y };
}

/** Rows of an invented spectrum as text. */
export function rowsOf(
  points: { x: readonly number[]; y: readonly number[] },
  options: { separator?: string; xDecimals?: number; yDecimals?: number; decimalComma?: boolean } = {},
): string[] {
  return points.x.map((x, i) => {
    const cells = [x.toFixed(options.xDecimals ?? 4), points.y[i]!.toFixed(options.yDecimals ?? 5)];
    const written = options.decimalComma ? cells.map((cell) => cell.replace('.', ',')) : cells;
    return written.join(options.separator ?? ',');
  });
}

/** The only spectrum of a text or of bytes; fails with the refusal where there is none. */
export function readOne(content: string | Uint8Array, name = 'file.txt'): Spectrum {
  const bytes = typeof content === 'string' ? bytesOf(content) : content;
  const outcome = readSpectrumFile({ name, bytes });
  if (!outcome.ok) throw new Error(`refused: ${outcome.code}: ${outcome.reason}`);
  if (outcome.spectra.length !== 1) throw new Error(`${outcome.spectra.length} spectra`);
  return outcome.spectra[0]!;
}

/** Code, line and sentence of a refusal; fails where the file was read. */
export function refusalOf(content: string | Uint8Array): {
  code: string;
  line: number | null;
  reason: string;
} {
  const bytes = typeof content === 'string' ? bytesOf(content) : content;
  const outcome = readSpectrumFile({ name: 'file.txt', bytes });
  if (outcome.ok) throw new Error(`read as ${outcome.spectra[0]!.wavenumberPerCm.length} points`);
  return outcome;
}

export function codesOf(spectrum: { notes: readonly { code: string }[] }): string[] {
  return spectrum.notes.map((note) => note.code);
}
