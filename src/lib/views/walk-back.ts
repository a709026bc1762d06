/** What one stage takes of 100 in the sample, in points. */
export interface WalkBackLoss {
  readonly stageKey: string;
  readonly lost: number;
  readonly interval: { readonly lower: number; readonly upper: number; readonly level: number } | null;
  /** Adjusted over the family of tests; null when the test could not be made. */
  readonly pAdjusted: number | null;
  readonly href: string;
}

export interface WalkBackRow {
  readonly panelEntryId: string;
  readonly name: string;
  /** In procedure order; null where the stage has no experiment, with the reason in `gap`. */
  readonly losses: readonly (WalkBackLoss | null)[];
  /** What is left of 100 at the detector; null when unknown. */
  readonly remaining: number | null;
  readonly gap: string | null;
  readonly href: string;
}

export interface WalkBackView {
  /** Loss stages from the source to the mouth. */
  readonly stages: readonly { readonly key: string; readonly name: string }[];
  readonly rows: readonly WalkBackRow[];
}
