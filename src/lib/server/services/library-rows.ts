import { QueryTypes } from 'sequelize';
import type { AnalyteBrief } from '../../views/library';
import { sequelize } from '../db/sequelize';

/** The columns of `AnalyteBrief`, from analyte_versions v. */
export const briefColumns = `v.analyte_id AS id, v.name, v.cas, v.class, v.formula, v.molar_mass AS "molarMass",
  v.log_kow AS "logKow", v.pka_acid AS "pkaAcid", v.pka_base AS "pkaBase", v.boiling_point_c AS "boilingPointC",
  v.henry_pa_m3_mol AS "henryPaM3Mol", v.version`;

export interface NamedAnalyte extends AnalyteBrief {
  readonly versionId: string;
  readonly synonyms: readonly string[];
  readonly smiles: string | null;
}

/** Every analyte of a lab's library in its current version, by name; archived ones are left out. */
export async function currentAnalytes(labId: string): Promise<readonly NamedAnalyte[]> {
  return sequelize.query<NamedAnalyte>(
    `SELECT ${briefColumns}, v.id AS "versionId", v.synonyms, v.smiles
      FROM analytes a JOIN analyte_versions v ON v.lab_id = a.lab_id AND v.id = a.current_version_id
      WHERE a.lab_id = $1 AND a.archived_at IS NULL ORDER BY lower(v.name), v.id`,
    { bind: [labId], type: QueryTypes.SELECT }
  );
}

export function briefOf({
  versionId: _versionId,
  synonyms: _synonyms,
  smiles: _smiles,
  ...brief
}: NamedAnalyte): AnalyteBrief {
  return brief;
}
