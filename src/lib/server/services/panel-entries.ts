import { QueryTypes } from 'sequelize';
import type { CriteriaOverride } from '../../domain/criteria';
import type { PanelRole } from '../../domain/vocabulary';
import type { AnalyteBrief } from '../../views/library';
import type { PanelEntryView } from '../../views/panel';
import type { Study } from '../db/models/study';
import { sequelize } from '../db/sequelize';
import { briefColumns } from './library-rows';

interface Row extends AnalyteBrief {
  readonly entryId: string;
  readonly position: number;
  readonly role: PanelRole;
  readonly hasNewer: boolean;
  readonly standardId: string | null;
  readonly standardName: string | null;
  readonly criteriaOverride: CriteriaOverride | null;
  readonly hasData: boolean;
  readonly updatedAt: Date;
}

function viewOf(row: Row): PanelEntryView {
  const {
    entryId,
    position,
    role,
    hasNewer,
    standardId,
    standardName,
    criteriaOverride,
    hasData,
    updatedAt,
    ...analyte
  } = row;
  return {
    id: entryId,
    position,
    role,
    analyte,
    hasNewer,
    internalStandard: standardId === null ? null : { id: standardId, name: standardName ?? '' },
    criteriaOverride,
    hasData,
    seen: updatedAt.toISOString()
  };
}

/** The panel of a study in its order. */
export async function panelOf(study: Pick<Study, 'id' | 'labId'>): Promise<readonly PanelEntryView[]> {
  const rows = await sequelize.query<Row>(
    `SELECT ${briefColumns}, p.id AS "entryId", p.position, p.role, a.current_version_id <> v.id AS "hasNewer",
        p.internal_standard_entry_id AS "standardId", sv.name AS "standardName", p.criteria_override AS "criteriaOverride",
        p.updated_at AS "updatedAt",
        EXISTS (SELECT 1 FROM experiments e JOIN measurements m ON m.experiment_id = e.id AND m.analyte_id = p.analyte_id
          WHERE e.study_id = p.study_id) OR
        EXISTS (SELECT 1 FROM calibration_sets c JOIN measurements m ON m.calibration_set_id = c.id AND m.analyte_id = p.analyte_id
          WHERE c.study_id = p.study_id) AS "hasData"
      FROM panel_entries p
        JOIN analytes a ON a.lab_id = p.lab_id AND a.id = p.analyte_id
        JOIN analyte_versions v ON v.lab_id = p.lab_id AND v.id = p.analyte_version_id
        LEFT JOIN panel_entries s ON s.id = p.internal_standard_entry_id
        LEFT JOIN analyte_versions sv ON sv.id = s.analyte_version_id
      WHERE p.lab_id = $1 AND p.study_id = $2 ORDER BY p.position, p.id`,
    { bind: [study.labId, study.id], type: QueryTypes.SELECT }
  );
  return rows.map(viewOf);
}
