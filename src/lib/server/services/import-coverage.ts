import { QueryTypes } from 'sequelize';
import type { Study } from '../db/models/study';
import { sequelize } from '../db/sequelize';
import type { Expectation, MappedRecord } from '../imports/types';

export interface Coverage {
  /** How many values on record stand at places that the new records fill. */
  readonly count: number;
  readonly fileNames: readonly string[];
}

/** An injection of a stored import, and what it was measured for. */
interface OnRecord {
  /** null: a check without a moment. */
  readonly place: string | null;
  readonly file_name: string;
  /** Ids, parted by blanks: one text an injection is read many times faster than one row a value. */
  readonly analytes: string;
}

/**
 * Which values of stored imports the records would cover, place by place: preparation and fraction, level, or check and moment, and in
 * each the analyte. A check is run many times under one label, so that the moment of its injection is part of its place: another
 * day's check covers nothing, the same injection read anew covers itself. A check without a moment is covered by nothing.
 */
export async function coveredPlaces(
  study: Pick<Study, 'id' | 'labId'>,
  records: readonly MappedRecord[],
  expectation: Expectation
): Promise<Coverage> {
  const experiments = new Set<string>();
  const sets = new Set<string>();
  for (const { place } of records) {
    if (place.kind === 'extract') experiments.add(place.experimentId);
    else sets.add(place.calibrationSetId);
  }
  if (expectation.panel.length === 0 || experiments.size + sets.size === 0)
    return { count: 0, fileNames: [] };

  const onRecord = await sequelize.query<OnRecord>(
    `SELECT x.replicate_id || ' ' || coalesce(x.fraction_id::text, '') AS place, i.file_name, m.analytes
        FROM (SELECT injection_id, string_agg(analyte_id::text, ' ') AS analytes FROM measurements
            WHERE lab_id = $1 AND experiment_id = ANY ($3::uuid[]) GROUP BY injection_id) m
          JOIN injections j ON j.id = m.injection_id JOIN extracts x ON x.id = j.extract_id
          JOIN imports i ON i.id = j.import_id AND i.state = 'stored'
        WHERE i.lab_id = $1 AND i.study_id = $2
      UNION ALL
      SELECT coalesce(j.level_id::text, j.check_standard_id || ' ' || (extract(epoch FROM j.run_at) * 1000)::bigint),
          i.file_name, m.analytes
        FROM (SELECT injection_id, string_agg(analyte_id::text, ' ') AS analytes FROM measurements
            WHERE lab_id = $1 AND calibration_set_id = ANY ($4::uuid[]) GROUP BY injection_id) m
          JOIN injections j ON j.id = m.injection_id
          JOIN imports i ON i.id = j.import_id AND i.state = 'stored'
        WHERE i.lab_id = $1 AND i.study_id = $2`,
    { bind: [study.labId, study.id, [...experiments], [...sets]], type: QueryTypes.SELECT }
  );
  if (onRecord.length === 0) return { count: 0, fileNames: [] };
  const entries = await sequelize.query<{ id: string; analyte_id: string }>(
    'SELECT id, analyte_id FROM panel_entries WHERE lab_id = $1 AND study_id = $2',
    { bind: [study.labId, study.id], type: QueryTypes.SELECT }
  );
  const analyteOf = new Map(entries.map((entry) => [entry.id, entry.analyte_id]));

  const filled = new Map<string, Set<string | undefined>>();
  for (const record of records) {
    const { panelEntryId } = record;
    const key = placeKey(record);
    if (key === null) continue;
    const analytes = filled.get(key) ?? new Set();
    filled.set(key, analytes.add(analyteOf.get(panelEntryId)));
  }
  const covered = new Map<string, Set<string>>();
  const fileNames = new Set<string>();
  for (const { place, file_name: fileName, analytes } of onRecord) {
    if (place === null) continue;
    const wanted = filled.get(place);
    const met = analytes.split(' ').filter((analyte) => wanted?.has(analyte));
    if (met.length === 0) continue;
    fileNames.add(fileName);
    const known = covered.get(place) ?? new Set();
    for (const analyte of met) known.add(analyte);
    covered.set(place, known);
  }
  return {
    count: [...covered.values()].reduce((sum, analytes) => sum + analytes.size, 0),
    fileNames: [...fileNames].sort()
  };
}

/** Where a record belongs, as values of later files cover those of earlier ones; null: it covers nothing. */
export function placeKey({ place, acquiredAt }: MappedRecord): string | null {
  switch (place.kind) {
    case 'extract':
      return `${place.replicateId} ${place.fractionId ?? ''}`;
    case 'level':
      return place.levelId;
    case 'check':
      return acquiredAt === null ? null : `${place.checkStandardId} ${Date.parse(`${acquiredAt}Z`)}`;
  }
}
