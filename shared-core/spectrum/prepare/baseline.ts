import { binMeans, binsFor, type Bins } from './bins.ts';
import { findFringes, type Fringes } from './fringes.ts';
import { scatterOf } from './noise.ts';
import { selectRank } from '../select-rank.ts';
import { fitSmoothSpline, splineAt, type SmoothSpline } from './smooth-spline.ts';
import { stiffCurve } from './upper-curve.ts';

export interface Baseline {
  /** In transmittance, above zero. */
  readonly values: Float64Array;
  /** 1 where a point shows baseline only, 0 in lines and their wings. */
  readonly free: Uint8Array;
  readonly fringes: Fringes | null;
}

/** Distance of the knots: the curve follows nothing narrower; lines of a band are closer, gas bands are masked. */
const stiffKnotsPerCm = 120;
const finalKnotsPerCm = 60;

/** Root mean square of what lies above the curve, over all points or the free ones: lines do not enter it. */
function upperScatter(depth: Float64Array, free: Uint8Array | null): number {
  let [sum, count] = [0, 0];
  for (let i = 0; i < depth.length; i++) {
    if (depth[i]! >= 0 || (free && free[i] === 0)) continue;
    sum += depth[i]! ** 2;
    count++;
  }
  return count === 0 ? 0 : Math.sqrt(sum / count);
}

/** Marks points that lie within the tolerance of the curve, and unmarks the neighbours of those that do not. */
function freePoints(depth: Float64Array, tolerance: number, reach: number): Uint8Array {
  const free = new Uint8Array(depth.length).fill(1);
  let blockedUntil = -1;
  for (let i = 0; i < depth.length; i++) {
    if (depth[i]! <= tolerance && depth[i]! >= -2 * tolerance) continue;
    const to = Math.min(depth.length - 1, i + reach);
    for (let k = Math.max(0, blockedUntil + 1, i - reach); k <= to; k++) free[k] = 0;
    blockedUntil = to;
  }
  return free;
}

function shareOf(free: Uint8Array): number {
  let count = 0;
  for (const each of free) count += each;
  return count / free.length;
}

function intervalsFor(bins: Bins, distance: number): number {
  const wanted = Math.round((bins.count * bins.widthPerCm) / distance);
  return Math.max(2, Math.min(wanted, Math.floor(bins.count / 8)));
}

/** Through the free points; where lines leave none for long, the curve keeps to the one before. */
function throughFree(bins: Bins, y: Float64Array, free: Uint8Array, before: SmoothSpline): SmoothSpline {
  const { means, counts } = binMeans(bins, y, free);
  for (let b = 0; b < means.length; b++) {
    if (counts[b] === 0) means[b] = splineAt(before, (b + 0.5) / bins.count);
    counts[b] = Math.max(counts[b]!, 0.003);
  }
  // Few free points between dense lines: a supple curve would sag into the band.
  const distance = shareOf(free) < 0.3 ? stiffKnotsPerCm : finalKnotsPerCm;
  return fitSmoothSpline(means, counts, intervalsFor(bins, distance), 0.01);
}

function sampledQuantile(values: Float64Array, share: number): number {
  const sorted = values.toSorted();
  return sorted[Math.floor(share * (sorted.length - 1))]!;
}

/** Points less than 2.5 times the median depth below the curve: all of a wave whose crests the curve rides on. */
function generousFree(depth: Float64Array): Uint8Array {
  const stride = Math.max(1, Math.floor(depth.length / 4000));
  const sizes = new Float64Array(Math.ceil(depth.length / stride));
  for (let i = 0; i < sizes.length; i++) sizes[i] = Math.abs(depth[i * stride]!);
  const limit = 2.5 * selectRank(sizes, sizes.length, sizes.length >> 1);
  return Uint8Array.from(depth, (each) => (Math.abs(each) < limit ? 1 : 0));
}

/** Carbon dioxide of the air stands there in either direction and must not bend the curve, where more is left. */
function withoutCarbonDioxide(bins: Bins, counts: Float64Array): Float64Array {
  const isThere = (b: number): boolean => Math.abs(bins.from + (b + 0.5) * bins.widthPerCm - 2340) < 50;
  const left = counts.map((count, b) => (isThere(b) ? 0 : count));
  return left.filter((count) => count > 0).length > 0.7 * bins.count ? left : counts;
}

type Wave = ReturnType<typeof findFringes>;

/** State of the search: the curve without the wave, and the depth of every point below both. */
class Search {
  readonly depth: Float64Array;
  private readonly x: Float64Array;
  private readonly t: Float64Array;
  private readonly bins: Bins;
  private readonly least: number;
  values: Float64Array;
  private curve: SmoothSpline;
  wave: Wave = null;

  constructor(x: Float64Array, t: Float64Array, bins: Bins, curve: SmoothSpline, least: number) {
    this.x = x;
    this.t = t;
    this.bins = bins;
    this.curve = curve;
    this.least = least;
    this.depth = new Float64Array(x.length);
    this.values = this.withoutWave();
    this.measure();
  }

  private withoutWave(): Float64Array {
    const span = this.bins.count * this.bins.widthPerCm;
    return this.x.map((w) => Math.max(this.least, splineAt(this.curve, (w - this.bins.from) / span)));
  }

  private measure(): void {
    for (let i = 0; i < this.depth.length; i++) this.depth[i] = 1 - this.t[i]! / this.values[i]!;
  }

  /** Looks for one wave in the free points, on the bare curve. */
  findWave(free: Uint8Array): Wave {
    const bare = this.wave ? this.withoutWave() : this.values;
    const relative = this.t.map((value, i) => value / bare[i]! - 1);
    const flat = binMeans(this.bins, relative, free);
    return findFringes(flat.means, flat.counts, this.bins.widthPerCm, scatterOf(this.depth, free));
  }

  /** Puts the curve through the free points after dividing the wave out. */
  refine(free: Uint8Array): void {
    const { wave, bins } = this;
    const factor = wave ? this.x.map((w) => 1 + wave.atBin((w - bins.from) / bins.widthPerCm - 0.5)) : null;
    this.curve = throughFree(
      bins,
      factor ? this.t.map((value, i) => value / factor[i]!) : this.t,
      free,
      this.curve,
    );
    this.values = this.withoutWave();
    if (factor) this.values = this.values.map((value, i) => value * factor[i]!);
    this.measure();
  }
}

/**
 * The baseline of a transmittance whose lines point down: a stiff curve through the upper side, one wave of fringes,
 * and a gentle refinement through the points that show no line.
 */
export function estimateBaseline(x: Float64Array, t: Float64Array, stepPerCm: number): Baseline {
  const bins = binsFor(x, stepPerCm);
  const { means, counts } = binMeans(bins, t, null);
  const stiff = stiffCurve(means, withoutCarbonDioxide(bins, counts), intervalsFor(bins, stiffKnotsPerCm));
  const least = Math.max(1e-9, 1e-3 * sampledQuantile(means, 0.9));
  const search = new Search(x, t, bins, stiff.curve, least);
  const reach = Math.max(2, Math.round(0.5 / stepPerCm));
  // Lines point down, so what lies above the curve measures noise, fringes and misfit without them.
  const first = 2.5 * upperScatter(search.depth, null);
  let free = freePoints(search.depth, first, reach);
  const generous = generousFree(search.depth);
  search.wave = search.findWave(generous);
  if (search.wave) free = generous;
  for (let round = 0; round < 3 && shareOf(free) >= 0.03; round++) {
    if (round < 2 && !(round === 0 && search.wave)) search.wave = search.findWave(free);
    search.refine(free);
    const tolerance = 3 * Math.min(scatterOf(search.depth, free), upperScatter(search.depth, free));
    free = freePoints(
      search.depth,
      Math.max(tolerance, round === 0 && !search.wave ? 0.6 * first : 1e-6),
      reach,
    );
  }
  return { values: search.values, free, fringes: search.wave };
}
