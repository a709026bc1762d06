/** How far a statement can be relied on: seen in the document named, quoted from memory, or a rule of the trade. */
export type StandingView = 'seen' | 'memory' | 'practice';

/** A fact or a question for the chemist, what it rests on and how far that can be relied on. */
export interface ChemistryFindingView {
  readonly text: string;
  readonly evidence: string;
  readonly source: string;
  readonly standing: StandingView;
}

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
