import type { PrescribedConstants } from '../reference/types.ts';
import type { ChosenSet } from './compare.ts';
import type { AnswerKey } from './prescribe.ts';
import type { SubmissionVerdict } from './slips/weigh-submission.ts';
import type { MarkedValue } from './types.ts';

/** Everything about one isotopologue of a submission. */
export interface MarkedPart {
  readonly key: AnswerKey;
  readonly values: readonly MarkedValue[];
  readonly chosen: readonly ChosenSet[];
  readonly prescribed: readonly PrescribedConstants[];
  readonly verdict: SubmissionVerdict | null;
}
