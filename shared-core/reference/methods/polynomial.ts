import type { MethodLine, MethodOutcome, PrimitiveKey } from './method-line.ts';
import { unweightedOperator } from './unweighted.ts';

/**
 * Unweighted polynomial ν̃(m) = Σ c_k mᵏ, read as a student reads it.
 *
 * c0 = ν̃0, c1 = B_n + B_0, c2 = B_n − B_0 − (D_n − D_0), c3 = −2(D_n + D_0), c4 = −(D_n − D_0). Degree 1 yields ν̃0 and B̄, degree 2
 * no D. With degree 4 and D free, B_n − B_0 = c2 − c4; tied, c4 is fitted and not read.
 *
 * @param lines any order, cm-1. @param degree 1 to 4.
 * @throws RangeError for another degree.
 */
export function polynomialPrimitives(
  lines: readonly MethodLine[],
  degree: number,
  distortion: 'tied' | 'free',
): MethodOutcome {
  if (!Number.isInteger(degree) || degree < 1 || degree > 4) {
    throw new RangeError(`degree: expected 1, 2, 3 or 4, got ${degree}`);
  }
  const operator = unweightedOperator(lines.map((line) => powers(line.m, degree)));
  if (operator === null) {
    return {
      ok: false,
      reason: `a polynomial of degree ${degree} needs more different lines than the ${lines.length} given`,
    };
  }
  const c = (k: number): Float64Array => operator[k] ?? new Float64Array(lines.length);
  const linear: [PrimitiveKey, Float64Array][] = [['nu0', c(0)]];
  if (degree === 1) {
    linear.push(['bBar', combine(lines.length, [0.5, c(1)])]);
  } else {
    const quartic = distortion === 'free' ? 0.5 : 0;
    linear.push(['B0', combine(lines.length, [0.5, c(1)], [-0.5, c(2)], [quartic, c(4)])]);
    linear.push(['Bn', combine(lines.length, [0.5, c(1)], [0.5, c(2)], [-quartic, c(4)])]);
  }
  if (degree >= 3) linear.push(['D', combine(lines.length, [-0.25, c(3)])]);
  return outcome(lines, linear);
}

/** Values of linear functions of the wavenumbers, from their weights. */
export function outcome(
  lines: readonly MethodLine[],
  linear: readonly (readonly [PrimitiveKey, Float64Array])[],
): MethodOutcome {
  return {
    ok: true,
    primitives: {
      keys: linear.map(([key]) => key),
      values: linear.map(([, weights]) => applyWeights(weights, lines)),
      weights: linear.map(([, weights]) => weights),
      readingCovariance: products(linear.map(([, weights]) => weights)),
    },
  };
}

function products(weights: readonly Float64Array[]): Float64Array {
  const n = weights.length;
  const covariance = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      let sum = 0;
      for (let l = 0; l < weights[i]!.length; l++) sum += weights[i]![l]! * weights[j]![l]!;
      covariance[i * n + j] = sum;
    }
  }
  return covariance;
}

/** Σ factor · weights. */
export function combine(n: number, ...terms: readonly (readonly [number, Float64Array])[]): Float64Array {
  const sum = new Float64Array(n);
  for (const [factor, weights] of terms) for (let i = 0; i < n; i++) sum[i]! += factor * weights[i]!;
  return sum;
}

/** 1, m, m², … up to the degree. */
function powers(m: number, degree: number): number[] {
  const row = [1];
  for (let k = 1; k <= degree; k++) row.push(row[k - 1]! * m);
  return row;
}

/** Σ weight · wavenumber. */
export function applyWeights(weights: Float64Array, lines: readonly MethodLine[]): number {
  // Taken from the first line, which keeps the rounding error of large wavenumbers out of small constants.
  const origin = lines[0]?.wavenumberPerCm ?? 0;
  let sum = 0;
  let total = 0;
  for (let i = 0; i < lines.length; i++) {
    sum += weights[i]! * (lines[i]!.wavenumberPerCm - origin);
    total += weights[i]!;
  }
  return sum + (Math.abs(total) < 1e-9 ? 0 : total * origin);
}
