/** Plans (bit reversal and twiddle factors) by length, since benches transform thousands of arrays of a few lengths. */
const plans = new Map<number, { reversed: Uint32Array; cosine: Float64Array; sine: Float64Array }>();

function planOf(length: number): { reversed: Uint32Array; cosine: Float64Array; sine: Float64Array } {
  const known = plans.get(length);
  if (known) return known;
  const bits = Math.round(Math.log2(length));
  if (length < 2 || 2 ** bits !== length) {
    throw new RangeError(`length must be a power of two of at least 2, got ${length}`);
  }
  const reversed = new Uint32Array(length);
  for (let i = 0; i < length; i++) {
    reversed[i] = (reversed[i >> 1]! >> 1) | ((i & 1) << (bits - 1));
  }
  const cosine = new Float64Array(length / 2);
  const sine = new Float64Array(length / 2);
  for (let i = 0; i < length / 2; i++) {
    cosine[i] = Math.cos((2 * Math.PI * i) / length);
    sine[i] = Math.sin((2 * Math.PI * i) / length);
  }
  const plan = { reversed, cosine, sine };
  plans.set(length, plan);
  return plan;
}

/**
 * Discrete Fourier transform in place, X_k = sum x_j exp(-2 pi i jk/N) (`inverse`: plus sign, not divided by N).
 * The length must be a power of two.
 */
export function transform(real: Float64Array, imaginary: Float64Array, inverse = false): void {
  const length = real.length;
  const { reversed, cosine, sine } = planOf(length);
  for (let i = 0; i < length; i++) {
    const j = reversed[i]!;
    if (j > i) {
      const r = real[i]!;
      real[i] = real[j]!;
      real[j] = r;
      const m = imaginary[i]!;
      imaginary[i] = imaginary[j]!;
      imaginary[j] = m;
    }
  }
  const sign = inverse ? 1 : -1;
  for (let half = 1; half < length; half *= 2) {
    const stride = length / (2 * half);
    for (let start = 0; start < length; start += 2 * half) {
      for (let k = 0; k < half; k++) {
        const c = cosine[k * stride]!;
        const s = sign * sine[k * stride]!;
        const a = start + k;
        const b = a + half;
        const r = real[b]! * c - imaginary[b]! * s;
        const m = real[b]! * s + imaginary[b]! * c;
        real[b] = real[a]! - r;
        imaginary[b] = imaginary[a]! - m;
        real[a] = real[a]! + r;
        imaginary[a] = imaginary[a]! + m;
      }
    }
  }
}
