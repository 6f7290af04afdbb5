const usage =
  'Usage: npm run bench -- [accuracy] [robust] [envelope] [controls] [causes] [speed] [marking] [--n N] [--only TEXT] [--seed N]';

interface Arguments {
  readonly parts: readonly string[];
  readonly count: number | null;
  readonly only: string | null;
  readonly seed: number | null;
}

function parse(list: readonly string[]): Arguments {
  const parts: string[] = [];
  let [count, only, seed]: [number | null, string | null, number | null] = [null, null, null];
  for (let i = 0; i < list.length; i++) {
    const each = list[i]!;
    if (each === '--n') count = Number(list[++i]);
    else if (each === '--only') only = list[++i] ?? null;
    else if (each === '--seed') seed = Number(list[++i]);
    else parts.push(each);
  }
  const unknown = parts.find((part) => !(part in runners));
  if (
    unknown !== undefined ||
    (count !== null && !(count >= 1)) ||
    (seed !== null && !Number.isInteger(seed))
  ) {
    console.error(usage);
    process.exit(2);
  }
  return { parts: parts.length > 0 ? parts : ['accuracy', 'robust', 'speed', 'marking'], count, only, seed };
}

/** Parts load what they measure only when they run. */
const runners: Readonly<Record<string, (options: Arguments) => Promise<void>>> = {
  accuracy: async ({ count, only }) => (await import('./accuracy.ts')).benchAccuracy(count ?? 200, only),
  robust: async ({ count }) => (await import('./robust.ts')).benchRobust(count ?? 1000),
  envelope: async ({ count, seed }) =>
    (await import('./robust.ts')).benchEnvelope(count ?? 1000, seed ?? undefined),
  controls: async ({ count }) => (await import('./robust.ts')).benchControls(count ?? 10),
  causes: async ({ count }) => (await import('./robust.ts')).benchCauses(count ?? 10),
  speed: async ({ count }) => (await import('./speed.ts')).benchSpeed(count ?? 7),
};

const options = parse(process.argv.slice(2));
for (const part of options.parts) {
  const started = performance.now();
  await runners[part]!(options);
  console.log(`(${part}: ${((performance.now() - started) / 1000).toFixed(0)} s)`);
}
export {};
