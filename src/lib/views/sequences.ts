import type { CheckStandardKind } from '$lib/domain/vocabulary';
import type { RuleView } from './findings';

/** A check or blank of a calibration set, as it was described. */
export interface CheckStandardView {
  readonly id: string;
  readonly kind: CheckStandardKind;
  readonly label: string;
  readonly source: string;
  readonly note: string;
  readonly version: number;
  /** How many injections of stored imports are of it. */
  readonly injections: number;
  /** ng/mL, in panel order. */
  readonly concentrations: readonly {
    readonly panelEntryId: string;
    readonly name: string;
    readonly concentrationNgPerMl: number;
  }[];
}

/** What a check may hold: the panel, and how much of each the levels hold. */
export interface CheckEntryView {
  readonly panelEntryId: string;
  readonly name: string;
  readonly role: string;
  readonly isStandard: boolean;
  /** Lowest and highest concentration over the levels, ng/mL; null: the set does not hold it. */
  readonly range: readonly [number, number] | null;
}

export interface CheckStandardsView {
  readonly set: { readonly id: string; readonly name: string; readonly instrument: string };
  readonly checks: readonly CheckStandardView[];
  readonly entries: readonly CheckEntryView[];
}

/** A run in a list. */
export interface SequenceItem {
  readonly id: string;
  readonly title: string;
  readonly instrument: string;
  /** ISO date; null: the file gave no times. */
  readonly runOn: string | null;
  readonly sets: readonly { readonly id: string; readonly name: string }[];
  readonly experiments: readonly number[];
  readonly injections: number;
  /** Injections of levels: what its sets were fitted to. */
  readonly levels: number;
  readonly checks: number;
  /** Injections with at least one flag. */
  readonly flagged: number;
  readonly gaps: number;
  /** The imports that brought it. */
  readonly importIds: readonly string[];
  readonly href: string;
}

export type InjectionKind = 'level' | 'second source' | 'continuing' | 'blank' | 'extract';

export interface SequenceInjectionView {
  readonly id: string;
  /** In the run, from 1. */
  readonly place: number;
  readonly kind: InjectionKind;
  readonly label: string;
  /** "14:20" in the instrument's own time; null: not given. */
  readonly time: string | null;
  readonly experiment: { readonly number: number; readonly href: string } | null;
  /** Of an extract: how many analytes are flagged, of how many measured. */
  readonly flagged: number;
  readonly measured: number;
  /** Of a check or blank: how many of its readings fail, of how many that are held to a rule. */
  readonly failed: number;
  readonly held: number;
}

/** One figure at one place of the run. */
export interface TracePoint {
  readonly place: number;
  /** null: unread. */
  readonly percent: number | null;
  readonly fails: boolean;
}

export interface TraceView {
  readonly id: string;
  readonly name: string;
  readonly points: readonly TracePoint[];
}

/** What one run says of one calibration set. */
export interface SequenceSetView {
  readonly id: string;
  readonly name: string;
  readonly href: string;
  /** Area of each internal standard, percent of its mean over the levels. */
  readonly standards: readonly TraceView[];
  readonly standardRule: RuleView | null;
  readonly standardLimits: readonly [number | null, number | null];
  /** Found concentration of each analyte in each check, percent of what it was made to. */
  readonly drift: readonly TraceView[];
  readonly driftRule: RuleView | null;
  readonly driftLimits: readonly [number | null, number | null];
}

/** One reason why injections are flagged. */
export interface FlagView {
  readonly text: string;
  readonly rule: RuleView;
  /** The places in the run that it flags. */
  readonly places: readonly number[];
  readonly labels: readonly string[];
}

export interface CheckReadingView {
  readonly entryId: string;
  readonly name: string;
  readonly nominal: number | null;
  readonly found: number | null;
  readonly percent: number | null;
  readonly state: 'holds' | 'fails' | 'unheld' | 'unread';
  readonly limits: readonly number[];
  readonly asked: string;
  readonly why: string | null;
}

export interface CheckInjectionView {
  readonly injectionId: string;
  readonly place: number;
  readonly name: string;
  readonly kind: Exclude<InjectionKind, 'level' | 'extract'>;
  /** "2 of 12 analytes fail" and what follows of it. */
  readonly says: string;
  readonly fails: boolean;
  readonly readings: readonly CheckReadingView[];
}

export interface SequenceView {
  readonly id: string;
  readonly title: string;
  readonly instrument: string;
  readonly runOn: string | null;
  readonly orderedBy: 'time' | 'file';
  /** The finding in a sentence. */
  readonly lead: string;
  readonly files: readonly { readonly name: string; readonly href: string }[];
  readonly injections: readonly SequenceInjectionView[];
  readonly sets: readonly SequenceSetView[];
  readonly checks: readonly CheckInjectionView[];
  readonly flags: readonly FlagView[];
  readonly gaps: readonly { readonly text: string; readonly rule: RuleView | null }[];
}
