/**
 * Discrete Fourier transforms of one length (a power of two), complex, in place; tables are made once.
 *
 * Forward: X_k = Σ x_j e^{−2πijk/n}; backward without the division by n.
 */
export interface Fourier {
  readonly length: number;
  readonly forward: (re: Float64Array, im: Float64Array) => void;
  readonly backward: (re: Float64Array, im: Float64Array) => void;
}

/** @param length a power of two, at least 2. @throws RangeError where it is not. */
export function fourier(length: number): Fourier {
  if (length < 2 || (length & (length - 1)) !== 0) {
    throw new RangeError(`length: expected a power of two, got ${length}`);
  }
  const cos = new Float64Array(length / 2);
  const sin = new Float64Array(length / 2);
  for (let i = 0; i < length / 2; i++) {
    cos[i] = Math.cos((2 * Math.PI * i) / length);
    sin[i] = Math.sin((2 * Math.PI * i) / length);
  }
  const reversed = new Uint32Array(length);
  const bits = Math.log2(length);
  for (let i = 1; i < length; i++) reversed[i] = (reversed[i >> 1]! >> 1) | ((i & 1) << (bits - 1));

  function forward(re: Float64Array, im: Float64Array): void {
    for (let i = 0; i < length; i++) {
      const j = reversed[i]!;
      if (j > i) {
        const a = re[i]!;
        re[i] = re[j]!;
        re[j] = a;
        const b = im[i]!;
        im[i] = im[j]!;
        im[j] = b;
      }
    }
    for (let half = 1; half < length; half *= 2) {
      const stride = length / (2 * half);
      for (let k = 0; k < half; k++) {
        const c = cos[k * stride]!;
        const s = sin[k * stride]!;
        for (let i = k; i < length; i += 2 * half) {
          const j = i + half;
          const tr = re[j]! * c + im[j]! * s;
          const ti = im[j]! * c - re[j]! * s;
          re[j] = re[i]! - tr;
          im[j] = im[i]! - ti;
          re[i] = re[i]! + tr;
          im[i] = im[i]! + ti;
        }
      }
    }
  }
  return { length, forward, backward: (re, im) => forward(im, re) };
}
