/** Where the scale of the stated uncertainties comes from. */
export type SigmaScale = 'input' | 'residuals';

/** Result of a fit that reached its minimum; arrays are in the order of the parameters. */
export interface ConvergedFit {
  readonly outcome: 'converged';
  readonly values: Float64Array;
  /** Row-major, parameters x parameters. */
  readonly covariance: Float64Array;
  readonly standardDeviations: Float64Array;
  /** observed - calculated, in the unit of the data. */
  readonly residuals: Float64Array;
  readonly degreesOfFreedom: number;
  /** Weighted sum of squared residuals. */
  readonly chiSquared: number;
  readonly sigmaScale: SigmaScale;
  readonly iterations: number;
}

export type FitOutcome =
  | ConvergedFit
  | { readonly outcome: 'not-converged'; readonly reason: string }
  | { readonly outcome: 'rank-deficient'; readonly reason: string }
  | { readonly outcome: 'too-few-lines'; readonly reason: string };
