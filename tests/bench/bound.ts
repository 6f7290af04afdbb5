import { Matrix, inverse } from 'ml-matrix';
import type { SimulatedBand } from '../../electron/backend/example/bands.ts';
import { noiseReduction } from '../../electron/backend/example/instrument.ts';
import { instrumentOf, type SimulatedSpectrum } from '../../electron/backend/example/simulate.ts';

/** Least standard deviations that any unbiased estimate from this spectrum can have (Cramer-Rao), file's own axis. */
export interface Bound {
  readonly bandOriginPerCm: number;
  readonly rotationalConstantEquilibriumPerCm: number;
  readonly alphaEPerCm: number;
}

const constantKeys = [
  'bandOriginPerCm',
  'rotationalConstantLowerPerCm',
  'rotationalConstantUpperPerCm',
  'centrifugalConstantLowerPerCm',
  'centrifugalConstantUpperPerCm',
] as const;

/** Steps that move a line of m about 8 by a thousandth of a wavenumber or so. */
const steps = {
  bandOriginPerCm: 1e-3,
  rotationalConstantLowerPerCm: 2e-5,
  rotationalConstantUpperPerCm: 2e-5,
  centrifugalConstantLowerPerCm: 3e-7,
  centrifugalConstantUpperPerCm: 3e-7,
} as const;

/**
 * Cramer-Rao bounds of every band, by name "isotopologue/band". Free: the five constants and the strength of every band,
 * and one Lorentz width. H is held. White noise: information = J'J/sigma^2 on the points of the file. Noise that comes
 * from the interferogram: the same on the unweighted, critically sampled spectrum, where that noise is white.
 */
export function cramerRaoBounds(spectrum: SimulatedSpectrum): ReadonlyMap<string, Bound> {
  const options = spectrum.truth.options;
  const instrument = instrumentOf(options);
  const correlated = options.noiseModel === 'interferogram';
  const changed = correlated
    ? {
        apodisation: 'boxcar' as const,
        stepPerCm: 1 / (2 * instrument.maximumPathDifferenceCm),
      }
    : {};
  const sigma = (options.noise ?? 1e-3) / (correlated ? noiseReduction(instrument) : 1);
  const width = options.lorentzHalfWidthPerCm ?? 0.03;
  const model = (bands: readonly SimulatedBand[], half = width): Float64Array =>
    spectrum.exactModel(bands, { ...changed, lorentzHalfWidthPerCm: half });
  const centre = model(spectrum.bands);
  const columns: Float64Array[] = [];
  const names: string[] = [];
  const slope = (moved: Float64Array, step: number): Float64Array =>
    moved.map((value, i) => (value - centre[i]!) / (step * sigma));
  const withBand = (
    index: number,
    change: (band: SimulatedBand) => SimulatedBand,
  ): readonly SimulatedBand[] => spectrum.bands.map((band, i) => (i === index ? change(band) : band));
  spectrum.bands.forEach((band, index) => {
    const name = `${band.isotopologue}/${band.upper}-0`;
    for (const key of constantKeys) {
      const bands = withBand(index, (b) => ({
        ...b,
        constants: { ...b.constants, [key]: b.constants[key] + steps[key] },
      }));
      columns.push(slope(model(bands), steps[key]));
      names.push(`${name}/${key}`);
    }
    columns.push(slope(model(withBand(index, (b) => ({ ...b, strength: b.strength * 1.001 }))), 1e-3));
    names.push(`${name}/strength`);
  });
  columns.push(slope(model(spectrum.bands, width * 1.003), 3e-3));
  names.push('width');
  const covariance = covarianceOf(columns);
  return new Map(
    spectrum.bands.map((band) => {
      const name = `${band.isotopologue}/${band.upper}-0`;
      const at = (key: string): number => names.indexOf(`${name}/${key}`);
      const [origin, lower, upper] = [at(constantKeys[0]), at(constantKeys[1]), at(constantKeys[2])];
      const n = band.upper;
      const variance = (weights: readonly (readonly [number, number])[]): number =>
        weights.reduce(
          (sum, [i, a]) => sum + weights.reduce((inner, [j, b]) => inner + a * b * covariance.get(i, j), 0),
          0,
        );
      return [
        name,
        {
          bandOriginPerCm: Math.sqrt(variance([[origin, 1]])),
          rotationalConstantEquilibriumPerCm: Math.sqrt(
            variance([
              [lower, 1 + 1 / (2 * n)],
              [upper, -1 / (2 * n)],
            ]),
          ),
          alphaEPerCm: Math.sqrt(
            variance([
              [lower, 1 / n],
              [upper, -1 / n],
            ]),
          ),
        },
      ] as const;
    }),
  );
}

/** Inverse of the information matrix, by columns scaled to unit length. */
function covarianceOf(columns: readonly Float64Array[]): Matrix {
  const lengths = columns.map((column) => Math.sqrt(column.reduce((sum, v) => sum + v * v, 0)) || 1e-30);
  const information = Matrix.zeros(columns.length, columns.length);
  columns.forEach((a, i) => {
    for (let j = 0; j <= i; j++) {
      const b = columns[j]!;
      let sum = 0;
      for (let k = 0; k < a.length; k++) sum += a[k]! * b[k]!;
      information.set(i, j, sum / (lengths[i]! * lengths[j]!));
      information.set(j, i, sum / (lengths[i]! * lengths[j]!));
    }
    information.set(i, i, information.get(i, i) * (1 + 1e-12));
  });
  const result = inverse(information);
  columns.forEach((_, i) => {
    columns.forEach((__, j) => result.set(i, j, result.get(i, j) / (lengths[i]! * lengths[j]!)));
  });
  return result;
}
