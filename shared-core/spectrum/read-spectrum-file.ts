import { assembleSpectrum } from './assemble-spectrum.ts';
import { readDelimited } from './delimited/read-delimited.ts';
import { looksLikeJcamp, readInfraredBlocks } from './jcamp/decode-jcamp.ts';
import { refuse, RefusedFile } from './refusal.ts';
import { decodeText, linesOf } from './text/decode-text.ts';
import type { ReadSpectrumOutcome, SourceFile, Spectrum } from './types.ts';

function refuseMarkup(text: string): void {
  const head = text.slice(0, 2000).trimStart();
  if (/^<(?:!doctype|html|\?xml|svg|[a-z]+[\s>])/i.test(head)) {
    refuse(
      'document-file',
      'The file is a web page or XML document, not a spectrum file: export the spectrum as JCAMP-DX or as text with two columns.',
    );
  }
  if (/^[{[]\s*["{[]/.test(head)) {
    refuse(
      'document-file',
      'The file is a JSON document, not a spectrum file: export the spectrum as JCAMP-DX or as text with two columns.',
    );
  }
}

function readJcamp(fileName: string, lines: readonly string[]): Spectrum[] {
  return readInfraredBlocks(lines).map((block) =>
    assembleSpectrum({
      fileName,
      title: block.title,
      x: block.x,
      y: block.y,
      abscissaLabel: block.xUnits,
      // The standard calls 0-1 TRANSMITTANCE whatever its case; the data type tells a single beam or an emission.
      ordinateLabel: block.yUnits,
      inAir: false,
      notes: block.notes,
    }),
  );
}

/**
 * Reads the bytes of a file as infrared spectra: JCAMP-DX (strictly) or delimited text. Nothing about the file is
 * judged beyond that; a spectrum whose ordinate cannot be used is returned with the kind 'unusable' and the reason.
 * @param file name and bytes
 * @returns the spectra (one per block or column of ordinates), or a refusal with code, a sentence of what, where and
 *   what to do, and the line where it is known. Work is bounded: at most 128 MB, 3 million lines, 2 million points.
 */
export function readSpectrumFile(file: SourceFile): ReadSpectrumOutcome {
  try {
    const { text } = decodeText(file.bytes);
    if (text.trim() === '') {
      refuse('empty-file', 'The file holds nothing but blanks: export the spectrum again.');
    }
    refuseMarkup(text);
    const lines = linesOf(text);
    const spectra = looksLikeJcamp(text) ? readJcamp(file.name, lines) : readDelimited(file.name, lines);
    return { ok: true, spectra };
  } catch (error) {
    if (!(error instanceof RefusedFile)) throw error;
    return { ok: false, code: error.code, reason: error.message, line: error.line };
  }
}
