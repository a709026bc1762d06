import type { BedKindView } from '../../../views/panel-chemistry';
import { reversedPhases, workingRanges, type ReversedPhase } from '../../chemistry';

const labels: Readonly<Record<ReversedPhase, string>> = { c18: 'bonded silica', polymer: 'polymer' };

/** A kind of bed with the pH that it stands, as pages name it. */
export function bedKind(key: ReversedPhase): BedKindView {
  const { low, high, source } = workingRanges[key];
  return { key, label: labels[key], range: { low, high }, source };
}

export const bedKinds: readonly BedKindView[] = reversedPhases.map(bedKind);
