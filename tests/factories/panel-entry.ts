import type { PanelRole } from '../../src/lib/domain/vocabulary';
import { PanelEntry } from '../../src/lib/server/db/models/panel-entry';
import type { Study } from '../../src/lib/server/db/models/study';
import { makeAnalyte, type MadeAnalyte } from './analyte';

/** An analyte (a new one where none is given) on a study's panel: a target unless said otherwise. */
export async function makePanelEntry(
  study: Study,
  overrides: Readonly<
    Partial<{ analyte: MadeAnalyte; role: PanelRole; internalStandardEntryId: string; name: string }>
  > = {}
): Promise<PanelEntry> {
  const analyte =
    overrides.analyte ?? (await makeAnalyte(study.labId, overrides.name ? { name: overrides.name } : {}));
  const count = await PanelEntry.count({ where: { studyId: study.id } });
  return PanelEntry.create({
    labId: study.labId,
    studyId: study.id,
    analyteId: analyte.id,
    analyteVersionId: analyte.versionId,
    role: overrides.role ?? 'target',
    position: count + 1,
    internalStandardEntryId: overrides.internalStandardEntryId ?? null
  });
}
