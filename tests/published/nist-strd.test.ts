import { existsSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { fitNonlinear } from '../../shared-core/fitting/fit-nonlinear.ts';

/** NIST Statistical Reference Datasets, nonlinear regression: certified values and standard deviations. */
const folder = '../shared/reference-data/nist-strd';
const absent = !existsSync(folder);

type Model = (b: readonly number[], x: readonly number[]) => number;
const { exp, PI, sin, cos, atan } = Math;
const rational: Model = (b, [x = 0]) =>
  (b[0]! + b[1]! * x + b[2]! * x ** 2 + b[3]! * x ** 3) / (1 + b[4]! * x + b[5]! * x ** 2 + b[6]! * x ** 3);
const chwirut: Model = (b, [x = 0]) => exp(-b[0]! * x) / (b[1]! + b[2]! * x);
const lanczos: Model = (b, [x = 0]) =>
  b[0]! * exp(-b[1]! * x) + b[2]! * exp(-b[3]! * x) + b[4]! * exp(-b[5]! * x);
const gauss: Model = (b, [x = 0]) =>
  b[0]! * exp(-b[1]! * x) +
  b[2]! * exp(-((x - b[3]!) ** 2) / b[4]! ** 2) +
  b[5]! * exp(-((x - b[6]!) ** 2) / b[7]! ** 2);
const models: Readonly<Record<string, Model>> = {
  Misra1a: (b, [x = 0]) => b[0]! * (1 - exp(-b[1]! * x)),
  Misra1b: (b, [x = 0]) => b[0]! * (1 - (1 + (b[1]! * x) / 2) ** -2),
  Misra1c: (b, [x = 0]) => b[0]! * (1 - (1 + 2 * b[1]! * x) ** -0.5),
  Misra1d: (b, [x = 0]) => (b[0]! * b[1]! * x) / (1 + b[1]! * x),
  Chwirut1: chwirut,
  Chwirut2: chwirut,
  Lanczos1: lanczos,
  Lanczos2: lanczos,
  Lanczos3: lanczos,
  Gauss1: gauss,
  Gauss2: gauss,
  Gauss3: gauss,
  DanWood: (b, [x = 0]) => b[0]! * x ** b[1]!,
  Kirby2: (b, [x = 0]) => (b[0]! + b[1]! * x + b[2]! * x ** 2) / (1 + b[3]! * x + b[4]! * x ** 2),
  Hahn1: rational,
  Thurber: rational,
  Nelson: (b, [x = 0, z = 0]) => b[0]! - b[1]! * x * exp(-b[2]! * z),
  MGH17: (b, [x = 0]) => b[0]! + b[1]! * exp(-x * b[3]!) + b[2]! * exp(-x * b[4]!),
  Roszman1: (b, [x = 0]) => b[0]! - b[1]! * x - atan(b[2]! / (x - b[3]!)) / PI,
  ENSO: (b, [x = 0]) =>
    b[0]! + b[1]! * cos((2 * PI * x) / 12) + b[2]! * sin((2 * PI * x) / 12) + b[4]! * cos((2 * PI * x) / b[3]!) + b[5]! * sin((2 * PI * x) / b[3]!) +
    b[7]! * cos((2 * PI * x) / b[6]!) + b[8]! * sin((2 * PI * x) / b[6]!),
  MGH09: (b, [x = 0]) => (b[0]! * (x * x + x * b[1]!)) / (x * x + x * b[2]! + b[3]!),
  BoxBOD: (b, [x = 0]) => b[0]! * (1 - exp(-b[1]! * x)),
  Rat42: (b, [x = 0]) => b[0]! / (1 + exp(b[1]! - b[2]! * x)),
  MGH10: (b, [x = 0]) => b[0]! * exp(b[1]! / (x + b[2]!)),
  Eckerle4: (b, [x = 0]) => (b[0]! / b[1]!) * exp(-((x - b[2]!) ** 2) / (2 * b[1]! ** 2)),
  Rat43: (b, [x = 0]) => b[0]! / (1 + exp(b[1]! - b[2]! * x)) ** (1 / b[3]!),
  Bennett5: (b, [x = 0]) => b[0]! * (b[1]! + x) ** (-1 / b[2]!),
}; // prettier-ignore

interface Dataset {
  readonly starts: readonly (readonly number[])[];
  readonly values: readonly number[];
  readonly deviations: readonly number[];
  readonly y: readonly number[];
  readonly x: readonly (readonly number[])[];
}

function read(name: string): Dataset {
  const lines = readFileSync(`${folder}/${name}.dat`, 'utf8').split(/\r?\n/);
  const rows = lines.flatMap((line) => {
    const match = /^\s*b\d+\s*=\s*(.+)$/.exec(line);
    return match === null ? [] : [match[1]!.trim().split(/\s+/).map(Number)];
  });
  const from = lines.findLastIndex((line) => /^Data:/.test(line)) + 1;
  const data = lines
    .slice(from)
    .filter((line) => /^\s*[-\d.]/.test(line))
    .map((line) => line.trim().split(/\s+/).map(Number));
  return {
    starts: [rows.map((r) => r[0]!), rows.map((r) => r[1]!)],
    values: rows.map((r) => r[2]!),
    deviations: rows.map((r) => r[3]!),
    // Nelson is certified for log y.
    y: data.map((r) => (name === 'Nelson' ? Math.log(r[0]!) : r[0]!)),
    x: data.map((r) => r.slice(1)),
  };
}

/**
 * Started far off (start 1), these four run into a valley without end (higher level of difficulty, says the certificate); from the near
 * start all 27 are reached.
 */
const farStartsNotReached = new Set<string>(['MGH17', 'MGH09', 'BoxBOD', 'MGH10']);

function check(name: string, start: 0 | 1): void {
  const set = read(name);
  const model = models[name]!;
  const fit = fitNonlinear({
    predict: (b) => set.x.map((x) => model(b, x)),
    observed: set.y,
    sigmas: set.y.map(() => 1),
    start: set.starts[start]!,
    scale: 'residuals',
  });
  expect(fit.outcome).toBe('converged');
  if (fit.outcome !== 'converged') return;
  set.values.forEach((certified, j) => {
    // Six digits of the values, four of the standard deviations.
    expect(Math.abs(fit.values[j]! / certified - 1)).toBeLessThan(1e-6);
    // Lanczos1 has data to 13 digits: its deviations are rounding.
    if (name !== 'Lanczos1')
      expect(Math.abs(fit.standardDeviations[j]! / set.deviations[j]! - 1)).toBeLessThan(1e-4);
  });
}

describe.skipIf(absent)('certified nonlinear regression (NIST StRD)', () => {
  it('covers all 27 sets', () => {
    expect(Object.keys(models)).toHaveLength(27);
  });
  it.each(Object.keys(models))('%s from the near start', (name) => check(name, 1));
  it.each(Object.keys(models).filter((n) => !farStartsNotReached.has(n)))('%s from the far start', (name) =>
    check(name, 0),
  );
});
