import type { Column } from './columns.ts';
import type { FineGrid } from './grid.ts';

/** Widths around a line within which its own derivative is followed on the fine grid. */
const coreWidths = 25;

/**
 * Derivatives of the observed transmittance by the centre and the strength of one line:
 * ∂T/∂ν_i = −K ∗ (e^{−τ} s ∂L/∂ν_i), ∂T/∂s_i = −K ∗ (e^{−τ} L), summed over the fine grid near the line.
 *
 * @param transmission e^{−τ} of all lines on the fine grid. @param kernel response at multiples of the fine step, times the step.
 */
export function columnOf(
  centrePerCm: number,
  strength: number,
  gammaPerCm: number,
  transmission: Float64Array,
  grid: FineGrid,
  kernel: Float64Array,
  samplePerCm: Float64Array,
): { byCentre: Column; byStrength: Column } {
  const h = grid.stepPerCm;
  // A black line shows only at its edges: go out to where its optical depth is small.
  const edge = Math.sqrt((Math.abs(strength) * gammaPerCm) / Math.PI / 0.003);
  const core = Math.max(coreWidths * gammaPerCm, edge, 2 * h);
  const from = Math.max(0, Math.ceil((centrePerCm - core - grid.startPerCm) / h));
  const to = Math.min(grid.length - 1, Math.floor((centrePerCm + core - grid.startPerCm) / h));
  const n = Math.max(0, to - from + 1);
  const dCentre = new Float64Array(n);
  const dStrength = new Float64Array(n);
  for (let k = 0; k < n; k++) {
    const d = grid.startPerCm + (from + k) * h - centrePerCm;
    const inverse = 1 / (d * d + gammaPerCm * gammaPerCm);
    const shape = (gammaPerCm / Math.PI) * inverse;
    const e = transmission[from + k]!;
    dStrength[k] = -e * shape;
    dCentre[k] = -e * strength * shape * 2 * d * inverse;
  }
  const reach = core + (kernel.length - 2) * h;
  const first = lowerBound(samplePerCm, centrePerCm - reach);
  const end = lowerBound(samplePerCm, centrePerCm + reach);
  const byCentre = new Float64Array(end - first);
  const byStrength = new Float64Array(end - first);
  const last = kernel.length - 2;
  for (let i = first; i < end; i++) {
    const offset = (samplePerCm[i]! - grid.startPerCm) / h - from;
    let c = 0;
    let s = 0;
    const k0 = Math.max(0, Math.ceil(offset - last));
    const k1 = Math.min(n - 1, Math.floor(offset + last));
    if (grid.firstSample !== null) {
      // Even samples are points of the fine grid: nothing to interpolate.
      const centre = Math.round(offset);
      for (let k = k0; k <= k1; k++) {
        const w = kernel[k < centre ? centre - k : k - centre]!;
        c += w * dCentre[k]!;
        s += w * dStrength[k]!;
      }
    } else {
      for (let k = k0; k <= k1; k++) {
        const u = Math.abs(offset - k);
        const j = u | 0;
        const w = kernel[j]! + (u - j) * (kernel[j + 1]! - kernel[j]!);
        c += w * dCentre[k]!;
        s += w * dStrength[k]!;
      }
    }
    byCentre[i - first] = c;
    byStrength[i - first] = s;
  }
  return { byCentre: { start: first, values: byCentre }, byStrength: { start: first, values: byStrength } };
}

/** First index whose element is at least `value`. */
export function lowerBound(ascending: Float64Array, value: number): number {
  let low = 0;
  let high = ascending.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (ascending[middle]! < value) low = middle + 1;
    else high = middle;
  }
  return low;
}
