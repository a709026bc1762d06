import { QueryTypes } from 'sequelize';
import type { Actor } from '../../domain/actor';
import type { CalibrationModelName } from '../../domain/vocabulary';
import type { CalibrationSetForm, FitForm } from '../../schemas/calibration';
import type { CalibrationSetItem, CalibrationSetView } from '../../views/calibration';
import { CalibrationFit } from '../db/models/calibration-fit';
import { CalibrationLevel } from '../db/models/calibration-level';
import { CalibrationLevelConcentration } from '../db/models/calibration-level-concentration';
import { CalibrationSet } from '../db/models/calibration-set';
import type { Study } from '../db/models/study';
import { sequelize } from '../db/sequelize';
import { audit, inTransaction } from '../db/transaction';
import { Invalid, NotFound, type Problem } from '../errors';
import { leavingOutProblem, spelledConcentrations } from './calibration-levels';
import { fitViewsOf } from './calibration-fits';
import { counted } from './changes';
import { knownId } from './known-id';
import { panelOf } from './panel-entries';
import { require } from './permissions';
import { figuresOfStudy } from './figures/figures-cache';
import { requireUnchanged } from './stale';
import { studyKeys, studyOf } from './study-of';

async function itemsOf(study: Study): Promise<readonly CalibrationSetItem[]> {
  return sequelize.query<CalibrationSetItem>(
    `SELECT c.id, c.name, c.instrument, c.calibrated_on AS "calibratedOn", c.default_model AS "defaultModel",
        c.default_weighting AS "defaultWeighting",
        (SELECT count(*)::int FROM calibration_levels l WHERE l.calibration_set_id = c.id) AS levels,
        (SELECT count(DISTINCT k.panel_entry_id)::int FROM calibration_levels l
          JOIN calibration_level_concentrations k ON k.level_id = l.id WHERE l.calibration_set_id = c.id) AS entries,
        (SELECT count(*)::int FROM measurements m JOIN imports i ON i.id = m.import_id AND i.state = 'stored'
          WHERE m.calibration_set_id = c.id) AS values,
        ARRAY(SELECT e.number FROM experiments e WHERE e.calibration_set_id = c.id ORDER BY e.number) AS experiments
      FROM calibration_sets c WHERE c.lab_id = $1 AND c.study_id = $2 ORDER BY c.calibrated_on, c.created_at`,
    { bind: [study.labId, study.id], type: QueryTypes.SELECT }
  );
}

/** The calibration sets of a study by their day. @throws NotFound */
export async function getCalibrationSets(actor: Actor, code: string): Promise<readonly CalibrationSetItem[]> {
  require(actor, 'studies.see');
  return itemsOf(await studyOf(actor, code));
}

/** One set with its levels and the fit of each analyte. @throws NotFound */
export async function getCalibrationSet(
  actor: Actor,
  code: string,
  setId: string
): Promise<CalibrationSetView> {
  require(actor, 'studies.see');
  const study = await studyOf(actor, code);
  const item = (await itemsOf(study)).find(({ id }) => id === setId);
  if (!item) throw new NotFound();
  const { data } = await figuresOfStudy(actor.labId, study.code);
  return { ...item, ...(await fitViewsOf(data, item.id)) };
}

/**
 * Describes a calibration: its levels, named as in the instrument's list, and what they hold. Its areas come in with a data file.
 * @returns its id @throws NotFound, Invalid
 */
export async function createCalibrationSet(
  actor: Actor,
  code: string,
  form: CalibrationSetForm
): Promise<string> {
  require(actor, 'calibrations.choose');
  const seen = await studyOf(actor, code);
  return inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    const problems: Problem[] = [];
    const concentrations = spelledConcentrations(form, await panelOf(study), problems);
    if (concentrations.length === 0) {
      problems.push({
        path: 'levels',
        message: 'The levels hold nothing yet: put analytes on the panel first.'
      });
    }
    const twin = await CalibrationSet.findOne({ where: { ...studyKeys(study), name: form.name } });
    if (twin)
      problems.push({ path: 'name', message: `There is already a set called ${form.name} in this study.` });
    if (problems.length > 0) throw new Invalid(problems);

    const { name, instrument, calibratedOn, defaultModel, defaultWeighting } = form;
    const set = await CalibrationSet.create({
      ...studyKeys(study),
      name,
      instrument,
      calibratedOn,
      defaultModel,
      defaultWeighting
    });
    for (const [index, { label }] of form.levels.entries()) {
      const level = await CalibrationLevel.create({
        ...studyKeys(study),
        calibrationSetId: set.id,
        number: index + 1,
        label
      });
      const own = concentrations.filter((concentration) => concentration.label === label);
      await CalibrationLevelConcentration.bulkCreate(
        own.map(({ panelEntryId, concentrationNgPerMl }) => ({
          ...studyKeys(study),
          levelId: level.id,
          panelEntryId,
          concentrationNgPerMl
        }))
      );
    }
    audit({
      action: 'created',
      entity: 'calibration set',
      entityId: set.id,
      studyId: study.id,
      sentence: `Described the calibration set ${name} with ${counted(form.levels.length, 'level')}.`,
      after: form
    });
    return set.id;
  });
}

const coefficientsOf: Readonly<Record<CalibrationModelName, number>> = {
  'average response factor': 1,
  linear: 2,
  quadratic: 3
};

async function levelsWith(study: Study, setId: string, panelEntryId: string) {
  const levels = await CalibrationLevel.findAll({
    where: { ...studyKeys(study), calibrationSetId: setId },
    order: [['number', 'ASC']]
  });
  const held = await CalibrationLevelConcentration.findAll({
    where: { levelId: levels.map(({ id }) => id), panelEntryId }
  });
  return levels.map(({ id, label }) => ({
    id,
    label,
    concentration: held.find(({ levelId }) => levelId === id)?.concentrationNgPerMl ?? null
  }));
}

/**
 * Chooses how one analyte of a set is fitted. The choice is a new revision with its reason; those before stay on record.
 * @returns the revision @throws NotFound, Invalid, Conflict when somebody chose meanwhile
 */
export async function chooseFit(actor: Actor, code: string, setId: string, form: FitForm): Promise<number> {
  require(actor, 'calibrations.choose');
  const seen = await studyOf(actor, code);
  return inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    const set = await CalibrationSet.findOne({ where: { ...studyKeys(study), id: knownId(setId) } });
    const entry = (await panelOf(study)).find(({ id }) => id === form.panelEntryId);
    if (!set || !entry) throw new NotFound();
    const last = await CalibrationFit.findOne({
      where: { ...studyKeys(study), calibrationSetId: set.id, panelEntryId: entry.id },
      order: [['revision', 'DESC']]
    });
    requireUnchanged(
      `the fit of ${entry.analyte.name}`,
      form.seenRevision,
      last?.revision ?? 0,
      last?.get({ plain: true }) ?? null
    );
    const levels = await levelsWith(study, set.id, entry.id);
    const problem = leavingOutProblem(levels, form.levelsLeftOut, coefficientsOf[form.model]);
    if (problem) throw Invalid.at('levelsLeftOut', problem);

    // The average response factor has its weighting built in.
    const weighting = form.model === 'average response factor' ? 'none' : form.weighting;
    const revision = (last?.revision ?? 0) + 1;
    const values = { model: form.model, weighting, levelsLeftOut: form.levelsLeftOut };
    await CalibrationFit.create({
      ...studyKeys(study),
      calibrationSetId: set.id,
      panelEntryId: entry.id,
      revision,
      ...values,
      reason: form.reason,
      chosenBy: actor.userId
    });
    const left = levels.filter(({ id }) => form.levelsLeftOut.includes(id)).map(({ label }) => label);
    audit({
      action: 'chosen',
      entity: 'calibration',
      entityId: set.id,
      studyId: study.id,
      sentence: `${entry.analyte.name} in ${set.name} is fitted by ${fitText(form.model, weighting)}${left.length > 0 ? `, without ${left.join(', ')}` : ''}.`,
      before: last
        ? { model: last.model, weighting: last.weighting, levelsLeftOut: last.levelsLeftOut }
        : null,
      after: { ...values, revision },
      reason: form.reason
    });
    return revision;
  });
}

function fitText(model: CalibrationModelName, weighting: string): string {
  if (model === 'average response factor') return 'its average response factor';
  const line = model === 'linear' ? 'a straight line' : 'a quadratic curve';
  return weighting === 'none' ? `${line}, unweighted` : `${line}, weighted ${weighting}`;
}
