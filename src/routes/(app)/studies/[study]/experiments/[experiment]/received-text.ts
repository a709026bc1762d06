import { givenText } from '$lib/domain/given-text';
import type { ReplicateKind } from '$lib/domain/vocabulary';
import type { SpikeView } from '$lib/views/experiments';

/** What a preparation of a kind receives, entries of the same amount gathered: "50 ng of 24 targets; 75 ng of Carbamazepine". */
export function receivedText(spikes: readonly SpikeView[], kind: ReplicateKind): string {
  const groups = new Map<string, { readonly ng: number; readonly role: string; readonly names: string[] }>();
  for (const { role, amountNg, name } of spikes.filter((spike) => spike.kind === kind)) {
    const key = `${role} ${amountNg}`;
    const group = groups.get(key) ?? { ng: amountNg, role, names: [] };
    group.names.push(name);
    groups.set(key, group);
  }
  return [...groups.values()]
    .map(({ ng, role, names }) => {
      const what = names.length > 3 ? `${names.length} ${role}s` : names.join(', ');
      return `${givenText(ng)} ng of ${what}`;
    })
    .join('; ');
}
