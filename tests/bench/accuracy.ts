import { createRandom } from '../../electron/backend/example/random.ts';
import { simulateSpectrum, type SimulationOptions } from '../../electron/backend/example/simulate.ts';
import { makeReference } from '../../shared-core/reference/index.ts';
import { cramerRaoBounds } from './bound.ts';
import { benchSettings, errorsOf, fileOf, isWrong, type Errors } from './judge.ts';
import { printTable } from './print.ts';

interface AccuracyCase {
  readonly name: string;
  readonly limit: string;
  readonly options: (seed: number) => SimulationOptions;
}

const common = (seed: number) => {
  const random = createRandom(seed, 11);
  return {
    seed,
    peakAbsorbance: 0.8 * 4 ** random.uniform(),
    lorentzHalfWidthPerCm: random.between(0.025, 0.06),
    /** The grid of points falls differently on the lines in every file. */
    shift: random.uniform(),
  };
};

function fundamental(
  gas: 'HCl' | 'DCl' | 'CO',
  range: readonly [number, number],
  changes: Partial<SimulationOptions> = {},
): (seed: number) => SimulationOptions {
  return (seed) => {
    const { peakAbsorbance, lorentzHalfWidthPerCm, shift } = common(seed);
    return {
      seed,
      gases: [{ gas, peakAbsorbance, deviation: 1e-5 }],
      fromPerCm: range[0] + shift,
      toPerCm: range[1] + shift,
      lorentzHalfWidthPerCm,
      resolutionPerCm: 0.5,
      apodisation: 'raised-cosine',
      zeroFilling: 2,
      noise: 1e-3,
      ...changes,
    };
  };
}

const hydrogenChloride = [2650, 3090] as const;
export const accuracyCases: readonly AccuracyCase[] = [
  { name: 'HCl 0.5', limit: '1.3', options: fundamental('HCl', hydrogenChloride) },
  { name: 'DCl 0.5', limit: '1.3', options: fundamental('DCl', [1930, 2230]) },
  { name: 'CO 0.5', limit: '1.3', options: fundamental('CO', [2030, 2260]) },
  {
    name: 'HCl 1.0 half resolved',
    limit: '2.6',
    options: fundamental('HCl', hydrogenChloride, { resolutionPerCm: 1, noise: 5e-4 }),
  },
  {
    name: 'HCl 0.5 boxcar',
    limit: 'aim 2',
    options: fundamental('HCl', hydrogenChloride, { apodisation: 'boxcar' }),
  },
  {
    name: 'HCl 0.5 correlated noise',
    limit: 'printed',
    options: fundamental('HCl', hydrogenChloride, { noiseModel: 'interferogram' }),
  },
];

const keys = ['bandOriginPerCm', 'rotationalConstantEquilibriumPerCm', 'alphaEPerCm'] as const;

/** RMS error over the Cramer-Rao bound and coverage of the stated intervals, per case. */
export function benchAccuracy(count: number, only: string | null): void {
  const rows: string[][] = [];
  const coverage = { one: 0, two: 0, of: 0 };
  for (const each of accuracyCases) {
    if (only !== null && !each.name.includes(only)) continue;
    const ratios = { bandOriginPerCm: [], rotationalConstantEquilibriumPerCm: [], alphaEPerCm: [] } as Record<
      keyof Errors,
      number[]
    >;
    const pulls: number[] = [];
    let [sound, absent, wrong, milliseconds] = [0, 0, 0, 0];
    for (let i = 0; i < count; i++) {
      const spectrum = simulateSpectrum(each.options(1000 + i));
      const truth = spectrum.truth.bands[0]!;
      const bound = cramerRaoBounds(spectrum).get(`${truth.isotopologue}/1-0`)!;
      const file = fileOf(spectrum);
      const started = performance.now();
      const reference = makeReference({ files: [file], settings: benchSettings });
      milliseconds += performance.now() - started;
      if (reference.reliability === 'sound') sound++;
      const constants = reference.isotopologues[truth.isotopologue];
      const errors = constants ? errorsOf(constants, truth) : null;
      if (!constants || !errors) {
        absent++;
        console.error(
          `${each.name} seed ${1000 + i}: no constants (${reference.reasons.map((r) => r.code).join(' ')})`,
        );
        continue;
      }
      if (isWrong(errors, truth)) {
        wrong++;
        console.error(
          `${each.name} seed ${1000 + i}: ${reference.reliability} and wrong ${JSON.stringify(errors)}`,
        );
        continue;
      }
      const stated = [constants.nu0, constants.Be, constants.alphaE];
      keys.forEach((key, k) => {
        ratios[key].push(errors[key] / bound[key]);
        const uncertainty = stated[k]?.uncertainty;
        if (uncertainty) pulls.push(Math.abs(errors[key]) / uncertainty);
      });
    }
    const share = (limit: number): number => pulls.filter((pull) => pull < limit).length;
    if (each.limit !== 'printed') {
      coverage.one += share(1);
      coverage.two += share(2);
      coverage.of += pulls.length;
    }
    const rms = (values: readonly number[]): string =>
      Math.sqrt(values.reduce((sum, v) => sum + v * v, 0) / values.length).toFixed(2);
    rows.push([
      each.name,
      ...keys.map((key) => rms(ratios[key])),
      each.limit,
      `${((100 * share(1)) / pulls.length).toFixed(1)} %`,
      `${((100 * share(2)) / pulls.length).toFixed(1)} %`,
      `${sound}/${count}`,
      `${absent}`,
      `${wrong}`,
      `${(milliseconds / count).toFixed(0)} ms`,
    ]);
  }
  printTable(
    `Accuracy: RMS error over the Cramer-Rao bound, ${count} spectra per case`,
    ['case', 'nu0', 'Be', 'alphaE', 'limit', '1 sigma', '2 sigma', 'sound', 'absent', 'wrong', 'time'],
    rows,
  );
  console.log(
    `Honesty over ${coverage.of} results: 1 sigma covers ${((100 * coverage.one) / coverage.of).toFixed(1)} % (62-74), 2 sigma ${((100 * coverage.two) / coverage.of).toFixed(1)} % (92-98)`,
  );
}
