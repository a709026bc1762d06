import type { Exclusion } from './types';

/** The exclusion that sets a whole replicate aside, for every analyte or for this one; null: it counts. */
export function replicateExclusion(
  exclusions: readonly Exclusion[],
  replicateId: string,
  entryId: string
): Exclusion | null {
  return (
    exclusions.find(
      (item) => item.replicateId === replicateId && item.fractionId === null && concerns(item, entryId)
    ) ?? null
  );
}

/** The exclusion that sets one fraction of a replicate aside; null: it counts as far as the fraction goes. */
export function fractionExclusion(
  exclusions: readonly Exclusion[],
  replicateId: string,
  fractionId: string | null,
  entryId: string
): Exclusion | null {
  if (fractionId === null) return null;
  return (
    exclusions.find(
      (item) => item.replicateId === replicateId && item.fractionId === fractionId && concerns(item, entryId)
    ) ?? null
  );
}

function concerns(item: Exclusion, entryId: string): boolean {
  return item.entryId === null || item.entryId === entryId;
}
