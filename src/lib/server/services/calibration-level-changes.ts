import type { Actor } from '../../domain/actor';
import type { LevelsForm, LevelsProposal } from '../../schemas/calibration';
import type { ProposedLevelsView } from '../../views/calibration';
import { CalibrationLevel } from '../db/models/calibration-level';
import { CalibrationLevelConcentration } from '../db/models/calibration-level-concentration';
import { CalibrationSet } from '../db/models/calibration-set';
import { CheckStandard } from '../db/models/check-standard';
import { Injection } from '../db/models/injection';
import type { Study } from '../db/models/study';
import { audit, inTransaction } from '../db/transaction';
import { Conflict, Invalid, NotFound } from '../errors';
import { setOf } from './calibration-fits';
import { changeOf, proposedSet, type LevelChange, type Taken } from './calibration-level-proposal';
import { movesOf, tokenOf } from './calibration-moves';
import { listed } from './changes';
import { figuresOfStudy } from './figures/figures-cache';
import type { StudyCalibrationSet } from './figures/study-data';
import { knownId } from './known-id';
import { require } from './permissions';
import { requireUnchanged } from './stale';
import { studyKeys, studyOf } from './study-of';

async function takenIn(study: Study, set: StudyCalibrationSet): Promise<Taken> {
  const rows = await Injection.findAll({
    attributes: ['levelId'],
    where: { ...studyKeys(study), levelId: set.levels.map(({ id }) => id) },
    raw: true
  });
  const injections = new Map<string, number>();
  for (const { levelId } of rows) if (levelId) injections.set(levelId, (injections.get(levelId) ?? 0) + 1);
  const checks = await CheckStandard.findAll({
    attributes: ['label'],
    where: { ...studyKeys(study), calibrationSetId: set.id },
    raw: true
  });
  return { injections, checkLabels: new Set(checks.map(({ label }) => label)) };
}

/** @throws NotFound, Conflict where somebody changed its levels since */
async function unchangedSet(study: Study, setId: string, seenVersion: number): Promise<CalibrationSet> {
  const row = await CalibrationSet.findOne({ where: { ...studyKeys(study), id: knownId(setId) } });
  if (!row) throw new NotFound();
  requireUnchanged(`the levels of ${row.name}`, seenVersion, row.version, null);
  return row;
}

/**
 * What the study's figures would be with other levels: nothing is stored.
 * @throws NotFound, Invalid, Conflict when somebody changed the levels meanwhile
 */
export async function proposeLevels(
  actor: Actor,
  code: string,
  setId: string,
  form: LevelsProposal
): Promise<ProposedLevelsView> {
  require(actor, 'calibrations.choose');
  const study = await studyOf(actor, code);
  await unchangedSet(study, setId, form.seenVersion);
  const figures = await figuresOfStudy(actor.labId, code);
  const set = setOf(figures.data, setId);
  const change = changeOf(figures.data, set, form, await takenIn(study, set));
  const rows = Object.keys(change.after);
  return {
    rows: rows.map((what) => ({
      what,
      before: String(change.before[what] ?? 'nothing'),
      after: String(change.after[what] ?? 'nothing')
    })),
    moves: movesOf(figures, proposedSet(set, change), change.after)
  };
}

/**
 * Corrects the levels of a set: what they hold, what they are called, a level more, or one less that no file has filled. What was
 * stored stays with its level, whatever that is called now; what stood there before stays in the history.
 *
 * @param form.foretold token of the preview; null: nothing was foretold (a caller that is no page)
 * @returns how many entries differ @throws NotFound, Invalid, Conflict
 */
export async function changeLevels(
  actor: Actor,
  code: string,
  setId: string,
  form: Omit<LevelsForm, 'foretold'> & { readonly foretold: string | null }
): Promise<number> {
  require(actor, 'calibrations.choose');
  const seen = await studyOf(actor, code);
  return inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    const row = await unchangedSet(study, setId, form.seenVersion);
    const { data } = await figuresOfStudy(actor.labId, code);
    const set = setOf(data, setId);
    const change = changeOf(data, set, form, await takenIn(study, set));
    const names = Object.keys(change.after);
    if (names.length === 0) throw Invalid.at('levels', 'Nothing differs from what is stored.');
    if (form.foretold !== null && form.foretold !== tokenOf(study.dataVersion, setId, change.after)) {
      throw new Conflict(
        'What is typed here, or the data of this study, changed after you looked at what it moves, so nothing was stored. Look again.'
      );
    }
    await writeLevels(study, set, change);
    await row.update({ version: row.version + 1 });
    audit({
      action: 'changed',
      entity: 'calibration set',
      entityId: setId,
      studyId: study.id,
      sentence: `Changed the levels of ${set.name}: ${listed(names)}.`,
      before: change.before,
      after: change.after,
      reason: form.reason
    });
    return names.length;
  });
}

async function writeLevels(
  study: Study,
  set: StudyCalibrationSet,
  { levels, removed }: LevelChange
): Promise<void> {
  const keys = studyKeys(study);
  const stored = new Map(set.levels.map((level) => [level.id, level]));
  for (const { id } of removed) await CalibrationLevel.destroy({ where: { ...keys, id } });
  // Two levels may change names with each other: both let go of the old one first.
  const renamed = levels.filter(({ key, label }) => stored.has(key) && stored.get(key)?.label !== label);
  for (const { key } of renamed)
    await CalibrationLevel.update({ label: `renamed ${key}` }, { where: { ...keys, id: key } });
  for (const { key, label } of renamed)
    await CalibrationLevel.update({ label }, { where: { ...keys, id: key } });

  let number = Math.max(0, ...set.levels.map((level) => level.number));
  for (const level of levels) {
    const levelId = level.isNew
      ? (
          await CalibrationLevel.create({
            ...keys,
            calibrationSetId: set.id,
            number: (number += 1),
            label: level.label
          })
        ).id
      : level.key;
    const old = stored.get(level.key)?.concentrations ?? new Map<string, number>();
    for (const [panelEntryId, concentrationNgPerMl] of level.concentrations) {
      if (old.get(panelEntryId) === concentrationNgPerMl) continue;
      await CalibrationLevelConcentration.upsert({ ...keys, levelId, panelEntryId, concentrationNgPerMl });
    }
    const gone = [...old.keys()].filter((id) => !level.concentrations.has(id));
    if (gone.length > 0) {
      await CalibrationLevelConcentration.destroy({ where: { ...keys, levelId, panelEntryId: gone } });
    }
  }
}
