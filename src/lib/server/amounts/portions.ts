import type { Value } from '../stats';
import { fractionExclusion, replicateExclusion } from './exclusions';
import type { ExperimentAmounts } from './experiment-amounts';
import type { PlaceAmount } from './place-amount';
import { spikeOf } from './spikes';
import type { Exclusion, ExperimentData, Fraction, Replicate } from './types';

/** One analyte in one fraction of one portion. */
export interface PortionPlace {
  readonly fraction: Fraction;
  /** The fraction its data hang on; null: a standard injected as it is. */
  readonly fractionId: string | null;
  readonly found: PlaceAmount;
  /** ng; null when there is no usable figure. Set aside counts as missing. */
  readonly ng: Value;
  readonly exclusion: Exclusion | null;
}

/** One analyte in one replicate over all fractions. */
export interface Portion {
  readonly replicate: Replicate;
  readonly spikeNg: number | null;
  readonly places: readonly PortionPlace[];
  /** Set aside as a whole, for this analyte or for all. */
  readonly exclusion: Exclusion | null;
}

/** Stands for the one measured extract of portions that were not split into fractions. */
export const wholeExtract: Fraction = {
  id: 'whole',
  name: 'Extract',
  kind: 'elution',
  countsAs: 'method',
  passedStages: []
};

/** The fractions that figures are formed over: those of the experiment, or the whole extract where it has none. */
export function fractionsOf(
  experiment: Pick<ExperimentData, 'fractions' | 'stageKind'>
): readonly Fraction[] {
  return experiment.stageKind === 'signal' || experiment.fractions.length === 0
    ? [wholeExtract]
    : experiment.fractions;
}

/** The portions whose recovery the experiment is about: spiked ones, and on the instrument the standards. */
export function carriers(experiment: Pick<ExperimentData, 'replicates' | 'stageKind'>): readonly Replicate[] {
  return experiment.replicates.filter(
    ({ kind }) => kind === 'spiked' || (kind === 'solvent standard' && experiment.stageKind === 'signal')
  );
}

/** One analyte in one replicate: what was found in each fraction, what was set aside. */
export function portionOf(amounts: ExperimentAmounts, entryId: string, replicate: Replicate): Portion {
  const { experiment } = amounts;
  const places = fractionsOf(experiment).map((fraction): PortionPlace => {
    const fractionId = fraction === wholeExtract ? wholePlace(amounts, replicate) : fraction.id;
    const found = amounts.at(entryId, replicate.id, fractionId);
    const exclusion = fractionExclusion(experiment.exclusions, replicate.id, fractionId, entryId);
    return { fraction, fractionId, found, exclusion, ng: exclusion ? null : valueOf(found) };
  });
  return {
    replicate,
    spikeNg: spikeOf(experiment, replicate, entryId),
    places,
    exclusion: replicateExclusion(experiment.exclusions, replicate.id, entryId)
  };
}

/** Where the data of an unsplit portion hang: on no fraction, or on the only one there is. */
function wholePlace(amounts: ExperimentAmounts, replicate: Replicate): string | null {
  const { fractions } = amounts.experiment;
  const only = fractions.length === 1 ? fractions[0] : undefined;
  return only && !amounts.hasPlace(replicate.id, null) ? only.id : null;
}

export function valueOf({ amount }: PlaceAmount): Value {
  if (amount.state === 'amount') return amount.ng;
  return amount.state === 'not detected' ? { below: amount.belowNg } : null;
}

/** Multiplies a value, limit included. */
export function scaled(value: Value, factor: number): Value {
  if (value === null) return null;
  return typeof value === 'number' ? value * factor : { below: value.below * factor };
}

/** The value with not-detected as zero. */
export function asZero(value: Exclude<Value, null>): number {
  return typeof value === 'number' ? value : 0;
}

/** Volume or mass of each portion, where all have one; null where the native amount cannot be scaled. */
export function sampleSizes(
  spiked: readonly Portion[],
  unspiked: readonly Portion[]
): ((portion: Portion) => number) | null {
  const all = [...spiked, ...unspiked];
  for (const size of ['sampleVolumeMl', 'sampleMassG'] as const) {
    if (all.every((portion) => portion.replicate[size] !== null))
      return (portion) => portion.replicate[size] ?? 1;
  }
  return null;
}
