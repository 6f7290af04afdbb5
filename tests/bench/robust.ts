import { createRandom } from '../../electron/backend/example/random.ts';
import { writeSpectrum } from '../../electron/backend/example/file-writer.ts';
import { simulateSpectrum } from '../../electron/backend/example/simulate.ts';
import { makeReference } from '../../shared-core/reference/index.ts';
import type { FileReference } from '../../shared-core/reference/types.ts';
import type { SourceFile } from '../../shared-core/spectrum/types.ts';
import { cramerRaoBounds } from './bound.ts';
import { injectedCauses, negativeControls } from './controls.ts';
import { drawEnvelope } from './envelope.ts';
import { benchSettings, boundAllows, exactStyle, falsehoods, fileOf } from './judge.ts';
import { percent, printTable } from './print.ts';

function reference(file: SourceFile): FileReference {
  return makeReference({ files: [file], settings: benchSettings });
}
const codes = (made: FileReference): string =>
  [...new Set(made.reasons.map((reason) => reason.code))].join(' ');

interface Tally {
  of: number;
  sound: number;
  check: number;
  none: number;
  wrong: number;
  allowed: number;
  allowedSound: number;
  milliseconds: number;
}
const empty = (): Tally => ({
  of: 0,
  sound: 0,
  check: 0,
  none: 0,
  wrong: 0,
  allowed: 0,
  allowedSound: 0,
  milliseconds: 0,
});

/** The envelope: share sound, sound and wrong, and the share that the Cramer-Rao bound itself allows. */
export function benchEnvelope(count: number, firstSeed = 50_000): void {
  const tallies = new Map<string, Tally>();
  const reasons = new Map<string, number>();
  for (let i = 0; i < count; i++) {
    const seed = firstSeed + i;
    const draw = drawEnvelope(seed);
    const spectrum = simulateSpectrum(draw.options);
    const started = performance.now();
    let made: FileReference;
    try {
      made = reference(fileOf(spectrum, draw.style, draw.clipAbsorbance));
    } catch (error) {
      console.error(`envelope seed ${seed}: threw ${String(error)}`);
      continue;
    }
    const spent = performance.now() - started;
    const main = spectrum.truth.bands[0]!;
    const bounds = cramerRaoBounds(spectrum);
    const allowed = spectrum.truth.bands.some((band) => {
      const bound = bounds.get(`${band.isotopologue}/${band.band}`);
      return bound !== undefined && boundAllows(bound, band);
    });
    const false_ = falsehoods(made, spectrum.truth.bands);
    for (const sentence of false_) {
      console.error(`envelope seed ${seed}: SOUND AND WRONG ${sentence} ${JSON.stringify(draw.options)}`);
    }
    if (made.reliability !== 'sound' && allowed) {
      console.error(`envelope seed ${seed}: ${made.reliability} (${codes(made)}) ${describe(draw.options)}`);
    }
    for (const key of ['all', main.gas, `resolution ${String(draw.options.resolutionPerCm)}`]) {
      const tally = tallies.get(key) ?? empty();
      tally.of++;
      tally[made.reliability]++;
      tally.wrong += false_.length > 0 ? 1 : 0;
      tally.allowed += allowed ? 1 : 0;
      tally.allowedSound += allowed && made.reliability === 'sound' ? 1 : 0;
      tally.milliseconds += spent;
      tallies.set(key, tally);
    }
    if (made.reliability !== 'sound') {
      for (const code of new Set(made.reasons.map((reason) => reason.code))) {
        reasons.set(code, (reasons.get(code) ?? 0) + 1);
      }
    }
  }
  printTable(
    `Robustness: ${count} spectra of the whole envelope (sound at least 85 %, sound and wrong none)`,
    [
      'class',
      'spectra',
      'sound',
      'check',
      'none',
      'sound and wrong',
      'bound allows',
      'sound of these',
      'time',
    ],
    [...tallies]
      .sort(([a], [b]) => a.localeCompare(b))
      .map(([name, t]) => [
        name,
        `${t.of}`,
        percent(t.sound, t.of),
        percent(t.check, t.of),
        percent(t.none, t.of),
        `${t.wrong}`,
        percent(t.allowed, t.of),
        percent(t.allowedSound, t.allowed),
        `${(t.milliseconds / t.of).toFixed(0)} ms`,
      ]),
  );
  printTable(
    'Reasons where not sound',
    ['reason', 'spectra'],
    [...reasons].sort((a, b) => b[1] - a[1]).map(([code, n]) => [code, `${n}`]),
  );
}

function describe(o: ReturnType<typeof drawEnvelope>['options']): string {
  return [
    o.gases.map((g) => `${g.gas} A${g.peakAbsorbance.toFixed(2)}`).join('+'),
    `res ${o.resolutionPerCm} ${o.apodisation} zf ${o.zeroFilling}`,
    `noise ${o.noise?.toExponential(1)} ${o.noiseModel}`,
    `width ${o.lorentzHalfWidthPerCm?.toFixed(3)}`,
    o.fringes ? `fringes ${o.fringes.amplitude.toFixed(3)}/${o.fringes.periodPerCm.toFixed(0)}` : '',
    o.foreign?.water ? `water ${o.foreign.water.toFixed(2)}` : '',
    o.detectorFloor ? `floor ${o.detectorFloor.toFixed(3)}` : '',
    o.phaseErrorRad ? `phase ${o.phaseErrorRad.toFixed(3)}` : '',
    o.spikes ? 'spikes' : '',
  ]
    .filter((part) => part !== '')
    .join(', ');
}

/** Negative controls: never sound. */
export function benchControls(count: number): void {
  const rows = new Map<string, { states: string[]; codes: Set<string> }>();
  for (let i = 0; i < count; i++) {
    for (const control of negativeControls(700 + i)) {
      const bytes = writeSpectrum({ ...control, title: control.name, resolutionPerCm: 0.5 }, exactStyle);
      const made = reference({ name: 'control.csv', bytes });
      const row = rows.get(control.name) ?? { states: [], codes: new Set() };
      row.states.push(made.reliability);
      made.reasons.forEach((reason) => row.codes.add(reason.code));
      rows.set(control.name, row);
      if (made.reliability === 'sound') console.error(`control ${control.name} seed ${700 + i}: SOUND`);
    }
  }
  const times = (states: readonly string[], state: string): string =>
    `${states.filter((each) => each === state).length}`;
  printTable(
    'Negative controls: never sound',
    ['control', 'sound', 'check', 'none', 'reasons'],
    [...rows].map(([name, row]) => [
      name,
      times(row.states, 'sound'),
      times(row.states, 'check'),
      times(row.states, 'none'),
      [...row.codes].join(' '),
    ]),
  );
}

/** Causes injected one at a time: what came out, and whether a reason names the cause. */
export function benchCauses(count: number): void {
  const rows = new Map<
    string,
    { states: Record<string, number>; named: number; of: number; codes: Set<string> }
  >();
  for (let i = 0; i < count; i++) {
    const shift = createRandom(800 + i, 1).uniform();
    for (const cause of injectedCauses(800 + i)) {
      const spectrum = simulateSpectrum({ ...cause.options, fromPerCm: cause.options.fromPerCm + shift });
      const made = reference(fileOf(spectrum, exactStyle, cause.clipAbsorbance));
      const row = rows.get(cause.name) ?? {
        states: { sound: 0, check: 0, none: 0 },
        named: 0,
        of: 0,
        codes: new Set(),
      };
      row.of++;
      row.states[made.reliability] = (row.states[made.reliability] ?? 0) + 1;
      const all = [...made.reasons, ...made.notes].map((reason) => reason.code);
      if (
        cause.name === 'nothing'
          ? made.reliability === 'sound'
          : all.some((code) => cause.expected.test(code))
      ) {
        row.named++;
      }
      made.reasons.forEach((reason) => row.codes.add(reason.code));
      rows.set(cause.name, row);
      for (const sentence of falsehoods(made, spectrum.truth.bands)) {
        console.error(`cause ${cause.name} seed ${800 + i}: SOUND AND WRONG ${sentence}`);
      }
    }
  }
  printTable(
    'Causes injected one at a time',
    ['cause', 'sound', 'check', 'none', 'named', 'reasons'],
    [...rows].map(([name, row]) => [
      name,
      `${row.states.sound}`,
      `${row.states.check}`,
      `${row.states.none}`,
      `${row.named}/${row.of}`,
      [...row.codes].join(' '),
    ]),
  );
}

export function benchRobust(count: number): void {
  benchEnvelope(count);
  benchControls(Math.max(1, Math.round(count / 100)));
  benchCauses(Math.max(1, Math.round(count / 100)));
}
