/** What somebody typed beside what the structure says. */
export interface ComparedView {
  readonly typed: string | null;
  readonly computed: string | null;
  /** null where there is only one of them, or they cannot be held against each other. */
  readonly agree: boolean | null;
}

/** log Kow, and whether it was typed into the library or predicted from the structure because nothing was typed. */
export interface LogKowView {
  readonly value: number;
  readonly basis: 'library' | 'predicted';
  /** Where the value was taken from, or how it was predicted. */
  readonly source: string;
}

/** What the SMILES of an analyte says, beside what the library holds. */
export interface StructureView {
  /** One `svg` element made by the program from numbers that it checked; null without a structure that can be read. */
  readonly drawing: string | null;
  /** Why there is no drawing, in a sentence; null where there is one, or no SMILES. */
  readonly problem: string | null;
  readonly formula: ComparedView;
  /** g/mol */
  readonly molarMass: ComparedView;
  readonly logKow: LogKowView | null;
  /** What the reader should know of the structure: salts, charges that stay. */
  readonly notes: readonly string[];
}
