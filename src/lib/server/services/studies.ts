import { QueryTypes } from 'sequelize';
import type { Actor } from '../../domain/actor';
import { standardStages } from '../../domain/stages';
import { editableStudyStates, type StudyState } from '../../domain/vocabulary';
import type { StudyChangeForm, StudyForm } from '../../schemas/study';
import type { PanelPaste } from '../../views/panel';
import type { StudyListItem, StudyView } from '../../views/studies';
import { CriteriaSet } from '../db/models/criteria-set';
import { CriteriaSetVersion } from '../db/models/criteria-set-version';
import { Lab } from '../db/models/lab';
import { Study } from '../db/models/study';
import { StudyStage } from '../db/models/study-stage';
import { User } from '../db/models/user';
import { sequelize } from '../db/sequelize';
import { audit, inTransaction } from '../db/transaction';
import { Invalid } from '../errors';
import { changesBetween, listed } from './changes';
import { addLines } from './panels';
import { require } from './permissions';
import { requireUnchanged } from './stale';
import { stagesOf, studyKeys, studyOf } from './study-of';

const dayMs = 24 * 60 * 60 * 1000;

const moverOf: Readonly<Record<StudyState, string | null>> = {
  draft: 'the owner',
  returned: 'the owner',
  'in review': 'a reviewer',
  reviewed: 'a lab manager',
  signed: null
};

type ListRow = Omit<StudyListItem, 'lastEventAt' | 'daysWaiting' | 'waitsFor'> & {
  readonly lastEventAt: Date;
};

/** The lab's studies: open ones first, within these the ones that moved last first. */
export async function listStudies(actor: Actor): Promise<readonly StudyListItem[]> {
  require(actor, 'studies.see');
  const rows = await sequelize.query<ListRow>(
    `SELECT s.code, s.title, s.matrix, s.state, s.revision, u.name AS owner,
        (SELECT count(*)::int FROM panel_entries p WHERE p.study_id = s.id AND p.role = 'target') AS targets,
        (SELECT count(*)::int FROM variants v WHERE v.study_id = s.id) AS variants,
        (SELECT count(*)::int FROM experiments e WHERE e.study_id = s.id) AS experiments,
        (SELECT st.name FROM study_stages st WHERE st.study_id = s.id AND EXISTS (
            SELECT 1 FROM experiments e JOIN extracts x ON x.experiment_id = e.id
              JOIN imports i ON i.id = x.import_id AND i.state = 'stored' WHERE e.stage_id = st.id)
          ORDER BY st.position DESC LIMIT 1) AS "stageReached",
        coalesce((SELECT a.at FROM audit_events a WHERE a.lab_id = s.lab_id AND a.study_id = s.id
          ORDER BY a.seq DESC LIMIT 1), s.updated_at) AS "lastEventAt"
      FROM studies s JOIN users u ON u.id = s.owner_id
      WHERE s.lab_id = $1 ORDER BY s.state = 'signed', "lastEventAt" DESC, s.code`,
    { bind: [actor.labId], type: QueryTypes.SELECT }
  );
  const now = Date.now();
  return rows.map((row) => ({
    ...row,
    lastEventAt: row.lastEventAt.toISOString(),
    daysWaiting:
      row.state === 'signed' ? null : Math.max(0, Math.floor((now - row.lastEventAt.getTime()) / dayMs)),
    waitsFor: row.state === 'draft' || row.state === 'returned' ? row.owner : moverOf[row.state]
  }));
}

async function countsOf(study: Study): Promise<StudyView['counts']> {
  const [counts] = await sequelize.query<StudyView['counts']>(
    `SELECT (SELECT count(*)::int FROM panel_entries WHERE study_id = $1) AS panel,
        (SELECT count(*)::int FROM variants WHERE study_id = $1) AS variants,
        (SELECT count(*)::int FROM experiments WHERE study_id = $1) AS experiments,
        (SELECT count(*)::int FROM calibration_sets WHERE study_id = $1) AS "calibrationSets",
        (SELECT count(*)::int FROM imports WHERE study_id = $1 AND state = 'stored') AS imports`,
    { bind: [study.id], type: QueryTypes.SELECT }
  );
  return counts ?? { panel: 0, variants: 0, experiments: 0, calibrationSets: 0, imports: 0 };
}

/** A study with its criteria, stages and what there is in it. @throws NotFound */
export async function getStudy(actor: Actor, code: string): Promise<StudyView> {
  require(actor, 'studies.see');
  const study = await studyOf(actor, code);
  const owner = await User.findByPk(study.ownerId, { attributes: ['name'] });
  const where = { labId: actor.labId, id: study.criteriaSetVersionId };
  const criteria = await CriteriaSetVersion.findOne({ where, rejectOnEmpty: true });
  const set = await CriteriaSet.findOne({
    where: { labId: actor.labId, id: study.criteriaSetId },
    rejectOnEmpty: true
  });
  const stages = await stagesOf(study);
  return {
    id: study.id,
    code: study.code,
    title: study.title,
    matrix: study.matrix,
    objective: study.objective,
    sampleVolumeMl: study.sampleVolumeMl,
    state: study.state,
    isOpen: editableStudyStates.includes(study.state),
    revision: study.revision,
    version: study.version,
    owner: owner?.name ?? '',
    criteria: {
      setId: study.criteriaSetId,
      versionId: criteria.id,
      name: criteria.name,
      version: criteria.version,
      hasNewer: set.currentVersionId !== criteria.id,
      rules: criteria.rules
    },
    stages: stages.map(({ id, key, name, position, kind }) => ({ id, key, name, position, kind })),
    counts: await countsOf(study)
  };
}

/** The current version of a criteria set of the lab. @throws Invalid */
async function currentCriteria(actor: Actor, setId: string) {
  const set = await CriteriaSet.findOne({ where: { labId: actor.labId, id: setId } });
  if (!set?.currentVersionId) throw Invalid.at('criteriaSetId', "Choose one of the lab's criteria sets.");
  return { criteriaSetId: set.id, criteriaSetVersionId: set.currentVersionId };
}

/** The next free code: S-1, S-2 … The lab's row is locked, so two studies cannot get the same. */
async function freeCode(actor: Actor, wanted: string): Promise<string> {
  const studies = await Study.findAll({ where: { labId: actor.labId }, attributes: ['code'] });
  const taken = new Set(studies.map(({ code }) => code.toLowerCase()));
  if (wanted !== '') {
    if (taken.has(wanted.toLowerCase())) throw Invalid.at('code', `There is already a study ${wanted}.`);
    return wanted;
  }
  let number = studies.length + 1;
  while (taken.has(`s-${number}`)) number += 1;
  return `S-${number}`;
}

/**
 * Creates a study with the four stages and, where lines were pasted, its first panel entries.
 * @returns its code, and what became of the pasted lines
 */
export async function createStudy(
  actor: Actor,
  form: StudyForm
): Promise<{ readonly code: string; readonly panel: PanelPaste }> {
  require(actor, 'studies.edit');
  return inTransaction(actor, {}, async (transaction) => {
    await Lab.findByPk(actor.labId, { lock: transaction.LOCK.NO_KEY_UPDATE });
    const { title, matrix, objective, sampleVolumeMl } = form;
    const study = await Study.create({
      labId: actor.labId,
      code: await freeCode(actor, form.code),
      title,
      matrix,
      objective,
      sampleVolumeMl,
      ...(await currentCriteria(actor, form.criteriaSetId)),
      ownerId: actor.userId
    });
    for (const [index, { key, name, kind }] of standardStages.entries()) {
      await StudyStage.create({ ...studyKeys(study), key, name, kind, position: index + 1 });
    }
    audit({
      action: 'created',
      entity: 'study',
      entityId: study.id,
      studyId: study.id,
      sentence: `Created the study ${study.code}, ${title}.`,
      after: {
        code: study.code,
        title,
        matrix,
        objective,
        sampleVolumeMl,
        criteriaSetVersionId: study.criteriaSetVersionId
      }
    });
    const none = { added: [], already: [], notFound: [] };
    const panel =
      form.panelText === '' ? none : await addLines(study, { text: form.panelText, role: form.panelRole });
    return { code: study.code, panel };
  });
}

/**
 * Changes what a study aims at. Saving takes over the current version of the criteria set that is chosen.
 * @throws NotFound, Invalid, Conflict when it was changed meanwhile or is not open
 */
export async function updateStudy(actor: Actor, code: string, form: StudyChangeForm): Promise<void> {
  require(actor, 'studies.edit');
  const seen = await studyOf(actor, code);
  await inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    requireUnchanged('this study', form.version, study.version, await getStudy(actor, code));
    const { title, matrix, objective, sampleVolumeMl } = form;
    const values = {
      title,
      matrix,
      objective,
      sampleVolumeMl,
      ...(await currentCriteria(actor, form.criteriaSetId))
    };
    const { before, after, names } = changesBetween(study.get({ plain: true }), values);
    if (names.length === 0) return;
    await study.update({ ...values, version: study.version + 1 });
    const words: Readonly<Record<string, string>> = {
      sampleVolumeMl: 'sample volume',
      criteriaSetId: 'criteria set',
      criteriaSetVersionId: 'version of the criteria'
    };
    audit({
      action: 'changed',
      entity: 'study',
      entityId: study.id,
      studyId: study.id,
      sentence: `Changed the study's ${listed(names.map((name) => words[name] ?? name))}.`,
      before,
      after
    });
  });
}
