import type Database from 'better-sqlite3';
import { fileOperations } from './files.ts';
import { intakeOperations } from './intakes.ts';
import { sectionOperations } from './sections.ts';
import { submissionOperations } from './submissions.ts';

/** Everything that the store can be asked, by name; each runs on the store's own thread, each change in one transaction. */
export const operations = {
  ...sectionOperations,
  ...fileOperations,
  ...submissionOperations,
  ...intakeOperations,
};

export type Operations = typeof operations;
export type OperationName = keyof Operations;
/** The argument of an operation beside the database. */
export type ArgumentOf<N extends OperationName> = Operations[N] extends (
  db: Database.Database,
  argument: infer A,
) => unknown
  ? A
  : undefined;
export type ResultOf<N extends OperationName> = ReturnType<Operations[N]>;
