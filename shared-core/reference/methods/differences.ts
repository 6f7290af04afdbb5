import type { MethodLine, MethodOutcome, PrimitiveKey } from './method-line.ts';
import { combine, outcome } from './polynomial.ts';
import { unweightedOperator } from './unweighted.ts';

/** An observation made of lines: Σ factor · wavenumber. */
type Mix = readonly (readonly [number, number])[];

/**
 * Combination differences, unweighted, for both states.
 *
 * Upper state: R(J) − P(J) = (4B_n − 6D_n)(J+½) − 8D_n(J+½)³; lower state: R(J−1) − P(J+1) with B_0, D_0. Without the cubic term the
 * slope is 4B; with an intercept the line need not pass through the origin. ν̃0 is half the intercept of ν̃(J) + ν̃(−J) against J²
 * (in which odd terms cancel); D is the mean of the two states.
 *
 * @param lines any order, cm-1.
 */
export function combinationDifferencePrimitives(
  lines: readonly MethodLine[],
  options: { readonly intercept: boolean; readonly cubicTerm: boolean },
): MethodOutcome {
  const index = indexByM(lines);
  const upper = stateFromDifferences(
    lines.length,
    pairs(index, (J) => [J + 1, -J]),
    options,
  );
  const lower = stateFromDifferences(
    lines.length,
    pairs(index, (J) => [J, -J - 1]),
    options,
  );
  if (upper === null || lower === null) {
    return {
      ok: false,
      reason: 'combination differences need more pairs of P and R lines with a common level',
    };
  }
  const linear: [PrimitiveKey, Float64Array][] = [
    ['B0', lower.b],
    ['Bn', upper.b],
  ];
  if (upper.d !== null && lower.d !== null) {
    linear.push(['D', combine(lines.length, [0.5, upper.d], [0.5, lower.d])]);
  }
  const origin = originFromSums(lines.length, index);
  if (origin !== null) linear.unshift(['nu0', origin]);
  return outcome(lines, linear);
}

/**
 * Successive differences within each branch: ν̃(m+1) − ν̃(m) = c1 + c2 (2m + 1), a straight line in 2m + 1.
 *
 * c1 = B_0 + B_n, c2 = B_n − B_0; ν̃0 is the mean of ν̃(m) − c2 m² over the innermost P and R lines of equal |m|.
 *
 * @param lines any order, cm-1.
 */
export function successiveDifferencePrimitives(lines: readonly MethodLine[]): MethodOutcome {
  const index = indexByM(lines);
  const steps: { m: number; mix: Mix }[] = [];
  for (const [m, at] of index) {
    const next = index.get(m + 1);
    if (next !== undefined && m !== 0 && m + 1 !== 0) {
      steps.push({ m, mix: [[1, next], [-1, at]] }); // prettier-ignore
    }
  }
  const operator = unweightedOperator(steps.map((s) => [1, 2 * s.m + 1]));
  const inner = innermostPair(index);
  if (operator === null || inner === null) {
    return {
      ok: false,
      reason: 'successive differences need at least two spacings and lines on both sides of the gap',
    };
  }
  const n = lines.length;
  const c1 = overLines(n, operator[0]!, steps.map((s) => s.mix)); // prettier-ignore
  const c2 = overLines(n, operator[1]!, steps.map((s) => s.mix)); // prettier-ignore
  const origin = combine(n, [-(inner.m ** 2), c2]);
  origin[inner.r]! += 0.5;
  origin[inner.p]! += 0.5;
  return outcome(lines, [
    ['nu0', origin],
    ['B0', combine(n, [0.5, c1], [-0.5, c2])],
    ['Bn', combine(n, [0.5, c1], [0.5, c2])],
  ]);
}

/** ν̃0 as the mean of R(0) and P(1); nothing else. */
export function midpointPrimitives(lines: readonly MethodLine[]): MethodOutcome {
  const index = indexByM(lines);
  const r = index.get(1);
  const p = index.get(-1);
  if (r === undefined || p === undefined) {
    return { ok: false, reason: 'the midpoint needs R(0) and P(1), and the lines do not hold both' };
  }
  const weights = new Float64Array(lines.length);
  weights[r] = 0.5;
  weights[p] = 0.5;
  return outcome(lines, [['nu0', weights]]);
}

function indexByM(lines: readonly MethodLine[]): Map<number, number> {
  return new Map(lines.map((line, i) => [line.m, i]));
}

function pairs(
  index: ReadonlyMap<number, number>,
  ms: (J: number) => readonly [number, number],
): { x: number; mix: Mix }[] {
  const largest = Math.max(0, ...[...index.keys()].map(Math.abs));
  const found: { x: number; mix: Mix }[] = [];
  for (let J = 1; J <= largest; J++) {
    const [mR, mP] = ms(J);
    const r = index.get(mR);
    const p = index.get(mP);
    if (r !== undefined && p !== undefined) found.push({ x: J + 0.5, mix: [[1, r], [-1, p]] }); // prettier-ignore
  }
  return found;
}

function stateFromDifferences(
  n: number,
  points: readonly { x: number; mix: Mix }[],
  options: { readonly intercept: boolean; readonly cubicTerm: boolean },
): { b: Float64Array; d: Float64Array | null } | null {
  const operator = unweightedOperator(
    points.map(({ x }) => [x, ...(options.cubicTerm ? [x ** 3] : []), ...(options.intercept ? [1] : [])]),
  );
  if (operator === null) return null;
  const mixes = points.map((p) => p.mix);
  const slope = overLines(n, operator[0]!, mixes);
  if (!options.cubicTerm) return { b: combine(n, [0.25, slope]), d: null };
  const d = combine(n, [-1 / 8, overLines(n, operator[1]!, mixes)]);
  return { b: combine(n, [0.25, slope], [1.5, d]), d };
}

function originFromSums(n: number, index: ReadonlyMap<number, number>): Float64Array | null {
  const points: { x: number; mix: Mix }[] = [];
  for (const [m, r] of index) {
    const p = index.get(-m);
    if (m > 0 && p !== undefined) points.push({ x: m * m, mix: [[0.5, r], [0.5, p]] }); // prettier-ignore
  }
  const operator = unweightedOperator(points.map(({ x }) => [1, x]));
  if (operator === null) return null;
  return overLines(n, operator[0]!, points.map((p) => p.mix)); // prettier-ignore
}

function innermostPair(index: ReadonlyMap<number, number>): { m: number; p: number; r: number } | null {
  const both = [...index.keys()].filter((m) => m > 0 && index.has(-m));
  if (both.length === 0) return null;
  const m = Math.min(...both);
  return { m, p: index.get(-m)!, r: index.get(m)! };
}

/** Weights on observations turned into weights on lines. */
function overLines(n: number, row: Float64Array, mixes: readonly Mix[]): Float64Array {
  const weights = new Float64Array(n);
  mixes.forEach((mix, i) => {
    for (const [factor, line] of mix) weights[line]! += row[i]! * factor;
  });
  return weights;
}
