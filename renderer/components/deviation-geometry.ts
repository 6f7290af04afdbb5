/** What a deviation scale shows, all in the unit of the value. */
export interface DeviationInput {
  readonly submitted: number;
  readonly reference: number;
  readonly low: number;
  readonly high: number;
  readonly uncertainty: number | null;
  readonly full: number;
  readonly part: number | null;
}

/** Places on a scale from 0 (left edge) to 1 (right edge); the reference stands at 0.5. */
export interface DeviationGeometry {
  readonly submitted: number;
  /** The value lies beyond the scale and is drawn at its edge with an arrow. */
  readonly beyond: 'left' | 'right' | null;
  readonly full: readonly [number, number];
  readonly part: readonly [number, number] | null;
  readonly span: readonly [number, number];
  readonly uncertainty: readonly [number, number] | null;
  /** Half width of the scale, in the unit of the value. */
  readonly halfWidth: number;
}

/** Lays the scale out: wide enough for the tolerance and, up to four times that, for the deviation. */
export function deviationGeometry(input: DeviationInput): DeviationGeometry {
  const widest = Math.max(
    input.part ?? input.full,
    input.full,
    input.high - input.reference,
    input.reference - input.low,
    Number.MIN_VALUE,
  );
  const deviation = input.submitted - input.reference;
  const halfWidth = Math.min(Math.max(widest * 1.3, Math.abs(deviation) * 1.12), widest * 4);
  const place = (offset: number): number => Math.min(1, Math.max(0, 0.5 + offset / (2 * halfWidth)));
  return {
    submitted: place(deviation),
    beyond: Math.abs(deviation) <= halfWidth ? null : deviation < 0 ? 'left' : 'right',
    // An admissible set widens what is accepted: the tolerance stands around the span.
    full: [place(input.low - input.reference - input.full), place(input.high - input.reference + input.full)],
    part:
      input.part === null
        ? null
        : [place(input.low - input.reference - input.part), place(input.high - input.reference + input.part)],
    span: [place(input.low - input.reference), place(input.high - input.reference)],
    uncertainty: input.uncertainty === null ? null : [place(-input.uncertainty), place(input.uncertainty)],
    halfWidth,
  };
}
