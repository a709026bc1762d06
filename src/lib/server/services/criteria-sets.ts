import { QueryTypes } from 'sequelize';
import type { Actor } from '../../domain/actor';
import type { CriteriaSetForm, CriteriaVersionForm } from '../../schemas/criteria-set';
import type { CriteriaSetBrief, CriteriaSetView } from '../../views/library';
import { newId } from '../db/entity-id';
import { CriteriaSet } from '../db/models/criteria-set';
import { CriteriaSetVersion } from '../db/models/criteria-set-version';
import { sequelize } from '../db/sequelize';
import { audit, inTransaction } from '../db/transaction';
import { NotFound } from '../errors';
import { counted } from './changes';
import { knownId } from './known-id';
import { require } from './permissions';
import { requireUnchanged } from './stale';

type Row = Omit<CriteriaSetBrief, 'createdAt'> & { readonly createdAt: Date };

const columns = `v.criteria_set_id AS id, v.id AS "versionId", v.version, v.name, v.rules, v.created_at AS "createdAt",
  u.name AS "createdBy"`;

const briefOf = (row: Row): CriteriaSetBrief => ({ ...row, createdAt: row.createdAt.toISOString() });

/** The lab's sets of acceptance criteria in their current versions, by name. */
export async function listCriteriaSets(actor: Actor): Promise<readonly CriteriaSetBrief[]> {
  require(actor, 'studies.see');
  const rows = await sequelize.query<Row>(
    `SELECT ${columns} FROM criteria_sets c
        JOIN criteria_set_versions v ON v.lab_id = c.lab_id AND v.id = c.current_version_id
        LEFT JOIN users u ON u.id = v.created_by
      WHERE c.lab_id = $1 AND c.archived_at IS NULL ORDER BY lower(v.name), v.id`,
    { bind: [actor.labId], type: QueryTypes.SELECT }
  );
  return rows.map(briefOf);
}

/** One set with its versions and the studies held against it. @throws NotFound */
export async function getCriteriaSet(actor: Actor, id: string): Promise<CriteriaSetView> {
  require(actor, 'studies.see');
  const bind = [actor.labId, knownId(id)];
  const rows = await sequelize.query<Row>(
    `SELECT ${columns} FROM criteria_set_versions v LEFT JOIN users u ON u.id = v.created_by
      WHERE v.lab_id = $1 AND v.criteria_set_id = $2 ORDER BY v.version DESC`,
    { bind, type: QueryTypes.SELECT }
  );
  const versions = rows.map(briefOf);
  const [current] = versions;
  if (!current) throw new NotFound();
  const studies = await sequelize.query<CriteriaSetView['studies'][number]>(
    `SELECT s.code, s.title, v.version FROM studies s JOIN criteria_set_versions v ON v.id = s.criteria_set_version_id
      WHERE s.lab_id = $1 AND s.criteria_set_id = $2 ORDER BY lower(s.code)`,
    { bind, type: QueryTypes.SELECT }
  );
  return { id, current, versions, studies };
}

/** @returns the id of the new set */
export async function createCriteriaSet(actor: Actor, form: CriteriaSetForm): Promise<string> {
  require(actor, 'library.edit');
  return inTransaction(actor, {}, async () => {
    const id = newId();
    const versionId = newId();
    const { labId, userId } = actor;
    await CriteriaSet.create({ id, labId, currentVersionId: versionId });
    await CriteriaSetVersion.create({
      id: versionId,
      labId,
      criteriaSetId: id,
      version: 1,
      createdBy: userId,
      ...form
    });
    audit({
      action: 'created',
      entity: 'criteria set',
      entityId: id,
      sentence: `Added the criteria set ${form.name} with ${counted(form.rules.length, 'rule')}.`,
      after: form
    });
    return id;
  });
}

/**
 * Adds a version of a set. Studies stay with the version they name until somebody changes that.
 * @returns the version's number @throws NotFound, Conflict when another version was added meanwhile
 */
export async function newCriteriaVersion(
  actor: Actor,
  id: string,
  form: CriteriaVersionForm
): Promise<number> {
  require(actor, 'library.edit');
  return inTransaction(actor, {}, async (transaction) => {
    const set = await CriteriaSet.findOne({
      where: { labId: actor.labId, id: knownId(id) },
      lock: transaction.LOCK.NO_KEY_UPDATE
    });
    const current = await CriteriaSetVersion.findOne({
      where: { labId: actor.labId, criteriaSetId: id },
      order: [['version', 'DESC']]
    });
    if (!set || !current) throw new NotFound();
    requireUnchanged(`the set ${current.name}`, form.seenVersion, current.version, {
      name: current.name,
      rules: current.rules,
      version: current.version
    });
    const version = current.version + 1;
    const versionId = newId();
    const { name, rules } = form;
    await CriteriaSetVersion.create({
      id: versionId,
      labId: actor.labId,
      criteriaSetId: id,
      version,
      createdBy: actor.userId,
      name,
      rules
    });
    await set.update({ currentVersionId: versionId });
    audit({
      action: 'changed',
      entity: 'criteria set',
      entityId: id,
      sentence: `Version ${version} of the criteria set ${name}, with ${counted(rules.length, 'rule')}.`,
      before: { name: current.name, rules: current.rules },
      after: { name, rules }
    });
    return version;
  });
}
