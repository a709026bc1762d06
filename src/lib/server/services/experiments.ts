import { Op, QueryTypes } from 'sequelize';
import type { Actor } from '../../domain/actor';
import type { ExperimentChangeForm, ExperimentForm } from '../../schemas/experiment';
import type { ExperimentListItem, ExperimentView } from '../../views/experiments';
import { CalibrationSet } from '../db/models/calibration-set';
import { Experiment } from '../db/models/experiment';
import { Membership } from '../db/models/membership';
import { Replicate } from '../db/models/replicate';
import type { Study } from '../db/models/study';
import { User } from '../db/models/user';
import { sequelize } from '../db/sequelize';
import { audit, inTransaction } from '../db/transaction';
import { Invalid, type Problem } from '../errors';
import { changesBetween, counted, listed } from './changes';
import {
  checkedAdditions,
  checkFractions,
  spelledSpikes,
  withSpikedStandards,
  writeAmounts,
  writeFractions
} from './experiment-parts';
import { experimentRow, experimentView } from './experiment-views';
import { panelOf } from './panel-entries';
import { require } from './permissions';
import { plannedReplicates } from './replicate-labels';
import { requireUnchanged } from './stale';
import { stagesOf, studyKeys, studyOf } from './study-of';
import { chooseStageEvidence } from './variants';

/** The experiments of a study by their number. @throws NotFound */
export async function getExperiments(actor: Actor, code: string): Promise<readonly ExperimentListItem[]> {
  require(actor, 'studies.see');
  const study = await studyOf(actor, code);
  return sequelize.query<ExperimentListItem>(
    `SELECT e.number, e.title, s.key AS "stageKey", s.name AS "stageName", e.medium, e.matrix, e.level_label AS "levelLabel",
        e.performed_on AS "performedOn",
        (SELECT count(*)::int FROM replicates r WHERE r.experiment_id = e.id AND r.kind = 'spiked') AS spiked,
        (SELECT count(*)::int FROM replicates r WHERE r.experiment_id = e.id AND r.kind <> 'spiked') AS others,
        (SELECT count(*)::int FROM fractions f WHERE f.experiment_id = e.id) AS fractions,
        (SELECT count(DISTINCT x.replicate_id)::int FROM extracts x JOIN imports i ON i.id = x.import_id AND i.state = 'stored'
          WHERE x.experiment_id = e.id) AS measured,
        (SELECT count(*)::int FROM exclusions x WHERE x.experiment_id = e.id AND x.lifted_at IS NULL) AS exclusions,
        ARRAY(SELECT DISTINCT v.code FROM stage_evidence g JOIN variants v ON v.id = g.variant_id
          WHERE g.experiment_id = e.id ORDER BY v.code) AS variants
      FROM experiments e JOIN study_stages s ON s.id = e.stage_id
      WHERE e.lab_id = $1 AND e.study_id = $2 ORDER BY e.number`,
    { bind: [study.labId, study.id], type: QueryTypes.SELECT }
  );
}

/** One experiment with its preparations, fractions, spikes and what is set aside. @throws NotFound */
export async function getExperiment(actor: Actor, code: string, number: number): Promise<ExperimentView> {
  require(actor, 'studies.see');
  const study = await studyOf(actor, code);
  return experimentView(study, await experimentRow(study, number));
}

/** What an experiment points to has to be of this lab and study. */
async function checkReferences(
  actor: Actor,
  study: Study,
  form: Pick<ExperimentForm, 'calibrationSetId' | 'analystId'>,
  problems: Problem[]
): Promise<void> {
  if (form.calibrationSetId) {
    const set = await CalibrationSet.findOne({ where: { ...studyKeys(study), id: form.calibrationSetId } });
    if (!set) problems.push({ path: 'calibrationSetId', message: 'Choose a calibration set of this study.' });
  }
  if (form.analystId) {
    const member = await Membership.findOne({ where: { labId: actor.labId, userId: form.analystId } });
    if (!member) problems.push({ path: 'analystId', message: 'Choose a member of this lab.' });
  }
}

function valuesOf(form: ExperimentForm | ExperimentChangeForm) {
  return {
    title: form.title,
    medium: form.medium,
    matrix: form.matrix || null,
    levelLabel: form.levelLabel,
    subtract: form.subtract,
    performedOn: form.performedOn,
    analystId: form.analystId,
    calibrationSetId: form.calibrationSetId,
    sampleVolumeMl: form.sampleVolumeMl,
    finalVolumeMl: form.finalVolumeMl
  };
}

/** What an experiment needs before it can be subtracted from. */
function checkSubtraction(form: ExperimentForm, problems: Problem[]): void {
  const has = (kind: string): boolean =>
    form.replicates.some((group) => group.kind === kind && group.count > 0);
  if (form.subtract === 'native' && !has('unspiked')) {
    problems.push({
      path: 'subtract',
      message: 'The native amount is measured in unspiked portions: plan at least one.'
    });
  }
  if (form.subtract === 'method blank' && !has('method blank')) {
    problems.push({ path: 'subtract', message: 'A method blank is subtracted, but none is planned.' });
  }
}

/**
 * Plans an experiment: where it is spiked, with how much of what, which fractions are measured and how many preparations of each
 * kind there are.
 * @returns its number within the study
 * @throws NotFound, Invalid with every problem, Conflict when the study is not open
 */
export async function createExperiment(actor: Actor, code: string, form: ExperimentForm): Promise<number> {
  require(actor, 'studies.edit');
  const seen = await studyOf(actor, code);
  return inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    const stages = await stagesOf(study);
    const panel = await panelOf(study);
    const problems: Problem[] = [];
    const stage = stages.find(({ key }) => key === form.stageKey);
    if (!stage) throw Invalid.at('stageKey', 'Choose one of the stages of this study.');
    await checkReferences(actor, study, form, problems);
    checkSubtraction(form, problems);
    checkFractions(form.fractions, stage, stages, problems);
    const spikes = spelledSpikes(form.spikes, panel, problems);
    const additions = withSpikedStandards(checkedAdditions(form.additions, panel, problems), spikes, panel);
    const last = await Experiment.max<number | null, Experiment>('number', { where: studyKeys(study) });
    const number = (last ?? 0) + 1;
    const replicates = plannedReplicates(number, form.replicates, [], problems);
    if (problems.length > 0) throw new Invalid(problems);

    const values = valuesOf(form);
    const experiment = await Experiment.create({ ...studyKeys(study), number, stageId: stage.id, ...values });
    const keys = { ...studyKeys(study), experimentId: experiment.id };
    await writeFractions(keys, form.fractions, new Set());
    await writeAmounts(keys, spikes, additions);
    for (const replicate of replicates) {
      const sampleVolumeMl = replicate.sampleVolumeMl ?? form.sampleVolumeMl;
      await Replicate.create({ ...keys, ...replicate, sampleVolumeMl });
    }
    audit({
      action: 'created',
      entity: 'experiment',
      entityId: experiment.id,
      studyId: study.id,
      sentence: `Planned experiment ${number}, ${form.title}: ${stage.name.toLowerCase()}, ${counted(replicates.length, 'preparation')}, ${counted(form.fractions.length, 'fraction')}.`,
      after: await experimentView(study, experiment)
    });
    if (form.variantCode !== '') {
      await chooseStageEvidence(actor, code, form.variantCode, {
        stageKey: stage.key,
        experimentNumber: number,
        matrix: '',
        levelLabel: ''
      });
    }
    return number;
  });
}

/** What the history says of a change; null where nothing changed. */
function describeChange(before: ExperimentView, after: ExperimentView) {
  const cut = ({
    version: _version,
    replicates: _replicates,
    exclusions: _exclusions,
    ...rest
  }: ExperimentView) => rest;
  const changes = changesBetween(cut(before), cut(after));
  const words: Readonly<Record<string, string>> = {
    levelLabel: 'spike level',
    performedOn: 'day',
    calibrationSet: 'calibration set',
    sampleVolumeMl: 'sample volume',
    finalVolumeMl: 'final volume',
    additions: 'internal standards',
    subtract: 'subtraction'
  };
  return changes.names.length === 0
    ? null
    : { ...changes, sentence: listed(changes.names.map((name) => words[name] ?? name)) };
}

/** Parts of an experiment that stored figures rest on: to change these, a reason is asked for. */
const bearing = ['spikes', 'additions', 'fractions', 'subtract', 'calibrationSet', 'medium'];

/**
 * Changes an experiment's settings, spikes, internal standards and fractions; its stage and its preparations stay.
 * @throws NotFound, Invalid, Conflict when it was changed meanwhile, or a fraction with data would go
 */
export async function updateExperiment(
  actor: Actor,
  code: string,
  number: number,
  form: ExperimentChangeForm
): Promise<void> {
  require(actor, 'studies.edit');
  const seen = await studyOf(actor, code);
  await inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    const experiment = await experimentRow(study, number);
    const before = await experimentView(study, experiment);
    requireUnchanged(`experiment ${number}`, form.version, experiment.version, before);
    const stages = await stagesOf(study);
    const panel = await panelOf(study);
    const problems: Problem[] = [];
    await checkReferences(actor, study, form, problems);
    checkFractions(form.fractions, before.stage, stages, problems);
    const spikes = spelledSpikes(form.spikes, panel, problems);
    const additions = withSpikedStandards(checkedAdditions(form.additions, panel, problems), spikes, panel);
    if (problems.length > 0) throw new Invalid(problems);

    const keys = { ...studyKeys(study), experimentId: experiment.id };
    const measured = new Set(before.fractions.filter(({ hasData }) => hasData).map(({ id }) => id));
    await writeFractions(keys, form.fractions, measured);
    await writeAmounts(keys, spikes, additions);
    await experiment.update({ ...valuesOf(form), version: experiment.version + 1 });
    const change = describeChange(before, await experimentView(study, experiment));
    if (!change) return;
    if (before.hasData && form.reason === '' && change.names.some((name) => bearing.includes(name))) {
      throw Invalid.at(
        'reason',
        `Stored figures rest on this experiment's ${change.sentence}. Say why it changes: the reason stays on record.`
      );
    }
    audit({
      action: 'changed',
      entity: 'experiment',
      entityId: experiment.id,
      studyId: study.id,
      sentence: `Changed experiment ${number}: ${change.sentence}.`,
      before: change.before,
      after: change.after,
      reason: form.reason || null
    });
  });
}

/** The members of the lab who can have done an experiment, by name. */
export async function listAnalysts(
  actor: Actor
): Promise<readonly { readonly id: string; readonly name: string }[]> {
  require(actor, 'studies.see');
  const memberships = await Membership.findAll({ where: { labId: actor.labId }, attributes: ['userId'] });
  const users = await User.findAll({
    where: { id: { [Op.in]: memberships.map(({ userId }) => userId) } },
    attributes: ['id', 'name'],
    order: [['name', 'ASC']]
  });
  return users.map(({ id, name }) => ({ id, name }));
}
