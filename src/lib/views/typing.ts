import type { TypedCells } from '../domain/typed-cells';
import type { ReportedBasis } from '../domain/vocabulary';

/** One row of the grid for typing: an injection of an extract, of a standard or of a calibration level. */
export interface TypingRow {
  readonly key: string;
  /** As in the sample column of a file. */
  readonly sample: string;
  readonly fraction: string | null;
  readonly injection: number;
  readonly isLevel: boolean;
}

export interface TypingColumn {
  readonly key: string;
  readonly label: string;
  readonly unit: string | null;
  readonly kind: 'preparation' | 'value' | 'internal standard';
}

export interface TypingView {
  readonly experiment: { readonly number: number; readonly title: string };
  readonly basis: ReportedBasis;
  readonly injections: number;
  readonly rows: readonly TypingRow[];
  readonly columns: readonly TypingColumn[];
  readonly cells: TypedCells;
  /** When the draft was last kept; null: nothing is typed yet. */
  readonly keptAt: string | null;
  /** Typed for preparations, fractions or analytes that the experiment no longer has. */
  readonly withoutPlace: number;
  /** What is stored for this experiment already: what is typed now would cover it. */
  readonly stored: { readonly values: number; readonly by: string; readonly at: string } | null;
  /** The import that it was handed on as and that still waits to be stored. */
  readonly waiting: string | null;
}

/** What checking found: by `row key:column key` where a cell is meant. */
export interface TypingCheck {
  readonly errors: Readonly<Record<string, string>>;
  readonly other: readonly string[];
}
