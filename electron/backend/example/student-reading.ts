import type { Random } from './random.ts';
import type { TrueBand } from './simulate.ts';

/** A line as an invented student wrote it down. */
export interface ReadLine {
  readonly m: number;
  readonly wavenumberPerCm: number;
}

export interface ReadingHabits {
  /** 'parabola' through three points, or the highest point of the file. */
  readonly read: 'parabola' | 'highest-point';
  /** Further error of every reading, cm-1 (ruler, cursor, rounding). */
  readonly readingErrorPerCm: number;
  /** Lines per branch that the student wants to use. */
  readonly largestM: number;
}

/** Index of the highest absorbance within `reach` of a place; null where the file does not hold it. */
function highestNear(x: Float64Array, y: Float64Array, place: number, reach: number): number | null {
  const step = x[1]! - x[0]!;
  const first = Math.ceil((place - reach - x[0]!) / step);
  const last = Math.floor((place + reach - x[0]!) / step);
  if (first < 1 || last > x.length - 2 || last < first) return null;
  let best = first;
  for (let i = first; i <= last; i++) if (y[i]! > y[best]!) best = i;
  return best;
}

function topOf(x: Float64Array, y: Float64Array, i: number, read: ReadingHabits['read']): number {
  const [a, b, c] = [y[i - 1]!, y[i]!, y[i + 1]!];
  const curvature = a - 2 * b + c;
  const step = x[1]! - x[0]!;
  if (read === 'highest-point' || curvature >= 0) return x[i]!;
  return x[i]! + Math.max(-0.6, Math.min(0.6, (0.5 * (a - c)) / curvature)) * step;
}

/**
 * Lines as read off the sampled spectrum (absorbance over an ascending, even axis): the top nearest to each line that
 * stands out of the noise, up to the number the student wants, without gaps.
 */
export function readLines(
  x: Float64Array,
  absorbance: Float64Array,
  band: TrueBand,
  habits: ReadingHabits,
  random: Random,
): readonly ReadLine[] {
  const tallest = Math.max(...band.lines.map((line) => line.peakAbsorbance));
  const step = x[1]! - x[0]!;
  const found: ReadLine[] = [];
  for (const sign of [1, -1]) {
    for (let j = 1; j <= habits.largestM; j++) {
      const line = band.lines.find((each) => each.m === sign * j);
      if (!line || line.peakAbsorbance < 0.04 * tallest) break;
      const top = highestNear(x, absorbance, line.wavenumberPerCm, Math.max(0.3, 2.2 * step));
      if (top === null) break;
      const place = topOf(x, absorbance, top, habits.read) + habits.readingErrorPerCm * random.normal();
      found.push({ m: line.m, wavenumberPerCm: Number(place.toFixed(3)) });
    }
  }
  return found.sort((a, b) => a.m - b.m);
}
