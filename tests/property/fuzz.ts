import { fuzzSpectrum } from './fuzz-spectrum.ts';

/** The long fuzz run: `npm run fuzz -- --cases N --seed S`. */
function option(name: string, fallback: number): number {
  const at = process.argv.indexOf(`--${name}`);
  const value = at < 0 ? fallback : Number(process.argv[at + 1]);
  if (!Number.isInteger(value) || value < 1) {
    process.stderr.write(`--${name} must be a whole number of at least 1\n`);
    process.exit(2);
  }
  return value;
}

const cases = option('cases', 100_000);
const seed = option('seed', 1);
const started = performance.now();
const counts = fuzzSpectrum(cases, seed);
const seconds = (performance.now() - started) / 1000;
const reasons = Object.entries(counts.refusedBy).sort((a, b) => b[1] - a[1]);
process.stdout.write(
  [
    `${counts.cases} spectrum files (seed ${seed}) in ${seconds.toFixed(0)} s, none crashed, none read otherwise than by a second reader`,
    `read: ${counts.read}, refused: ${counts.refused}, slowest ${counts.slowestMs.toFixed(0)} ms`,
    ...reasons.map(([code, count]) => `  ${String(count).padStart(7)} ${code}`),
    '',
  ].join('\n'),
);
