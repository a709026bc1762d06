import { QueryTypes } from 'sequelize';
import type { PanelRole } from '../../../domain/vocabulary';
import type { AnalyteBrief, AnalyteVersionView } from '../../../views/library';
import type { Study } from '../../db/models/study';
import { sequelize } from '../../db/sequelize';
import { briefColumns } from '../library-rows';

/** What one version of the library says of an analyte. */
export type Substance = AnalyteBrief &
  Pick<AnalyteVersionView, 'smiles' | 'vapourPressurePa' | 'waterSolubilityMgL' | 'sources'>;

/** An analyte of a panel as the version says that the study has pinned. */
export interface PanelSubstance extends Substance {
  readonly entryId: string;
  readonly role: PanelRole;
}

/** The panel of a study in its order. */
export async function panelSubstances(study: Study): Promise<readonly PanelSubstance[]> {
  return sequelize.query<PanelSubstance>(
    `SELECT ${briefColumns}, v.smiles, v.vapour_pressure_pa AS "vapourPressurePa",
        v.water_solubility_mg_l AS "waterSolubilityMgL", v.sources, p.id AS "entryId", p.role
      FROM panel_entries p JOIN analyte_versions v ON v.lab_id = p.lab_id AND v.id = p.analyte_version_id
      WHERE p.lab_id = $1 AND p.study_id = $2 ORDER BY p.position, p.id`,
    { bind: [study.labId, study.id], type: QueryTypes.SELECT }
  );
}
