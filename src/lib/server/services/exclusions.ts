import { QueryTypes, UniqueConstraintError } from 'sequelize';
import type { Actor } from '../../domain/actor';
import type { ExclusionForm, LiftForm } from '../../schemas/exclusion';
import type { ExclusionView } from '../../views/experiments';
import { Exclusion } from '../db/models/exclusion';
import { Experiment } from '../db/models/experiment';
import { Fraction } from '../db/models/fraction';
import { PanelEntry } from '../db/models/panel-entry';
import { Replicate } from '../db/models/replicate';
import type { Study } from '../db/models/study';
import { sequelize } from '../db/sequelize';
import { audit, inTransaction } from '../db/transaction';
import { Conflict, Invalid, NotFound } from '../errors';
import { knownId } from './known-id';
import { require } from './permissions';
import { studyKeys, studyOf } from './study-of';

type Row = Omit<ExclusionView, 'at' | 'lifted'> & {
  readonly at: Date;
  readonly liftedBy: string | null;
  readonly liftedAt: Date | null;
  readonly liftReason: string | null;
};

function viewOf({ liftedBy, liftedAt, liftReason, at, ...row }: Row): ExclusionView {
  const lifted =
    liftedAt === null ? null : { by: liftedBy ?? '', at: liftedAt.toISOString(), reason: liftReason ?? '' };
  return { ...row, at: at.toISOString(), lifted };
}

/** What is and was set aside in an experiment (or in the whole study), newest first. */
export async function exclusionsOf(
  study: Study,
  experimentId: string | null
): Promise<readonly ExclusionView[]> {
  const rows = await sequelize.query<Row>(
    `SELECT x.id, x.replicate_id AS "replicateId", r.label AS "replicateLabel", x.fraction_id AS "fractionId",
        f.name AS "fractionName", x.analyte_id AS "analyteId", v.name AS "analyteName", x.cause, u.name AS by,
        x.excluded_at AS at, l.name AS "liftedBy", x.lifted_at AS "liftedAt", x.lift_reason AS "liftReason"
      FROM exclusions x JOIN replicates r ON r.id = x.replicate_id JOIN users u ON u.id = x.excluded_by
        LEFT JOIN fractions f ON f.id = x.fraction_id LEFT JOIN users l ON l.id = x.lifted_by
        LEFT JOIN panel_entries p ON p.study_id = x.study_id AND p.analyte_id = x.analyte_id
        LEFT JOIN analyte_versions v ON v.id = p.analyte_version_id
      WHERE x.lab_id = $1 AND x.study_id = $2 AND ($3::uuid IS NULL OR x.experiment_id = $3)
      ORDER BY x.excluded_at DESC, x.id DESC`,
    { bind: [study.labId, study.id, experimentId], type: QueryTypes.SELECT }
  );
  return rows.map(viewOf);
}

/** What is and was set aside in a study, newest first. @throws NotFound */
export async function listExclusions(actor: Actor, code: string): Promise<readonly ExclusionView[]> {
  require(actor, 'studies.see');
  return exclusionsOf(await studyOf(actor, code), null);
}

/** The causes given last in the lab, each once, for a first draft of the next. */
export async function recentCauses(actor: Actor): Promise<readonly string[]> {
  require(actor, 'studies.see');
  const rows = await sequelize.query<{ cause: string }>(
    `SELECT cause FROM exclusions WHERE lab_id = $1 GROUP BY cause ORDER BY max(excluded_at) DESC LIMIT 5`,
    { bind: [actor.labId], type: QueryTypes.SELECT }
  );
  return rows.map(({ cause }) => cause);
}

async function experimentOf(study: Study, number: number): Promise<Experiment> {
  const experiment = await Experiment.findOne({ where: { ...studyKeys(study), number } });
  if (!experiment) throw new NotFound();
  return experiment;
}

/** "S4", "the first elution of S4", "Carbon in the first elution of S4". */
function placeText(replicate: string, fraction: string | null, analyte: string | null): string {
  const where = fraction === null ? replicate : `${fraction} of ${replicate}`;
  return analyte === null ? where : `${analyte} in ${where}`;
}

async function namesOf(study: Study, experiment: Experiment, form: ExclusionForm) {
  const within = { ...studyKeys(study), experimentId: experiment.id };
  const replicate = await Replicate.findOne({ where: { ...within, id: form.replicateId } });
  if (!replicate) throw new NotFound();
  const fraction = form.fractionId
    ? await Fraction.findOne({ where: { ...within, id: form.fractionId } })
    : null;
  if (form.fractionId && !fraction) throw Invalid.at('fractionId', 'This experiment has no such fraction.');
  const entry = form.analyteId
    ? await PanelEntry.findOne({ where: { ...studyKeys(study), analyteId: form.analyteId } })
    : null;
  if (form.analyteId && !entry) throw Invalid.at('analyteId', 'This analyte is not on the panel.');
  const [named] = form.analyteId
    ? await sequelize.query<{ name: string }>(
        'SELECT v.name FROM panel_entries p JOIN analyte_versions v ON v.id = p.analyte_version_id WHERE p.id = $1',
        { bind: [entry?.id], type: QueryTypes.SELECT }
      )
    : [];
  return placeText(replicate.label, fraction?.name ?? null, named?.name ?? null);
}

/**
 * Sets a preparation, a fraction of it, or one analyte of either aside. Nothing is deleted: its figures are read without it until it is
 * lifted.
 * @returns the id of the exclusion @throws NotFound, Invalid, Conflict when the same place is set aside already
 */
export async function exclude(
  actor: Actor,
  code: string,
  number: number,
  form: ExclusionForm
): Promise<string> {
  require(actor, 'data.exclude');
  const study = await studyOf(actor, code);
  try {
    return await inTransaction(actor, { study: study.id }, async () => {
      const experiment = await experimentOf(study, number);
      const place = await namesOf(study, experiment, form);
      const { replicateId, fractionId, analyteId, cause } = form;
      const exclusion = await Exclusion.create({
        ...studyKeys(study),
        experimentId: experiment.id,
        replicateId,
        fractionId,
        analyteId,
        cause,
        excludedBy: actor.userId
      });
      audit({
        action: 'excluded',
        entity: 'exclusion',
        entityId: exclusion.id,
        studyId: study.id,
        sentence: `Set ${place} aside in experiment ${number}.`,
        after: { experiment: number, replicateId, fractionId, analyteId },
        reason: cause
      });
      return exclusion.id;
    });
  } catch (error) {
    if (!(error instanceof UniqueConstraintError)) throw error;
    const experiment = await experimentOf(study, number);
    const standing = (await exclusionsOf(study, experiment.id)).find(
      (other) =>
        other.lifted === null &&
        other.replicateId === form.replicateId &&
        other.fractionId === form.fractionId &&
        other.analyteId === form.analyteId
    );
    const who = standing ? ` by ${standing.by}: ${standing.cause}` : '';
    throw new Conflict(`This is set aside already${who}. Nothing was changed.`, standing ?? null);
  }
}

/** Lets what was set aside count again; the exclusion and its cause stay on record. @throws Conflict when it was lifted already */
export async function lift(actor: Actor, code: string, form: LiftForm): Promise<void> {
  require(actor, 'data.exclude');
  const study = await studyOf(actor, code);
  await inTransaction(actor, { study: study.id }, async (transaction) => {
    const exclusion = await Exclusion.findOne({
      where: { ...studyKeys(study), id: knownId(form.exclusionId) },
      lock: transaction.LOCK.UPDATE
    });
    if (!exclusion) throw new NotFound();
    const view = (await exclusionsOf(study, exclusion.experimentId)).find(({ id }) => id === exclusion.id);
    if (exclusion.liftedAt !== null) {
      throw new Conflict(
        `${view?.lifted?.by ?? 'Somebody'} has lifted this exclusion already.`,
        view ?? null
      );
    }
    await exclusion.update({ liftedBy: actor.userId, liftedAt: new Date(), liftReason: form.reason });
    const place = placeText(
      view?.replicateLabel ?? '',
      view?.fractionName ?? null,
      view?.analyteName ?? null
    );
    audit({
      action: 'lifted',
      entity: 'exclusion',
      entityId: exclusion.id,
      studyId: study.id,
      sentence: `${place} counts again.`,
      before: { cause: exclusion.cause },
      reason: form.reason
    });
  });
}
