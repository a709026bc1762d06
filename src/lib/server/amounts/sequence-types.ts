import type { CriterionRule } from '../../domain/criteria';
import type { CheckStandardKind } from '../../domain/vocabulary';
import type { CalibrationSet, ExperimentData, PanelEntry, Reported } from './types';

/** A solution that is run to tell whether a calibration still holds, or the blank of the instrument. */
export interface CheckStandard {
  readonly id: string;
  readonly calibrationSetId: string;
  readonly kind: CheckStandardKind;
  readonly label: string;
  readonly source: string;
  readonly note: string;
  /** ng/mL by panel entry, internal standards included. A blank holds internal standards at most. */
  readonly concentrations: ReadonlyMap<string, number>;
}

export interface CheckReported extends Reported {
  readonly checkStandardId: string;
}

/** What one import brought of one instrument's run. */
export interface Sequence {
  readonly id: string;
  readonly importId: string;
  readonly instrument: string;
  /** ISO date; null: the file gave no times. */
  readonly runOn: string | null;
}

/** What stands at one place of a sequence. */
export type InjectionSubject =
  | {
      readonly kind: 'extract';
      readonly experimentId: string;
      readonly replicateId: string;
      readonly fractionId: string | null;
      readonly finalVolumeMl: number | null;
    }
  | { readonly kind: 'level'; readonly calibrationSetId: string; readonly levelId: string }
  | { readonly kind: 'check' | 'blank'; readonly checkStandardId: string };

export interface SequenceInjection {
  readonly id: string;
  readonly sequenceId: string;
  /** In the order of the file, from 1. */
  readonly position: number;
  readonly number: number;
  readonly dilution: number;
  /** Milliseconds since 1970, in the instrument's own time; null: the file does not say. */
  readonly runAt: number | null;
  readonly subject: InjectionSubject;
}

/** Everything the checks of a study are told from. */
export interface SequenceInput {
  readonly panel: ReadonlyMap<string, PanelEntry>;
  readonly sets: readonly CalibrationSet[];
  readonly experiments: readonly ExperimentData[];
  readonly checkStandards: readonly CheckStandard[];
  /** Counting numbers of checks and blanks. */
  readonly checkReported: readonly CheckReported[];
  readonly sequences: readonly Sequence[];
  readonly injections: readonly SequenceInjection[];
  readonly rules: readonly CriterionRule[];
}

/** fails: outside its rule. unheld: there is a reading, and no rule for it. unread: there is none; `why` says so. */
export type ReadingState = 'holds' | 'fails' | 'unheld' | 'unread';

/** One analyte in one injection of a check. */
export interface CheckReading {
  readonly injectionId: string;
  readonly checkStandardId: string;
  readonly entryId: string;
  /** The concentration it was made to, ng/mL. */
  readonly nominal: number;
  /** By the line of the set as it is now, ng/mL; null: unread. */
  readonly found: number | null;
  /** 100 found/nominal; the drift is this less 100. */
  readonly percent: number | null;
  readonly state: ReadingState;
  readonly rule: CriterionRule | null;
  /** Why there is no reading, or what made it fail besides its concentration; null: nothing. */
  readonly why: string | null;
}

/** One analyte in one injection of an instrument blank. */
export interface BlankReading {
  readonly injectionId: string;
  readonly checkStandardId: string;
  readonly entryId: string;
  /** Percent of the lowest level; 0 where nothing was detected; null: unread. */
  readonly percentOfLowest: number | null;
  readonly detected: boolean;
  readonly state: ReadingState;
  readonly rule: CriterionRule;
  readonly why: string | null;
}

/** The area of one internal standard in one injection, as percent of what it was elsewhere. */
export interface StandardArea {
  readonly injectionId: string;
  /** The internal standard's panel entry. */
  readonly standardId: string;
  readonly area: number;
  /** Of the mean over the levels of the set, both divided by their concentrations; null: cannot be told. */
  readonly percentOfCalibration: number | null;
  /** Of the latest check before it that holds; null: there is none, or it cannot be told. */
  readonly percentOfCheck: number | null;
  readonly failures: readonly { readonly rule: CriterionRule; readonly percent: number }[];
}

/** Why a number is looked at twice. A flag never takes a value away. */
export interface Flag {
  readonly cause: 'second source' | 'check' | 'check as a whole' | 'internal standard' | 'blank';
  /** The injection that gave cause; for internal standards the flagged one itself. */
  readonly injectionId: string;
  readonly entryId: string;
  /** Where the cause lies, seen from what is flagged. */
  readonly side: 'before' | 'after' | 'itself' | 'calibration';
  /** A clause without subject before it: "the continuing check CCV after it read Atrazine at 127 % of its concentration, where 80 to 120 % is asked for". */
  readonly text: string;
  readonly rule: CriterionRule;
}

/** What a sequence does not show. No failure; but it is said. */
export interface SequenceGap {
  readonly calibrationSetId: string;
  readonly kind:
    | 'no check'
    | 'not opened'
    | 'not closed'
    | 'unread'
    | 'interval'
    | 'no second source'
    | 'order of the file';
  readonly text: string;
  readonly rule: CriterionRule | null;
  readonly injectionIds: readonly string[];
}
