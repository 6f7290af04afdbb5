import { parentPort } from 'node:worker_threads';
import {
  emptyReference,
  runReferenceTask,
  type ReferenceResult,
  type ReferenceTask,
} from './reference-task.ts';

if (parentPort === null) throw new Error('reference-worker runs as a worker thread only');
const port = parentPort;

/** One ordered channel: the answer is the only message, so none can be lost behind another. */
port.on('message', ({ id, task }: { id: number; task: ReferenceTask }) => {
  port.postMessage({ id, result: answer(task) });
});

/** A fault of our own in one file must not take the section with it: it becomes that file's reason. */
function answer(task: ReferenceTask): ReferenceResult {
  try {
    return runReferenceTask(task);
  } catch (error) {
    const detail = error instanceof Error ? error.message : String(error);
    const text = `${task.file.name}: the analysis failed by a fault of this program (${detail}); please report it with the file.`;
    return {
      fileName: task.file.name,
      reference: emptyReference('internal', text),
      signature: null,
      title: null,
      points: null,
      stepPerCm: null,
      unreadable: text,
    };
  }
}
