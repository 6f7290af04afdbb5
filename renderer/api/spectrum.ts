import type { SpectrumPoints } from '../../shared-core/contract/index.ts';
import type { SpectrumData } from '../charts/spectrum-plot.ts';
import { text } from '../text/index.ts';

/** Points as the chart draws them. */
export function spectrumOf(points: SpectrumPoints): SpectrumData {
  return {
    wavenumberPerCm: floats(points.wavenumberBase64),
    ordinate: floats(points.absorbanceBase64),
    ordinateLabel: text.terms.ordinate.absorbance,
  };
}

function floats(base64: string): Float64Array {
  const binary = atob(base64);
  const bytes = new Uint8Array(binary.length);
  for (let i = 0; i < binary.length; i++) bytes[i] = binary.charCodeAt(i);
  return new Float64Array(bytes.buffer);
}
