import type {
  FileReference,
  LineRule,
  MethodSettings,
  PrescribedConstants,
  PrescribedMethod,
} from '../reference/types.ts';
import type { QuantityKey, Reason, StandardUnit } from '../units/types.ts';

/** Half width of an accepted range: absolute (standard unit), relative (0.003 = 0.3 %), or a multiple of the combined uncertainty. */
export type Tolerance =
  { readonly absolute: number } | { readonly relative: number } | { readonly sigmas: number };

export interface QuantityRule {
  readonly key: QuantityKey;
  /** Empty or absent: every isotopologue of the scheme. */
  readonly isotopologues?: readonly string[];
  /** Unit asked for, as written ("pm", "Å", "N/m"). */
  readonly unit: string;
  readonly full: Tolerance;
  readonly part: Tolerance | null;
  /** 'stepped': half points in the part-credit range; 'sliding': falling linearly from full to part. */
  readonly partCredit?: 'stepped' | 'sliding';
  readonly points: number;
  readonly leastFigures: number | null;
  readonly uncertaintyWanted?: boolean;
  /** Slip codes that the tolerance is meant to tell apart from a correct value. */
  readonly tellApart: readonly string[];
}

export interface HandItem {
  readonly title: string;
  readonly points: number;
}

export interface Lateness {
  readonly graceHours: number;
  readonly pointsPerDay: number;
  readonly mostPoints: number;
}

/** What the section asks for and how it is marked; versioned, stored, JSON in and out. */
export interface MarkingScheme extends MethodSettings {
  readonly version: 1;
  readonly title: string;
  readonly isotopologues: readonly string[];
  readonly methods: readonly PrescribedMethod[];
  readonly lines: LineRule;
  readonly quantities: readonly QuantityRule[];
  readonly handItems: readonly HandItem[];
  readonly readingErrorPerCm: number | null;
  readonly carryForward: boolean;
  readonly oncePerCause: boolean;
  readonly attempts: 'latest' | 'best';
  /** ISO 8601 with offset, or null. */
  readonly due: string | null;
  readonly lateness: Lateness | null;
}

/** A value as the student wrote it, and what was read. */
export interface SubmittedValue {
  readonly isotopologue: string | null;
  readonly quantity: QuantityKey;
  /** As it stood in the cell. */
  readonly text: string;
  /** In the standard unit; null where unreadable or not given. */
  readonly value: number | null;
  readonly uncertainty: number | null;
  /** Significant figures; null where unknown (a spreadsheet number has lost its zeros). */
  readonly figures: number | null;
  /** Half of the last digit given, in the standard unit; null where unknown. */
  readonly halfLastDigit: number | null;
  /** Unit in which it was written. */
  readonly unit: string;
  readonly standardUnit: StandardUnit;
  /** Why it could not be read; null where it could. */
  readonly unreadableBecause: string | null;
}

/** A line as the student handed it in. */
export interface SubmittedLine {
  readonly isotopologue: string | null;
  readonly m: number;
  readonly wavenumberPerCm: number;
}

export interface Submission {
  readonly student: string;
  readonly name: string | null;
  readonly group: string | null;
  readonly attempt: number;
  /** ISO 8601, or null. */
  readonly received: string | null;
  readonly isotopologue: string | null;
  /** File names as matched. */
  readonly spectra: readonly string[];
  readonly values: readonly SubmittedValue[];
  readonly lines: readonly SubmittedLine[];
  /** Number of lines used, where the student states it and gives no table. */
  readonly lineCount: number | null;
}

export type Agreement = 'within' | 'part credit' | 'outside' | 'not given' | 'unreadable' | 'no reference';

export interface MarkedValue {
  readonly isotopologue: string;
  readonly quantity: QuantityKey;
  readonly text: string;
  readonly submitted: number | null;
  readonly uncertainty: number | null;
  readonly figures: number | null;
  readonly unit: StandardUnit;
  readonly agreement: Agreement;
  readonly reason: string | null;
  /** Reference by the method that agreed (or the first): value, span, uncertainty, all in `unit`. Null without reference. */
  readonly reference: {
    readonly value: number;
    readonly low: number;
    readonly high: number;
    readonly uncertainty: number | null;
  } | null;
  /** Full and part tolerance as half widths in `unit`; null without reference. */
  readonly tolerance: { readonly full: number; readonly part: number | null } | null;
  /** submitted - reference, in `unit`; null where there is nothing to compare. */
  readonly deviation: number | null;
  readonly method: string | null;
  readonly carriedForward: boolean;
  /** null: open (no sound reference). */
  readonly points: number | null;
  readonly of: number;
}

export interface SlipFinding {
  readonly code: string;
  /** 0 to 1, among the explanations considered, "none of these" included. */
  readonly probability: number;
  readonly isotopologue: string | null;
  readonly quantities: readonly QuantityKey[];
  /** What was done, with the arithmetic that supports it. */
  readonly text: string;
  /** Where several slips explain the same numbers: what would tell them apart. */
  readonly tellApart: string | null;
}

/** Something a person should know that is no slip; never changes points, never in the grades file. */
export interface Observation {
  readonly code: string;
  readonly quantities: readonly QuantityKey[];
  readonly text: string;
  readonly figures: Readonly<Record<string, number>>;
}

export interface SectionObservation {
  readonly code: string;
  readonly files: readonly string[];
  readonly students: readonly string[];
  readonly text: string;
  readonly figures: Readonly<Record<string, number>>;
}

export interface MarkedSubmission {
  readonly submission: Submission;
  /** File that the reference stands on; null where none. */
  readonly spectrum: string | null;
  readonly reference: FileReference | null;
  /** Per isotopologue asked for, per accepted method. */
  readonly prescribed: Readonly<Record<string, readonly PrescribedConstants[]>>;
  readonly values: readonly MarkedValue[];
  readonly slips: readonly SlipFinding[];
  readonly observations: readonly Observation[];
  /** Points of settled values; null where nothing is settled. */
  readonly points: number | null;
  readonly of: number;
  /** Number of values whose points are open. */
  readonly open: number;
  /** Remarks on the submission as a whole (two rows of a pair, late, no spectrum, ...). */
  readonly remarks: readonly Reason[];
}
