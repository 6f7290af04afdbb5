import type { NoiseSignature } from './noise-signature.ts';

/** How two spectra relate: by their noise, which two measurements of one gas never share. */
export interface SpectrumComparison {
  /** True where both come from one measurement. */
  readonly same: boolean;
  readonly kind: 'identical' | 'altered' | 'independent' | 'not-comparable';
  /** Correlation of the noise between the lines, -1 to 1; null where too little of it overlaps. */
  readonly noiseCorrelation: number | null;
  /** That correlation over what chance gives (standard deviations). */
  readonly significance: number | null;
  /** Points compared. */
  readonly points: number;
  /** Factor from the absorbances of the first to those of the second. */
  readonly absorbanceRatio: number | null;
  readonly alterations: readonly ('cropped' | 'resampled' | 'scaled' | 'noise-added')[];
  readonly text: string;
}

/** Noise in common beyond this, and this many standard deviations from chance, is one measurement. */
const leastCorrelation = 0.5;
const leastSignificance = 8;
const leastPoints = 120;
/** With fewer independent points than this, or with side lobes, only a near-perfect match counts: remains of lines can look like noise. */
const manyPoints = 300;
const nearPerfect = 0.995;

interface Sums {
  count: number;
  a: number;
  b: number;
  aa: number;
  bb: number;
  ab: number;
}

function correlationOf(sums: Sums): number {
  const { count, a, b, aa, bb, ab } = sums;
  const covariance = ab - (a * b) / count;
  const variances = (aa - (a * a) / count) * (bb - (b * b) / count);
  return variances > 0 ? covariance / Math.sqrt(variances) : 0;
}

/** Values of `fine` at a place, between its points; mean over `width` points around it where that is above 1. */
function sampleAt(values: Float64Array, place: number, width: number): number {
  if (width <= 1) {
    const left = Math.floor(place + 1e-6);
    const part = place - left;
    if (left < 0 || left >= values.length) return NaN;
    if (part < 1e-3 || left + 1 >= values.length) return values[left]!;
    return values[left]! + part * (values[left + 1]! - values[left]!);
  }
  let sum = 0;
  const from = Math.round(place - (width - 1) / 2);
  for (let i = from; i < from + width; i++) sum += values[i] ?? NaN;
  return sum / width;
}

/** Sums over the points of `coarse` that have a partner in `fine`, shifted by `shift` points of `fine`. */
function sumsAt(coarse: NoiseSignature, fine: NoiseSignature, shift: number, width: number): Sums {
  const sums: Sums = { count: 0, a: 0, b: 0, aa: 0, bb: 0, ab: 0 };
  const x = fine.wavenumberPerCm;
  let k = 0;
  for (let i = 0; i < coarse.residual.length; i++) {
    const own = coarse.residual[i]!;
    if (Number.isNaN(own)) continue;
    const wavenumber = coarse.wavenumberPerCm[i]!;
    while (k + 1 < x.length && x[k + 1]! <= wavenumber + 1e-9) k++;
    if (x[k]! > wavenumber + fine.stepPerCm || wavenumber > x[k]! + 1.5 * fine.stepPerCm) continue;
    const other = sampleAt(fine.residual, k + (wavenumber - x[k]!) / fine.stepPerCm + shift, width);
    if (Number.isNaN(other)) continue;
    sums.count++;
    sums.a += own;
    sums.b += other;
    sums.aa += own * own;
    sums.bb += other * other;
    sums.ab += own * other;
  }
  return sums;
}

interface Match {
  readonly correlation: number;
  readonly points: number;
}

/** Best correlation over shifts of up to two points, read between points and averaged over a coarse step. */
function bestMatch(coarse: NoiseSignature, fine: NoiseSignature): Match {
  let best: Match = { correlation: 0, points: 0 };
  const ratio = coarse.stepPerCm / fine.stepPerCm;
  for (const width of ratio > 1.5 ? [1, Math.round(ratio)] : [1]) {
    for (const shift of [0, 0.5, -0.5, 1, -1, 2, -2]) {
      const sums = sumsAt(coarse, fine, shift, width);
      if (sums.count < leastPoints) continue;
      const correlation = correlationOf(sums);
      if (correlation > best.correlation || best.points === 0) best = { correlation, points: sums.count };
      if (correlation > 0.97) return best;
    }
  }
  return best;
}

/** Median ratio of the absorbances where both show clear lines. */
function absorbanceRatioOf(coarse: NoiseSignature, fine: NoiseSignature): number | null {
  const ratios: number[] = [];
  const x = fine.wavenumberPerCm;
  let k = 0;
  for (let i = 0; i < coarse.absorbance.length; i++) {
    const wavenumber = coarse.wavenumberPerCm[i]!;
    while (k + 1 < x.length && x[k + 1]! <= wavenumber + 1e-9) k++;
    if (Math.abs(wavenumber - x[k]!) > fine.stepPerCm) continue;
    const own = coarse.absorbance[i]!;
    const other = sampleAt(fine.absorbance, k + (wavenumber - x[k]!) / fine.stepPerCm, 1);
    if (own > 0.05 && own < 1.5 && other > 0.02 && other < 2) ratios.push(other / own);
  }
  if (ratios.length < 10) return null;
  ratios.sort((a, b) => a - b);
  return ratios[ratios.length >> 1]!;
}

function isCropped(a: NoiseSignature, b: NoiseSignature): boolean {
  const step = 2 * Math.max(a.stepPerCm, b.stepPerCm);
  const [fromA, toA] = [a.wavenumberPerCm[0]!, a.wavenumberPerCm.at(-1)!];
  const [fromB, toB] = [b.wavenumberPerCm[0]!, b.wavenumberPerCm.at(-1)!];
  return Math.abs(fromA - fromB) > step || Math.abs(toA - toB) > step;
}

function alterationsOf(
  a: NoiseSignature,
  b: NoiseSignature,
  correlation: number,
  ratio: number | null,
): SpectrumComparison['alterations'] {
  const found: ('cropped' | 'resampled' | 'scaled' | 'noise-added')[] = [];
  if (isCropped(a, b)) found.push('cropped');
  const steps = a.stepPerCm / b.stepPerCm;
  const resampled = Math.abs(steps - 1) > 1e-3;
  if (resampled) found.push('resampled');
  if (ratio !== null && Math.abs(ratio - 1) > 0.003) found.push('scaled');
  if (correlation < (resampled ? 0.7 : 0.95)) found.push('noise-added');
  return found;
}

function sentence(same: boolean, match: Match, significance: number, alterations: readonly string[]): string {
  const figures = `the noise between the lines correlates by ${match.correlation.toFixed(2)} over ${match.points} points (${significance.toFixed(0)} standard deviations from chance)`;
  if (!same) return `Two measurements: ${figures}.`;
  const how =
    alterations.length === 0 ? 'unaltered' : alterations.join(', ').replace('noise-added', 'noise added');
  return `One measurement (${how}): ${figures}; two measurements of one gas share their lines, never their noise.`;
}

/**
 * Whether two spectra come from one measurement: equal after scaling, cropping, resampling or added noise. Only the
 * noise between the lines is compared, since lines, fringes and slopes repeat in every honest measurement.
 * @returns same, with the correlation r of the noise and its significance r sqrt(N/c) (N points, c their correlation
 *   length); 'not-comparable' where fewer than 120 such points overlap
 */
export function compareSpectra(a: NoiseSignature, b: NoiseSignature): SpectrumComparison {
  const [coarse, fine] = a.stepPerCm >= b.stepPerCm ? [a, b] : [b, a];
  const match = bestMatch(coarse, fine);
  if (match.points < leastPoints) {
    return {
      same: false,
      kind: 'not-comparable',
      noiseCorrelation: null,
      significance: null,
      points: match.points,
      absorbanceRatio: null,
      alterations: [],
      text: 'The two spectra share too few points without lines to be compared.',
    };
  }
  const length = Math.max(1, Math.min(coarse.correlationPoints, fine.correlationPoints));
  const significance = match.correlation * Math.sqrt(match.points / length);
  const doubtful = match.points / length < manyPoints || a.ringing || b.ringing;
  const wanted = doubtful ? nearPerfect : leastCorrelation;
  const same = match.correlation > wanted && significance > leastSignificance;
  const fromCoarse = same ? absorbanceRatioOf(coarse, fine) : null;
  const absorbanceRatio = fromCoarse === null ? null : coarse === a ? fromCoarse : 1 / fromCoarse;
  const alterations = same ? alterationsOf(a, b, match.correlation, absorbanceRatio) : [];
  return {
    same,
    kind: !same ? 'independent' : alterations.length === 0 ? 'identical' : 'altered',
    noiseCorrelation: match.correlation,
    significance,
    points: match.points,
    absorbanceRatio,
    alterations,
    text: sentence(same, match, significance, alterations),
  };
}
