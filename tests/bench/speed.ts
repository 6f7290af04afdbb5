import { execFileSync } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { simulateSpectrum, type SimulationOptions } from '../../electron/backend/example/simulate.ts';
import { assignLines } from '../../shared-core/assignment/assign-lines.ts';
import { findLines } from '../../shared-core/lines/find-lines.ts';
import { makeReference } from '../../shared-core/reference/make-reference.ts';
import { prepareSpectrum } from '../../shared-core/spectrum/prepare/prepare-spectrum.ts';
import { readSpectrumFile } from '../../shared-core/spectrum/read-spectrum-file.ts';
import type { SourceFile } from '../../shared-core/spectrum/types.ts';
import { benchSettings, fileOf } from './judge.ts';
import { printTable } from './print.ts';

const small = (seed: number): SimulationOptions => ({
  seed,
  gases: [{ gas: 'HCl', peakAbsorbance: 2 }],
  fromPerCm: 2650,
  toPerCm: 3087,
  stepPerCm: 0.125,
  noise: 1e-3,
  lorentzHalfWidthPerCm: 0.04,
});
/** 40,001 points with HCl, DCl, water and a raised baseline. */
const large = (seed: number): SimulationOptions => ({
  seed,
  gases: [
    { gas: 'HCl', peakAbsorbance: 6 },
    { gas: 'DCl', peakAbsorbance: 4 },
  ],
  fromPerCm: 1200,
  toPerCm: 6000,
  stepPerCm: 0.12,
  noise: 1e-3,
  lorentzHalfWidthPerCm: 0.05,
  baselineOffset: 0.4,
  foreign: { water: 0.2, carbonDioxide: 0.1, halfHeavyWater: 0.05 },
});

const median = (values: readonly number[]): number =>
  values.toSorted((a, b) => a - b)[values.length >> 1] ?? NaN;

function timed(work: () => unknown, repeats: number): number {
  const spent: number[] = [];
  for (let i = 0; i < repeats; i++) {
    const started = performance.now();
    work();
    spent.push(performance.now() - started);
  }
  return median(spent);
}

const reference = (file: SourceFile) => makeReference({ files: [file], settings: benchSettings });

function stages(file: SourceFile, repeats: number): string[] {
  const read = readSpectrumFile(file);
  if (!read.ok) throw new Error(read.reason);
  const spectrum = read.spectra[0]!;
  const prepared = prepareSpectrum(spectrum);
  if ('unusable' in prepared) throw new Error(prepared.unusable.text);
  const lines = findLines(prepared);
  return [
    timed(() => readSpectrumFile(file), repeats),
    timed(() => prepareSpectrum(spectrum), repeats),
    timed(() => findLines(prepared), repeats),
    timed(() => assignLines(lines, {}), repeats),
  ].map((each) => each.toFixed(1));
}

function yardstick(files: readonly SourceFile[], repeats: number): number | null {
  const python = ['/usr/bin/python3', 'python3'].find((each) => each === 'python3' || existsSync(each))!;
  const folder = mkdtempSync(join(tmpdir(), 'bench-'));
  try {
    const list = files.map((file) => {
      const path = join(folder, file.name);
      writeFileSync(path, file.bytes);
      return { path, origin: 2885.98, lower: 10.44, upper: 10.136 };
    });
    const text = execFileSync(
      python,
      [join(import.meta.dirname, 'yardstick.py'), JSON.stringify(list), String(repeats)],
      { encoding: 'utf8', stdio: ['ignore', 'pipe', 'ignore'] },
    );
    return 1000 * median((JSON.parse(text) as { seconds: number[] }).seconds);
  } catch {
    return null;
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

/** Ratios in one run: against the yardstick, large file against small, refit after a correction against a first fit. */
export function benchSpeed(repeats: number): void {
  const files = Array.from({ length: 5 }, (_, i) =>
    fileOf(simulateSpectrum(small(60 + i)), undefined, undefined, `small-${i}`),
  );
  const big = fileOf(simulateSpectrum(large(70)));
  for (const file of files) reference(file);
  const first = median(files.map((file) => timed(() => reference(file), repeats)));
  const bigTime = timed(() => reference(big), repeats);
  const made = reference(files[0]!);
  const line = made.lines.find((each) => each.used);
  const refit = timed(
    () =>
      makeReference({
        files: [files[0]!],
        settings: benchSettings,
        ...(line ? { corrections: [{ kind: 'line-out', lineId: line.id }] } : {}),
      }),
    repeats,
  );
  const scipy = yardstick(files, Math.max(2, repeats));
  printTable(
    'Speed (medians, one process)',
    ['what', 'ms', 'ratio', 'limit'],
    [
      ['reference, 3,500 points', first.toFixed(1), '1', ''],
      [
        'SciPy yardstick, same files',
        scipy === null ? 'not there' : scipy.toFixed(1),
        scipy === null ? '-' : `${(scipy / first).toFixed(2)} x faster`,
        'at least 3',
      ],
      ['reference, 40,001 points', bigTime.toFixed(1), (bigTime / first).toFixed(1), 'at most 12'],
      ['refit after one correction', refit.toFixed(1), (refit / first).toFixed(2), 'at most 0.33'],
    ],
  );
  printTable(
    'Stages (ms)',
    ['file', 'read', 'prepare', 'find lines', 'assign'],
    [
      ['3,500 points', ...stages(files[0]!, repeats)],
      ['40,001 points', ...stages(big, Math.max(1, repeats >> 1))],
    ],
  );
}
