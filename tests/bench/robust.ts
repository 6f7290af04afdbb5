import { createRandom } from '../../electron/backend/example/random.ts';
import { writeSpectrum } from '../../electron/backend/example/file-writer.ts';
import { simulateSpectrum } from '../../electron/backend/example/simulate.ts';
import { makeReference } from '../../shared-core/reference/make-reference.ts';
import type { FileReference } from '../../shared-core/reference/types.ts';
import type { SourceFile } from '../../shared-core/spectrum/types.ts';
import { injectedCauses, negativeControls } from './controls.ts';
import { benchEnvelope } from './robust-envelope.ts';
import { benchSettings, exactStyle, falsehoods, fileOf } from './judge.ts';
import { printTable } from './print.ts';

function reference(file: SourceFile): FileReference {
  return makeReference({ files: [file], settings: benchSettings });
}

/** Negative controls: never sound. */
export function benchControls(count: number): void {
  const rows = new Map<string, { states: string[]; codes: Set<string> }>();
  for (let i = 0; i < count; i++) {
    for (const control of negativeControls(700 + i)) {
      const style = control.header === undefined ? exactStyle : { ...exactStyle, header: [control.header] };
      const bytes = writeSpectrum({ ...control, title: control.name, resolutionPerCm: 0.5 }, style);
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

export async function benchRobust(count: number, workers: number): Promise<void> {
  await benchEnvelope(count, workers);
  benchControls(Math.max(1, Math.round(count / 100)));
  benchCauses(Math.max(1, Math.round(count / 100)));
}
