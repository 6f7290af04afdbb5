/** A line as a prescribed method takes it: m = J + 1 (R) or −J (P), wavenumber and its 1-sigma uncertainty in cm-1. */
export interface MethodLine {
  readonly m: number;
  readonly wavenumberPerCm: number;
  readonly uncertaintyPerCm: number;
}

/** What a method reads off the lines directly; B̄ = (B_0 + B_n)/2. All cm-1. */
export type PrimitiveKey = 'nu0' | 'bBar' | 'B0' | 'Bn' | 'D';

/**
 * What a method reads off the lines, each a linear function of their wavenumbers.
 *
 * `weights[i]` holds ∂(primitive i)/∂(wavenumber of line j) for the lines in the order given.
 */
export interface Primitives {
  readonly keys: readonly PrimitiveKey[];
  readonly values: readonly number[];
  readonly weights: readonly Float64Array[];
  /** Covariance for an independent error of 1 cm-1 on every line: weights · weightsᵀ, row-major. */
  readonly readingCovariance: Float64Array;
}

/** A method applied to lines: its primitives, or a sentence why these lines do not carry it. */
export type MethodOutcome =
  { readonly ok: true; readonly primitives: Primitives } | { readonly ok: false; readonly reason: string };
