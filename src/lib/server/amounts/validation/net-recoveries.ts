import type { Sample } from '../../stats';
import { methodSample } from '../method-sample';
import type { Portion } from '../portions';
import type { RecoveryInput } from '../recovery-input';

/** The method recovery of one portion, percent of its spike, what is subtracted taken off. */
export interface NetRecovery {
  readonly portion: Portion;
  readonly percent: number;
}

/**
 * Method recoveries portion by portion: each complete portion's sum over the method fractions less the mean of what is subtracted,
 * of its own batch where that batch has some, in percent of the spike. Their mean and SD are those of the method recovery.
 */
export function netRecoveries(input: RecoveryInput): readonly NetRecovery[] {
  const sample = methodSample(input);
  if (!sample) return [];
  const method = input.fractions.filter(({ countsAs }) => countsAs === 'method').map(({ id }) => id);
  const complete = input.counted.filter((_, index) =>
    method.every((id) => (input.replicates[index]?.[id] ?? null) !== null)
  );
  return sample.values.flatMap((value, index) => {
    const portion = complete[index];
    return portion ? [{ portion, percent: value - subtractedFrom(sample, index) }] : [];
  });
}

function subtractedFrom({ native, batches, nativeBatches }: Sample, index: number): number {
  if (!native) return 0;
  const batch = batches?.[index];
  const own = native.filter((_, other) => nativeBatches !== undefined && nativeBatches[other] === batch);
  const taken = batch !== undefined && own.length > 0 ? own : native;
  return taken.reduce((sum, value) => sum + value, 0) / taken.length;
}

/**
 * The samples of several experiments as one: every value keeps to what was subtracted in its own experiment. Null where one of
 * them has nothing complete to subtract.
 */
export function joinedSample(inputs: readonly RecoveryInput[]): Sample | null {
  const samples = inputs.map((input) => ({ input, sample: methodSample(input) }));
  if (samples.some(({ sample }) => sample === null)) return null;
  const subtracts = samples.filter(({ sample }) => sample?.native !== undefined);
  const values = samples.flatMap(({ sample }) => sample?.values ?? []);
  if (subtracts.length === 0) return { values };
  // Those that subtract nothing lose a zero of their own, which adds no scatter.
  const label = (index: number, batch: string | undefined): string => `${index} ${batch ?? ''}`;
  return {
    values,
    native: samples.flatMap(({ sample }) => sample?.native ?? [0]),
    batches: samples.flatMap(({ sample }, index) =>
      (sample?.values ?? []).map((_, at) => label(index, sample?.batches?.[at]))
    ),
    nativeBatches: samples.flatMap(({ sample }, index) =>
      (sample?.native ?? [0]).map((_, at) => label(index, sample?.nativeBatches?.[at]))
    )
  };
}
