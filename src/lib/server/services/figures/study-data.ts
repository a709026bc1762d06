import type { CriterionRule, RecoveryCriteria } from '../../../domain/criteria';
import type { Medium, StageKind } from '../../../domain/stages';
import type { ValidationPartKey } from '../../../domain/validation-parts';
import type { StepKind, StudyState } from '../../../domain/vocabulary';
import type { CheckReported, CheckStandard, Sequence, SequenceInjection } from '../../amounts/sequence-types';
import type { CalibrationSet, ExperimentData, PanelEntry } from '../../amounts/types';

/** One study as plain numbers and words, read at one moment: everything its figures and its summary are made of. */
export interface StudyData {
  readonly id: string;
  readonly labId: string;
  readonly code: string;
  readonly title: string;
  readonly matrix: string;
  readonly objective: string;
  readonly sampleVolumeMl: number | null;
  readonly state: StudyState;
  readonly revision: number;
  readonly dataVersion: number;
  readonly ownerName: string;
  readonly criteriaSet: {
    readonly name: string;
    readonly version: number;
    readonly rules: readonly CriterionRule[];
  };
  /** From the mouth (detector) up. */
  readonly stages: readonly StudyStageData[];
  /** In panel order. */
  readonly panel: readonly StudyPanelEntry[];
  readonly variants: readonly StudyVariant[];
  /** In order of their number. */
  readonly experiments: readonly StudyExperiment[];
  readonly calibrationSets: readonly StudyCalibrationSet[];
  readonly checkStandards: readonly CheckStandard[];
  /** Counting numbers of checks and blanks. */
  readonly checkReported: readonly CheckReported[];
  /** Of stored imports, in the order of storing. */
  readonly sequences: readonly Sequence[];
  readonly injections: readonly SequenceInjection[];
  /** Stored, superseded and withdrawn ones, in the order of storing. */
  readonly imports: readonly StudyImport[];
  /** Lifted ones too, in the order of time. */
  readonly exclusionRecords: readonly ExclusionRecord[];
  /** In order of the experiments' numbers. */
  readonly validationEvidence: readonly ValidationChoice[];
  readonly duplicatePairs: readonly DuplicateChoice[];
}

/** An experiment that a person chose to stand for a part of the validation. */
export interface ValidationChoice {
  readonly part: ValidationPartKey;
  /** null: for every variant. */
  readonly variantId: string | null;
  readonly experimentId: string;
  readonly reason: string;
  readonly by: string;
  /** ISO 8601, UTC. */
  readonly at: string;
}

/** Two preparations that a person declared to be duplicates of each other. */
export interface DuplicateChoice {
  readonly id: string;
  readonly experimentId: string;
  readonly firstId: string;
  readonly secondId: string;
  readonly reason: string;
  readonly by: string;
  readonly at: string;
}

export interface StudyStageData {
  readonly id: string;
  readonly key: string;
  readonly name: string;
  readonly position: number;
  readonly kind: StageKind;
}

export interface StudyPanelEntry extends PanelEntry {
  readonly analyteId: string;
  readonly position: number;
  readonly cas: string | null;
  readonly class: string | null;
  readonly properties: Readonly<Record<AnalyteProperty, number | readonly number[] | string | null>>;
  /** Property name to where its value was taken from. */
  readonly sources: Readonly<Record<string, string>>;
  readonly criteriaOverride: (RecoveryCriteria & { readonly reason?: string }) | null;
}

export type AnalyteProperty =
  | 'formula'
  | 'molarMass'
  | 'logKow'
  | 'pkaAcid'
  | 'pkaBase'
  | 'boilingPointC'
  | 'vapourPressurePa'
  | 'henryPaM3Mol'
  | 'waterSolubilityMgL';

export interface StudyVariant {
  readonly id: string;
  readonly code: string;
  readonly name: string;
  readonly description: string;
  readonly steps: readonly {
    readonly stageKey: string;
    readonly position: number;
    readonly kind: StepKind;
    readonly instruction: string;
    readonly parameters: Readonly<Record<string, unknown>>;
  }[];
  readonly evidence: readonly {
    readonly stageKey: string;
    readonly matrix: string | null;
    readonly levelLabel: string | null;
    readonly experimentId: string;
  }[];
}

export interface StudyExperiment extends ExperimentData {
  readonly stageKey: string;
  readonly medium: Medium;
  readonly matrix: string | null;
  readonly levelLabel: string;
  /** ISO date. */
  readonly performedOn: string | null;
  readonly analystName: string | null;
  /** Days (ISO, UTC) recorded for single preparations, by their id. */
  readonly replicateDays: ReadonlyMap<string, ReplicateDays>;
}

export interface ReplicateDays {
  readonly extractedOn: string | null;
  readonly analysedOn: string | null;
}

export interface StudyCalibrationSet extends CalibrationSet {
  readonly instrument: string;
  /** ISO date. */
  readonly calibratedOn: string;
}

export interface StudyImport {
  readonly id: string;
  readonly fileName: string;
  readonly sheetNames: readonly string[];
  readonly sha256: string;
  readonly byteSize: number;
  readonly state: 'stored' | 'superseded' | 'withdrawn';
  /** ISO 8601, UTC. */
  readonly storedAt: string | null;
  readonly storedBy: string | null;
  readonly endReason: string | null;
  readonly counts: Readonly<Record<string, unknown>>;
}

export interface ExclusionRecord {
  readonly id: string;
  readonly experimentId: string;
  readonly replicateId: string;
  readonly fractionId: string | null;
  readonly entryId: string | null;
  readonly cause: string;
  readonly by: string;
  readonly at: string;
  readonly lifted: { readonly by: string; readonly at: string; readonly reason: string } | null;
}
