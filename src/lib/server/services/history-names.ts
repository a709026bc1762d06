import { QueryTypes } from 'sequelize';
import { sequelize } from '../db/sequelize';

const idPattern = /^[0-9a-f]{8}(?:-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;

/** Every kind of record that an event may point at, with the name that people know it by. */
const namesSql = `
  SELECT id, label AS name FROM replicates WHERE lab_id = $1 AND id = ANY($2::uuid[])
  UNION ALL SELECT id, name FROM fractions WHERE lab_id = $1 AND id = ANY($2::uuid[])
  UNION ALL SELECT p.id, v.name FROM panel_entries p JOIN analyte_versions v ON v.id = p.analyte_version_id
    WHERE p.lab_id = $1 AND p.id = ANY($2::uuid[])
  UNION ALL SELECT a.id, v.name FROM analytes a JOIN analyte_versions v ON v.id = a.current_version_id
    WHERE a.lab_id = $1 AND a.id = ANY($2::uuid[])
  UNION ALL SELECT id, name || ', version ' || version FROM analyte_versions
    WHERE lab_id = $1 AND id = ANY($2::uuid[])
  UNION ALL SELECT id, name FROM calibration_sets WHERE lab_id = $1 AND id = ANY($2::uuid[])
  UNION ALL SELECT id, label FROM calibration_levels WHERE lab_id = $1 AND id = ANY($2::uuid[])
  UNION ALL SELECT id, label FROM check_standards WHERE lab_id = $1 AND id = ANY($2::uuid[])
  UNION ALL SELECT id, number || ', ' || title FROM experiments WHERE lab_id = $1 AND id = ANY($2::uuid[])
  UNION ALL SELECT id, code || ', ' || name FROM variants WHERE lab_id = $1 AND id = ANY($2::uuid[])
  UNION ALL SELECT id, name || ', version ' || version FROM criteria_set_versions
    WHERE lab_id = $1 AND id = ANY($2::uuid[])
  UNION ALL SELECT c.id, v.name FROM criteria_sets c JOIN criteria_set_versions v ON v.id = c.current_version_id
    WHERE c.lab_id = $1 AND c.id = ANY($2::uuid[])
  UNION ALL SELECT id, file_name FROM imports WHERE lab_id = $1 AND id = ANY($2::uuid[])
  UNION ALL SELECT u.id, u.name FROM users u JOIN memberships m ON m.user_id = u.id
    WHERE m.lab_id = $1 AND u.id = ANY($2::uuid[])`;

function collect(value: unknown, into: Set<string>): void {
  if (typeof value === 'string') {
    if (idPattern.test(value)) into.add(value);
  } else if (typeof value === 'object' && value !== null) {
    for (const member of Object.values(value)) collect(member, into);
  }
}

/** The present names of the records that these values of events point at, by id; records of other labs stay unnamed. */
export async function namesOfIds(
  labId: string,
  values: readonly unknown[]
): Promise<ReadonlyMap<string, string>> {
  const ids = new Set<string>();
  for (const value of values) collect(value, ids);
  if (ids.size === 0) return new Map();
  const rows = await sequelize.query<{ id: string; name: string }>(namesSql, {
    bind: [labId, [...ids]],
    type: QueryTypes.SELECT
  });
  return new Map(rows.map(({ id, name }) => [id, name]));
}

/** A value of an event with ids as names where they are known. The stored event, and its hash, hold the ids. */
export function withNames(value: unknown, names: ReadonlyMap<string, string>): unknown {
  if (typeof value === 'string') return names.get(value) ?? value;
  if (Array.isArray(value)) return value.map((item) => withNames(item, names));
  if (typeof value === 'object' && value !== null) {
    return Object.fromEntries(Object.entries(value).map(([key, member]) => [key, withNames(member, names)]));
  }
  return value;
}
