/** A line found in a prepared spectrum by a line-shape fit, before anybody says what it is. */
export interface FoundLine {
  readonly wavenumberPerCm: number;
  /** 1-sigma uncertainty of the position from the fit, correlated noise included, cm-1. */
  readonly uncertaintyPerCm: number;
  /** Decadic absorbance at the top, above the baseline. */
  readonly peakAbsorbance: number;
  /** Integral of the decadic absorbance over the line, cm-1. */
  readonly integratedAbsorbance: number;
  readonly fullWidthHalfHeightPerCm: number;
  /** Signal over noise at the top. */
  readonly signalToNoise: number;
  readonly saturated: boolean;
  /** Fitted together with a neighbour closer than about two widths. */
  readonly blended: boolean;
}
