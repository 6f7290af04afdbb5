import { describe, expect, it } from 'vitest';
import { createRandom } from '../../../../electron/backend/example/random.ts';
import { fourier } from '../../../../shared-core/reference/forward/fft.ts';
import { fineGrid } from '../../../../shared-core/reference/forward/grid.ts';
import { kernelAt } from '../../../../shared-core/reference/forward/instrument.ts';
import {
  modelTransmittance,
  transmittanceOnly,
  type ModelState,
} from '../../../../shared-core/reference/forward/transmittance.ts';
import { whiteningFilter } from '../../../../shared-core/reference/forward/whiten.ts';

const samples = Float64Array.from({ length: 161 }, (_, i) => 2000 + 0.125 * i);
const grid = fineGrid(samples, 0.125, 0.01, 30);
const state: ModelState = {
  centresPerCm: Float64Array.of(2008.03, 2009.1, 2013.47),
  strengths: Float64Array.of(0.12, 0.05, 1.5),
  lorentzHalfWidthPerCm: 0.045,
  instrument: { pathDifferenceCm: 2, q1: 0.45, q2: 0.01 },
};

/** Largest difference of two columns over the largest value of the second. */
function apart(a: Float64Array, b: Float64Array): number {
  const scale = Math.max(...b.map(Math.abs));
  return Math.max(...a.map((v, i) => Math.abs(v - b[i]!))) / scale;
}

function difference(change: (step: number) => ModelState, step: number): Float64Array {
  const up = transmittanceOnly(change(step), grid, samples.length);
  const down = transmittanceOnly(change(-step), grid, samples.length);
  return up.map((v, i) => (v - down[i]!) / (2 * step));
}

function whole(column: { start: number; values: Float64Array }): Float64Array {
  const all = new Float64Array(samples.length);
  all.set(column.values, column.start);
  return all;
}

describe('the model of the transmittance', () => {
  const values = modelTransmittance(state, grid, samples);

  it('has the derivatives that differences of the model give', () => {
    const instrument = (changes: Partial<ModelState['instrument']>): ModelState => ({
      ...state,
      instrument: { ...state.instrument, ...changes },
    });
    expect(
      apart(
        values.byWidth,
        difference((d) => ({ ...state, lorentzHalfWidthPerCm: 0.045 + d }), 1e-4),
      ),
    ).toBeLessThan(2e-3);
    expect(
      apart(
        values.byQ1,
        difference((d) => instrument({ q1: 0.45 + d }), 1e-4),
      ),
    ).toBeLessThan(1e-6);
    expect(
      apart(
        values.byQ2,
        difference((d) => instrument({ q2: 0.01 + d }), 1e-4),
      ),
    ).toBeLessThan(1e-6);
    expect(
      apart(
        values.byPath,
        difference((d) => instrument({ pathDifferenceCm: 2 + d }), 1e-3),
      ),
    ).toBeLessThan(0.1);
  });

  it('has the derivatives by centre and strength of thin and of black lines', () => {
    for (const i of [0, 1, 2]) {
      const moved = (d: number): ModelState => ({
        ...state,
        centresPerCm: state.centresPerCm.map((c, k) => (k === i ? c + d : c)),
      });
      const stronger = (d: number): ModelState => ({
        ...state,
        strengths: state.strengths.map((s, k) => (k === i ? s + d : s)),
      });
      expect(apart(whole(values.byCentre[i]!), difference(moved, 1e-4))).toBeLessThan(0.02);
      expect(apart(whole(values.byStrength[i]!), difference(stronger, 1e-4))).toBeLessThan(0.02);
    }
  });

  it('keeps the light that a line takes, whatever the instrument', () => {
    const takenBy = (pathDifferenceCm: number, q1: number): number => {
      const instrument = { pathDifferenceCm, q1, q2: 0 };
      const one = { ...state, centresPerCm: Float64Array.of(2010), strengths: Float64Array.of(0.8) };
      return transmittanceOnly({ ...one, instrument }, grid, samples.length).reduce((s, t) => s + 1 - t, 0);
    };
    expect(takenBy(1, 0.5) / takenBy(2.5, 0.5)).toBeCloseTo(1, 3);
    expect(takenBy(1.5, 0.4) / takenBy(2.5, 0.5)).toBeCloseTo(1, 2);
  });
});

describe('the response of the instrument', () => {
  it('is the cosine transform of the weighting of the interferogram', () => {
    const [l, q1, q2] = [1.7, 0.4, 0.05];
    for (const delta of [0, 0.13, 0.4, 1.1]) {
      const steps = 4000;
      let sum = 0;
      for (let i = 0; i < steps; i++) {
        const x = ((i + 0.5) * l) / steps;
        const a = 1 - q1 - q2 + q1 * Math.cos((Math.PI * x) / l) + q2 * Math.cos((2 * Math.PI * x) / l);
        sum += (2 * a * Math.cos(2 * Math.PI * delta * x) * l) / steps;
      }
      expect(kernelAt({ pathDifferenceCm: l, q1, q2 }, delta)).toBeCloseTo(sum, 5);
    }
  });
});

describe('fourier', () => {
  it('comes back to where it started and agrees with the sum that defines it', () => {
    const random = createRandom(2, 1);
    const re = Float64Array.from({ length: 64 }, () => random.normal());
    const im = Float64Array.from({ length: 64 }, () => random.normal());
    const [a, b] = [re.slice(), im.slice()];
    const transform = fourier(64);
    transform.forward(a, b);
    const k = 5;
    const sum = re.reduce((s, v, j) => {
      const angle = (-2 * Math.PI * j * k) / 64;
      return s + v * Math.cos(angle) - im[j]! * Math.sin(angle);
    }, 0);
    expect(a[k]).toBeCloseTo(sum, 10);
    transform.backward(a, b);
    expect(a[17]! / 64).toBeCloseTo(re[17]!, 12);
    expect(b[3]! / 64).toBeCloseTo(im[3]!, 12);
  });

  it('refuses a length that is no power of two', () => {
    expect(() => fourier(12)).toThrow(RangeError);
  });
});

describe('whiteningFilter', () => {
  it('undoes an autoregressive process', () => {
    const random = createRandom(4, 1);
    const x = new Float64Array(20000);
    for (let i = 1; i < x.length; i++) x[i] = 0.7 * x[i - 1]! + random.normal();
    const filter = whiteningFilter(x, new Uint8Array(x.length).fill(1), 4, 0);
    expect(filter[1]! / filter[0]!).toBeCloseTo(-0.7, 1);
    expect(filter[2]! / filter[0]!).toBeCloseTo(0, 1);
    const white = x.map((_, i) => filter.reduce((s, f, k) => s + f * (x[i - k] ?? 0), 0));
    expect(white.reduce((s, v) => s + v * v, 0) / white.length).toBeCloseTo(1, 1);
  });
});
