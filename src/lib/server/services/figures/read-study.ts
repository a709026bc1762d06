import type { PoolClient } from 'pg';
import type { Spike } from '../../amounts/types';
import {
  readCalibrationMeasurements,
  readCheckMeasurements,
  readStudyMeasurements,
  type CountingMeasurement
} from '../../db/measurement-read';
import { withReadingClient } from '../../db/reading-client';
import { inSnapshot } from '../../db/snapshot';
import { NotFound } from '../../errors';
import type { ExtractReported, FitChoice, Fraction, LevelReported, Reported } from '../../amounts/types';
import type {
  DuplicateChoice,
  ExclusionRecord,
  ReplicateDays,
  StudyCalibrationSet,
  StudyData,
  StudyExperiment,
  StudyImport,
  StudyPanelEntry,
  StudyStageData,
  StudyVariant,
  ValidationChoice
} from './study-data';

/** The study's id and the version of its data, or null when the lab has no such study. */
export async function findStudy(
  labId: string,
  code: string
): Promise<{ readonly id: string; readonly dataVersion: number } | null> {
  const rows = await withReadingClient((client) =>
    select<{ id: string; dataVersion: string }>(
      client,
      `SELECT id, data_version AS "dataVersion" FROM studies WHERE lab_id = $1 AND lower(code) = lower($2)`,
      [labId, code]
    )
  );
  const [row] = rows;
  return row ? { id: row.id, dataVersion: Number(row.dataVersion) } : null;
}

/**
 * Reads one study whole, on one unchanging view of the database.
 * @throws NotFound when the lab has no study of this id
 */
export async function readStudy(labId: string, studyId: string): Promise<StudyData> {
  return inSnapshot(async () => {
    const parts = await withReadingClient((client) => readParts(client, labId, studyId));
    const measured = await readStudyMeasurements({ labId, studyId });
    const levels = new Map<string, LevelReported[]>();
    for (const set of parts.calibrationSets) {
      const rows = await readCalibrationMeasurements({ labId, studyId, calibrationSetId: set.id });
      levels.set(
        set.id,
        ordered(rows.map((row) => reportedOf(row, parts.entryOf, { levelId: row.injection.levelId })))
      );
    }
    const checks = await readCheckMeasurements({ labId, studyId });
    const byExperiment = new Map<string, ExtractReported[]>();
    for (const row of measured) {
      const { experimentId, replicateId, fractionId, finalVolumeMl, aliquotShare } = row.injection.extract;
      const list = byExperiment.get(experimentId) ?? [];
      byExperiment.set(experimentId, list);
      list.push(reportedOf(row, parts.entryOf, { replicateId, fractionId, finalVolumeMl, aliquotShare }));
    }
    const { entryOf: _entryOf, ...data } = parts;
    return {
      ...data,
      experiments: data.experiments.map((item) => ({
        ...item,
        reported: ordered(byExperiment.get(item.id) ?? [])
      })),
      calibrationSets: data.calibrationSets.map((set) => ({ ...set, reported: levels.get(set.id) ?? [] })),
      checkReported: ordered(
        checks.map((row) =>
          reportedOf(row, parts.entryOf, { checkStandardId: row.injection.checkStandardId })
        )
      )
    };
  });
}

type Parts = StudyData & { readonly entryOf: ReadonlyMap<string, string> };

async function readParts(client: PoolClient, labId: string, studyId: string): Promise<Parts> {
  const of = <Row extends object>(text: string): Promise<Row[]> =>
    select<Row>(client, text, [labId, studyId]);
  const [study] = await of<StudyRow>(studySql);
  if (!study) throw new NotFound();
  const stages = await of<StudyStageData>(
    `SELECT id, key, name, position, kind FROM study_stages WHERE lab_id = $1 AND study_id = $2 ORDER BY position`
  );
  const panel = await of<StudyPanelEntry>(panelSql);
  const entryOf = new Map(panel.map((entry) => [entry.analyteId, entry.id]));
  const { rules, setName, setVersion, dataVersion, ...rest } = study;
  const exclusionRecords = await readExclusions(of, entryOf);
  return {
    ...rest,
    dataVersion: Number(dataVersion),
    criteriaSet: { name: setName, version: setVersion, rules },
    stages,
    panel,
    variants: await readVariants(of),
    experiments: await readExperiments(of, exclusionRecords),
    calibrationSets: await readCalibrationSets(of),
    checkStandards: await readCheckStandards(of),
    checkReported: [],
    sequences: await of<StudyData['sequences'][number]>(sequencesSql),
    injections: await readInjections(of),
    imports: await of<StudyImport>(importsSql),
    exclusionRecords,
    validationEvidence: await of<ValidationChoice>(validationEvidenceSql),
    duplicatePairs: await of<DuplicateChoice>(duplicatePairsSql),
    entryOf
  };
}

type Select = <Row extends object>(text: string) => Promise<Row[]>;

interface StudyRow extends Pick<
  StudyData,
  | 'id'
  | 'labId'
  | 'code'
  | 'title'
  | 'matrix'
  | 'objective'
  | 'sampleVolumeMl'
  | 'state'
  | 'revision'
  | 'ownerName'
> {
  readonly dataVersion: string;
  readonly setName: string;
  readonly setVersion: number;
  readonly rules: StudyData['criteriaSet']['rules'];
}

const studySql = `SELECT s.id, s.lab_id AS "labId", s.code, s.title, s.matrix, s.objective, s.sample_volume_ml AS "sampleVolumeMl",
    s.state, s.revision, s.data_version AS "dataVersion", u.name AS "ownerName", c.name AS "setName",
    c.version AS "setVersion", c.rules
  FROM studies s JOIN users u ON u.id = s.owner_id
  JOIN criteria_set_versions c ON c.lab_id = s.lab_id AND c.id = s.criteria_set_version_id
  WHERE s.lab_id = $1 AND s.id = $2`;

const panelSql = `SELECT p.id, p.analyte_id AS "analyteId", p.role, p.position, p.internal_standard_entry_id AS "internalStandardId",
    p.criteria_override AS "criteriaOverride", v.name, v.cas, v.class, v.sources,
    json_build_object('formula', v.formula, 'molarMass', v.molar_mass, 'logKow', v.log_kow, 'pkaAcid', v.pka_acid,
      'pkaBase', v.pka_base, 'boilingPointC', v.boiling_point_c, 'vapourPressurePa', v.vapour_pressure_pa,
      'henryPaM3Mol', v.henry_pa_m3_mol, 'waterSolubilityMgL', v.water_solubility_mg_l) AS properties
  FROM panel_entries p JOIN analyte_versions v ON v.lab_id = p.lab_id AND v.id = p.analyte_version_id
  WHERE p.lab_id = $1 AND p.study_id = $2 ORDER BY p.position, p.id`;

const importsSql = `SELECT i.id, i.file_name AS "fileName", i.sheet_names AS "sheetNames", i.sha256, i.byte_size AS "byteSize", i.state,
    to_char(i.stored_at AT TIME ZONE 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS"Z"') AS "storedAt", u.name AS "storedBy",
    i.end_reason AS "endReason", i.counts
  FROM imports i LEFT JOIN users u ON u.id = i.stored_by
  WHERE i.lab_id = $1 AND i.study_id = $2 AND i.state IN ('stored', 'superseded', 'withdrawn') ORDER BY i.stored_order`;

const moment = (column: string): string =>
  `to_char(${column} AT TIME ZONE 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS"Z"')`;

const validationEvidenceSql = `SELECT e.part, e.variant_id AS "variantId", e.experiment_id AS "experimentId", e.reason, u.name AS by,
    ${moment('e.created_at')} AS at
  FROM validation_evidence e JOIN experiments x ON x.id = e.experiment_id JOIN users u ON u.id = e.chosen_by
  WHERE e.lab_id = $1 AND e.study_id = $2 ORDER BY x.number`;

const duplicatePairsSql = `SELECT p.id, p.experiment_id AS "experimentId", p.first_replicate_id AS "firstId",
    p.second_replicate_id AS "secondId", p.reason, u.name AS by, ${moment('p.created_at')} AS at
  FROM duplicate_pairs p JOIN experiments x ON x.id = p.experiment_id JOIN users u ON u.id = p.declared_by
  WHERE p.lab_id = $1 AND p.study_id = $2 ORDER BY x.number, p.created_at, p.id`;

async function readVariants(of: Select): Promise<StudyVariant[]> {
  const variants = await of<Omit<StudyVariant, 'steps' | 'evidence'>>(
    `SELECT id, code, name, description FROM variants WHERE lab_id = $1 AND study_id = $2 ORDER BY position, code`
  );
  const steps = await of<StudyVariant['steps'][number] & { variantId: string }>(
    `SELECT p.variant_id AS "variantId", t.key AS "stageKey", p.position, p.kind, p.instruction, p.parameters
      FROM procedure_steps p JOIN study_stages t ON t.id = p.stage_id
      WHERE p.lab_id = $1 AND p.study_id = $2 ORDER BY p.position`
  );
  const evidence = await of<StudyVariant['evidence'][number] & { variantId: string }>(
    `SELECT e.variant_id AS "variantId", t.key AS "stageKey", e.matrix, e.level_label AS "levelLabel",
        e.experiment_id AS "experimentId"
      FROM stage_evidence e JOIN study_stages t ON t.id = e.stage_id JOIN experiments x ON x.id = e.experiment_id
      WHERE e.lab_id = $1 AND e.study_id = $2 ORDER BY t.position, e.matrix NULLS FIRST, e.level_label NULLS FIRST, x.number`
  );
  return variants.map((variant) => ({
    ...variant,
    steps: without(steps, variant.id),
    evidence: without(evidence, variant.id)
  }));
}

function without<Row extends { readonly variantId: string }>(
  rows: readonly Row[],
  variantId: string
): Omit<Row, 'variantId'>[] {
  return rows.filter((row) => row.variantId === variantId).map(({ variantId: _variantId, ...row }) => row);
}

async function readExclusions(of: Select, entryOf: ReadonlyMap<string, string>): Promise<ExclusionRecord[]> {
  const rows = await of<{
    id: string;
    experimentId: string;
    replicateId: string;
    fractionId: string | null;
    analyteId: string | null;
    cause: string;
    by: string;
    at: Date;
    liftedBy: string | null;
    liftedAt: Date | null;
    liftReason: string | null;
  }>(
    `SELECT x.id, x.experiment_id AS "experimentId", x.replicate_id AS "replicateId", x.fraction_id AS "fractionId",
        x.analyte_id AS "analyteId", x.cause, b.name AS by, x.excluded_at AS at, l.name AS "liftedBy",
        x.lifted_at AS "liftedAt", x.lift_reason AS "liftReason"
      FROM exclusions x JOIN users b ON b.id = x.excluded_by LEFT JOIN users l ON l.id = x.lifted_by
      WHERE x.lab_id = $1 AND x.study_id = $2 ORDER BY x.excluded_at, x.id`
  );
  return rows.map(({ analyteId, liftedBy, liftedAt, liftReason, at, ...row }) => ({
    ...row,
    // An analyte that has left the panel keeps its exclusion; it concerns nothing that is shown.
    entryId: analyteId === null ? null : (entryOf.get(analyteId) ?? `analyte ${analyteId}`),
    at: at.toISOString(),
    lifted: liftedAt ? { by: liftedBy ?? '', at: liftedAt.toISOString(), reason: liftReason ?? '' } : null
  }));
}

async function readExperiments(
  of: Select,
  exclusions: readonly ExclusionRecord[]
): Promise<StudyExperiment[]> {
  const experiments = await of<
    Omit<
      StudyExperiment,
      | 'fractions'
      | 'replicates'
      | 'spikes'
      | 'replicateSpikes'
      | 'additions'
      | 'exclusions'
      | 'reported'
      | 'replicateDays'
    >
  >(
    `SELECT e.id, e.number, e.title, t.kind AS "stageKind", t.key AS "stageKey", e.subtract, e.medium, e.matrix,
        e.level_label AS "levelLabel", e.calibration_set_id AS "calibrationSetId",
        to_char(e.performed_on, 'YYYY-MM-DD') AS "performedOn", u.name AS "analystName"
      FROM experiments e JOIN study_stages t ON t.id = e.stage_id LEFT JOIN users u ON u.id = e.analyst_id
      WHERE e.lab_id = $1 AND e.study_id = $2 ORDER BY e.number`
  );
  type Own = { experimentId: string };
  const fractions = await of<Fraction & Own>(
    `SELECT experiment_id AS "experimentId", id, name, kind, counts_as AS "countsAs", passed_stages AS "passedStages"
      FROM fractions WHERE lab_id = $1 AND study_id = $2 ORDER BY position`
  );
  const replicates = await of<StudyExperiment['replicates'][number] & Own>(
    `SELECT experiment_id AS "experimentId", id, number, label, kind, batch, sample_volume_ml AS "sampleVolumeMl",
        sample_mass_g AS "sampleMassG"
      FROM replicates WHERE lab_id = $1 AND study_id = $2
      ORDER BY array_position(ARRAY['spiked', 'unspiked', 'method blank', 'post-extraction spike', 'solvent standard'], kind), number`
  );
  const days = await of<ReplicateDays & Own & { id: string }>(
    `SELECT experiment_id AS "experimentId", id, to_char(extracted_at AT TIME ZONE 'UTC', 'YYYY-MM-DD') AS "extractedOn",
        to_char(analysed_at AT TIME ZONE 'UTC', 'YYYY-MM-DD') AS "analysedOn"
      FROM replicates WHERE lab_id = $1 AND study_id = $2 AND (extracted_at IS NOT NULL OR analysed_at IS NOT NULL)`
  );
  const spikes = await of<Spike & Own>(
    `SELECT experiment_id AS "experimentId", replicate_kind AS "replicateKind", panel_entry_id AS "entryId", amount_ng AS "amountNg"
      FROM experiment_spikes WHERE lab_id = $1 AND study_id = $2`
  );
  const replicateSpikes = await of<StudyExperiment['replicateSpikes'][number] & Own>(
    `SELECT r.experiment_id AS "experimentId", s.replicate_id AS "replicateId", s.panel_entry_id AS "entryId",
        s.amount_ng AS "amountNg"
      FROM replicate_spikes s JOIN replicates r ON r.id = s.replicate_id WHERE s.lab_id = $1 AND s.study_id = $2`
  );
  const additions = await of<StudyExperiment['additions'][number] & Own>(
    `SELECT experiment_id AS "experimentId", panel_entry_id AS "entryId", point, amount_ng AS "amountNg",
        concentration_ng_per_ml AS "concentrationNgPerMl"
      FROM internal_standard_additions WHERE lab_id = $1 AND study_id = $2`
  );
  const own = <Row extends Own>(rows: readonly Row[], id: string): Omit<Row, 'experimentId'>[] =>
    rows.filter((row) => row.experimentId === id).map(({ experimentId: _experimentId, ...row }) => row);
  return experiments.map((item) => ({
    ...item,
    fractions: own(fractions, item.id),
    replicates: own(replicates, item.id),
    spikes: own(spikes, item.id),
    replicateSpikes: own(replicateSpikes, item.id),
    additions: own(additions, item.id),
    exclusions: exclusions.filter((record) => record.experimentId === item.id && record.lifted === null),
    replicateDays: new Map(own(days, item.id).map(({ id, ...found }) => [id, found] as const)),
    reported: []
  }));
}

async function readCalibrationSets(of: Select): Promise<StudyCalibrationSet[]> {
  const sets = await of<Omit<StudyCalibrationSet, 'levels' | 'choices' | 'reported'>>(
    `SELECT id, name, instrument, to_char(calibrated_on, 'YYYY-MM-DD') AS "calibratedOn", default_model AS "defaultModel",
        default_weighting AS "defaultWeighting"
      FROM calibration_sets WHERE lab_id = $1 AND study_id = $2 ORDER BY calibrated_on, name`
  );
  const levels = await of<{ setId: string; id: string; number: number; label: string }>(
    `SELECT calibration_set_id AS "setId", id, number, label FROM calibration_levels
      WHERE lab_id = $1 AND study_id = $2 ORDER BY number`
  );
  const concentrations = await of<{ levelId: string; entryId: string; concentration: number }>(
    `SELECT level_id AS "levelId", panel_entry_id AS "entryId", concentration_ng_per_ml AS concentration
      FROM calibration_level_concentrations WHERE lab_id = $1 AND study_id = $2`
  );
  // Ascending, so that the newest revision is the one that stays.
  const fits = await of<FitChoice & { setId: string; entryId: string }>(
    `SELECT calibration_set_id AS "setId", panel_entry_id AS "entryId", id AS "fitId", revision, model, weighting,
        levels_left_out AS "levelsLeftOut"
      FROM calibration_fits WHERE lab_id = $1 AND study_id = $2 ORDER BY revision`
  );
  const byLevel = new Map<string, Map<string, number>>();
  for (const { levelId, entryId, concentration } of concentrations) {
    const ofLevel = byLevel.get(levelId) ?? new Map<string, number>();
    byLevel.set(levelId, ofLevel.set(entryId, concentration));
  }
  return sets.map((set) => ({
    ...set,
    levels: levels
      .filter((level) => level.setId === set.id)
      .map(({ setId: _setId, ...level }) => ({
        ...level,
        concentrations: byLevel.get(level.id) ?? new Map()
      })),
    choices: new Map(
      fits
        .filter((fit) => fit.setId === set.id)
        .map(({ setId: _setId, entryId, ...choice }) => [entryId, choice] as const)
    ),
    reported: []
  }));
}

async function readCheckStandards(of: Select): Promise<StudyData['checkStandards']> {
  const checks = await of<Omit<StudyData['checkStandards'][number], 'concentrations'>>(
    `SELECT id, calibration_set_id AS "calibrationSetId", kind, label, source, note FROM check_standards
      WHERE lab_id = $1 AND study_id = $2 ORDER BY created_at, id`
  );
  const concentrations = await of<{ checkId: string; entryId: string; concentration: number }>(
    `SELECT check_standard_id AS "checkId", panel_entry_id AS "entryId", concentration_ng_per_ml AS concentration
      FROM check_standard_concentrations WHERE lab_id = $1 AND study_id = $2`
  );
  return checks.map((check) => ({
    ...check,
    concentrations: new Map(
      concentrations
        .filter(({ checkId }) => checkId === check.id)
        .map(({ entryId, concentration }) => [entryId, concentration] as const)
    )
  }));
}

const sequencesSql = `SELECT s.id, s.import_id AS "importId", s.instrument, to_char(s.run_on, 'YYYY-MM-DD') AS "runOn"
  FROM sequences s JOIN imports i ON i.id = s.import_id AND i.state = 'stored'
  WHERE s.lab_id = $1 AND s.study_id = $2 ORDER BY i.stored_order, s.id`;

async function readInjections(of: Select): Promise<StudyData['injections']> {
  const rows = await of<{
    id: string;
    sequenceId: string;
    position: number;
    kind: 'level' | 'check' | 'blank' | 'extract';
    number: number;
    dilution: number;
    runAt: Date | null;
    levelId: string | null;
    levelSetId: string | null;
    checkStandardId: string | null;
    experimentId: string | null;
    replicateId: string | null;
    fractionId: string | null;
    finalVolumeMl: number | null;
  }>(
    `SELECT j.id, j.sequence_id AS "sequenceId", j.position, j.kind, j.number, j.dilution, j.run_at AS "runAt", j.level_id AS "levelId",
        l.calibration_set_id AS "levelSetId", j.check_standard_id AS "checkStandardId", x.experiment_id AS "experimentId",
        x.replicate_id AS "replicateId", x.fraction_id AS "fractionId", x.final_volume_ml AS "finalVolumeMl"
      FROM injections j JOIN imports i ON i.id = j.import_id AND i.state = 'stored'
      LEFT JOIN calibration_levels l ON l.id = j.level_id LEFT JOIN extracts x ON x.id = j.extract_id
      WHERE j.lab_id = $1 AND j.study_id = $2 ORDER BY i.stored_order, j.position`
  );
  return rows.map(({ id, sequenceId, position, number, dilution, runAt, ...row }) => ({
    id,
    sequenceId,
    position,
    number,
    dilution,
    runAt: runAt?.getTime() ?? null,
    subject:
      row.kind === 'extract'
        ? {
            kind: row.kind,
            experimentId: row.experimentId ?? '',
            replicateId: row.replicateId ?? '',
            fractionId: row.fractionId,
            finalVolumeMl: row.finalVolumeMl
          }
        : row.kind === 'level'
          ? { kind: row.kind, calibrationSetId: row.levelSetId ?? '', levelId: row.levelId ?? '' }
          : { kind: row.kind, checkStandardId: row.checkStandardId ?? '' }
  }));
}

/** The place is spread last, into the object that is being made: the other way round takes many times as long. */
function reportedOf<Place extends object>(
  row: CountingMeasurement<{ readonly id: string; readonly number: number; readonly dilution: number }>,
  entryOf: ReadonlyMap<string, string>,
  place: Place
): Reported & Place {
  const entry = (analyteId: string): string => entryOf.get(analyteId) ?? `analyte ${analyteId}`;
  return {
    id: row.id,
    importId: row.importId,
    injectionId: row.injection.id,
    entryId: entry(row.analyteId),
    basis: row.basis,
    state: row.state,
    value: row.reported,
    internalArea: row.internalArea,
    internalEntryId: row.internalAnalyteId === null ? null : entry(row.internalAnalyteId),
    limit: row.limitValue,
    rawText: row.rawText,
    sheet: row.sheet,
    row: row.sheetRow,
    column: row.sheetColumn,
    injection: row.injection.number,
    dilution: row.injection.dilution,
    ...place
  };
}

/** In the order they were stored, so that a fit or a list does not depend on the database's mood. */
function ordered<Row extends { readonly id: string }>(rows: readonly Row[]): Row[] {
  return [...rows].sort((a, b) => a.id.length - b.id.length || (a.id < b.id ? -1 : 1));
}

async function select<Row extends object>(
  client: PoolClient,
  text: string,
  values: unknown[]
): Promise<Row[]> {
  return (await client.query(text, values)).rows as Row[];
}
