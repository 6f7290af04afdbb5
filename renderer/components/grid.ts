/** A column of the data grid. */
export interface GridColumn<Row> {
  readonly id: string;
  readonly header: string;
  /** CSS grid track, e.g. "9rem", "minmax(8rem, 1fr)". */
  readonly track: string;
  readonly align?: 'start' | 'end';
  /** What the column is sorted by; absent: not sortable. */
  readonly sortBy?: (row: Row) => number | string | null;
  /** Plain text of the cell where no slot fills it. */
  readonly text?: (row: Row) => string;
}
