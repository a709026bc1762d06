import { QueryTypes } from 'sequelize';
import type { Actor } from '../../domain/actor';
import type { CalibrationSetForm } from '../../schemas/calibration';
import type { CalibrationSetItem, CalibrationSetView, FitDetailView } from '../../views/calibration';
import type { ProposedFit } from '../amounts/calibration-proposal';
import { CalibrationLevel } from '../db/models/calibration-level';
import { CalibrationLevelConcentration } from '../db/models/calibration-level-concentration';
import { CalibrationSet } from '../db/models/calibration-set';
import type { Study } from '../db/models/study';
import { sequelize } from '../db/sequelize';
import { audit, inTransaction } from '../db/transaction';
import { Invalid, NotFound, type Problem } from '../errors';
import { fitDetailOf } from './calibration-fit-detail';
import { fitViewsOf } from './calibration-fits';
import { levelChangesOf } from './calibration-level-history';
import { spelledConcentrations } from './calibration-levels';
import { counted } from './changes';
import { panelOf } from './panel-entries';
import { require } from './permissions';
import { figuresOfStudy } from './figures/figures-cache';
import { studyKeys, studyOf } from './study-of';

async function itemsOf(study: Study): Promise<readonly CalibrationSetItem[]> {
  return sequelize.query<CalibrationSetItem>(
    `SELECT c.id, c.name, c.instrument, c.calibrated_on AS "calibratedOn", c.default_model AS "defaultModel",
        c.default_weighting AS "defaultWeighting", c.version,
        (SELECT count(*)::int FROM calibration_levels l WHERE l.calibration_set_id = c.id) AS levels,
        (SELECT count(DISTINCT k.panel_entry_id)::int FROM calibration_levels l
          JOIN calibration_level_concentrations k ON k.level_id = l.id WHERE l.calibration_set_id = c.id) AS entries,
        (SELECT count(*)::int FROM measurements m JOIN imports i ON i.id = m.import_id AND i.state = 'stored'
            JOIN injections j ON j.id = m.injection_id AND j.kind = 'level'
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
  return {
    ...item,
    ...(await fitViewsOf(data, item.id)),
    levelChanges: await levelChangesOf(study, item.id)
  };
}

/**
 * One analyte's line with its curve, the candidates beside it and what was read on it. Null: the set draws no line for it.
 * @throws NotFound
 */
export async function getCalibrationFit(
  actor: Actor,
  code: string,
  set: Pick<CalibrationSetView, 'id' | 'fits'>,
  entryId: string,
  proposed: ProposedFit | null = null
): Promise<FitDetailView | null> {
  require(actor, 'studies.see');
  return fitDetailOf(await figuresOfStudy(actor.labId, code), set.fits, set.id, entryId, proposed);
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
