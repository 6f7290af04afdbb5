/**
 * Cholesky factor L of a symmetric positive definite matrix A = LLᵀ, row-major, in place of a copy.
 *
 * @param a p × p. @returns the lower factor, or null where A is not positive definite to working precision.
 */
export function choleskyFactor(a: ArrayLike<number>, p: number): Float64Array | null {
  const l = new Float64Array(p * p);
  for (let i = 0; i < p; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = a[i * p + j]!;
      for (let k = 0; k < j; k++) sum -= l[i * p + k]! * l[j * p + k]!;
      if (i === j) {
        if (!(sum > 1e-14 * Math.abs(a[i * p + i]!))) return null;
        l[i * p + i] = Math.sqrt(sum);
      } else l[i * p + j] = sum / l[j * p + j]!;
    }
  }
  return l;
}

/** Solves LLᵀx = b for the factor of `choleskyFactor`. */
export function choleskySolve(l: Float64Array, b: ArrayLike<number>, p: number): Float64Array {
  const x = Float64Array.from({ length: p }, (_, i) => b[i]!);
  for (let i = 0; i < p; i++) {
    let sum = x[i]!;
    for (let k = 0; k < i; k++) sum -= l[i * p + k]! * x[k]!;
    x[i] = sum / l[i * p + i]!;
  }
  for (let i = p - 1; i >= 0; i--) {
    let sum = x[i]!;
    for (let k = i + 1; k < p; k++) sum -= l[k * p + i]! * x[k]!;
    x[i] = sum / l[i * p + i]!;
  }
  return x;
}

/** Inverse of the matrix whose factor is given, row-major. */
export function choleskyInverse(l: Float64Array, p: number): Float64Array {
  const inverse = new Float64Array(p * p);
  const unit = new Float64Array(p);
  for (let j = 0; j < p; j++) {
    unit.fill(0);
    unit[j] = 1;
    const column = choleskySolve(l, unit, p);
    for (let i = 0; i < p; i++) inverse[i * p + j] = column[i]!;
  }
  return inverse;
}
