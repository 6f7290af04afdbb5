import type { Reason } from '../units/types.ts';
import { decideAbscissa, recoverGrid, wavenumberOf } from './abscissa.ts';
import { decideOrdinate } from './ordinate.ts';
import { counted, refuse } from './refusal.ts';
import type { Spectrum } from './types.ts';

/** Points as a reader found them, with the labels that stood beside them. */
export interface RawPoints {
  readonly fileName: string;
  readonly title: string;
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly abscissaLabel: string;
  readonly ordinateLabel: string;
  /** Whether the file says that its wavelengths hold in air. */
  readonly inAir: boolean;
  readonly notes: readonly Reason[];
}

/** Fewer points than this show no band. */
export const leastPoints = 40;

interface Points {
  readonly x: Float64Array;
  readonly y: Float64Array;
}

function withoutGaps(points: Points, notes: Reason[]): Points {
  let kept = 0;
  const x = new Float64Array(points.x.length);
  const y = new Float64Array(points.x.length);
  for (let i = 0; i < points.x.length; i++) {
    const a = points.x[i]!;
    const b = points.y[i]!;
    if (Number.isFinite(a) && Number.isFinite(b)) {
      x[kept] = a;
      y[kept++] = b;
    }
  }
  if (kept === points.x.length) return points;
  notes.push({
    code: 'points-without-number',
    text: `${counted(points.x.length - kept, 'point')} without a number (blank or NaN) left out; ${kept} stay.`,
  });
  return { x: x.slice(0, kept), y: y.slice(0, kept) };
}

function isAscending(x: Float64Array): boolean {
  for (let i = 1; i < x.length; i++) if (!(x[i]! > x[i - 1]!)) return false;
  return true;
}

/** Ascending abscissa; points of equal abscissa become one with their mean. */
function sorted(points: Points, notes: Reason[]): Points {
  if (isAscending(points.x)) return points;
  const reversed = { x: points.x.toReversed(), y: points.y.toReversed() };
  if (isAscending(reversed.x)) return reversed;
  let falls = 0;
  let rises = 0;
  for (let i = 1; i < points.x.length; i++) {
    if (points.x[i]! < points.x[i - 1]!) falls++;
    else if (points.x[i]! > points.x[i - 1]!) rises++;
  }
  const order = Array.from({ length: points.x.length }, (_, i) => i);
  order.sort((a, b) => points.x[a]! - points.x[b]! || a - b);
  if (Math.min(falls, rises) > 0) {
    notes.push({
      code: 'abscissa-unsorted',
      text: `The points were not in order (${counted(Math.min(falls, rises), 'step')} against the direction); they were sorted by wavenumber.`,
    });
  }
  const x = new Float64Array(order.length);
  const y = new Float64Array(order.length);
  let count = 0;
  let largest = 0;
  for (let i = 0; i < order.length;) {
    const value = points.x[order[i]!]!;
    let sum = 0;
    let n = 0;
    const first = points.y[order[i]!]!;
    for (; i < order.length && points.x[order[i]!] === value; i++, n++) {
      sum += points.y[order[i]!]!;
      largest = Math.max(largest, Math.abs(points.y[order[i]!]! - first));
    }
    x[count] = value;
    y[count++] = n === 1 ? first : sum / n;
  }
  if (count < order.length) {
    notes.push({
      code: 'abscissa-duplicates',
      text: `${counted(order.length - count, 'point')} had the abscissa of another and were averaged with it (largest difference ${Number(largest.toPrecision(3))}).`,
    });
  }
  return { x: x.slice(0, count), y: y.slice(0, count) };
}

function refuseCounting(x: Float64Array): void {
  const first = x[0]!;
  if ((first === 0 || first === 1) && x.every((value, i) => value === first + i)) {
    refuse(
      'abscissa-counts-points',
      `The first column only counts the points (${first}, ${first + 1}, ${first + 2}, …): hand in the file with its wavenumbers.`,
    );
  }
}

/** A point far from all others is a damaged number, not a measurement. */
function refuseOutlier(x: Float64Array): void {
  const n = x.length;
  const above = x[n - 1]! - x[n - 2]! > 2 * (x[n - 2]! - x[0]!);
  const below = x[1]! - x[0]! > 2 * (x[n - 1]! - x[1]!);
  if (!above && !below) return;
  const value = Number((above ? x[n - 1]! : x[0]!).toPrecision(9));
  refuse(
    'abscissa-outlier',
    `One point stands at ${value}, far from all others (${x[1]!} to ${x[n - 2]!}): its abscissa is damaged, mend the line or export the file again.`,
  );
}

function refuseTooFew(count: number): void {
  if (count >= leastPoints) return;
  refuse(
    'too-few-points',
    `Only ${counted(count, 'point')} with two numbers found, too few for a spectrum (at least ${leastPoints}): check that this is the spectrum file and not a table of lines or results.`,
  );
}

/** Wavenumbers above zero, ascending, from ascending raw abscissas. */
function inWavenumbers(points: Points, raw: RawPoints, notes: Reason[]) {
  const decision = decideAbscissa(points.x, raw.abscissaLabel);
  notes.push(...decision.notes);
  const recovered = recoverGrid(points.x);
  notes.push(...recovered.notes);
  const kind = decision.kind;
  if (kind === 'wavenumber-per-cm') {
    const from = recovered.x.findIndex((value) => value > 0);
    if (from <= 0) return { points: { x: recovered.x, y: points.y }, decision };
    notes.push({
      code: 'abscissa-not-positive',
      text: `${counted(from, 'point')} at wavenumbers of zero or below left out.`,
    });
    return { points: { x: recovered.x.slice(from), y: points.y.slice(from) }, decision };
  }
  if (!(recovered.x[0]! > 0)) {
    refuse('abscissa-not-infrared', 'A wavelength of zero or below stands in the first column: export the spectrum against wavenumber.'); // prettier-ignore
  }
  const unit = kind === 'wavelength-nm' ? 'nm' : 'µm';
  notes.push({
    code: 'wavelength-converted',
    text: `Wavelengths in ${unit} (${raw.inAir ? 'in air, as the file says' : 'taken as vacuum'}) were converted to cm⁻¹.`,
  });
  const x = recovered.x.map((value) => wavenumberOf(value, kind, raw.inAir)).reverse();
  return { points: { x, y: points.y.toReversed() }, decision };
}

/**
 * A spectrum from raw points: gaps left out, sorted, duplicates averaged, wavelengths converted, rounded steps
 * recovered, ordinate decided; each step that changed anything stands in the notes.
 * @throws RefusedFile where no spectrum can be made of the points
 */
export function assembleSpectrum(raw: RawPoints): Spectrum {
  const notes = [...raw.notes];
  const complete = withoutGaps(raw, notes);
  refuseTooFew(complete.x.length);
  const ascending = sorted(complete, notes);
  refuseTooFew(ascending.x.length);
  refuseCounting(ascending.x);
  refuseOutlier(ascending.x);
  const { points, decision } = inWavenumbers(ascending, raw, notes);
  refuseTooFew(points.x.length);
  const ordinate = decideOrdinate(points.y, raw.ordinateLabel);
  notes.push(...ordinate.notes);
  return {
    fileName: raw.fileName,
    title: raw.title,
    wavenumberPerCm: points.x,
    ordinate: points.y,
    abscissaKind: decision.kind,
    abscissaReason: decision.reason,
    ordinateKind: ordinate.kind,
    ordinateReason: ordinate.reason,
    notes,
  };
}
