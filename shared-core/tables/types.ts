import type { Submission, SubmittedLine } from '../marking/types.ts';
import type { QuantityKey, Reason } from '../units/types.ts';

/** A table as rows of cells; a cell that a spreadsheet stored as a number says so (its zeros are lost). */
export interface Cell {
  readonly text: string;
  readonly storedAsNumber: boolean;
}
export interface RawTable {
  readonly fileName: string;
  readonly sheet: string | null;
  readonly rows: readonly (readonly Cell[])[];
}

export type ColumnRole =
  | {
      readonly role:
        | 'student'
        | 'name'
        | 'group'
        | 'attempt'
        | 'received'
        | 'isotopologue'
        | 'spectrum'
        | 'line-count'
        | 'comment';
    }
  | {
      readonly role: 'quantity';
      readonly quantity: QuantityKey;
      readonly unit: string | null;
      readonly isotopologue: string | null;
    }
  | { readonly role: 'quantity-name' | 'value' | 'unit' | 'uncertainty' }
  | { readonly role: 'branch' | 'J' | 'm' | 'wavenumber' }
  | { readonly role: 'ignore' };

/** How one column was understood, and why; `ambiguous` means that the instructor has to say. */
export interface ColumnUnderstanding {
  readonly index: number;
  readonly header: string;
  readonly role: ColumnRole;
  readonly reason: string;
  readonly ambiguous: boolean;
  readonly alternatives: readonly ColumnRole[];
  /** First cells, for the eye. */
  readonly firstValues: readonly string[];
}

export type TableKind = 'submissions-wide' | 'submissions-long' | 'lines' | 'roster' | 'unknown';

export interface TableUnderstanding {
  readonly kind: TableKind;
  readonly reason: string;
  /** Index of the header row (after merged or titled rows above it); -1 where there is none. */
  readonly headerRow: number;
  readonly columns: readonly ColumnUnderstanding[];
  readonly notes: readonly Reason[];
}

export interface ReadSubmissionsResult {
  readonly submissions: readonly Submission[];
  /** Rows that could not be used, each with its row number (1-based, as in the file) and a sentence. */
  readonly problems: readonly { readonly row: number; readonly text: string }[];
}

export interface ReadLinesResult {
  readonly linesByStudent: ReadonlyMap<string, readonly SubmittedLine[]>;
  readonly problems: readonly { readonly row: number; readonly text: string }[];
}

/** Which file belongs to which submission, and how that was found. */
export interface FileMatch {
  readonly fileName: string;
  readonly student: string | null;
  readonly attempt: number | null;
  readonly state: 'matched' | 'ambiguous' | 'left-over';
  readonly reason: string;
  readonly candidates: readonly string[];
}
