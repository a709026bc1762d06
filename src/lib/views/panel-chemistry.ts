import type { PanelRole } from '../domain/vocabulary';
import type { ChemistryFindingView, ChemistryGroupView } from './chemistry';
import type { LogKowView, StructureView } from './structure';

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

/** How the charge of an analyte moves with pH; nothing of it where `unknown` says why. */
export interface ChargeCurveView {
  readonly curve: NeutralCurveView | null;
  /** Where at least 99 % is neutral, and where at least 99 % carries a charge. */
  readonly neutralRanges: readonly PhRangeView[];
  readonly chargedRanges: readonly PhRangeView[];
  /** Why nothing can be said of its charge; null: something can. */
  readonly unknown: string | null;
}

/** One analyte of the panel at the chosen pH. */
export interface PanelChemistryRow extends ChargeCurveView {
  readonly panelEntryId: string;
  readonly analyteId: string;
  readonly name: string;
  readonly role: PanelRole;
  readonly class: string | null;
  /** Groups that it belongs to beside the one of its charge, in a word or two each. */
  readonly also: readonly string[];
  /** What put it into its group. */
  readonly evidence: string;
  readonly pkaAcid: readonly number[];
  readonly pkaBase: readonly number[];
  readonly logKow: LogKowView | null;
  /** Neutral share at the chosen pH, 0 to 1; null where nothing is known. */
  readonly neutral: number | null;
  readonly charge: ChargeView | null;
  readonly logD: number | null;
  /** Opens its chemistry. */
  readonly href: string;
}

/** A group by charge with its rows, in the order of the chart; every analyte is in one of these. */
export interface ChargeGroupView extends Omit<ChemistryGroupView, 'members' | 'names'> {
  /** How many of it are neutral at the chosen pH, in a sentence. */
  readonly atPh: string;
  readonly rows: readonly PanelChemistryRow[];
}

/** A pH at which variants of the study take their analytes up. */
export interface PlannedPhView {
  readonly ph: number;
  readonly variants: readonly { readonly code: string; readonly name: string }[];
}

/** A kind of bed with the pH that it stands. */
export interface BedKindView {
  readonly key: string;
  readonly label: string;
  readonly range: PhRangeView;
  readonly source: string;
}

/** Cartridge or disk, and a pre-filter, as far as volume and suspended solids say. */
export interface SampleFormatView {
  readonly volumeMl: number;
  readonly suspendedSolidsMgL: number | null;
  readonly sentence: string;
  readonly findings: readonly ChemistryFindingView[];
}

/** What the chemistry of a panel asks of the procedure. */
export interface PanelChemistryView {
  readonly study: { readonly code: string; readonly matrix: string; readonly sampleVolumeMl: number | null };
  readonly ph: number;
  /** Why this pH: asked for, a variant's, or none given. */
  readonly phReason: string;
  readonly planned: readonly PlannedPhView[];
  readonly bed: BedKindView;
  readonly beds: readonly BedKindView[];
  /** The panel in a sentence. */
  readonly lead: string;
  /** What one pass and what two would have neutral. */
  readonly passes: readonly string[];
  readonly groups: readonly ChargeGroupView[];
  /** Groups that analytes belong to beside the one of their charge. */
  readonly further: readonly ChemistryGroupView[];
  /** What cannot be seen in the chart: who is left out, what was assumed. */
  readonly notes: readonly string[];
  /** null where the study has no sample volume. */
  readonly sampleFormat: SampleFormatView | null;
}

/** A property of the library with its source. */
export interface SourcedPropertyView {
  readonly label: string;
  readonly value: string;
  readonly source: string | null;
}

/** An estimate with its inputs at their lower, middle and upper values. */
export interface EstimateView {
  readonly low: number;
  readonly middle: number;
  readonly high: number;
}

/** How much of a sample a bed takes before an analyte passes, as an estimate. */
export interface BreakthroughView {
  readonly bed: BedKindView;
  readonly bedMassMg: number;
  /** null: the range that cartridges have. */
  readonly plates: number | null;
  readonly lossPercent: number;
  readonly sampleVolumeMl: number | null;
  /** null where `why` says that nothing can be estimated. */
  readonly estimate: {
    readonly holdUpMl: number;
    readonly bedVolumes: number | null;
    readonly retentionMl: EstimateView;
    readonly breakthroughMl: EstimateView;
    /** Percent of the sample. */
    readonly lostPercent: EstimateView | null;
    readonly cautions: readonly ChemistryFindingView[];
  } | null;
  readonly why: string | null;
  /** What the bed can hold, in sentences with their sources. */
  readonly capacity: readonly ChemistryFindingView[];
}

/** Everything the program can say of one substance without a measurement. */
export interface SubstanceView extends ChargeCurveView {
  readonly analyteId: string;
  readonly name: string;
  readonly cas: string | null;
  readonly class: string | null;
  readonly version: number;
  readonly structure: StructureView;
  /** What the library holds of charge and volatility. */
  readonly properties: readonly SourcedPropertyView[];
  /** What was assumed of its charge, in a sentence; null: nothing. */
  readonly assumed: string | null;
  readonly atPhs: readonly SubstanceAtPhView[];
  readonly volatility: {
    readonly sentence: string;
    readonly findings: readonly ChemistryFindingView[];
  };
}

/** Charge and distribution at one pH; shares 0 to 1. */
export interface SubstanceAtPhView {
  readonly ph: number;
  readonly shares: {
    readonly neutral: number;
    readonly cation: number;
    readonly anion: number;
    readonly zwitterion: number;
  };
  readonly charge: ChargeView;
  readonly logD: number | null;
  readonly caution: ChemistryFindingView | null;
}

/** The substance of a panel that is open beside the chart. */
export interface OpenSubstanceView extends SubstanceView {
  readonly panelEntryId: string;
  readonly role: PanelRole;
  readonly breakthrough: BreakthroughView;
}
