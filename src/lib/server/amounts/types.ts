import type {
  AdditionPoint,
  CalibrationModelName,
  CalibrationWeighting,
  CountsAs,
  FractionKind,
  MeasurementState,
  PanelRole,
  ReplicateKind,
  ReportedBasis,
  Subtraction
} from '../../domain/vocabulary';
import type { StageKind } from '../../domain/stages';

/** What the figures of a study are made of, as plain numbers: the shape that the database is read into. */

export interface PanelEntry {
  readonly id: string;
  readonly name: string;
  readonly role: PanelRole;
  /** The entry its area is divided by; null: external calibration. */
  readonly internalStandardId: string | null;
}

/** One reported number with the cell it stands in. Amounts in ng, concentrations in ng/mL, volumes in mL. */
export interface Reported {
  readonly id: string;
  readonly importId: string;
  /** The run of the instrument it came of. */
  readonly injectionId: string;
  readonly entryId: string;
  readonly basis: ReportedBasis;
  readonly state: MeasurementState;
  /** In the unit of the basis; null unless the state is 'value'. */
  readonly value: number | null;
  readonly internalArea: number | null;
  /** The panel entry `internalArea` belongs to. */
  readonly internalEntryId: string | null;
  readonly limit: number | null;
  readonly rawText: string;
  /** All three as the workbook shows them, counted from 1. */
  readonly sheet: number;
  readonly row: number;
  readonly column: number;
  /** Number of this injection among those of the same extract or level. */
  readonly injection: number;
  readonly dilution: number;
}

export interface ExtractReported extends Reported {
  readonly replicateId: string;
  /** null: a standard that is injected as it is. */
  readonly fractionId: string | null;
  readonly finalVolumeMl: number | null;
  readonly aliquotShare: number;
}

export interface LevelReported extends Reported {
  readonly levelId: string;
}

export interface CalibrationLevel {
  readonly id: string;
  readonly number: number;
  readonly label: string;
  /** ng/mL by panel entry, internal standards included. */
  readonly concentrations: ReadonlyMap<string, number>;
}

/** How one analyte is fitted: a choice of a person (a fit revision), or the set's default. */
export interface FitChoice {
  readonly fitId: string | null;
  readonly revision: number | null;
  readonly model: CalibrationModelName;
  readonly weighting: CalibrationWeighting;
  readonly levelsLeftOut: readonly string[];
}

export interface CalibrationSet {
  readonly id: string;
  readonly name: string;
  readonly defaultModel: CalibrationModelName;
  readonly defaultWeighting: CalibrationWeighting;
  readonly levels: readonly CalibrationLevel[];
  /** The newest revision by panel entry; absent: the default. */
  readonly choices: ReadonlyMap<string, FitChoice>;
  readonly reported: readonly LevelReported[];
}

export interface Fraction {
  readonly id: string;
  readonly name: string;
  readonly kind: FractionKind;
  readonly countsAs: CountsAs;
  readonly passedStages: readonly string[];
}

export interface Replicate {
  readonly id: string;
  readonly number: number;
  readonly label: string;
  readonly kind: ReplicateKind;
  readonly batch: string | null;
  /** Volume (mL) or mass (g) of the sample portion. */
  readonly sampleVolumeMl: number | null;
  readonly sampleMassG: number | null;
}

export interface Spike {
  readonly replicateKind: ReplicateKind;
  readonly entryId: string;
  readonly amountNg: number;
}

export interface ReplicateSpike {
  readonly replicateId: string;
  readonly entryId: string;
  readonly amountNg: number;
}

export interface InternalStandardAddition {
  readonly entryId: string;
  readonly point: AdditionPoint;
  /** For 'extract' and 'sample'. */
  readonly amountNg: number | null;
  /** For 'vial'. */
  readonly concentrationNgPerMl: number | null;
}

/** A replicate, a fraction of it or one analyte of it, set aside by a person. */
export interface Exclusion {
  readonly id: string;
  readonly replicateId: string;
  readonly fractionId: string | null;
  readonly entryId: string | null;
  readonly cause: string;
  readonly by: string;
  /** ISO 8601, UTC. */
  readonly at: string;
}

export interface ExperimentData {
  readonly id: string;
  readonly number: number;
  readonly title: string;
  readonly stageKind: StageKind;
  readonly subtract: Subtraction;
  readonly calibrationSetId: string | null;
  /** In procedure order. */
  readonly fractions: readonly Fraction[];
  readonly replicates: readonly Replicate[];
  readonly spikes: readonly Spike[];
  readonly replicateSpikes: readonly ReplicateSpike[];
  readonly additions: readonly InternalStandardAddition[];
  /** In force now: lifted ones are left out. */
  readonly exclusions: readonly Exclusion[];
  readonly reported: readonly ExtractReported[];
}
