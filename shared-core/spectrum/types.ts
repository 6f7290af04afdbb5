import type { Reason } from '../units/types.ts';

/** A file as it came: its name (with folders, "/" between them) and its bytes. */
export interface SourceFile {
  readonly name: string;
  readonly bytes: Uint8Array;
}

export type OrdinateKind = 'absorbance' | 'transmittance' | 'percent-transmittance' | 'unusable';
export type AbscissaKind = 'wavenumber-per-cm' | 'wavelength-um' | 'wavelength-nm';

/** What stands in a file, after reading and before any judgement: ascending, without duplicates or gaps of NaN. */
export interface Spectrum {
  readonly fileName: string;
  readonly title: string;
  /** Ascending wavenumbers in cm-1 (converted where the file had wavelengths). */
  readonly wavenumberPerCm: Float64Array;
  /** Ordinate as in the file, in the order of `wavenumberPerCm`. */
  readonly ordinate: Float64Array;
  readonly abscissaKind: AbscissaKind;
  readonly abscissaReason: string;
  readonly ordinateKind: OrdinateKind;
  /** Why this kind was taken: the label, the data, or both. */
  readonly ordinateReason: string;
  /** What was repaired or left out on reading: sorted, duplicates averaged, points without a number, ... */
  readonly notes: readonly Reason[];
}

/** Reading ends in spectra or in a refusal with a sentence (what, where, what to do); never in silence. */
export type ReadSpectrumOutcome =
  | { readonly ok: true; readonly spectra: readonly Spectrum[] }
  | { readonly ok: false; readonly code: string; readonly reason: string; readonly line: number | null };

/** A spectrum made ready for the search for lines; all arrays have the length of `wavenumberPerCm`. */
export interface PreparedSpectrum {
  readonly spectrum: Spectrum;
  readonly wavenumberPerCm: Float64Array;
  /** Transmittance divided by the baseline, 1 where nothing absorbs; NaN never. */
  readonly transmittance: Float64Array;
  /** Decadic absorbance above the baseline. */
  readonly absorbance: Float64Array;
  /** The baseline that was divided out, in transmittance. */
  readonly baselineTransmittance: Float64Array;
  /** 1-sigma noise of `transmittance` at each point, from the data, after the division. */
  readonly noise: Float64Array;
  /** Correlation length of the noise in points: 1 for independent points, about the factor of zero filling otherwise. */
  readonly noiseCorrelationPoints: number;
  readonly stepPerCm: number;
  /** Smallest full width at half height that features of this spectrum show, cm-1; null where nothing sharp is seen. */
  readonly resolutionPerCm: number | null;
  /** Absorbance at which the ordinate saturates or is clipped; null where it does not. */
  readonly saturationAbsorbance: number | null;
  /** True where lines point the other way (emission-like). */
  readonly inverted: boolean;
  readonly notes: readonly Reason[];
}
