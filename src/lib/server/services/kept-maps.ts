import { QueryTypes } from 'sequelize';
import type { ColumnMap } from '../../schemas/column-map';
import { sequelize } from '../db/sequelize';

/** The newest version of a column map that a lab keeps. */
export interface KeptMap {
  readonly mapId: string;
  readonly versionId: string;
  readonly name: string;
  readonly version: number;
  readonly map: ColumnMap;
}

/** The maps of a lab that apply by themselves, the one saved last first. */
export async function keptMapsOf(labId: string): Promise<readonly KeptMap[]> {
  return sequelize.query<KeptMap>(
    `SELECT DISTINCT ON (m.id) m.id AS "mapId", v.id AS "versionId", m.name, v.version, v.map
      FROM column_maps m JOIN column_map_versions v ON v.lab_id = m.lab_id AND v.column_map_id = m.id
      WHERE m.lab_id = $1 AND m.retired_at IS NULL ORDER BY m.id DESC, v.version DESC`,
    { bind: [labId], type: QueryTypes.SELECT }
  );
}

/** A map by its name (capitals do not count) and version, the newest where none is named; null: the lab has no such one. */
export async function keptMapNamed(
  labId: string,
  name: string,
  version: number | null
): Promise<KeptMap | null> {
  const [found] = await sequelize.query<KeptMap>(
    `SELECT m.id AS "mapId", v.id AS "versionId", m.name, v.version, v.map
      FROM column_maps m JOIN column_map_versions v ON v.lab_id = m.lab_id AND v.column_map_id = m.id
      WHERE m.lab_id = $1 AND lower(m.name) = lower($2) AND ($3::int IS NULL OR v.version = $3)
      ORDER BY v.version DESC LIMIT 1`,
    { bind: [labId, name, version], type: QueryTypes.SELECT }
  );
  return found ?? null;
}
