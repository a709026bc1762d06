import type { LevelChangeView } from '../../views/calibration';
import { AuditEvent } from '../db/models/audit-event';
import type { Study } from '../db/models/study';

/** How a change of levels is written into the history: one line a cell, on either side what stood there. */
export type LevelCells = Readonly<Record<string, string | number | null>>;

const shown = (value: unknown): string =>
  typeof value === 'string' || typeof value === 'number' ? String(value) : 'nothing';

/** The changes that the levels of a set have seen, newest first. */
export async function levelChangesOf(study: Study, setId: string): Promise<readonly LevelChangeView[]> {
  const events = await AuditEvent.findAll({
    where: {
      labId: study.labId,
      studyId: study.id,
      entity: 'calibration set',
      entityId: setId,
      action: 'changed'
    },
    order: [['seq', 'DESC']]
  });
  return events.map(({ at, actorName, sentence, reason, before, after }) => {
    const [old, now] = [before, after].map((side) => (side ?? {}) as Record<string, unknown>);
    return {
      at: at.toISOString(),
      by: actorName,
      sentence,
      reason,
      rows: Object.keys(now ?? {}).map((what) => ({
        what,
        before: shown(old?.[what]),
        after: shown(now?.[what])
      }))
    };
  });
}
