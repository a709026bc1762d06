/** How far a statement can be relied on: seen in the document named, quoted from memory, or a rule of the trade. */
export type StandingView = 'seen' | 'memory' | 'practice';

/** A fact or a question for the chemist, what it rests on and how far that can be relied on. */
export interface ChemistryFindingView {
  readonly text: string;
  readonly evidence: string;
  readonly source: string;
  readonly standing: StandingView;
}
export type FindingView = ChemistryFindingView;

/** Analytes that ask the same of the procedure. */
export interface ChemistryGroupView {
  readonly key: string;
  readonly title: string;
  readonly question: string;
  readonly names: readonly string[];
  readonly members: readonly { readonly id: string; readonly name: string; readonly evidence: string }[];
  readonly findings: readonly ChemistryFindingView[];
  readonly source: string;
  readonly standing: StandingView;
}

/** log Kow with where it comes from: a value of the library always wins over a prediction. */
export interface LogKowView {
  readonly value: number;
  readonly basis: 'library' | 'predicted';
  readonly source: string;
}

/** What was typed beside what the structure says; `agree` is null where one of them is missing or cannot be compared. */
export interface ComparedView {
  readonly typed: string | null;
  readonly computed: string | null;
  readonly agree: boolean | null;
}

/** The structure of an analyte and what follows from it. */
export interface StructureView {
  /** A checked piece of SVG; null without a SMILES that can be read. */
  readonly drawing: string | null;
  /** Why there is no drawing though there is a SMILES. */
  readonly problem: string | null;
  readonly formula: ComparedView;
  readonly molarMass: ComparedView;
  readonly logKow: LogKowView | null;
  readonly notes: readonly string[];
}
