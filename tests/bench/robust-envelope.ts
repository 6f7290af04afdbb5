import { percent, printTable } from './print.ts';
import type { EnvelopeRecord } from './robust-cases.ts';
import { spread } from './spread.ts';

/** The envelope: share sound, sound and wrong, and the share that the Cramer-Rao bound itself allows. */
export async function benchEnvelope(count: number, workers: number, firstSeed = 50_000): Promise<void> {
  const measurement = { module: new URL('./robust-cases.ts', import.meta.url).href, name: 'measureEnvelope' };
  const seeds = Array.from({ length: count }, (_, i) => firstSeed + i);
  const records = await spread<EnvelopeRecord>(measurement, seeds, workers);
  for (const record of records) {
    for (const sentence of record.falsehoods) {
      console.error(`envelope seed ${record.seed}: SOUND AND WRONG ${sentence}; ${record.description}`);
    }
    if (record.reliability === 'threw' || (record.reliability !== 'sound' && record.allowed)) {
      console.error(
        `envelope seed ${record.seed}: ${record.reliability} (${record.codes.join(' ')}) ${record.description}`,
      );
    }
  }
  const classes: readonly (readonly [string, readonly EnvelopeRecord[]])[] = [
    ['all', records],
    ...groups(records, (record) => record.gas),
    ...groups(records, (record) => `resolution ${record.resolutionPerCm}`),
  ];
  printTable(
    `Robustness: ${count} spectra of the whole envelope (sound at least 85 %, sound and wrong none)`,
    [
      'class',
      'spectra',
      'sound',
      'check',
      'none',
      'threw',
      'sound and wrong',
      'bound allows',
      'sound of these',
      'time',
    ],
    classes.map(([name, list]) => row(name, list)),
  );
  const reasons = new Map<string, number>();
  for (const record of records) {
    if (record.reliability === 'sound') continue;
    for (const code of record.codes) reasons.set(code, (reasons.get(code) ?? 0) + 1);
  }
  printTable(
    'Reasons where not sound',
    ['reason', 'spectra'],
    [...reasons].sort((a, b) => b[1] - a[1]).map(([code, n]) => [code.slice(0, 120), `${n}`]),
  );
}

function groups(
  records: readonly EnvelopeRecord[],
  keyOf: (record: EnvelopeRecord) => string,
): (readonly [string, readonly EnvelopeRecord[]])[] {
  const keys = [...new Set(records.map(keyOf))].sort();
  return keys.map((key) => [key, records.filter((record) => keyOf(record) === key)] as const);
}

function row(name: string, list: readonly EnvelopeRecord[]): string[] {
  const times = (state: string): string =>
    percent(list.filter((record) => record.reliability === state).length, list.length);
  const allowed = list.filter((record) => record.allowed);
  return [
    name,
    `${list.length}`,
    times('sound'),
    times('check'),
    times('none'),
    times('threw'),
    `${list.filter((record) => record.falsehoods.length > 0).length}`,
    percent(allowed.length, list.length),
    percent(allowed.filter((record) => record.reliability === 'sound').length, allowed.length),
    `${(list.reduce((sum, record) => sum + record.milliseconds, 0) / list.length).toFixed(0)} ms`,
  ];
}
