import type { FormulaNode } from './formula';
import type { Verdict } from './verdict';

/** A step towards the cell: what went into a figure, and where that is opened in turn. */
export interface ProvenanceInput {
  readonly label: string;
  readonly value: string;
  readonly unit: string;
  readonly note: string | null;
  /** Opens the next level; null: this is where it ends. */
  readonly href: string | null;
}

export interface ProvenanceTable {
  readonly caption: string;
  readonly columns: readonly { readonly key: string; readonly label: string; readonly unit: string | null }[];
  readonly rows: readonly {
    readonly key: string;
    readonly label: string;
    readonly cells: readonly {
      readonly text: string | null;
      readonly href: string | null;
      readonly note: string | null;
    }[];
    /** Why the row does not count; null: it does. */
    readonly setAside: string | null;
  }[];
}

/** The cell of the stored file that a number came from. */
export interface SourceCell {
  readonly fileName: string;
  readonly sheet: string;
  /** As spreadsheets write it: F18. */
  readonly cell: string;
  /** What stands in it. */
  readonly rawText: string;
  readonly sha256: string;
  readonly href: string;
}

/** Where a figure comes from: one level of the way down to the cell. */
export interface ProvenanceView {
  readonly address: string;
  readonly title: string;
  readonly panelEntryId: string | null;
  readonly figure: {
    readonly value: string;
    readonly unit: string;
    readonly halfWidth: string | null;
    readonly level: number | null;
    readonly n: string | null;
  } | null;
  /** Why there is no figure. */
  readonly missing: string | null;
  readonly verdict: { readonly verdict: Verdict | null; readonly detail: string } | null;
  readonly formula: FormulaNode | null;
  /** The formula in a line of text. */
  readonly reading: string;
  /** What is to be known beside the formula, in sentences. */
  readonly sentences: readonly string[];
  readonly inputs: readonly ProvenanceInput[];
  readonly tables: readonly ProvenanceTable[];
  readonly cells: readonly SourceCell[];
  readonly setAside: readonly { readonly text: string }[];
  /** One level up. */
  readonly up: { readonly label: string; readonly href: string } | null;
}
