/** Analytes that ask the same of the procedure, as a list of groups shows them. */
export interface NamedGroupView {
  readonly key: string;
  readonly title: string;
  readonly question: string;
  readonly names: readonly string[];
}
