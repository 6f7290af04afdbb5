import { availableParallelism } from 'node:os';
import { parseArgs } from 'node:util';
import { markBare } from './headless-bare.ts';
import { markFolder } from './headless-folder.ts';
import { Unusable } from './unusable.ts';

const usage =
  'Usage: npm run --silent mark -- FOLDER --out DIR [--scheme FILE] [--store FILE] [--workers N]\n' +
  '       npm run --silent mark -- --bare FILE… [--species H35Cl,…] [--workers N]';

async function main(): Promise<void> {
  const { values, positionals } = readArguments();
  const workers = values.workers === undefined ? availableParallelism() : Number(values.workers);
  if (!Number.isInteger(workers) || workers < 1)
    throw new Unusable(`--workers wants a whole number above 0.\n${usage}`);
  const say = (sentence: string): void => void process.stderr.write(`${sentence}\n`);
  if (values.bare === true) {
    if (positionals.length === 0) throw new Unusable(`--bare wants at least one file.\n${usage}`);
    await markBare(positionals, values.species?.split(',').map((s) => s.trim()) ?? null, workers, say);
    return;
  }
  const folder = positionals[0];
  if (folder === undefined || positionals.length > 1 || values.out === undefined) throw new Unusable(usage);
  if (values.species !== undefined) throw new Unusable(`--species goes with --bare.\n${usage}`);
  await markFolder({
    folder,
    out: values.out,
    schemeFile: values.scheme ?? null,
    storeFile: values.store ?? null,
    workers,
    say,
  });
}

function readArguments(): ReturnType<typeof parse> {
  try {
    return parse();
  } catch (error) {
    throw new Unusable(`${error instanceof Error ? error.message : String(error)}\n${usage}`);
  }
}

function parse() {
  return parseArgs({
    allowPositionals: true,
    options: {
      out: { type: 'string' },
      scheme: { type: 'string' },
      store: { type: 'string' },
      bare: { type: 'boolean' },
      species: { type: 'string' },
      workers: { type: 'string' },
    },
  });
}

try {
  await main();
} catch (error) {
  if (!(error instanceof Unusable)) throw error;
  process.stderr.write(`${error.message}\n`);
  process.exitCode = 2;
}
