import type { ReadLine } from './student-reading.ts';

/** The analysis that the course prescribes, as the invented students carry it out. */
export type StudentMethod =
  'cubic' | 'quadratic' | 'combination-differences' | 'combination-differences-through-origin' | 'midpoint';

/** What comes straight out of a student's fit, cm-1. */
export interface StudentFit {
  readonly origin: number;
  readonly lower: number;
  readonly upper: number;
  /** Null where the method gives none. */
  readonly distortion: number | null;
}

/** Unweighted least squares for a linear model, by the normal equations with pivoting (few columns, scaled by the caller). */
export function leastSquares(rows: readonly (readonly number[])[], observed: readonly number[]): number[] {
  const n = rows[0]?.length ?? 0;
  if (rows.length < n) throw new RangeError(`rows must be at least ${n}, got ${rows.length}`);
  const system = Array.from({ length: n }, (_, i) => [
    ...Array.from({ length: n }, (__, j) => rows.reduce((sum, row) => sum + row[i]! * row[j]!, 0)),
    rows.reduce((sum, row, k) => sum + row[i]! * observed[k]!, 0),
  ]);
  for (let column = 0; column < n; column++) {
    let pivot = column;
    for (let i = column + 1; i < n; i++) {
      if (Math.abs(system[i]![column]!) > Math.abs(system[pivot]![column]!)) pivot = i;
    }
    [system[column], system[pivot]] = [system[pivot]!, system[column]!];
    for (let i = 0; i < n; i++) {
      if (i === column) continue;
      const factor = system[i]![column]! / system[column]![column]!;
      for (let j = column; j <= n; j++) system[i]![j] = system[i]![j]! - factor * system[column]![j]!;
    }
  }
  return system.map((row, i) => row[n]! / row[i]!);
}

/** Coefficients c0, c1, ... of a polynomial in m, as a spreadsheet's trend line gives them. */
export function trendLine(lines: readonly ReadLine[], degree: number): number[] {
  const reference = lines[0]?.wavenumberPerCm ?? 0;
  const scale = 10;
  const rows = lines.map(({ m }) => Array.from({ length: degree + 1 }, (_, power) => (m / scale) ** power));
  const raw = leastSquares(
    rows,
    lines.map((line) => line.wavenumberPerCm - reference),
  );
  return raw.map((value, power) => value / scale ** power + (power === 0 ? reference : 0));
}

function byPolynomial(lines: readonly ReadLine[], degree: 2 | 3): StudentFit {
  const [c0 = NaN, c1 = NaN, c2 = NaN, c3 = null] = trendLine(lines, degree);
  return {
    origin: c0,
    lower: (c1 - c2) / 2,
    upper: (c1 + c2) / 2,
    distortion: c3 === null ? null : -c3 / 4,
  };
}

function byDifferences(lines: readonly ReadLine[], throughOrigin: boolean): StudentFit {
  const at = new Map(lines.map((line) => [line.m, line.wavenumberPerCm]));
  const slope = (pairs: readonly (readonly [number, number])[]): number =>
    throughOrigin
      ? leastSquares(
          pairs.map(([x]) => [x]),
          pairs.map(([, y]) => y),
        )[0]!
      : leastSquares(
          pairs.map(([x]) => [1, x]),
          pairs.map(([, y]) => y),
        )[1]!;
  const collect = (r: (j: number) => number, p: (j: number) => number): [number, number][] => {
    const pairs: [number, number][] = [];
    for (let j = 1; j <= 40; j++) {
      const [high, low] = [at.get(r(j)), at.get(p(j))];
      if (high !== undefined && low !== undefined) pairs.push([j + 0.5, high - low]);
    }
    return pairs;
  };
  const upper = slope(collect((j) => j + 1, (j) => -j)) / 4; // prettier-ignore
  const lower = slope(collect((j) => j, (j) => -j - 1)) / 4; // prettier-ignore
  const sums: [number, number][] = [];
  for (let j = 1; j <= 40; j++) {
    const [high, low] = [at.get(j), at.get(-j)];
    if (high !== undefined && low !== undefined) sums.push([j * j, high + low]);
  }
  const reference = sums[0]?.[1] ?? 0;
  const [twice = NaN] = leastSquares(
    sums.map(([x]) => [1, x / 100]),
    sums.map(([, y]) => y - reference),
  );
  return { origin: (twice + reference) / 2, lower, upper, distortion: null };
}

/** The student's fit by the prescribed method. The midpoint course takes its B values from combination differences. */
export function fitByMethod(lines: readonly ReadLine[], method: StudentMethod): StudentFit {
  switch (method) {
    case 'cubic':
      return byPolynomial(lines, 3);
    case 'quadratic':
      return byPolynomial(lines, 2);
    case 'combination-differences':
      return byDifferences(lines, false);
    case 'combination-differences-through-origin':
      return byDifferences(lines, true);
    case 'midpoint': {
      const at = (m: number): number => lines.find((line) => line.m === m)?.wavenumberPerCm ?? NaN;
      return { ...byDifferences(lines, true), origin: (at(1) + at(-1)) / 2 };
    }
  }
}
