import type { Medium } from '../../src/lib/domain/stages';
import type { CountsAs, FractionKind, ReplicateKind, Subtraction } from '../../src/lib/domain/vocabulary';
import type { DemoAnalyte } from './panel';
import type { StageKey } from './procedures';
import type { Shifts, Split, VariantCode } from './truth';

export interface PlannedFraction {
  readonly name: string;
  readonly kind: FractionKind;
  readonly countsAs: CountsAs;
  readonly passedStages: readonly StageKey[];
  readonly finalVolumeMl: number;
  /** Share of the fraction that the measured extract stands for. */
  readonly aliquotShare: number;
  readonly dilution: number;
}

export interface PlannedPortion {
  readonly label: string;
  readonly kind: ReplicateKind;
  readonly number: number;
  readonly batch: string | null;
  /** What a mishap left of it; the portion is then set aside with this cause. */
  readonly mishap: { readonly left: number; readonly cause: string } | null;
}

export interface PlannedExperiment {
  readonly key: string;
  readonly title: string;
  readonly stage: StageKey;
  readonly medium: Medium;
  readonly matrix: string | null;
  readonly subtract: Subtraction;
  readonly performedOn: string;
  /** Index of the calibration set. */
  readonly calibration: 0 | 1;
  /** Where the injection standards go in. */
  readonly standardsIn: 'vial' | 'extract';
  readonly sampleVolumeMl: number | null;
  readonly injections: number;
  readonly layout: 'long' | 'wide';
  readonly serves: readonly VariantCode[];
  readonly fractions: readonly PlannedFraction[];
  readonly portions: readonly PlannedPortion[];
  /** Where an amount ends that is put in at this stage, by fraction. */
  readonly split: (analyte: DemoAnalyte, shifts?: Shifts) => Split;
  /** Humic matter in the extracts masks some signals. */
  readonly masked: boolean;
  /** Relative standard deviations: of a whole portion, and of one substance in it. */
  readonly scatter: { readonly portion: number; readonly substance: number };
}

const prefixes: Readonly<Record<ReplicateKind, string>> = {
  spiked: 'S',
  unspiked: 'N',
  'method blank': 'B',
  'post-extraction spike': 'P',
  'solvent standard': 'R'
};

export function portions(
  key: string,
  kind: ReplicateKind,
  count: number,
  batch: string | null = null,
  from = 1
): readonly PlannedPortion[] {
  return Array.from({ length: count }, (_, index) => {
    const number = from + index;
    return { label: `${key}-${prefixes[kind]}${number}`, kind, number, batch, mishap: null };
  });
}

type How = Pick<PlannedFraction, 'finalVolumeMl' | 'aliquotShare' | 'dilution'>;
const measured: How = { finalVolumeMl: 1, aliquotShare: 1, dilution: 1 };

export function fraction(
  name: string,
  kind: FractionKind,
  countsAs: CountsAs,
  passedStages: readonly StageKey[],
  how: Partial<How> = {}
): PlannedFraction {
  return { name, kind, countsAs, passedStages, ...measured, ...how };
}

/** A tenth is freeze-dried and taken up again. */
export const tenth = { aliquotShare: 0.1 };
