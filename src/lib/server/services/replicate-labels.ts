import type { ReplicateKind } from '../../domain/vocabulary';
import type { ReplicatesForm } from '../../schemas/experiment';
import type { Problem } from '../errors';
import { nameKey } from '../../domain/name-key';

const letters: Readonly<Record<ReplicateKind, string>> = {
  spiked: 'S',
  unspiked: 'U',
  'method blank': 'B',
  'post-extraction spike': 'P',
  'solvent standard': 'N'
};

/** A preparation that is about to be added. */
export interface PlannedReplicate {
  readonly number: number;
  readonly kind: ReplicateKind;
  readonly label: string;
  readonly batch: string | null;
  readonly sampleVolumeMl: number | null;
}

/** Preparations that exist already, as far as numbers and labels go. */
interface Existing {
  readonly kind: ReplicateKind;
  readonly number: number;
  readonly label: string;
}

/**
 * Numbers and labels the preparations of a form, going on where existing ones end: E3-S1, E3-S2 … for spiked ones of experiment 3, U for
 * unspiked, B for method blanks, P for post-extraction spikes, N for solvent standards. Typed labels take the place of generated ones.
 */
export function plannedReplicates(
  experimentNumber: number,
  groups: readonly ReplicatesForm[],
  existing: readonly Existing[],
  problems: Problem[]
): readonly PlannedReplicate[] {
  const planned: PlannedReplicate[] = [];
  const taken = new Set(existing.map(({ label }) => nameKey(label)));
  for (const [index, group] of groups.entries()) {
    const typed = group.labels
      .split(/\r?\n/)
      .map((label) => label.trim())
      .filter((label) => label !== '');
    if (typed.length > 0 && typed.length !== group.count) {
      const message = `${typed.length} labels stand here for ${group.count} preparations. Give one for each, or none.`;
      problems.push({ path: `replicates.${index}.labels`, message });
      continue;
    }
    const numbers = [...existing, ...planned]
      .filter(({ kind }) => kind === group.kind)
      .map(({ number }) => number);
    const first = Math.max(0, ...numbers) + 1;
    for (let offset = 0; offset < group.count; offset += 1) {
      const number = first + offset;
      const label = typed[offset] ?? `E${experimentNumber}-${letters[group.kind]}${number}`;
      const key = nameKey(label);
      if (taken.has(key) || key === '' || label.length > 80) {
        const message = taken.has(key)
          ? `Two preparations would be called ${label}.`
          : `'${label}' cannot be a label: it needs a letter or a digit, and at most 80 characters.`;
        problems.push({ path: `replicates.${index}.labels`, message });
      }
      taken.add(key);
      planned.push({
        number,
        kind: group.kind,
        label,
        batch: group.batch || null,
        sampleVolumeMl: group.sampleVolumeMl
      });
    }
  }
  return planned;
}
