import { QueryTypes } from 'sequelize';
import type { Study } from '../db/models/study';
import { sequelize } from '../db/sequelize';
import type { Expectation, MappedRecord } from '../imports/types';

export interface Coverage {
  /** How many values on record stand at places that the new records fill. */
  readonly count: number;
  readonly fileNames: readonly string[];
}

interface PlaceRow {
  readonly place: string;
  readonly analyte_id: string;
  readonly file_name: string;
}

/** Which values of stored imports the records would cover, place by place (preparation or level, fraction, analyte). */
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

  const rows = await sequelize.query<PlaceRow>(
    `SELECT DISTINCT x.replicate_id || ' ' || coalesce(x.fraction_id::text, '') AS place, m.analyte_id, i.file_name
        FROM measurements m JOIN imports i ON i.id = m.import_id AND i.state = 'stored'
          JOIN injections j ON j.id = m.injection_id JOIN extracts x ON x.id = j.extract_id
        WHERE m.lab_id = $1 AND i.study_id = $2 AND m.experiment_id = ANY ($3::uuid[])
      UNION ALL
      SELECT DISTINCT j.level_id::text, m.analyte_id, i.file_name
        FROM measurements m JOIN imports i ON i.id = m.import_id AND i.state = 'stored'
          JOIN injections j ON j.id = m.injection_id
        WHERE m.lab_id = $1 AND i.study_id = $2 AND m.calibration_set_id = ANY ($4::uuid[])`,
    { bind: [study.labId, study.id, [...experiments], [...sets]], type: QueryTypes.SELECT }
  );
  const entries = await sequelize.query<{ id: string; analyte_id: string }>(
    'SELECT id, analyte_id FROM panel_entries WHERE lab_id = $1 AND study_id = $2',
    { bind: [study.labId, study.id], type: QueryTypes.SELECT }
  );
  const analyteOf = new Map(entries.map((entry) => [entry.id, entry.analyte_id]));

  const filled = new Set(
    records.map(({ place, panelEntryId }) => `${placeKey(place)} ${analyteOf.get(panelEntryId)}`)
  );
  const covered = rows.filter((row) => filled.has(`${row.place} ${row.analyte_id}`));
  return {
    count: new Set(covered.map((row) => `${row.place} ${row.analyte_id}`)).size,
    fileNames: [...new Set(covered.map((row) => row.file_name))].sort()
  };
}

function placeKey(place: MappedRecord['place']): string {
  return place.kind === 'extract' ? `${place.replicateId} ${place.fractionId ?? ''}` : place.levelId;
}
