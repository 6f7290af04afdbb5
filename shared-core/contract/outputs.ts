import type { Correction, FileReference, Reliability } from '../reference/types.ts';
import type { Agreement, MarkedSubmission, MarkingScheme, SectionObservation } from '../marking/types.ts';
import type { ColumnUnderstanding, FileMatch, TableKind } from '../tables/types.ts';
import type { QuantityKey, Reason } from '../units/types.ts';
import type { MethodName, Ruling } from './inputs.ts';

export interface SectionSummary {
  readonly id: number;
  readonly title: string;
  readonly createdAt: string;
  readonly submissions: number;
  readonly spectra: number;
  /** What needs attention. */
  readonly withoutReference: number;
  readonly toCheck: number;
  readonly toDecide: number;
  readonly exportedAt: string | null;
}

export interface SectionDetail extends SectionSummary {
  readonly scheme: MarkingScheme | null;
  readonly schemeVersion: number;
  readonly people: readonly {
    readonly key: string;
    readonly name: string | null;
    readonly group: string | null;
  }[];
  readonly observations: readonly SectionObservation[];
}

export interface SchemeCheck {
  /** Faults that keep the scheme from being used; empty where it can. */
  readonly problems: readonly string[];
  /** Remarks on tolerances, margins and the method. */
  readonly warnings: readonly Reason[];
  /** What published lines would give under it, in the standard unit. */
  readonly outlook: readonly { readonly isotopologue: string; readonly quantity: QuantityKey; readonly value: number; readonly low: number; readonly high: number; readonly best: number | null; readonly unit: string }[]; // prettier-ignore
}

export interface SchemeChange {
  readonly student: string;
  readonly name: string | null;
  readonly before: number | null;
  readonly after: number | null;
  readonly why: string;
}

export interface IntakeFile {
  readonly name: string;
  readonly bytes: number;
  readonly sha256: string;
  readonly became: 'spectrum' | 'table of submissions' | 'table of lines' | 'scheme' | 'roster' | 'left out';
  /** Title of a spectrum, or why a file is left out. */
  readonly text: string;
  readonly points: number | null;
  readonly ordinate: string | null;
  /** Already in the section, byte for byte. */
  readonly known: boolean;
}

export interface IntakeTable {
  readonly fileName: string;
  readonly kind: TableKind;
  readonly reason: string;
  readonly columns: readonly ColumnUnderstanding[];
  readonly rows: number;
  readonly problems: readonly string[];
}

export interface IntakeView {
  readonly intakeId: number;
  readonly sectionId: number;
  readonly files: readonly IntakeFile[];
  readonly tables: readonly IntakeTable[];
  readonly matches: readonly FileMatch[];
  readonly submissions: readonly { readonly student: string; readonly name: string | null; readonly attempt: number; readonly isotopologue: string | null; readonly spectra: readonly string[]; readonly values: number; readonly isNew: boolean }[]; // prettier-ignore
  readonly missing: readonly { readonly student: string; readonly wanted: string }[];
  readonly hasScheme: boolean;
  /** Sentences that keep the intake from being committed; empty where it can be. */
  readonly blockers: readonly string[];
}

export interface IntakeResult {
  readonly newSubmissions: number;
  readonly newFiles: number;
  readonly alreadyThere: number;
}

export interface ReferenceRow {
  readonly fileId: number;
  readonly name: string;
  readonly state: 'waiting' | 'running' | 'done';
  readonly reliability: Reliability | null;
  readonly isotopologues: readonly string[];
  readonly lines: number;
  readonly be: { readonly value: number; readonly uncertainty: number | null } | null;
  readonly axisScalePpm: number | null;
  readonly reasons: readonly Reason[];
  readonly students: readonly string[];
  readonly corrections: number;
}

export interface ReferenceDetail {
  readonly row: ReferenceRow;
  readonly reference: FileReference | null;
  readonly corrections: readonly { readonly correction: Correction; readonly at: string }[];
}

export interface SpectrumPoints {
  /** Float64 little-endian, base64: ascending wavenumbers (cm-1) and the ordinate as absorbance. */
  readonly wavenumberBase64: string;
  readonly absorbanceBase64: string;
  readonly points: number;
}

export interface JobState {
  readonly total: number;
  readonly done: number;
  readonly running: boolean;
}

export interface ValueState {
  readonly isotopologue: string;
  readonly quantity: QuantityKey;
  readonly agreement: Agreement;
  readonly points: number | null;
  readonly of: number;
  readonly slip: string | null;
  readonly flagged: boolean;
  readonly ruling: (Ruling & { readonly at: string }) | null;
}

export interface ReviewRow {
  readonly submissionId: number;
  readonly student: string;
  readonly name: string | null;
  readonly group: string | null;
  readonly attempt: number;
  readonly isotopologue: string | null;
  readonly reliability: Reliability;
  readonly counts: boolean;
  readonly values: readonly ValueState[];
  readonly undecided: number;
  readonly points: number | null;
  readonly of: number;
  /** Larger is worse: the order of the list. */
  readonly weight: number;
}

export interface ReviewDetail {
  readonly row: ReviewRow;
  readonly marked: MarkedSubmission;
  readonly fileId: number | null;
  readonly comment: string;
  readonly handPoints: Readonly<Record<string, number | null>>;
  readonly handItems: readonly { readonly title: string; readonly points: number }[];
}

export interface SameSlipValue {
  readonly submissionId: number;
  readonly student: string;
  readonly isotopologue: string;
  readonly quantity: QuantityKey;
  readonly text: string;
  readonly points: number | null;
  readonly of: number;
}

export interface FeedbackSheet {
  readonly student: string;
  readonly name: string | null;
  readonly isotopologue: string | null;
  readonly spectrum: string | null;
  readonly values: readonly { readonly quantity: QuantityKey; readonly isotopologue: string; readonly submitted: string; readonly agreement: Agreement; readonly points: number | null; readonly of: number; readonly reference: string | null; readonly comment: string; readonly slip: string | null }[]; // prettier-ignore
  readonly points: number | null;
  readonly of: number;
  readonly comment: string;
}

export interface SectionReport {
  readonly title: string;
  readonly submissions: number;
  readonly perQuantity: readonly {
    readonly quantity: QuantityKey;
    readonly agreements: Readonly<Record<Agreement, number>>;
  }[];
  readonly slips: readonly { readonly code: string; readonly count: number }[];
  readonly observations: readonly SectionObservation[];
  readonly points: readonly (number | null)[];
}

export interface ExportedFile {
  readonly fileName: string;
  readonly mimeType: string;
  readonly text: string;
}

export interface JournalEntry {
  readonly id: number;
  readonly at: string;
  readonly who: string;
  readonly what: string;
  readonly undone: boolean;
}

/** Values of the replies, by method. */
export interface Outputs {
  'app.info': { readonly version: string; readonly core: string; readonly hasSections: boolean };
  'settings.get': { readonly value: string | null };
  'settings.set': { readonly value: string };
  'sections.list': readonly SectionSummary[];
  'sections.create': { readonly sectionId: number };
  'sections.rename': { readonly sectionId: number };
  'sections.copy': { readonly sectionId: number };
  'sections.remove': { readonly removed: true };
  'sections.get': SectionDetail;
  'sections.makeExample': { readonly sectionId: number; readonly intakeId: number };
  'scheme.starters': readonly { readonly name: string; readonly scheme: MarkingScheme }[];
  'scheme.check': SchemeCheck;
  'scheme.preview': { readonly problems: readonly string[]; readonly changes: readonly SchemeChange[] };
  'scheme.save': { readonly version: number };
  'intake.current': { readonly intakeId: number | null };
  'intake.begin': { readonly intakeId: number };
  'intake.putPart': { readonly received: number };
  'intake.view': IntakeView;
  'intake.setColumn': IntakeView;
  'intake.setMatch': IntakeView;
  'intake.commit': IntakeResult;
  'intake.cancel': { readonly cancelled: true };
  'references.list': readonly ReferenceRow[];
  'references.get': ReferenceDetail;
  'references.spectrum': SpectrumPoints;
  'references.correct': ReferenceDetail;
  'references.takeBack': ReferenceDetail;
  'jobs.state': JobState;
  'jobs.cancel': JobState;
  'jobs.resume': JobState;
  'review.list': readonly ReviewRow[];
  'review.get': ReviewDetail;
  'review.decide': ReviewDetail;
  'review.sameSlip': readonly SameSlipValue[];
  'review.decideMany': { readonly decided: number };
  'review.handPoints': ReviewDetail;
  'review.comment': ReviewDetail;
  'export.preview': { readonly rows: readonly (readonly string[])[] };
  'export.grades': ExportedFile;
  'export.report': ExportedFile;
  'export.feedback': readonly FeedbackSheet[];
  'export.summary': SectionReport;
  'export.records': readonly {
    readonly at: string;
    readonly kind: string;
    readonly sha256: string;
    readonly changedSince: boolean;
  }[];
  'journal.list': readonly JournalEntry[];
  'journal.undo': { readonly what: string | null };
  'journal.redo': { readonly what: string | null };
}

export type OutputOf<M extends MethodName> = Outputs[M];

/** What the back end tells without being asked. */
export type AppEvent =
  | {
      readonly event: 'job';
      readonly sectionId: number;
      readonly state: JobState;
      readonly fileId: number | null;
    }
  | { readonly event: 'changed'; readonly sectionId: number };
