import type { Actor } from '../../src/lib/domain/actor';
import { getPanel, setPanelEntry } from '../../src/lib/server/services/panels';

/** Panel entry ids by analyte name. */
export type PanelIds = ReadonlyMap<string, string>;

/** A panel entry that is read against an internal standard. */
export interface ReadAgainst {
  readonly name: string;
  readonly internalStandard: string | null;
}

export function idOf(ids: PanelIds, name: string): string {
  const id = ids.get(name);
  if (id === undefined) throw new Error(`${name} is not on the panel`);
  return id;
}

/** Tells each entry which internal standard it is read against. @returns the ids by name */
export async function assignStandards(
  actor: Actor,
  studyCode: string,
  entries: readonly ReadAgainst[]
): Promise<PanelIds> {
  const panel = await getPanel(actor, studyCode);
  const ids: PanelIds = new Map(panel.map((entry) => [entry.analyte.name, entry.id]));
  for (const { id, role, seen, analyte } of panel) {
    const standard = entries.find(({ name }) => name === analyte.name)?.internalStandard ?? null;
    if (standard === null) continue;
    const none = { low: null, high: null, rsdMax: null, nMin: null, reason: '' };
    await setPanelEntry(actor, studyCode, {
      entryId: id,
      seen,
      role,
      internalStandardEntryId: idOf(ids, standard),
      ...none
    });
  }
  return ids;
}
