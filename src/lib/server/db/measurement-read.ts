import type { PoolClient } from 'pg';
import {
  arrays,
  counting,
  readCountingRows,
  selected,
  type Cells,
  type CountingMeasurement,
  type MeasuredInjection
} from './counting-rows';
import { withReadingClient } from './reading-client';

export type { CountingMeasurement };

/** An import that counts: stored, in the order of storing. */
export interface CountingImport {
  readonly id: string;
  readonly order: number;
}

export interface MeasuredExtract {
  readonly id: string;
  readonly experimentId: string;
  readonly replicateId: string;
  /** null: a standard that is injected as it is. */
  readonly fractionId: string | null;
  readonly finalVolumeMl: number | null;
  readonly aliquotShare: number;
}

export interface ExtractInjection extends MeasuredInjection {
  readonly extract: MeasuredExtract;
}

export interface LevelInjection extends MeasuredInjection {
  readonly levelId: string;
}

export interface CheckInjection extends MeasuredInjection {
  readonly checkStandardId: string;
}

async function storedImports(
  client: PoolClient,
  labId: string,
  studyId: string
): Promise<Map<string, number>> {
  const rows = await arrays<[string, string]>(
    client,
    `SELECT id, stored_order FROM imports WHERE lab_id = $1 AND study_id = $2 AND state = 'stored'`,
    [labId, studyId]
  );
  return new Map(rows.map(([id, order]) => [id, Number(order)]));
}

type ExtractCells = [
  id: string,
  importId: string,
  number: number,
  dilution: number,
  runAt: Date | null,
  extractId: string,
  experimentId: string,
  replicateId: string,
  fractionId: string | null,
  finalVolumeMl: number | null,
  aliquotShare: number
];

async function extractInjections(
  client: PoolClient,
  labId: string,
  studyId: string,
  experimentIds: readonly string[]
): Promise<Map<string, ExtractInjection>> {
  const rows = await arrays<ExtractCells>(
    client,
    `SELECT i.id, i.import_id, i.number, i.dilution, i.run_at, e.id, e.experiment_id, e.replicate_id, e.fraction_id,
        e.final_volume_ml, e.aliquot_share
      FROM extracts e JOIN injections i ON i.extract_id = e.id
      WHERE e.experiment_id = ANY ($3::uuid[]) AND e.lab_id = $1 AND e.study_id = $2`,
    [labId, studyId, experimentIds]
  );
  const extracts = new Map<string, MeasuredExtract>();
  const injections = new Map<string, ExtractInjection>();
  for (const [
    id,
    importId,
    number,
    dilution,
    runAt,
    extractId,
    experimentId,
    replicateId,
    fractionId,
    finalVolumeMl,
    aliquotShare
  ] of rows) {
    const extract = extracts.get(extractId) ?? {
      id: extractId,
      experimentId,
      replicateId,
      fractionId,
      finalVolumeMl,
      aliquotShare
    };
    extracts.set(extractId, extract);
    injections.set(id, { id, importId, number, dilution, runAt, extract });
  }
  return injections;
}

/**
 * The counting measurements of experiments of one study (all of a study's at once where all are named), injections and
 * extracts joined, later stored imports covering earlier ones place by place (replicate, fraction, analyte).
 * In no particular order. Exclusions are not applied here.
 */
export async function readExperimentMeasurements(
  where: Readonly<{ labId: string; studyId: string; experimentIds: readonly string[] }>
): Promise<CountingMeasurement<ExtractInjection>[]> {
  const { labId, studyId, experimentIds } = where;
  if (experimentIds.length === 0) return [];
  return withReadingClient(async (client) => {
    const imports = await storedImports(client, labId, studyId);
    if (imports.size === 0) return [];
    const injections = await extractInjections(client, labId, studyId, experimentIds);
    const placeOf = ({ extract }: ExtractInjection): string => `${extract.replicateId} ${extract.fractionId}`;
    const which =
      experimentIds.length === 1
        ? { condition: 'experiment_id = $2 AND lab_id = $1', values: [labId, experimentIds[0]] }
        : { condition: 'experiment_id = ANY ($2::uuid[]) AND lab_id = $1', values: [labId, experimentIds] };
    const rows = await readCountingRows(client, which, injections, imports, placeOf);
    return counting(rows, injections, imports, placeOf);
  });
}

/** The counting measurements of every experiment of a study; see `readExperimentMeasurements`. */
export async function readStudyMeasurements(
  where: Readonly<{ labId: string; studyId: string }>
): Promise<CountingMeasurement<ExtractInjection>[]> {
  const experiments = await withReadingClient((client) =>
    arrays<[string]>(client, 'SELECT id FROM experiments WHERE lab_id = $1 AND study_id = $2', [
      where.labId,
      where.studyId
    ])
  );
  return readExperimentMeasurements({ ...where, experimentIds: experiments.map(([id]) => id) });
}

/**
 * The counting measurements of one calibration set, later stored imports covering earlier ones level by level and analyte by
 * analyte. In no particular order.
 */
export async function readCalibrationMeasurements(
  where: Readonly<{ labId: string; studyId: string; calibrationSetId: string }>
): Promise<CountingMeasurement<LevelInjection>[]> {
  const { labId, studyId, calibrationSetId } = where;
  return withReadingClient(async (client) => {
    const imports = await storedImports(client, labId, studyId);
    if (imports.size === 0) return [];
    const found = await arrays<[string, string, number, number, Date | null, string]>(
      client,
      `SELECT i.id, i.import_id, i.number, i.dilution, i.run_at, i.level_id
        FROM calibration_levels l JOIN injections i ON i.level_id = l.id
        WHERE l.calibration_set_id = $3 AND l.lab_id = $1 AND l.study_id = $2`,
      [labId, studyId, calibrationSetId]
    );
    const injections = new Map<string, LevelInjection>(
      found.map(([id, importId, number, dilution, runAt, levelId]) => [
        id,
        { id, importId, number, dilution, runAt, levelId }
      ])
    );
    const placeOf = ({ levelId }: LevelInjection): string => levelId;
    const which = { condition: 'calibration_set_id = $2 AND lab_id = $1', values: [labId, calibrationSetId] };
    const rows = await readCountingRows(client, which, injections, imports, placeOf);
    return counting(rows, injections, imports, placeOf);
  });
}

/**
 * The counting measurements of every check and instrument blank of a study. A check is run many times under one label, so that the moment of its injection
 * is part of its place: a later stored import covers an earlier one only at the same moment, analyte by analyte, and a check
 * without a moment is covered by nothing. In no particular order.
 */
export async function readCheckMeasurements(
  where: Readonly<{ labId: string; studyId: string }>
): Promise<CountingMeasurement<CheckInjection>[]> {
  const { labId, studyId } = where;
  return withReadingClient(async (client) => {
    const imports = await storedImports(client, labId, studyId);
    if (imports.size === 0) return [];
    const found = await arrays<[string, string, number, number, Date | null, string, string]>(
      client,
      `SELECT i.id, i.import_id, i.number, i.dilution, i.run_at, i.check_standard_id, c.calibration_set_id
        FROM check_standards c JOIN injections i ON i.check_standard_id = c.id
        WHERE c.lab_id = $1 AND c.study_id = $2`,
      [labId, studyId]
    );
    if (found.length === 0) return [];
    const injections = new Map<string, CheckInjection>(
      found.map(([id, importId, number, dilution, runAt, checkStandardId]) => [
        id,
        { id, importId, number, dilution, runAt, checkStandardId }
      ])
    );
    const sets = [...new Set(found.map(([, , , , , , setId]) => setId))];
    const rows = await arrays<Cells>(
      client,
      `${selected} WHERE calibration_set_id = ANY ($2::uuid[]) AND lab_id = $1`,
      [labId, sets]
    );
    return counting(
      rows,
      injections,
      imports,
      ({ checkStandardId, runAt, importId }) => `${checkStandardId} ${runAt?.getTime() ?? importId}`
    );
  });
}
