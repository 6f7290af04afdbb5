const usage =
  'Usage: npm run bench -- [accuracy] [robust | envelope controls causes] [speed] [marking] [--n N] [--only TEXT] [--seed N] [--workers N] [--truth]';

interface Arguments {
  readonly parts: readonly string[];
  readonly count: number | null;
  readonly only: string | null;
  readonly seed: number | null;
  readonly workers: number;
  /** Marking with references made from the truth. */
  readonly fromTruth: boolean;
}

function misuse(): never {
  console.error(usage);
  process.exit(2);
}

function parse(list: readonly string[]): Arguments {
  const parts: string[] = [];
  let [count, only, seed]: [number | null, string | null, number | null] = [null, null, null];
  let workers = 1;
  let fromTruth = false;
  for (let i = 0; i < list.length; i++) {
    const each = list[i]!;
    if (each === '--n') count = Number(list[++i]);
    else if (each === '--only') only = list[++i] ?? misuse();
    else if (each === '--seed') seed = Number(list[++i]);
    else if (each === '--workers') workers = Number(list[++i]);
    else if (each === '--truth') fromTruth = true;
    else if (each in runners) parts.push(each);
    else misuse();
  }
  const whole = (value: number | null, least: number): boolean =>
    value === null || (Number.isInteger(value) && value >= least);
  if (!whole(count, 1) || !whole(seed, 0) || !whole(workers, 1)) misuse();
  const all = ['accuracy', 'robust', 'speed', 'marking'];
  return { parts: parts.length > 0 ? parts : all, count, only, seed, workers, fromTruth };
}

/** Parts load what they measure only when they run. */
const runners: Readonly<Record<string, (options: Arguments) => Promise<void>>> = {
  accuracy: async ({ count, only, workers }) =>
    (await import('./accuracy.ts')).benchAccuracy(count ?? 200, only, workers),
  robust: async ({ count, workers }) => (await import('./robust.ts')).benchRobust(count ?? 1000, workers),
  envelope: async ({ count, seed, workers }) =>
    (await import('./robust-envelope.ts')).benchEnvelope(count ?? 1000, workers, seed ?? undefined),
  controls: async ({ count }) => (await import('./robust.ts')).benchControls(count ?? 10),
  causes: async ({ count }) => (await import('./robust.ts')).benchCauses(count ?? 10),
  speed: async ({ count }) => (await import('./speed.ts')).benchSpeed(count ?? 7),
  marking: async ({ count, seed, fromTruth, only }) =>
    (await import('./marking.ts')).benchMarking({ count: count ?? 160, seed: seed ?? 5, fromTruth }, only),
};

const options = parse(process.argv.slice(2));
for (const part of options.parts) {
  const started = performance.now();
  await runners[part]!(options);
  console.log(`(${part}: ${((performance.now() - started) / 1000).toFixed(0)} s)`);
}
export {};
