/** Maximum path difference L (cm) and weighting of the interferogram A(x) = 1 − q1 − q2 + q1 cos(πx/L) + q2 cos(2πx/L), |x| < L. */
export interface InstrumentParameters {
  readonly pathDifferenceCm: number;
  readonly q1: number;
  readonly q2: number;
}

/**
 * Response of the instrument to a line of no width at a distance δ from it, per cm-1:
 * K(δ) = 2L [(1 − q1 − q2) sinc u + (q1/2)(sinc(u−1) + sinc(u+1)) + (q2/2)(sinc(u−2) + sinc(u+2))], u = 2Lδ, sinc u = sin πu/(πu).
 */
export function kernelAt(instrument: InstrumentParameters, deltaPerCm: number): number {
  const { pathDifferenceCm: l, q1, q2 } = instrument;
  const u = 2 * l * deltaPerCm;
  const s = Math.sin(Math.PI * u) / Math.PI;
  // sin π(u ± k) = ± sin πu, so one sine serves all five terms.
  const over = (x: number, sign: number): number => (Math.abs(x) < 1e-6 ? 1 : (sign * s) / x);
  return (
    2 *
    l *
    ((1 - q1 - q2) * over(u, 1) +
      (q1 / 2) * (over(u - 1, -1) + over(u + 1, -1)) +
      (q2 / 2) * (over(u - 2, 1) + over(u + 2, 1)))
  );
}

/** Distance beyond which the kernel stays below `relative` of its height, cm-1: long for a boxcar, short for a smooth weighting. */
export function kernelReachPerCm(instrument: InstrumentParameters, relative: number): number {
  const { pathDifferenceCm: l, q1, q2 } = instrument;
  const end = Math.abs(1 - 2 * q1); // A(L): the jump at the end of the interferogram
  const boxcar = end / (Math.PI * relative);
  const smooth = Math.cbrt((Math.abs(q1) + 4 * Math.abs(q2)) / (Math.PI * relative));
  return Math.max(4, boxcar, smooth) / (2 * l);
}

/** Weights A(x) and their derivatives by L, q1, q2 at the delays 0, 1, 2, … of a transform, up to the end of the interferogram. */
export interface Weighting {
  readonly a: Float64Array;
  readonly byPath: Float64Array;
  readonly byQ1: Float64Array;
  readonly byQ2: Float64Array;
}

/** Share of L over which its end is spread. */
const edgeShare = 0.04;

/** @param spacingCm distance of neighbouring delays. @param most largest number of delays. */
export function weighting(instrument: InstrumentParameters, spacingCm: number, most: number): Weighting {
  const { pathDifferenceCm: l, q1, q2 } = instrument;
  // A jump at L would make the model a staircase in L, on which no solver gets ahead: it is spread over a few per cent of L,
  // which changes side lobes only some thirty line widths away.
  const ramp = Math.max(edgeShare * l, 2 * spacingCm);
  const length = Math.min(most, Math.ceil((l + ramp / 2) / spacingCm) + 1);
  const a = new Float64Array(length);
  const byPath = new Float64Array(length);
  const byQ1 = new Float64Array(length);
  const byQ2 = new Float64Array(length);
  for (let k = 0; k < length; k++) {
    const x = k * spacingCm;
    const inside = Math.min(1, Math.max(0, (l - x) / ramp + 0.5));
    const phase = (Math.PI * Math.min(x, l)) / l;
    const c1 = Math.cos(phase) - 1;
    const c2 = Math.cos(2 * phase) - 1;
    const value = 1 + q1 * c1 + q2 * c2;
    const slope = x < l ? ((q1 * Math.sin(phase) + 2 * q2 * Math.sin(2 * phase)) * phase) / l : 0;
    const onRamp = inside > 0 && inside < 1;
    a[k] = inside * value;
    byPath[k] = inside * slope + (onRamp ? (value / ramp) * (ramp > 2 * spacingCm ? x / l : 1) : 0);
    byQ1[k] = inside * c1;
    byQ2[k] = inside * c2;
  }
  return { a, byPath, byQ1, byQ2 };
}
