import type { StudyListItem } from './studies';

/** An experiment that is prepared and has no value yet. */
export interface WaitingExperiment {
  readonly study: string;
  readonly studyTitle: string;
  readonly number: number;
  readonly title: string;
  readonly stage: string;
  readonly replicates: number;
  readonly fractions: number;
  /** ISO 8601 date on which it was done; null where none is noted. */
  readonly performedOn: string | null;
}

export interface StartStudy extends StudyListItem {
  /** The finding on its losses in a sentence; null where nothing was measured, or the role does not come for it. */
  readonly finding: string | null;
}

/** What a person sees first. */
export interface StartView {
  readonly studies: readonly StartStudy[];
  readonly waiting: readonly WaitingExperiment[];
}
