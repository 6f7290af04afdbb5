import type { AccuracyRecord, AccuracyTask } from './accuracy-cases.ts';
import { accuracyCases } from './accuracy-options.ts';
import { percent, printTable } from './print.ts';
import { spread } from './spread.ts';

const rms = (values: readonly number[]): string =>
  values.length === 0 ? '-' : Math.sqrt(values.reduce((sum, v) => sum + v * v, 0) / values.length).toFixed(2);
const below = (pulls: readonly number[], limit: number): number =>
  pulls.filter((pull) => pull < limit).length;

/** RMS error over the Cramer-Rao bound and coverage of the stated intervals, per case. */
export async function benchAccuracy(count: number, only: string | null, workers: number): Promise<void> {
  const measurement = {
    module: new URL('./accuracy-cases.ts', import.meta.url).href,
    name: 'measureAccuracy',
  };
  const rows: string[][] = [];
  const counted: number[] = [];
  for (const [caseIndex, each] of accuracyCases.entries()) {
    if (only !== null && !each.name.includes(only)) continue;
    const tasks = Array.from({ length: count }, (_, i): AccuracyTask => ({ caseIndex, seed: 1000 + i }));
    const records = await spread<AccuracyRecord>(measurement, tasks, workers);
    records.forEach((record, i) => {
      if (record.ratios && !record.wrong) return;
      const what = record.ratios
        ? `and wrong (ratios ${record.ratios.map((r) => r.toFixed(1)).join(', ')})`
        : 'without constants';
      console.error(`accuracy ${each.name} seed ${1000 + i}: ${record.reliability} ${what} ${record.codes}`);
    });
    const right = records.filter((record) => record.ratios && !record.wrong);
    const pulls = right.flatMap((record) => record.pulls);
    if (each.counted) counted.push(...pulls);
    rows.push([
      each.name,
      ...[0, 1, 2].map((k) => rms(right.map((record) => record.ratios![k]!))),
      each.limit,
      percent(below(pulls, 1), pulls.length),
      percent(below(pulls, 2), pulls.length),
      `${records.filter((record) => record.reliability === 'sound').length}/${count}`,
      `${records.filter((record) => !record.ratios).length}`,
      `${records.filter((record) => record.wrong).length}`,
      `${(records.reduce((sum, record) => sum + record.milliseconds, 0) / count).toFixed(0)} ms`,
    ]);
  }
  printTable(
    `Accuracy: RMS error over the Cramer-Rao bound, ${count} spectra per case (wrong ones not in the RMS)`,
    ['case', 'nu0', 'Be', 'alphaE', 'limit', '1 sigma', '2 sigma', 'sound', 'absent', 'wrong', 'time'],
    rows,
  );
  console.log(
    `Honesty over ${counted.length} results of the first four: 1 sigma covers ${percent(below(counted, 1), counted.length)} (62-74), 2 sigma ${percent(below(counted, 2), counted.length)} (92-98)`,
  );
}
