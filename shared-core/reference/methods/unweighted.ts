/**
 * Operator of an unweighted least-squares fit, as a student's spreadsheet does it: coefficients = operator · observations.
 *
 * P = (XᵀX)⁻¹Xᵀ by Cholesky after scaling the columns to unit length; each row of the result belongs to one coefficient.
 * Being explicit, it carries the lines' uncertainties through methods that do not weight them.
 *
 * @param design n rows of p numbers.
 * @returns p rows of n numbers, or null where the columns are linearly dependent or n < p.
 */
export function unweightedOperator(design: readonly (readonly number[])[]): Float64Array[] | null {
  const n = design.length;
  const p = design[0]?.length ?? 0;
  if (p === 0 || n < p) return null;
  const scale = columnLengths(design, p);
  if (scale.some((s) => s === 0)) return null;
  const factor = choleskyOfNormalMatrix(design, scale);
  if (factor === null) return null;
  const operator: Float64Array[] = [];
  for (let k = 0; k < p; k++) operator.push(new Float64Array(n));
  const column = new Float64Array(p);
  for (let i = 0; i < n; i++) {
    for (let k = 0; k < p; k++) column[k] = design[i]![k]! / scale[k]!;
    solveCholesky(factor, column);
    for (let k = 0; k < p; k++) operator[k]![i] = column[k]! / scale[k]!;
  }
  return operator;
}

function columnLengths(design: readonly (readonly number[])[], p: number): Float64Array {
  const lengths = new Float64Array(p);
  for (const row of design) for (let k = 0; k < p; k++) lengths[k]! += row[k]! ** 2;
  return lengths.map(Math.sqrt);
}

/** Lower triangle L of LLᵀ = XᵀX (scaled), rows of p; null where a pivot vanishes. */
function choleskyOfNormalMatrix(
  design: readonly (readonly number[])[],
  scale: Float64Array,
): Float64Array[] | null {
  const p = scale.length;
  const factor: Float64Array[] = [];
  for (let a = 0; a < p; a++) factor.push(new Float64Array(p));
  for (const row of design) {
    for (let a = 0; a < p; a++) {
      const xa = row[a]! / scale[a]!;
      for (let b = 0; b <= a; b++) factor[a]![b]! += (xa * row[b]!) / scale[b]!;
    }
  }
  for (let a = 0; a < p; a++) {
    for (let b = 0; b <= a; b++) {
      let sum = factor[a]![b]!;
      for (let k = 0; k < b; k++) sum -= factor[a]![k]! * factor[b]![k]!;
      if (a !== b) {
        factor[a]![b] = sum / factor[b]![b]!;
      } else {
        if (sum < 1e-12) return null;
        factor[a]![a] = Math.sqrt(sum);
      }
    }
  }
  return factor;
}

function solveCholesky(factor: readonly Float64Array[], x: Float64Array): void {
  const p = factor.length;
  for (let a = 0; a < p; a++) {
    for (let k = 0; k < a; k++) x[a]! -= factor[a]![k]! * x[k]!;
    x[a]! /= factor[a]![a]!;
  }
  for (let a = p - 1; a >= 0; a--) {
    for (let k = a + 1; k < p; k++) x[a]! -= factor[k]![a]! * x[k]!;
    x[a]! /= factor[a]![a]!;
  }
}
