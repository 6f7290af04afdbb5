import { isotopologue } from '../../shared-core/molecule/index.ts';
import { answerKey } from '../../shared-core/marking/prescribe.ts';
import { referenceJson } from '../../shared-core/marking/report-json.ts';
import { starterScheme } from '../../shared-core/marking/starter-scheme.ts';
import type { FileReference, PrescribedConstants } from '../../shared-core/reference/types.ts';
import { emptyReference } from '../backend/jobs/reference-task.ts';
import { createWorkerPool } from '../backend/jobs/worker-pool.ts';
import { readSource } from './read-source.ts';
import { Unusable } from './unusable.ts';

/** One JSON line per file on standard output, in the order of the arguments: {"file": …, "reference": …}. */
export async function markBare(
  paths: readonly string[],
  species: readonly string[] | null,
  workers: number,
  say: (sentence: string) => void,
): Promise<void> {
  const unknown = species?.find((s) => isotopologue(s) === null);
  if (unknown !== undefined)
    throw new Unusable(
      `--species: “${unknown}” is no diatomic that is known here; write isotopologues as H35Cl,H37Cl.`,
    );
  const pool = createWorkerPool(Math.min(workers, paths.length));
  try {
    const results = paths.map(async (path) => {
      const read = await readSource(path, path);
      if (!read.ok) {
        say(read.reason);
        return emptyReference(read.code, read.reason);
      }
      const { reference, unreadable } = await pool.run({
        file: read.file,
        settings: null,
        candidates: species,
        preferred: species ?? [],
        corrections: [],
        withSignature: false,
      });
      if (unreadable !== null) say(unreadable);
      return reference;
    });
    for (const [i, result] of results.entries()) {
      const reference = await result;
      process.stdout.write(
        `${JSON.stringify({ file: paths[i], reference: referenceJson(reference, reference.isotopologue, prescribedOf(reference)) })}\n`,
      );
    }
  } finally {
    await pool.close();
  }
}

/** Constants by the common method (cubic in m, D tied) from all lines of the file. */
function prescribedOf(reference: FileReference): PrescribedConstants | undefined {
  const name = reference.isotopologue;
  if (name === null) return undefined;
  const scheme = starterScheme([{ key: 'Be', unit: null, isotopologue: null }], [name]);
  const key = answerKey(name, [{ file: '', reference }], scheme, {
    lines: [],
    lineCount: null,
    isotopologue: name,
  });
  return key.methods[0]?.span.constants;
}
