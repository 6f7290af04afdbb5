import { simulateSpectrum, type SimulationOptions } from '../../electron/backend/example/simulate.ts';
import { createRandom } from '../../electron/backend/example/random.ts';

/** Points of a file that must never give a sound reference (or, for a cause, one whose reason must fit). */
export interface ControlSpectrum {
  readonly name: string;
  readonly wavenumberPerCm: Float64Array;
  readonly transmittance: Float64Array;
  /** First line of the file; says transmittance where absent. */
  readonly header?: string;
}

const base = (seed: number): SimulationOptions => ({
  seed,
  gases: [{ gas: 'HCl', peakAbsorbance: 2 }],
  fromPerCm: 2600,
  toPerCm: 3150,
  lorentzHalfWidthPerCm: 0.05,
  noise: 1e-3,
});

function simulated(name: string, options: SimulationOptions): ControlSpectrum {
  const s = simulateSpectrum(options);
  return { name, wavenumberPerCm: s.wavenumberPerCm, transmittance: s.transmittance };
}

/** Lines of equal shape at given places on a flat, noisy baseline. */
function comb(name: string, seed: number, places: readonly number[], depth = 0.3): ControlSpectrum {
  const random = createRandom(seed, 31);
  const wavenumberPerCm = Float64Array.from({ length: 4400 }, (_, i) => 2600 + i * 0.125);
  const transmittance = wavenumberPerCm.map(
    (x) =>
      places.reduce((t, place) => t * (1 - depth * Math.exp(-(((x - place) / 0.35) ** 2))), 1) +
      1e-3 * random.normal(),
  );
  return { name, wavenumberPerCm, transmittance };
}

/** What the detector sees without a background to divide by: the hump of source and beam splitter, with everything in it. */
function singleBeam(name: string, seed: number, header: string): ControlSpectrum {
  const cell = simulated(name, {
    ...base(seed),
    fromPerCm: 500,
    toPerCm: 5000,
    zeroFilling: 1,
    foreign: { water: 0.3, carbonDioxide: 0.5 },
  });
  const hump = (x: number): number => 14.2 * ((x - 380) / 900) ** 2 * Math.exp(-(x - 380) / 620);
  return {
    ...cell,
    header,
    transmittance: cell.transmittance.map((t, i) => t * hump(cell.wavenumberPerCm[i]!)),
  };
}

/** The negative controls: none of them may come out sound. */
export function negativeControls(seed: number): readonly ControlSpectrum[] {
  const random = createRandom(seed, 32);
  const flat = simulated('background', { ...base(seed), gases: [] });
  const good = simulated('good', base(seed));
  const x = good.wavenumberPerCm;
  const order = random.shuffled([...good.transmittance.keys()]);
  return [
    flat,
    simulated('unresolved envelope', {
      ...base(seed),
      resolutionPerCm: 32,
      gases: [{ gas: 'HCl', peakAbsorbance: 30 }],
    }),
    simulated('unresolved CO', {
      ...base(seed),
      fromPerCm: 1950,
      toPerCm: 2350,
      resolutionPerCm: 16,
      gases: [{ gas: 'CO', peakAbsorbance: 20 }],
    }),
    simulated('carbon dioxide only', {
      ...base(seed),
      gases: [],
      fromPerCm: 2200,
      toPerCm: 2500,
      foreign: { carbonDioxide: 1.5 },
    }),
    simulated('water only', {
      ...base(seed),
      gases: [],
      fromPerCm: 3400,
      toPerCm: 4000,
      foreign: { water: 1 },
    }),
    simulated('water, bending', {
      ...base(seed),
      gases: [],
      fromPerCm: 1300,
      toPerCm: 2100,
      foreign: { water: 1 },
    }),
    simulated('half-heavy water only', { ...base(seed), gases: [], foreign: { halfHeavyWater: 1 } }),
    {
      name: 'pure noise',
      wavenumberPerCm: x,
      transmittance: x.map(() => Math.max(1e-3, 0.5 + 0.2 * random.normal())),
    },
    singleBeam('single beam, labelled', seed, 'wavenumber (cm-1),single beam'),
    singleBeam('single beam, no label', seed, 'wavenumber (cm-1),intensity'),
    {
      name: 'interferogram',
      wavenumberPerCm: Float64Array.from({ length: 4096 }, (_, i) => i),
      transmittance: Float64Array.from(
        { length: 4096 },
        (_, i) =>
          8 * Math.exp(-(((i - 300) / 8) ** 2)) * Math.cos((i - 300) * 1.1) +
          0.2 * Math.cos(i * 0.9) * Math.exp(-Math.abs(i - 300) / 900) +
          0.01 * random.normal(),
      ),
    },
    comb(
      'even comb',
      seed,
      Array.from({ length: 24 }, (_, i) => 2650 + 20.5 * i),
    ),
    comb(
      'random lines',
      seed,
      Array.from({ length: 24 }, () => random.between(2630, 3120)),
    ),
    comb('three lines', seed, [2904.1, 2925.9, 2865.1]),
    {
      name: 'shuffled points',
      wavenumberPerCm: x,
      transmittance: x.map((_, i) => good.transmittance[order[i]!]!),
    },
  ];
}

/** A spectrum with one thing wrong, and the reason codes (or parts of them) that would name it. */
export interface InjectedCause {
  readonly name: string;
  readonly expected: RegExp;
  readonly options: SimulationOptions;
  readonly clipAbsorbance?: number;
}

/** Known causes, one at a time, on a spectrum that is sound without them. */
export function injectedCauses(seed: number): readonly InjectedCause[] {
  const good = base(seed);
  const m = (from: number, to: number): number[] =>
    Array.from({ length: to - from + 1 }, (_, i) => from + i).filter((v) => v !== 0);
  const gas = (changes: Partial<SimulationOptions['gases'][number]>): SimulationOptions => ({
    ...good,
    gases: [{ gas: 'HCl', peakAbsorbance: 2, ...changes }],
  });
  return [
    { name: 'nothing', expected: /^$/, options: good },
    {
      name: 'too noisy',
      expected: /noise|precision|weak|faint|few/,
      options: { ...gas({ peakAbsorbance: 0.6 }), noise: 0.06 },
    },
    {
      name: 'too faint',
      expected: /noise|precision|weak|faint|few|no-lines/,
      options: { ...gas({ peakAbsorbance: 0.02 }), noise: 2e-3 },
    },
    {
      name: 'P branch missing',
      expected: /branch|few|numbering|ambiguous/,
      options: gas({ missing: m(-60, -1) }),
    },
    {
      name: 'R branch missing',
      expected: /branch|few|numbering|ambiguous/,
      options: gas({ missing: m(1, 60) }),
    },
    { name: 'three lines a side', expected: /few/, options: gas({ missing: [...m(-60, -4), ...m(4, 60)] }) },
    { name: 'cut inside P branch', expected: /branch|few|range|cut/, options: { ...good, fromPerCm: 2838 } },
    {
      name: 'unresolved',
      expected: /resol|no-lines|few|background|nothing/,
      options: { ...gas({ peakAbsorbance: 30 }), resolutionPerCm: 32 },
    },
    { name: 'axis off by 900 ppm', expected: /axis|scale/, options: { ...good, scaleErrorPpm: 900 } },
    {
      name: 'saturated',
      expected: /satur|black|clip/,
      options: { ...gas({ peakAbsorbance: 300 }), lorentzHalfWidthPerCm: 0.3 },
      clipAbsorbance: 2,
    },
    {
      name: 'upside down',
      expected: /invert|emission|upside|direction/,
      options: { ...good, inversion: 'emission' },
    },
    {
      name: 'overtone alone',
      expected: /overtone/,
      options: {
        ...good,
        gases: [{ gas: 'HCl', peakAbsorbance: 2, upper: 2 }],
        fromPerCm: 5350,
        toPerCm: 5850,
      },
    },
    { name: 'background only', expected: /no-|background|nothing|few/, options: { ...good, gases: [] } },
  ];
}
