import { describe, expect, it } from 'vitest';
import type { SimulationOptions } from '../../../../electron/backend/example/simulate.ts';
import { fitWholeSpectrum } from '../../../../shared-core/reference/forward/fit-whole-spectrum.ts';
import type { ForwardBand, ForwardFit } from '../../../../shared-core/reference/forward/types.ts';
import { prepareSimulated, startingBands, type PreparedSimulation } from '../../../helpers/forward-input.ts';

const hydrogenChloride = (seed: number, changes: Partial<SimulationOptions> = {}): SimulationOptions => ({
  seed,
  gases: [{ gas: 'HCl', peakAbsorbance: 1.3, deviation: 1e-5 }],
  fromPerCm: 2650 + (seed % 7) / 7,
  toPerCm: 3090 + (seed % 7) / 7,
  lorentzHalfWidthPerCm: 0.04,
  resolutionPerCm: 0.5,
  ...changes,
});

function fitted(simulation: PreparedSimulation, bands: readonly ForwardBand[]): ForwardFit {
  const fit = fitWholeSpectrum({ prepared: simulation.prepared, bands });
  if (fit.outcome !== 'converged') throw new Error(`${fit.outcome}: ${fit.reason}`);
  return fit;
}

/** Errors of ν̃0, B_0, B_1 of the first band in units of their own σ. */
function pulls(simulation: PreparedSimulation, fit: ForwardFit, bandCount: number): number[] {
  const truth = simulation.simulated.truth.bands[0]!.constants;
  const got = fit.constants[0]!;
  const sigma = (k: number): number => Math.sqrt(fit.covariance[k * (5 * bandCount + 1)]!);
  return [
    (got.bandOriginPerCm - truth.bandOriginPerCm) / sigma(0),
    (got.rotationalConstantLowerPerCm - truth.rotationalConstantLowerPerCm) / sigma(1),
    (got.rotationalConstantUpperPerCm - truth.rotationalConstantUpperPerCm) / sigma(2),
  ];
}

function pullsOf(options: SimulationOptions): number[] {
  const simulation = prepareSimulated(options);
  const bands = startingBands(simulation, options.seed);
  return pulls(simulation, fitted(simulation, bands), bands.length);
}

const rms = (values: readonly number[]): number => Math.hypot(...values) / Math.sqrt(values.length);

describe('fitWholeSpectrum', () => {
  it.each([
    ['a raised cosine', {}],
    ['no weighting: side lobes', { apodisation: 'boxcar' }],
    ['half-resolved doublets', { resolutionPerCm: 1, noise: 5e-4 }],
    ['black lines', { gases: [{ gas: 'HCl', peakAbsorbance: 12 }] }],
    ['strong noise', { noise: 8e-3 }],
  ] as const)('finds the constants within four σ with %s', (_, changes) => {
    const found = pullsOf(hydrogenChloride(31, changes));
    for (const pull of found) expect(Math.abs(pull)).toBeLessThan(4);
  });

  it('states σ near the precision that the points allow', () => {
    const simulation = prepareSimulated(hydrogenChloride(8));
    const bands = startingBands(simulation, 8);
    const sigma = Math.sqrt(fitted(simulation, bands).covariance[0]!);
    expect(sigma).toBeLessThan(1e-3);
    expect(sigma).toBeGreaterThan(5e-5);
  });

  // Eight spectra give 24 pulls, of which the three of one file hang together: an rms of 1 is held within about ± 0.4.
  it.each([
    ['independent', {}],
    ['correlated by zero filling', { noiseModel: 'interferogram' }],
    ['correlated by fourfold zero filling', { noiseModel: 'interferogram', zeroFilling: 4 }],
  ] as const)('states σ that the errors keep to, noise %s', (_, changes) => {
    const all = Array.from({ length: 8 }, (__, i) => pullsOf(hydrogenChloride(500 + i, changes))).flat();
    expect(rms(all)).toBeGreaterThan(0.5);
    expect(rms(all)).toBeLessThan(1.5);
  });

  it('is not pulled by a rare isotopologue that nobody has found', () => {
    const all = Array.from({ length: 6 }, (_, i) => {
      const simulation = prepareSimulated({
        seed: 700 + i,
        gases: [{ gas: 'CO', peakAbsorbance: 1.5, deviation: 1e-5 }],
        fromPerCm: 2030,
        toPerCm: 2260,
        lorentzHalfWidthPerCm: 0.04,
        resolutionPerCm: 0.5,
      });
      const common = startingBands(simulation, i).filter((b) => b.isotopologue.name === '12C16O');
      const fit = fitted(simulation, common);
      // What stands in the background is no part of the result.
      expect(fit.covariance).toHaveLength(25);
      expect(fit.lines.every((l) => l.bandIndex === 0)).toBe(true);
      return pulls(simulation, fit, 1);
    });
    expect(rms(all.flat())).toBeLessThan(1.5);
    const mean = all.reduce((sum, p) => sum + p[1]!, 0) / all.length;
    expect(Math.abs(mean)).toBeLessThan(1.3);
  });

  it('finds the centre of merged doublets, also where they are black', () => {
    const simulation = prepareSimulated(
      hydrogenChloride(12, {
        gases: [{ gas: 'HCl', peakAbsorbance: 20, deviation: 1e-5 }],
        resolutionPerCm: 3.3,
        noise: 1e-3,
      }),
    );
    const [light, heavy] = startingBands(simulation, 12);
    const ratio = 0.2424 / 0.7576; // natural abundances of 37Cl and 35Cl (IUPAC)
    const shift =
      light!.constants.bandOriginPerCm - simulation.simulated.truth.bands[0]!.constants.bandOriginPerCm;
    const follower: ForwardBand = {
      ...heavy!,
      ms: light!.ms,
      constants: {
        ...simulation.simulated.truth.bands[1]!.constants,
        bandOriginPerCm: simulation.simulated.truth.bands[1]!.constants.bandOriginPerCm + shift,
      },
      follows: { leader: 0, strengthRatio: ratio },
      peakAbsorbance: light!.peakAbsorbance.map((a) => ratio * a),
    };
    const fit = fitted(simulation, [light!, follower]);
    const error =
      fit.constants[0]!.bandOriginPerCm - simulation.simulated.truth.bands[0]!.constants.bandOriginPerCm;
    expect(Math.abs(error)).toBeLessThan(0.08);
    expect(Math.abs(error)).toBeLessThan(3 * Math.sqrt(fit.covariance[0]!));
  });

  it('gives every line a position of its own that agrees with the band', () => {
    const simulation = prepareSimulated(hydrogenChloride(21));
    const bands = startingBands(simulation, 21);
    const fit = fitted(simulation, bands);
    const strong = fit.lines.filter((l) => l.depth > 0.05);
    expect(strong.length).toBeGreaterThan(15);
    expect(rms(strong.map((l) => l.residualPerCm / l.uncertaintyPerCm))).toBeLessThan(2);
  });

  it('says so where lines are too few', () => {
    const simulation = prepareSimulated(hydrogenChloride(2));
    const [light] = startingBands(simulation, 2);
    const fit = fitWholeSpectrum({
      prepared: simulation.prepared,
      bands: [{ ...light!, ms: [1, 2], peakAbsorbance: [0.5, 0.5] }],
    });
    expect(fit.outcome).toBe('too-few-lines');
  });

  it('gives the same result twice', () => {
    const simulation = prepareSimulated(hydrogenChloride(4));
    const bands = startingBands(simulation, 4);
    expect(fitted(simulation, bands).constants).toEqual(fitted(simulation, bands).constants);
  });
});
