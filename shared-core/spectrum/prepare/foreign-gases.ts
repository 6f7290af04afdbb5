import type { Reason } from '../../units/types.ts';

/** Where water vapour of the air absorbs, cm-1 (common practice); cut so that the lines of DCl from 1850 stay out. */
const waterRanges: readonly (readonly [number, number])[] = [
  [1320, 1560],
  [1630, 1780],
  [3540, 3950],
];
/** Branches of the asymmetric stretch of carbon dioxide, cm-1 (common practice: P and R branch about 2349). */
const carbonDioxideBranches: readonly (readonly [number, number])[] = [
  [2318, 2345],
  [2353, 2375],
];

interface Feature {
  readonly wavenumberPerCm: number;
  /** +1 where it absorbs, -1 where it points the other way. */
  readonly sign: 1 | -1;
}

/** Tops of either direction that stand 6 sigma out of the baseline within a range. */
function featuresIn(
  x: Float64Array,
  excess: Float64Array,
  noise: Float64Array,
  from: number,
  to: number,
): Feature[] {
  const features: Feature[] = [];
  for (let i = 1; i + 1 < x.length; i++) {
    if (x[i]! < from || x[i]! > to) continue;
    const value = excess[i]!;
    if (Math.abs(value) < 6 * noise[i]!) continue;
    const isTop =
      value > 0
        ? value >= excess[i - 1]! && value > excess[i + 1]!
        : value <= excess[i - 1]! && value < excess[i + 1]!;
    if (isTop) features.push({ wavenumberPerCm: x[i]!, sign: value > 0 ? 1 : -1 });
  }
  return features;
}

/** Scatter of the spacings over their mean, pairs closer than 2 cm-1 taken as one (doublets of isotopologues). */
function irregularity(features: readonly Feature[]): number {
  const places: number[] = [];
  for (const { wavenumberPerCm } of features) {
    if (places.length === 0 || wavenumberPerCm - places.at(-1)! > 2) places.push(wavenumberPerCm);
  }
  if (places.length < 8) return 0;
  const gaps = places.slice(1).map((place, k) => place - places[k]!);
  const mean = gaps.reduce((sum, gap) => sum + gap, 0) / gaps.length;
  const variance = gaps.reduce((sum, gap) => sum + (gap - mean) ** 2, 0) / gaps.length;
  return Math.sqrt(variance) / mean;
}

function direction(sign: number): string {
  return sign > 0 ? 'absorbing' : 'pointing the other way (more of it in the background than in the sample)';
}

function waterNote(x: Float64Array, excess: Float64Array, noise: Float64Array): Reason | null {
  const found = waterRanges
    .map(([from, to]) => ({ from, to, features: featuresIn(x, excess, noise, from, to) }))
    .filter(({ features }) => irregularity(features) > 0.45);
  if (found.length === 0) return null;
  const all = found.flatMap(({ features }) => features);
  const balance = all.reduce((sum, { sign }) => sum + sign, 0) / all.length;
  const where = found.map(({ from, to }) => `${from} to ${to}`).join(', ');
  const how = Math.abs(balance) < 0.5 ? 'in both directions' : direction(balance);
  return {
    code: 'water-lines',
    text: `${all.length} irregular lines at ${where} cm⁻¹ look like water vapour, ${how}.`,
  };
}

function meanOf(
  x: Float64Array,
  values: Float64Array,
  from: number,
  to: number,
): { mean: number; count: number } {
  let sum = 0;
  let count = 0;
  for (let i = 0; i < x.length; i++) {
    if (x[i]! < from || x[i]! > to) continue;
    sum += values[i]!;
    count++;
  }
  return { mean: count === 0 ? 0 : sum / count, count };
}

function carbonDioxideNote(
  x: Float64Array,
  excess: Float64Array,
  noise: Float64Array,
  correlationPoints: number,
): Reason | null {
  const branches = carbonDioxideBranches.map(([from, to]) => {
    const { mean, count } = meanOf(x, excess, from, to);
    const sigma = meanOf(x, noise, from, to).mean * Math.sqrt(correlationPoints / Math.max(1, count));
    return { mean, count, significance: Math.abs(mean) / sigma };
  });
  const [p, r] = branches;
  if (!p || !r || p.count < 8 || r.count < 8) return null;
  const clear = Math.min(p.significance, r.significance) > 8 && Math.sign(p.mean) === Math.sign(r.mean);
  if (!clear || Math.min(Math.abs(p.mean), Math.abs(r.mean)) < 0.003) return null;
  // Nothing of the band is left beyond its head.
  const beyond = meanOf(x, excess, 2386, 2398);
  if (beyond.count >= 5 && Math.abs(beyond.mean) > 0.4 * Math.abs(r.mean)) return null;
  return {
    code: 'carbon-dioxide',
    text: `A band at 2318 to 2375 cm⁻¹ looks like carbon dioxide of the air, ${direction(p.mean)}.`,
  };
}

/**
 * Remarks on water vapour and carbon dioxide, by where they absorb and how they look, of either sign.
 * @param transmittance over its baseline; sample lines pointing down
 */
export function foreignGasNotes(
  x: Float64Array,
  transmittance: Float64Array,
  noise: Float64Array,
  correlationPoints: number,
): Reason[] {
  const excess = transmittance.map((value) => 1 - value);
  return [waterNote(x, excess, noise), carbonDioxideNote(x, excess, noise, correlationPoints)].filter(
    (note) => note !== null,
  );
}
