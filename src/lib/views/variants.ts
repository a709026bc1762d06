import type { StepParameters } from '../domain/procedure';
import type { StepKind } from '../domain/vocabulary';

export interface StepView {
  readonly stageKey: string;
  readonly kind: StepKind;
  readonly instruction: string;
  readonly parameters: StepParameters;
}

/** The experiment that stands for a stage of a variant. */
export interface EvidenceView {
  readonly stageKey: string;
  readonly matrix: string | null;
  readonly levelLabel: string | null;
  readonly experimentNumber: number;
  readonly experimentTitle: string;
}

export interface VariantView {
  readonly id: string;
  readonly code: string;
  readonly name: string;
  readonly description: string;
  readonly version: number;
  /** In the order of the procedure. */
  readonly steps: readonly StepView[];
  readonly evidence: readonly EvidenceView[];
  /** What follows from the steps; null where no step says. */
  readonly totals: { readonly solventMl: number | null; readonly minutes: number | null };
}
