import type { CalibrationModelName, CalibrationWeighting, PanelRole } from '../domain/vocabulary';

export interface CalibrationSetItem {
  readonly id: string;
  readonly name: string;
  readonly instrument: string;
  readonly calibratedOn: string;
  readonly defaultModel: CalibrationModelName;
  readonly defaultWeighting: CalibrationWeighting;
  readonly levels: number;
  /** Entries of the panel that its levels hold. */
  readonly entries: number;
  /** Values that count now. */
  readonly values: number;
  /** Numbers of the experiments that use it. */
  readonly experiments: readonly number[];
}

export interface LevelView {
  readonly id: string;
  readonly number: number;
  readonly label: string;
}

/** One level injection of an analyte and how the line reads it back. */
export interface FitPointView {
  readonly levelId: string;
  readonly levelLabel: string;
  /** ng/mL, or the ratio of concentrations. */
  readonly x: number;
  /** Area, or the ratio of areas. */
  readonly y: number;
  readonly fitted: number;
  readonly backCalculated: number | null;
  /** 100 (x' - x)/x. */
  readonly errorPercent: number | null;
  /** False where the error passes the rule of the study's criteria; null where there is no rule. */
  readonly holds: boolean | null;
}

/** A level injection that is no point of the line, and why. */
export interface UnusedPointView {
  readonly levelId: string;
  readonly levelLabel: string;
  readonly why: string;
}

export interface FitView {
  readonly entryId: string;
  readonly name: string;
  readonly role: PanelRole;
  readonly standardName: string | null;
  /** 0: the set's default. */
  readonly revision: number;
  readonly model: CalibrationModelName;
  readonly weighting: CalibrationWeighting;
  readonly levelsLeftOut: readonly string[];
  /** Who chose it, when and why; null for the default. */
  readonly choice: { readonly by: string; readonly at: string; readonly reason: string } | null;
  readonly earlier: readonly {
    readonly revision: number;
    readonly model: CalibrationModelName;
    readonly weighting: CalibrationWeighting;
    readonly by: string;
    readonly at: string;
    readonly reason: string;
  }[];
  /** concentration: area against ng/mL; ratio: area ratio against concentration ratio. Null where there is no line. */
  readonly scale: 'concentration' | 'ratio' | null;
  readonly coefficients: readonly number[];
  readonly r2: number | null;
  readonly rse: number | null;
  readonly responseFactorRsd: number | null;
  readonly range: readonly [number, number] | null;
  readonly points: readonly FitPointView[];
  readonly unused: readonly UnusedPointView[];
  /** Why there is no line. */
  readonly refusal: string | null;
}

export interface CalibrationSetView extends CalibrationSetItem {
  readonly levelList: readonly LevelView[];
  /** ng/mL by panel entry id and level id. */
  readonly concentrations: Readonly<Record<string, Readonly<Record<string, number>>>>;
  /** Panel entries that are in the standards, in panel order. */
  readonly fits: readonly FitView[];
  /** Panel entries that are not. */
  readonly missing: readonly string[];
  /** Limits of the study's criteria for a level's error, in percent; null: no such rule. */
  readonly errorLimit: number | null;
  readonly lowestErrorLimit: number | null;
}
