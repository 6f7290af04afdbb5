const terms = 32;
const scale = Math.sqrt(terms / Math.SQRT2);

/** Coefficients of J. A. C. Weideman, SIAM J. Numer. Anal. 31 (1994) 1497, by direct summation. */
function weidemanCoefficients(): Float64Array {
  const points = 4 * terms;
  const coefficients = new Float64Array(terms);
  const samples = new Float64Array(points);
  for (let k = 1; k < points; k++) {
    const t = scale * Math.tan(((k - points / 2) * Math.PI) / points);
    samples[k] = Math.exp(-t * t) * (scale * scale + t * t);
  }
  for (let n = 1; n <= terms; n++) {
    let sum = 0;
    for (let k = 1; k < points; k++) {
      sum += samples[k]! * Math.cos((2 * Math.PI * n * (k - points / 2)) / points);
    }
    coefficients[n - 1] = sum / points;
  }
  return coefficients;
}
const coefficients = weidemanCoefficients();

/** Real part of the Faddeeva function w(x + iy), y > 0, by Weideman's rational series; about 1e-12. */
function faddeevaNear(x: number, y: number): number {
  // Z = (L + iz)/(L - iz), with iz = -y + ix.
  const [nr, ni, dr, di] = [scale - y, x, scale + y, -x];
  const norm = dr * dr + di * di;
  const zr = (nr * dr + ni * di) / norm;
  const zi = (ni * dr - nr * di) / norm;
  let pr = 0;
  let pi = 0;
  for (let n = terms - 1; n >= 0; n--) {
    const r = pr * zr - pi * zi + coefficients[n]!;
    pi = pr * zi + pi * zr;
    pr = r;
  }
  // w = 2 p/(L - iz)^2 + (1/sqrt pi)/(L - iz)
  const sr = dr * dr - di * di;
  const si = 2 * dr * di;
  const squareNorm = sr * sr + si * si;
  return (2 * (pr * sr + pi * si)) / squareNorm + dr / (Math.sqrt(Math.PI) * norm);
}

/** Asymptotic w = (i/sqrt pi) (z^2 - 1)/(z (z^2 - 3/2)), good to 1e-7 for |z| > 15. */
function faddeevaFar(x: number, y: number): number {
  const zr2 = x * x - y * y;
  const zi2 = 2 * x * y;
  // numerator z^2 - 1, denominator z^3 - 1.5 z
  const nr = zr2 - 1;
  const dr = x * (zr2 - 1.5) - y * zi2;
  const di = x * zi2 + y * (zr2 - 1.5);
  // Re(i q) = -Im(q), q = n/d
  return -(zi2 * dr - nr * di) / ((dr * dr + di * di) * Math.sqrt(Math.PI));
}

/** A Voigt line of unit area (cm), Lorentz half width and Doppler half width (both at half height, cm-1). */
export interface VoigtWidths {
  readonly lorentzHalfWidthPerCm: number;
  readonly dopplerHalfWidthPerCm: number;
}

/** Voigt profile of unit area at `offsetPerCm` from the centre: w(x + iy)/(sqrt pi a), a = Doppler 1/e width. */
export function voigt(offsetPerCm: number, widths: VoigtWidths): number {
  const width = widths.dopplerHalfWidthPerCm / Math.sqrt(Math.LN2);
  const x = offsetPerCm / width;
  const y = widths.lorentzHalfWidthPerCm / width;
  const value = x * x + y * y > 225 ? faddeevaFar(x, y) : faddeevaNear(x, y);
  return value / (Math.sqrt(Math.PI) * width);
}

/** Adds `area` times a Voigt line at `centrePerCm` to samples at start + i step, out to `reachPerCm` on either side. */
export function addVoigt(
  target: Float64Array,
  grid: { readonly start: number; readonly step: number },
  line: { readonly centrePerCm: number; readonly area: number; readonly reachPerCm: number },
  widths: VoigtWidths,
): void {
  const width = widths.dopplerHalfWidthPerCm / Math.sqrt(Math.LN2);
  const y = widths.lorentzHalfWidthPerCm / width;
  const factor = line.area / (Math.sqrt(Math.PI) * width);
  const first = Math.max(0, Math.ceil((line.centrePerCm - line.reachPerCm - grid.start) / grid.step));
  const last = Math.min(
    target.length - 1,
    Math.floor((line.centrePerCm + line.reachPerCm - grid.start) / grid.step),
  );
  for (let i = first; i <= last; i++) {
    const x = (grid.start + i * grid.step - line.centrePerCm) / width;
    const value = x * x + y * y > 225 ? faddeevaFar(x, y) : faddeevaNear(x, y);
    target[i] = target[i]! + factor * value;
  }
}
