import type { PanelRole } from '../domain/vocabulary';

/** A range of pH on the axis from 0 to 14. */
export interface PhRangeView {
  readonly low: number;
  readonly high: number;
}

/** Neutral share (0 to 1) at pH `from`, `from + step`, … */
export interface NeutralCurveView {
  readonly from: number;
  readonly step: number;
  readonly values: readonly number[];
}

/** What charge most of an analyte carries at a pH. */
export type ChargeView = 'none' | 'positive' | 'negative' | 'both';

/** log Kow, and whether it was typed into the library or predicted from the structure because nothing was typed. */
export interface LogKowView {
  readonly value: number;
  readonly basis: 'library' | 'predicted';
  /** Where the value was taken from, or how it was predicted. */
  readonly source: string;
}

/** One analyte of the panel at the chosen pH. */
export interface PanelChemistryRow {
  readonly panelEntryId: string;
  readonly analyteId: string;
  readonly name: string;
  readonly role: PanelRole;
  readonly class: string | null;
  /** Groups that it belongs to beside the one of its charge, in a word or two each. */
  readonly also: readonly string[];
  readonly pkaAcid: readonly number[];
  readonly pkaBase: readonly number[];
  readonly logKow: LogKowView | null;
  /** Share without charge at the chosen pH, 0 to 1; null where nothing is known. */
  readonly neutral: number | null;
  readonly charge: ChargeView | null;
  readonly logD: number | null;
  readonly curve: NeutralCurveView | null;
  /** Where at least 99 % carries no charge, and where at least 99 % carries one. */
  readonly neutralRanges: readonly PhRangeView[];
  readonly chargedRanges: readonly PhRangeView[];
  /** Why nothing can be said of its charge; null: something can. */
  readonly unknown: string | null;
  /** Opens its chemistry. */
  readonly href: string;
}

/** Analytes that ask the same of the procedure. */
export interface ChemistryGroupView {
  readonly key: string;
  readonly title: string;
  /** What it rests on, in figures. */
  readonly evidence: string;
  /** What it asks the chemist. */
  readonly question: string;
}

/** A group by charge with its rows, in the order of the chart; every analyte is in one of these. */
export interface ChargeGroupView extends ChemistryGroupView {
  readonly rows: readonly PanelChemistryRow[];
}

/** A group that analytes belong to beside the one of their charge. */
export interface FurtherGroupView extends ChemistryGroupView {
  readonly names: readonly string[];
}

/** A pH at which variants of the study load or shake. */
export interface PlannedPhView {
  readonly ph: number;
  readonly variants: readonly { readonly code: string; readonly name: string }[];
}
