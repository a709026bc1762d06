import type { Medium } from '../domain/stages';
import type {
  AdditionPoint,
  CountsAs,
  FractionKind,
  PanelRole,
  ReplicateKind,
  Subtraction
} from '../domain/vocabulary';

export interface ExperimentListItem {
  readonly number: number;
  readonly title: string;
  readonly stageKey: string;
  readonly stageName: string;
  readonly medium: Medium;
  readonly matrix: string | null;
  readonly levelLabel: string;
  readonly performedOn: string | null;
  readonly spiked: number;
  readonly others: number;
  readonly fractions: number;
  /** Preparations that stored data speak of. */
  readonly measured: number;
  readonly exclusions: number;
  /** Codes of the variants it stands for. */
  readonly variants: readonly string[];
}

export interface FractionView {
  readonly id: string;
  readonly position: number;
  readonly name: string;
  readonly kind: FractionKind;
  readonly countsAs: CountsAs;
  readonly passedStages: readonly string[];
  readonly hasData: boolean;
}

export interface ReplicateView {
  readonly id: string;
  readonly number: number;
  readonly label: string;
  readonly kind: ReplicateKind;
  readonly batch: string | null;
  readonly sampleVolumeMl: number | null;
  readonly sampleMassG: number | null;
  readonly collectedAt: string | null;
  readonly extractedAt: string | null;
  readonly analysedAt: string | null;
  readonly observations: string;
  /** Ids of the fractions that stored data speak of; 'whole' where it has none. */
  readonly measuredFractions: readonly string[];
  readonly spikes: readonly {
    readonly panelEntryId: string;
    readonly name: string;
    readonly amountNg: number;
  }[];
  readonly seen: string;
}

export interface SpikeView {
  readonly kind: ReplicateKind;
  readonly panelEntryId: string;
  readonly name: string;
  readonly role: PanelRole;
  readonly amountNg: number;
}

export interface AdditionView {
  readonly panelEntryId: string;
  readonly name: string;
  readonly point: AdditionPoint;
  readonly amountNg: number | null;
  readonly concentrationNgPerMl: number | null;
}

export interface ExclusionView {
  readonly id: string;
  readonly replicateId: string;
  readonly replicateLabel: string;
  readonly fractionId: string | null;
  readonly fractionName: string | null;
  readonly analyteId: string | null;
  readonly analyteName: string | null;
  readonly cause: string;
  readonly by: string;
  readonly at: string;
  readonly lifted: { readonly by: string; readonly at: string; readonly reason: string } | null;
}

export interface ExperimentView {
  readonly id: string;
  readonly number: number;
  readonly title: string;
  readonly stage: {
    readonly key: string;
    readonly name: string;
    readonly kind: 'signal' | 'loss';
    readonly position: number;
  };
  readonly medium: Medium;
  readonly matrix: string | null;
  readonly levelLabel: string;
  readonly subtract: Subtraction;
  readonly performedOn: string | null;
  readonly analyst: { readonly id: string; readonly name: string } | null;
  readonly calibrationSet: { readonly id: string; readonly name: string } | null;
  readonly sampleVolumeMl: number | null;
  readonly finalVolumeMl: number | null;
  readonly version: number;
  readonly fractions: readonly FractionView[];
  readonly replicates: readonly ReplicateView[];
  readonly spikes: readonly SpikeView[];
  readonly additions: readonly AdditionView[];
  /** Newest first; lifted ones too. */
  readonly exclusions: readonly ExclusionView[];
  readonly variants: readonly string[];
  readonly hasData: boolean;
}
