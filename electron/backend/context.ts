import type { AppEvent } from '../../shared-core/contract/index.ts';
import type { JobRunner } from './jobs/job-runner.ts';
import type { SectionMarks } from './section-marks.ts';
import type { Staging } from './staging/staging.ts';
import type { Store } from './store/store.ts';

/** What handlers work with. */
export interface Context {
  readonly store: Store;
  readonly staging: Staging;
  readonly jobs: JobRunner;
  readonly marks: SectionMarks;
  /** Time as ISO 8601; the one clock of the back end. */
  readonly now: () => string;
  /** Local user's name, for the journal. */
  readonly who: string;
  readonly emit: (event: AppEvent) => void;
}
