import type { Verdict } from './verdict';

/** An interval of a figure, in its own unit. */
export interface IntervalView {
  readonly lower: number;
  readonly upper: number;
  readonly level: number;
}

/** One acceptance rule as it is cited. */
export interface RuleView {
  readonly what: string;
  /** "70 to 130 %" */
  readonly limits: string;
  readonly citation: string;
  readonly standing: 'seen' | 'memory' | 'own';
  readonly note: string | null;
}

/** One experiment to choose from, or to name a figure's origin by. */
export interface ExperimentChoice {
  readonly number: number;
  readonly title: string;
  readonly stageName: string;
}

export interface VariantChoice {
  readonly code: string;
  readonly name: string;
  /** false: no experiment stands for its extraction yet. */
  readonly measured: boolean;
}

/** What a page of findings is about: a variant with the experiment at its top, or an experiment by itself. */
export interface SubjectView {
  readonly variant: { readonly code: string; readonly name: string } | null;
  readonly experiment: ExperimentChoice | null;
  readonly variants: readonly VariantChoice[];
  /** Extraction experiments, for looking at one that stands for no variant, or for another matrix or level. */
  readonly experiments: readonly ExperimentChoice[];
}

/** The method recovery of one analyte in one experiment. Percent of the spike. */
export interface ResultRow {
  readonly panelEntryId: string;
  readonly name: string;
  readonly role: string;
  readonly class: string;
  readonly n: number | null;
  readonly mean: number | null;
  readonly sd: number | null;
  readonly rsd: number | null;
  readonly interval: IntervalView | null;
  /** Mean of what was subtracted, percent of the spike; null: nothing was. */
  readonly subtracted: number | null;
  readonly verdict: Verdict | null;
  readonly reasons: readonly string[];
  /** "70 to 130 %, RSD at most 20 %, n at least 5" and "of its own" where it has its own. */
  readonly criteria: string;
  /** The limits that its figures are held against, in percent, so that none is written as if it lay on the other side. */
  readonly limits: { readonly mean: readonly number[]; readonly rsd: readonly number[] };
  /** Relative recovery, where that is all there is. */
  readonly relative: { readonly mean: number; readonly n: number; readonly standard: string } | null;
  /** Replicates that were set aside or lack something. */
  readonly notes: readonly string[];
  /** What it rests on that the checks of its sequence put in doubt; null: nothing. */
  readonly flagged: string | null;
  readonly href: string;
}

export interface ResultsTableView {
  readonly experiment: ExperimentChoice;
  readonly rows: readonly ResultRow[];
  /** What holds for every row: a portion set aside, how something was subtracted. */
  readonly notes: readonly string[];
  readonly rules: readonly RuleView[];
}

/** One variant's recovery of one analyte. */
export interface CompareCell {
  readonly mean: number;
  /** The limits that the mean is held against, in percent. */
  readonly limits: readonly number[];
  readonly halfWidth: number | null;
  readonly n: number;
  readonly verdict: Verdict | null;
  readonly reason: string;
  /** As in a ResultRow. */
  readonly flagged: string | null;
  readonly href: string;
}

export interface CompareVariant {
  readonly code: string;
  readonly name: string;
  readonly experiment: ExperimentChoice | null;
  readonly counts: Readonly<Record<Verdict, number>>;
  readonly withoutVerdict: number;
  readonly worst: {
    readonly name: string;
    readonly mean: number;
    /** How many more stand equally low. */
    readonly others: number;
  } | null;
  /** Sums over the written steps; null where no step states one. */
  readonly solventMl: number | null;
  readonly minutes: number | null;
}

export interface CompareView {
  readonly variants: readonly CompareVariant[];
  readonly rows: readonly {
    readonly panelEntryId: string;
    readonly name: string;
    readonly class: string;
    /** One per variant, in their order; null with the reason in `gaps`. */
    readonly cells: readonly (CompareCell | null)[];
    readonly gaps: readonly (string | null)[];
  }[];
}

export interface SurrogateCell {
  readonly percent: number | null;
  readonly holds: boolean | null;
  readonly setAside: boolean;
  readonly reason: string | null;
}

/** Surrogates, blanks and matrix effects of one experiment. */
export interface PortionsView {
  readonly experiment: ExperimentChoice;
  readonly rule: RuleView | null;
  readonly portions: readonly { readonly id: string; readonly label: string; readonly kind: string }[];
  readonly surrogates: readonly {
    readonly panelEntryId: string;
    readonly name: string;
    readonly cells: readonly SurrogateCell[];
    readonly n: number | null;
    readonly mean: number | null;
    readonly rsd: number | null;
    readonly refusal: string | null;
    /** As in a ResultRow. */
    readonly flagged: string | null;
    readonly href: string;
  }[];
  /** Analytes that a method blank or, summed over all fractions, an unspiked portion holds; ng. */
  readonly blanks: readonly {
    readonly panelEntryId: string;
    readonly name: string;
    readonly cells: readonly { readonly label: string; readonly text: string }[];
    readonly percentOfSpike: number | null;
  }[];
  readonly blankLabels: readonly string[];
  readonly matrix: readonly {
    readonly panelEntryId: string;
    readonly name: string;
    readonly fraction: string;
    readonly effect: number | null;
    readonly effectInterval: IntervalView | null;
    readonly recovery: number | null;
    readonly efficiency: number | null;
    readonly href: string;
  }[];
  readonly matrixNote: string | null;
}

/** The finding in a sentence, and what is not known yet. */
export interface StageFindings {
  readonly lead: string;
  readonly named: readonly { readonly text: string; readonly href: string }[];
  readonly notes: readonly string[];
}
