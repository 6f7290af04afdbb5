import { columnOf } from './line-columns.ts';
import type { Column } from './columns.ts';
import { sampled, type FineGrid } from './grid.ts';
import {
  kernelAt,
  kernelReachPerCm,
  weighting,
  type InstrumentParameters,
  type Weighting,
} from './instrument.ts';

/** Everything that the model of the transmittance depends on, but the baseline. */
export interface ModelState {
  /** Line centres, cm-1. */
  readonly centresPerCm: Float64Array;
  /** Napierian integrated absorbance of each line, cm-1. */
  readonly strengths: Float64Array;
  readonly lorentzHalfWidthPerCm: number;
  readonly instrument: InstrumentParameters;
}

/** The model at the samples with its derivatives. */
export interface ModelValues {
  readonly transmittance: Float64Array;
  /** By the centre and by the strength of every line. */
  readonly byCentre: readonly Column[];
  readonly byStrength: readonly Column[];
  readonly byWidth: Float64Array;
  readonly byPath: Float64Array;
  readonly byQ1: Float64Array;
  readonly byQ2: Float64Array;
}

/** A wing of a line is followed until its optical depth falls to this. */
const wingDepth = 3e-5;

/** Derivatives by single lines are followed until the response falls to this share; the model itself has no such end. */
const columnShare = 4e-3;

/**
 * Transmittance behind the instrument: T = K ∗ exp(−Σ s_i L(ν − ν_i)), L(δ) = (γ/π)/(δ² + γ²), K the instrument's response.
 *
 * Applied on the fine grid and, exactly, at the delays of its Fourier transform; the derivatives by single lines are convolved
 * with a kernel cut where it has died away.
 */
export function modelTransmittance(
  state: ModelState,
  grid: FineGrid,
  samplePerCm: Float64Array,
): ModelValues {
  const { depth, depthByWidth } = opticalDepth(state, grid);
  const n = grid.length;
  const count = samplePerCm.length;
  const re = new Float64Array(n);
  const im = new Float64Array(n);
  const transmission = depth;
  for (let i = 0; i < n; i++) {
    const e = Math.exp(-depth[i]!);
    re[i] = 1 - e;
    im[i] = e * depthByWidth[i]!;
    transmission[i] = e;
  }
  grid.transform.forward(re, im);
  const w = weightingOf(state, grid);
  const first = filtered(re, im, w.a, grid);
  const { byPath, byQ1, byQ2 } = instrumentDerivatives(re, im, w, grid, count);
  const kernel = kernelTable(
    state.instrument,
    grid.stepPerCm,
    kernelReachPerCm(state.instrument, columnShare),
  );
  const byCentre: Column[] = [];
  const byStrength: Column[] = [];
  state.centresPerCm.forEach((centre, i) => {
    const columns = columnOf(
      centre,
      state.strengths[i]!,
      state.lorentzHalfWidthPerCm,
      transmission,
      grid,
      kernel,
      samplePerCm,
    );
    byCentre.push(columns.byCentre);
    byStrength.push(columns.byStrength);
  });
  return {
    transmittance: sampled(grid, first.re, count).map((v) => 1 - v),
    byCentre,
    byStrength,
    byWidth: sampled(grid, first.im, count).map((v) => -v),
    byPath,
    byQ1,
    byQ2,
  };
}

/** The same transmittance without its derivatives, for trial steps. */
export function transmittanceOnly(state: ModelState, grid: FineGrid, count: number): Float64Array {
  const { depth } = opticalDepth(state, grid);
  const re = depth.map((v) => -Math.expm1(-v));
  const im = new Float64Array(grid.length);
  grid.transform.forward(re, im);
  const { re: absorbed } = filtered(re, im, weightingOf(state, grid).a, grid);
  return sampled(grid, absorbed, count).map((v) => 1 - v);
}

function weightingOf(state: ModelState, grid: FineGrid): Weighting {
  return weighting(state.instrument, 1 / (grid.length * grid.stepPerCm), grid.length / grid.thinning / 2);
}

/** τ on the fine grid, and its derivative by γ. */
function opticalDepth(
  state: ModelState,
  grid: FineGrid,
): { depth: Float64Array; depthByWidth: Float64Array } {
  const depth = new Float64Array(grid.length);
  const byWidth = new Float64Array(grid.length);
  const gamma = state.lorentzHalfWidthPerCm;
  const g2 = gamma * gamma;
  state.centresPerCm.forEach((centre, i) => {
    const area = state.strengths[i]! / Math.PI;
    const reach = Math.max(10 * gamma, Math.sqrt((Math.abs(area) * gamma) / wingDepth));
    const from = Math.max(0, Math.ceil((centre - reach - grid.startPerCm) / grid.stepPerCm));
    const to = Math.min(grid.length - 1, Math.floor((centre + reach - grid.startPerCm) / grid.stepPerCm));
    // The wing is let down to 0 at its end, so that no step is cut into the spectrum.
    const rest = gamma / (reach * reach + g2);
    for (let k = from; k <= to; k++) {
      const d = grid.startPerCm + k * grid.stepPerCm - centre;
      const inverse = 1 / (d * d + g2);
      depth[k]! += area * (gamma * inverse - rest);
      byWidth[k]! += area * (d * d - g2) * inverse * inverse;
    }
  });
  return { depth, depthByWidth: byWidth };
}

/** Back from the delays to the output grid with weights on both sides of zero delay. */
function filtered(
  re: Float64Array,
  im: Float64Array,
  weights: Float64Array,
  grid: FineGrid,
): { re: Float64Array; im: Float64Array } {
  const n = grid.length;
  const m = n / grid.thinning;
  const a = new Float64Array(m);
  const b = new Float64Array(m);
  for (let k = 0; k < weights.length; k++) {
    const w = weights[k]! / n;
    a[k] = re[k]! * w;
    b[k] = im[k]! * w;
    if (k === 0) continue;
    a[m - k] = re[n - k]! * w;
    b[m - k] = im[n - k]! * w;
  }
  grid.outputTransform.backward(a, b);
  return { re: a, im: b };
}

/**
 * ∂T/∂L, ∂T/∂q1, ∂T/∂q2. The transform X of the deficit alone is the Hermitian part of what was transformed; X·∂A/∂q1 + i X·∂A/∂q2
 * brings two real results back in one transform.
 */
function instrumentDerivatives(
  re: Float64Array,
  im: Float64Array,
  w: Weighting,
  grid: FineGrid,
  count: number,
): { byPath: Float64Array; byQ1: Float64Array; byQ2: Float64Array } {
  const n = grid.length;
  const m = n / grid.thinning;
  const [pr, pi, qr, qi] = [0, 0, 0, 0].map(() => new Float64Array(m)) as [
    Float64Array,
    Float64Array,
    Float64Array,
    Float64Array,
  ];
  for (let k = 0; k < w.a.length; k++) {
    const j = (n - k) & (n - 1);
    const xr = (re[k]! + re[j]!) / (2 * n);
    const xi = (im[k]! - im[j]!) / (2 * n);
    for (const [at, sign] of k === 0
      ? ([[0, 1]] as const)
      : ([
          [k, 1],
          [m - k, -1],
        ] as const)) {
      const y = sign * xi;
      pr[at] = xr * w.byPath[k]!;
      pi[at] = y * w.byPath[k]!;
      qr[at] = xr * w.byQ1[k]! - y * w.byQ2[k]!;
      qi[at] = y * w.byQ1[k]! + xr * w.byQ2[k]!;
    }
  }
  grid.outputTransform.backward(pr, pi);
  grid.outputTransform.backward(qr, qi);
  const negative = (values: Float64Array): Float64Array => sampled(grid, values, count).map((v) => -v);
  return { byPath: negative(pr), byQ1: negative(qr), byQ2: negative(qi) };
}

/** Kernel at multiples of the fine step, from 0 to its reach, times the step (an integral over the grid becomes a sum). */
function kernelTable(instrument: InstrumentParameters, stepPerCm: number, reachPerCm: number): Float64Array {
  const length = Math.ceil(reachPerCm / stepPerCm) + 2;
  return Float64Array.from({ length }, (_, i) => kernelAt(instrument, i * stepPerCm) * stepPerCm);
}
