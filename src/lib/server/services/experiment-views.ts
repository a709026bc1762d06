import { QueryTypes } from 'sequelize';
import type { ExperimentView, FractionView, ReplicateView } from '../../views/experiments';
import { CalibrationSet } from '../db/models/calibration-set';
import { Experiment } from '../db/models/experiment';
import { Fraction } from '../db/models/fraction';
import { Replicate } from '../db/models/replicate';
import type { Study } from '../db/models/study';
import { User } from '../db/models/user';
import { sequelize } from '../db/sequelize';
import { NotFound } from '../errors';
import { exclusionsOf } from './exclusions';
import { stagesOf, studyKeys } from './study-of';

/** The row of an experiment of this number. @throws NotFound */
export async function experimentRow(study: Study, number: number): Promise<Experiment> {
  const isNumber = Number.isInteger(number) && number > 0 && number < 2 ** 31;
  const experiment = isNumber ? await Experiment.findOne({ where: { ...studyKeys(study), number } }) : null;
  if (!experiment) throw new NotFound();
  return experiment;
}

async function select<Row extends object>(sql: string, experiment: Experiment): Promise<readonly Row[]> {
  return sequelize.query<Row>(sql, { bind: [experiment.labId, experiment.id], type: QueryTypes.SELECT });
}

/** What stored imports speak of, whether or not a later one covers it. */
async function measuredPlaces(experiment: Experiment) {
  return select<{ replicateId: string; fractionId: string | null }>(
    `SELECT DISTINCT x.replicate_id AS "replicateId", x.fraction_id AS "fractionId"
      FROM extracts x JOIN imports i ON i.id = x.import_id AND i.state = 'stored'
      WHERE x.lab_id = $1 AND x.experiment_id = $2`,
    experiment
  );
}

const kindOrder = ['spiked', 'unspiked', 'method blank', 'post-extraction spike', 'solvent standard'];

function replicateView(
  replicate: Replicate,
  measured: readonly { replicateId: string; fractionId: string | null }[],
  spikes: readonly (ReplicateView['spikes'][number] & { replicateId: string })[]
): ReplicateView {
  const moment = (date: Date | null): string | null => date?.toISOString() ?? null;
  const { id, number, label, kind, batch, sampleVolumeMl, sampleMassG, observations } = replicate;
  return {
    id,
    number,
    label,
    kind,
    batch,
    sampleVolumeMl,
    sampleMassG,
    collectedAt: moment(replicate.collectedAt),
    extractedAt: moment(replicate.extractedAt),
    analysedAt: moment(replicate.analysedAt),
    observations,
    measuredFractions: measured
      .filter(({ replicateId }) => replicateId === id)
      .map(({ fractionId }) => fractionId ?? 'whole'),
    spikes: spikes
      .filter(({ replicateId }) => replicateId === id)
      .map(({ replicateId: _, ...spike }) => spike),
    seen: replicate.updatedAt.toISOString()
  };
}

/** One experiment with its preparations, fractions, spikes and what is set aside. */
export async function experimentView(study: Study, experiment: Experiment): Promise<ExperimentView> {
  const within = { ...studyKeys(study), experimentId: experiment.id };
  const fractions = await Fraction.findAll({ where: within, order: [['position', 'ASC']] });
  const replicates = await Replicate.findAll({ where: within, order: [['number', 'ASC']] });
  const measured = await measuredPlaces(experiment);
  const own = await select<ReplicateView['spikes'][number] & { replicateId: string }>(
    `SELECT s.replicate_id AS "replicateId", s.panel_entry_id AS "panelEntryId", v.name, s.amount_ng AS "amountNg"
      FROM replicate_spikes s JOIN replicates r ON r.id = s.replicate_id JOIN panel_entries p ON p.id = s.panel_entry_id
        JOIN analyte_versions v ON v.id = p.analyte_version_id
      WHERE s.lab_id = $1 AND r.experiment_id = $2 ORDER BY p.position`,
    experiment
  );
  const spikes = await select<ExperimentView['spikes'][number]>(
    `SELECT s.replicate_kind AS kind, s.panel_entry_id AS "panelEntryId", v.name, p.role, s.amount_ng AS "amountNg"
      FROM experiment_spikes s JOIN panel_entries p ON p.id = s.panel_entry_id
        JOIN analyte_versions v ON v.id = p.analyte_version_id
      WHERE s.lab_id = $1 AND s.experiment_id = $2 ORDER BY s.replicate_kind, p.position`,
    experiment
  );
  const additions = await select<ExperimentView['additions'][number]>(
    `SELECT a.panel_entry_id AS "panelEntryId", v.name, a.point, a.amount_ng AS "amountNg",
        a.concentration_ng_per_ml AS "concentrationNgPerMl"
      FROM internal_standard_additions a JOIN panel_entries p ON p.id = a.panel_entry_id
        JOIN analyte_versions v ON v.id = p.analyte_version_id
      WHERE a.lab_id = $1 AND a.experiment_id = $2 ORDER BY p.position`,
    experiment
  );
  const variants = await select<{ code: string }>(
    `SELECT DISTINCT v.code FROM stage_evidence g JOIN variants v ON v.id = g.variant_id
      WHERE g.lab_id = $1 AND g.experiment_id = $2 ORDER BY v.code`,
    experiment
  );
  const stage = (await stagesOf(study)).find(({ id }) => id === experiment.stageId);
  const set = experiment.calibrationSetId ? await CalibrationSet.findByPk(experiment.calibrationSetId) : null;
  const analyst = experiment.analystId
    ? await User.findByPk(experiment.analystId, { attributes: ['id', 'name'] })
    : null;
  const {
    id,
    number,
    title,
    medium,
    matrix,
    levelLabel,
    subtract,
    performedOn,
    sampleVolumeMl,
    finalVolumeMl,
    version
  } = experiment;
  return {
    id,
    number,
    title,
    stage: {
      key: stage?.key ?? '',
      name: stage?.name ?? '',
      kind: stage?.kind ?? 'loss',
      position: stage?.position ?? 0
    },
    medium,
    matrix,
    levelLabel,
    subtract,
    performedOn,
    analyst: analyst ? { id: analyst.id, name: analyst.name } : null,
    calibrationSet: set ? { id: set.id, name: set.name } : null,
    sampleVolumeMl,
    finalVolumeMl,
    version,
    fractions: fractions.map((fraction): FractionView => {
      const { id: fractionId, position, name, kind, countsAs, passedStages } = fraction;
      const hasData = measured.some((place) => place.fractionId === fractionId);
      return { id: fractionId, position, name, kind, countsAs, passedStages, hasData };
    }),
    replicates: replicates
      .map((replicate) => replicateView(replicate, measured, own))
      .sort((a, b) => kindOrder.indexOf(a.kind) - kindOrder.indexOf(b.kind) || a.number - b.number),
    spikes,
    additions,
    exclusions: await exclusionsOf(study, experiment.id),
    variants: variants.map((row) => row.code),
    hasData: measured.length > 0
  };
}
