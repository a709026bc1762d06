import type { ValidationPartKey } from '../domain/validation-parts';
import type { RuleView } from './findings';
import type { Verdict } from './verdict';

/** A cell of a validation table: unrounded for files, written for the screen. */
export interface ValidationCell {
  readonly value: number | string | null;
  readonly text: string | null;
}

export interface ValidationRow {
  readonly key: string;
  readonly panelEntryId: string;
  readonly name: string;
  /** Opens where the row comes from; null: there is nothing to open. */
  readonly href: string | null;
  readonly cells: readonly ValidationCell[];
  /** null: nothing is judged; see `why`. */
  readonly verdict: Verdict | null;
  readonly why: string;
}

export interface ValidationColumn {
  readonly key: string;
  readonly label: string;
  readonly unit: string | null;
  readonly numeric: boolean;
}

/** Rows worst first. */
export interface ValidationTable {
  readonly key: string;
  readonly caption: string;
  readonly columns: readonly ValidationColumn[];
  /** True where the rows are held against something. */
  readonly judged: boolean;
  readonly rows: readonly ValidationRow[];
}

/** An experiment that can stand for a part. */
export interface EvidenceCandidate {
  readonly number: number;
  readonly title: string;
  /** "5 spiked, 2 method blanks; 200 ng; reagent water; 26 Oct 2026" */
  readonly facts: string;
  readonly taken: boolean;
}

/** Which experiments a part rests on, and whether a person chose them. */
export interface PartEvidence {
  readonly state: 'chosen' | 'suggested' | 'none';
  /** "Chosen by …", or why these are suggested, or what is wanted. */
  readonly sentence: string;
  readonly experiments: readonly {
    readonly number: number;
    readonly title: string;
    readonly href: string;
    readonly facts: string;
  }[];
  readonly candidates: readonly EvidenceCandidate[];
  /** Numbers chosen now, joined by commas: what a later choice is held against. */
  readonly seen: string;
}

/** One portion or vial on a control chart. */
export interface ControlChartPoint {
  readonly key: string;
  readonly label: string;
  /** "experiment 3, 26 Oct 2026" */
  readonly place: string;
  readonly day: string | null;
  readonly value: number;
  readonly counted: boolean;
  /** "outside the rule", "beyond 3 s", "beyond 2 s"; empty: within. */
  readonly says: string;
  readonly outside: 'rule' | 'action' | 'warning' | null;
  readonly href: string | null;
}

/** A surrogate or internal standard over time, percent. */
export interface ControlChartView {
  readonly key: string;
  readonly panelEntryId: string;
  readonly name: string;
  readonly unit: string;
  readonly points: readonly ControlChartPoint[];
  readonly limits: {
    readonly centre: number;
    readonly warning: readonly [number, number];
    readonly action: readonly [number, number];
  } | null;
  readonly rule: { readonly low: number | null; readonly high: number | null };
  /** Points that count. */
  readonly n: number;
  readonly sentences: readonly string[];
  /** Portions without a figure, with their reason. */
  readonly missing: readonly string[];
}

export interface DeclaredPair {
  readonly id: string;
  readonly experiment: number;
  readonly labels: readonly [string, string];
  readonly reason: string;
  readonly by: string;
  readonly at: string;
}

/** Preparations that can be declared duplicates of each other. */
export interface PairChoice {
  readonly experiment: number;
  readonly title: string;
  readonly preparations: readonly { readonly id: string; readonly label: string; readonly kind: string }[];
}

/** One part of a study's validation: what it means, rests on, is held against and lacks. */
export interface ValidationPart {
  readonly key: ValidationPartKey | 'horwitz';
  readonly title: string;
  readonly meaning: readonly string[];
  readonly evidence: PartEvidence | null;
  /** "9 spiked preparations, 3 batches (…), 3 dates (…)" */
  readonly rests: readonly string[];
  /** Rules that its figures are held against. */
  readonly rules: readonly RuleView[];
  /** Published rules beside them, applied to nothing here. */
  readonly beside: readonly RuleView[];
  /** What is wanted and not there. */
  readonly missing: readonly string[];
  /** What is to be known before it is believed. */
  readonly notes: readonly string[];
  readonly tables: readonly ValidationTable[];
  readonly charts: readonly ControlChartView[];
  readonly pairs: readonly DeclaredPair[];
  readonly pairChoices: readonly PairChoice[];
  readonly counts: Readonly<Record<Verdict, number>>;
}

export interface ValidationView {
  readonly study: string;
  readonly variant: { readonly code: string; readonly name: string } | null;
  readonly variants: readonly { readonly code: string; readonly name: string }[];
  readonly criteria: string;
  readonly parts: readonly ValidationPart[];
}
