import type { PreparedSpectrum } from '../spectrum/types.ts';
import { smooth, type Smoothed } from './smooth.ts';
import type { FoundLine } from './types.ts';

export interface FindLinesOptions {
  /** Least signal over noise at the top, after smoothing over a line's width. Default 5. */
  readonly leastSignalToNoise?: number;
}

/** A side lobe of a strong neighbour is weaker than this share of it (the first of a boxcar: 0.13 upwards) and near it. */
const sideLobeShare = 0.17;
const sideLobeWidths = 6;

/**
 * Lines of a prepared spectrum, before anybody says what they are: tops of the curvature of the smoothed optical depth, at the scale
 * of the resolution, so that shoulders of half-resolved neighbours count too.
 *
 * Positions: parabola through the top of an isolated line's smoothed depth (for a flat, saturated one the middle of its flanks), through
 * the top of the curvature in a blend. The uncertainty is that of a line of this width and depth in this noise,
 * σ = 0.7 √(Δ w)/SNR (Δ step, w width; common practice), enlarged by the correlation of the noise; the whole-spectrum fit replaces it.
 *
 * @returns lines, ascending in wavenumber; empty where the spectrum shows nothing sharp.
 */
export function findLines(prepared: PreparedSpectrum, options: FindLinesOptions = {}): readonly FoundLine[] {
  const width = prepared.resolutionPerCm;
  if (width === null) return [];
  const points = width / prepared.stepPerCm;
  const { series, noise } = opticalDepth(prepared);
  const fine = smooth(series, Math.max(0.8, 0.3 * points));
  const least = options.leastSignalToNoise ?? 5;
  const tops = findTops(prepared, noise, fine, least);
  const kept = dropSideLobes(prepared, onePerLine(prepared, fine, tops, width), width);
  return kept.map((top, k) => describe(prepared, noise, fine, top, kept[k - 1], kept[k + 1], width));
}

/**
 * Optical depth −ln T, followed only as far as light is left (five σ), with its noise σ/T. A strong line keeps its top in it, where the
 * depth of the transmittance would be flat.
 */
function opticalDepth(prepared: PreparedSpectrum): { series: Float64Array; noise: Float64Array } {
  const noise = new Float64Array(prepared.noise.length);
  const series = prepared.transmittance.map((t, i) => {
    const light = Math.max(t, 5 * prepared.noise[i]!);
    noise[i] = prepared.noise[i]! / light;
    return -Math.log(light);
  });
  return { series, noise };
}

interface Top {
  readonly index: number;
  readonly depth: number;
  readonly signalToNoise: number;
}

function findTops(
  prepared: PreparedSpectrum,
  noiseOfSeries: Float64Array,
  fine: Smoothed,
  least: number,
): Top[] {
  const { value, curvature } = fine;
  // Correlated noise is not smoothed away as independent noise is.
  const correlation = Math.sqrt(Math.max(1, prepared.noiseCorrelationPoints));
  const tops: Top[] = [];
  for (let i = 2; i < value.length - 2; i++) {
    const c = curvature[i]!;
    if (c <= 0 || c < curvature[i - 1]! || c <= curvature[i + 1]!) continue;
    const noise = noiseOfSeries[i]!;
    const byValue = value[i]! / (noise * Math.min(1, fine.valueGain * correlation));
    const byCurvature = c / (noise * fine.curvatureGain * correlation);
    if (byValue < least || byCurvature < Math.max(3.5, least - 1)) continue;
    tops.push({ index: i, depth: value[i]!, signalToNoise: byValue });
  }
  return tops;
}

/** Two tops of the curvature without a dip between them are the shoulders of one black line: the deeper one stays. */
function onePerLine(prepared: PreparedSpectrum, fine: Smoothed, tops: readonly Top[], width: number): Top[] {
  const x = prepared.wavenumberPerCm;
  return tops.reduce<Top[]>((kept, top) => {
    const last = kept.at(-1);
    if (last === undefined || x[top.index]! - x[last.index]! > 0.8 * width) return [...kept, top];
    let dip = Infinity;
    for (let i = last.index; i <= top.index; i++) dip = Math.min(dip, fine.curvature[i]!);
    const apart =
      dip < 0.5 * Math.min(fine.curvature[last.index]!, fine.curvature[top.index]!) &&
      last.depth < 2 &&
      top.depth < 2;
    if (apart) return [...kept, top];
    return top.depth > last.depth ? [...kept.slice(0, -1), top] : kept;
  }, []);
}

/** Side lobes of an unweighted interferogram stand beside strong lines only; a weak line near a strong one is lost with them. */
function dropSideLobes(prepared: PreparedSpectrum, tops: readonly Top[], width: number): Top[] {
  const x = prepared.wavenumberPerCm;
  return tops.filter((top, k) => {
    for (const direction of [-1, 1]) {
      for (let j = k + direction; j >= 0 && j < tops.length; j += direction) {
        const other = tops[j]!;
        if (Math.abs(x[other.index]! - x[top.index]!) > sideLobeWidths * width) break;
        const distance = Math.abs(x[other.index]! - x[top.index]!) / width;
        if (top.depth < (sideLobeShare * other.depth) / Math.max(1, distance - 1)) return false;
      }
    }
    return true;
  });
}

function describe(
  prepared: PreparedSpectrum,
  noiseOfSeries: Float64Array,
  fine: Smoothed,
  top: Top,
  before: Top | undefined,
  after: Top | undefined,
  width: number,
): FoundLine {
  const x = prepared.wavenumberPerCm;
  const i = top.index;
  const apart = (other: Top | undefined): number =>
    other === undefined ? Infinity : Math.abs(x[other.index]! - x[i]!);
  const blended = Math.min(apart(before), apart(after)) < 2.2 * width;
  // No light left at the top: only the flanks tell where the middle is.
  const flat =
    prepared.transmittance[i]! < 6 * prepared.noise[i]! ||
    (prepared.saturationAbsorbance !== null &&
      prepared.absorbance[i]! > 0.93 * prepared.saturationAbsorbance);
  const ceiling = prepared.saturationAbsorbance;
  const peak = Math.max(...prepared.absorbance.subarray(Math.max(0, i - 1), i + 2));
  const [position, fullWidth] = flat
    ? flanks(x, fine.value, i, 0.85 * top.depth)
    : [vertex(x, blended ? fine.curvature : fine.value, i), flanks(x, fine.value, i, 0.5 * top.depth)[1]];
  const signalToNoise = top.depth / noiseOfSeries[i]!;
  const correlation = Math.sqrt(Math.max(1, prepared.noiseCorrelationPoints));
  const w = Math.min(Math.max(fullWidth, 0.7 * width), 4 * width);
  const random = (0.7 * Math.sqrt(prepared.stepPerCm * w) * correlation) / signalToNoise;
  const uncertainty = Math.hypot(random, 0.002 * w, flat ? 0.02 * w : 0, blended ? 0.03 * w : 0);
  return {
    wavenumberPerCm: position,
    uncertaintyPerCm: uncertainty,
    peakAbsorbance: Math.max(peak, 1e-6),
    integratedAbsorbance: Math.max(peak, 1e-6) * w * 1.1,
    fullWidthHalfHeightPerCm: w,
    signalToNoise,
    saturated: flat || peak > 1 || (ceiling !== null && peak > 0.9 * ceiling),
    blended,
  };
}

/** Abscissa of the vertex of the parabola through a top and its neighbours. */
function vertex(x: Float64Array, y: Float64Array, at: number): number {
  let i = at;
  while (i > 1 && y[i - 1]! > y[i]!) i--;
  while (i < y.length - 2 && y[i + 1]! > y[i]!) i++;
  if (Math.abs(i - at) > 3) i = at;
  const [a, b, c] = [y[i - 1]!, y[i]!, y[i + 1]!];
  const bend = a - 2 * b + c;
  const shift = bend < 0 ? Math.max(-1, Math.min(1, (a - c) / (2 * bend))) : 0;
  return x[i]! + shift * ((x[i + 1]! - x[i - 1]!) / 2);
}

/** Middle and distance of the two crossings of a level around a top. */
function flanks(x: Float64Array, y: Float64Array, at: number, level: number): [number, number] {
  let left = at;
  while (left > 0 && y[left]! > level) left--;
  let right = at;
  while (right < y.length - 1 && y[right]! > level) right++;
  const cross = (i: number): number => {
    const span = y[i + 1]! - y[i]!;
    return span === 0 ? x[i]! : x[i]! + ((level - y[i]!) / span) * (x[i + 1]! - x[i]!);
  };
  const from = cross(left);
  const to = cross(right - 1);
  return [(from + to) / 2, to - from];
}
