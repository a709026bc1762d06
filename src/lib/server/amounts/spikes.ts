import type { ExperimentData, Replicate } from './types';

/** What one replicate received of one entry, in ng: its own amount where one is recorded, else that of its kind; null: none. */
export function spikeOf(
  experiment: Pick<ExperimentData, 'spikes' | 'replicateSpikes'>,
  replicate: Pick<Replicate, 'id' | 'kind'>,
  entryId: string
): number | null {
  const own = experiment.replicateSpikes.find(
    (spike) => spike.replicateId === replicate.id && spike.entryId === entryId
  );
  if (own) return own.amountNg;
  const ofKind = experiment.spikes.find(
    (spike) => spike.replicateKind === replicate.kind && spike.entryId === entryId
  );
  return ofKind?.amountNg ?? null;
}
