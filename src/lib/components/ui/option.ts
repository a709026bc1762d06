/** One choice of a select, a radio group or a sentence. */
export interface Option {
  readonly value: string;
  readonly label: string;
  readonly disabled?: boolean;
  /** A line under the label, where there is room for one. */
  readonly hint?: string;
}
