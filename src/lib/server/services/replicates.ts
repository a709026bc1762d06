import { UniqueConstraintError } from 'sequelize';
import type { Actor } from '../../domain/actor';
import { nameKey } from '../../domain/name-key';
import type {
  ObservationForm,
  ReplicateChangeForm,
  ReplicatesForm,
  ReplicateSpikeForm
} from '../../schemas/experiment';
import type { ReplicateView } from '../../views/experiments';
import { Exclusion } from '../db/models/exclusion';
import { Extract } from '../db/models/extract';
import { Replicate } from '../db/models/replicate';
import { ReplicateSpike } from '../db/models/replicate-spike';
import { audit, inTransaction } from '../db/transaction';
import { Conflict, Invalid, NotFound, type Problem } from '../errors';
import { changesBetween, counted, listed } from './changes';
import { experimentRow, experimentView } from './experiment-views';
import { panelOf } from './panel-entries';
import { require } from './permissions';
import { plannedReplicates } from './replicate-labels';
import { requireUnchanged } from './stale';
import { studyKeys, studyOf } from './study-of';

/** Adds preparations of a kind to an experiment, numbered and labelled on. @returns their labels */
export async function addReplicates(
  actor: Actor,
  code: string,
  number: number,
  form: ReplicatesForm
): Promise<readonly string[]> {
  require(actor, 'studies.edit');
  const seen = await studyOf(actor, code);
  return inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    const experiment = await experimentRow(study, number);
    const keys = { ...studyKeys(study), experimentId: experiment.id };
    const problems: Problem[] = [];
    const planned = plannedReplicates(number, [form], await Replicate.findAll({ where: keys }), problems);
    if (form.count === 0) problems.push({ path: 'count', message: 'Say how many.' });
    if (problems.length > 0) {
      throw new Invalid(
        problems.map((problem) => ({ ...problem, path: problem.path.replace(/^replicates\.0\./, '') }))
      );
    }
    for (const replicate of planned) {
      const sampleVolumeMl = replicate.sampleVolumeMl ?? experiment.sampleVolumeMl;
      await Replicate.create({ ...keys, ...replicate, sampleVolumeMl });
    }
    const labels = planned.map(({ label }) => label);
    audit({
      action: 'added',
      entity: 'experiment',
      entityId: experiment.id,
      studyId: study.id,
      sentence: `Added ${counted(labels.length, `${form.kind} preparation`)} to experiment ${number}: ${listed(labels)}.`,
      after: planned
    });
    return labels;
  });
}

/** The preparation, its experiment and study, held for a change against what the person saw. */
async function changing(
  actor: Actor,
  code: string,
  number: number,
  replicateId: string,
  seen: string | null
) {
  const study = await studyOf(actor, code, { locked: true });
  const experiment = await experimentRow(study, number);
  const where = { ...studyKeys(study), experimentId: experiment.id, id: replicateId };
  const replicate = await Replicate.findOne({ where });
  if (!replicate) throw new NotFound();
  if (seen !== null && seen !== replicate.updatedAt.toISOString()) {
    const { replicates } = await experimentView(study, experiment);
    const current: ReplicateView | null = replicates.find(({ id }) => id === replicateId) ?? null;
    requireUnchanged(replicate.label, seen, replicate.updatedAt.toISOString(), current);
  }
  return { study, experiment, replicate };
}

const date = (text: string | null): Date | null =>
  text === null ? null : new Date(/Z|[+-]\d\d:\d\d$/.test(text) ? text : `${text}Z`);

/** Changes a preparation's label, batch, sample portion and times. */
export async function updateReplicate(
  actor: Actor,
  code: string,
  number: number,
  form: ReplicateChangeForm
): Promise<void> {
  require(actor, 'data.enter');
  const seen = await studyOf(actor, code);
  await inTransaction(actor, { study: seen.id }, async () => {
    const { study, experiment, replicate } = await changing(actor, code, number, form.replicateId, form.seen);
    const others = await Replicate.findAll({ where: { ...studyKeys(study), experimentId: experiment.id } });
    if (others.some((other) => other.id !== replicate.id && nameKey(other.label) === nameKey(form.label))) {
      throw Invalid.at('label', `Another preparation of this experiment is called ${form.label}.`);
    }
    const values = {
      label: form.label,
      batch: form.batch || null,
      sampleVolumeMl: form.sampleVolumeMl,
      sampleMassG: form.sampleMassG,
      collectedAt: date(form.collectedAt),
      extractedAt: date(form.extractedAt),
      analysedAt: date(form.analysedAt)
    };
    const { label } = replicate;
    const { before, after, names } = changesBetween(replicate.get({ plain: true }), values);
    if (names.length === 0) return;
    try {
      await replicate.update(values);
    } catch (error) {
      if (!(error instanceof UniqueConstraintError)) throw error;
      throw Invalid.at('label', `Another preparation of this experiment is called ${form.label}.`);
    }
    audit({
      action: 'changed',
      entity: 'preparation',
      entityId: replicate.id,
      studyId: study.id,
      sentence: `Changed ${label} of experiment ${number}: ${listed(names.map((name) => wordOf[name] ?? name))}.`,
      before,
      after
    });
  });
}

const wordOf: Readonly<Record<string, string>> = {
  sampleVolumeMl: 'sample volume',
  sampleMassG: 'sample mass',
  collectedAt: 'time of collection',
  extractedAt: 'time of extraction',
  analysedAt: 'time of analysis'
};

/** Keeps what was seen at the bench: foam, a slow cartridge, a colour. */
export async function recordObservation(
  actor: Actor,
  code: string,
  number: number,
  form: ObservationForm
): Promise<void> {
  require(actor, 'data.enter');
  const seen = await studyOf(actor, code);
  await inTransaction(actor, { study: seen.id }, async () => {
    const { study, replicate } = await changing(actor, code, number, form.replicateId, form.seen);
    const before = replicate.observations;
    if (before === form.observations) return;
    await replicate.update({ observations: form.observations });
    audit({
      action: 'changed',
      entity: 'preparation',
      entityId: replicate.id,
      studyId: study.id,
      sentence: `Noted an observation on ${replicate.label} of experiment ${number}.`,
      before: { observations: before },
      after: { observations: form.observations }
    });
  });
}

/** Records that one preparation received another amount than its experiment says; without an amount the experiment's applies again. */
export async function setReplicateSpike(
  actor: Actor,
  code: string,
  number: number,
  form: ReplicateSpikeForm
): Promise<void> {
  require(actor, 'data.enter');
  const seen = await studyOf(actor, code);
  await inTransaction(actor, { study: seen.id }, async () => {
    const { study, replicate } = await changing(actor, code, number, form.replicateId, null);
    const entry = (await panelOf(study)).find(({ id }) => id === form.panelEntryId);
    if (!entry) throw Invalid.at('panelEntryId', 'This analyte is not on the panel.');
    const refused = replicate.kind === 'unspiked' || replicate.kind === 'method blank';
    if (entry.role === 'injection internal standard' || (refused && entry.role === 'target')) {
      throw Invalid.at(
        'panelEntryId',
        `${replicate.label} receives no ${entry.analyte.name}: it is ${replicate.kind}.`
      );
    }
    const where = { replicateId: replicate.id, panelEntryId: entry.id };
    const own = await ReplicateSpike.findOne({ where });
    await ReplicateSpike.destroy({ where });
    if (form.amountNg !== null) {
      await ReplicateSpike.create({ ...studyKeys(study), ...where, amountNg: form.amountNg });
    }
    audit({
      action: 'changed',
      entity: 'preparation',
      entityId: replicate.id,
      studyId: study.id,
      sentence:
        form.amountNg === null
          ? `${replicate.label} of experiment ${number} received as much ${entry.analyte.name} as the experiment says.`
          : `${replicate.label} of experiment ${number} received ${form.amountNg} ng of ${entry.analyte.name}.`,
      before: { amountNg: own?.amountNg ?? null },
      after: { amountNg: form.amountNg },
      reason: form.reason
    });
  });
}

/** Takes a preparation away that was planned and never measured. @throws Conflict when data or exclusions rest on it */
export async function removeReplicate(
  actor: Actor,
  code: string,
  number: number,
  replicateId: string
): Promise<void> {
  require(actor, 'studies.edit');
  const seen = await studyOf(actor, code);
  await inTransaction(actor, { study: seen.id }, async () => {
    const { study, replicate } = await changing(actor, code, number, replicateId, null);
    const where = { replicateId: replicate.id };
    if ((await Extract.count({ where })) > 0) {
      throw new Conflict(`Data of ${replicate.label} have been stored. Set it aside with a cause instead.`);
    }
    if ((await Exclusion.count({ where })) > 0) {
      throw new Conflict(`${replicate.label} was set aside, and that stays on record.`);
    }
    await replicate.destroy();
    audit({
      action: 'removed',
      entity: 'preparation',
      entityId: replicate.id,
      studyId: study.id,
      sentence: `Took the planned preparation ${replicate.label} out of experiment ${number}.`,
      before: replicate.get({ plain: true })
    });
  });
}
