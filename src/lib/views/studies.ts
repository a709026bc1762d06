import type { CriterionRule } from '../domain/criteria';
import type { StageKind } from '../domain/stages';
import type { StudyState } from '../domain/vocabulary';

/** A study as the list of studies shows it. */
export interface StudyListItem {
  readonly code: string;
  readonly title: string;
  readonly matrix: string;
  readonly state: StudyState;
  readonly revision: number;
  readonly owner: string;
  readonly targets: number;
  readonly variants: number;
  readonly experiments: number;
  /** The stage farthest upstream that has stored data; null: none has. */
  readonly stageReached: string | null;
  /** ISO 8601, UTC. */
  readonly lastEventAt: string;
  /** Whole days since anything happened; null once signed. */
  readonly daysWaiting: number | null;
  /** Whose move it is: "the owner", "a reviewer", "a lab manager"; null once signed. */
  readonly waitsFor: string | null;
}

export interface StageView {
  readonly id: string;
  readonly key: string;
  readonly name: string;
  /** 1 is the detector. */
  readonly position: number;
  readonly kind: StageKind;
}

export interface StudyView {
  readonly id: string;
  readonly code: string;
  readonly title: string;
  readonly matrix: string;
  readonly objective: string;
  readonly sampleVolumeMl: number | null;
  readonly state: StudyState;
  /** Its content can be changed now. */
  readonly isOpen: boolean;
  readonly revision: number;
  readonly version: number;
  readonly owner: string;
  readonly criteria: {
    readonly setId: string;
    readonly versionId: string;
    readonly name: string;
    readonly version: number;
    /** The set has a newer version than the study names. */
    readonly hasNewer: boolean;
    readonly rules: readonly CriterionRule[];
  };
  /** From the detector up. */
  readonly stages: readonly StageView[];
  readonly counts: {
    readonly panel: number;
    readonly variants: number;
    readonly experiments: number;
    readonly calibrationSets: number;
    readonly imports: number;
  };
}
