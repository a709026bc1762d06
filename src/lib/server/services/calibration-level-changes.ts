import type { Actor } from '../../domain/actor';
import type { LevelsForm, LevelsProposal } from '../../schemas/calibration';
import type { ProposedLevelsView } from '../../views/calibration';
import type { CalibrationLevel as LevelData } from '../amounts/types';
import { CalibrationLevel } from '../db/models/calibration-level';
import { CalibrationLevelConcentration } from '../db/models/calibration-level-concentration';
import { CalibrationSet } from '../db/models/calibration-set';
import { CheckStandard } from '../db/models/check-standard';
import { Injection } from '../db/models/injection';
import type { Study } from '../db/models/study';
import { audit, inTransaction } from '../db/transaction';
import { Conflict, Invalid, NotFound, type Problem } from '../errors';
import { namesIn, setOf } from './calibration-fits';
import type { LevelCells } from './calibration-level-history';
import { leavingOutProblem } from './calibration-levels';
import { movesOf, tokenOf } from './calibration-moves';
import { counted, listed } from './changes';
import { figuresOfStudy } from './figures/figures-cache';
import type { StudyCalibrationSet, StudyData } from './figures/study-data';
import { knownId } from './known-id';
import { require } from './permissions';
import { requireUnchanged } from './stale';
import { studyKeys, studyOf } from './study-of';

/** A level as it is proposed; `key` is its id, or a made-up one where it is new. */
interface ProposedLevel {
  readonly key: string;
  readonly isNew: boolean;
  readonly label: string;
  readonly concentrations: ReadonlyMap<string, number>;
}

interface Change {
  readonly levels: readonly ProposedLevel[];
  readonly removed: readonly LevelData[];
  readonly before: LevelCells;
  readonly after: LevelCells;
}

/**
 * What a form makes of the levels of a set.
 * @throws NotFound for a level or an analyte that is not there, Invalid with a problem at each field
 */
function changeOf(data: StudyData, set: StudyCalibrationSet, form: LevelsProposal, taken: Taken): Change {
  const problems: Problem[] = [];
  const stored = new Map(set.levels.map((level) => [level.id, level]));
  const nameOf = namesIn(data);
  const panel = new Set(data.panel.map(({ id }) => id));
  const levels: ProposedLevel[] = [];
  const removed: LevelData[] = [];
  const labels = new Set<string>();
  for (const [index, row] of form.levels.entries()) {
    const old = row.id === null ? null : stored.get(row.id);
    if (old === undefined) throw new NotFound();
    if (Object.keys(row.cells).some((id) => !panel.has(id))) throw new NotFound();
    const at = (path: string, message: string) => problems.push({ path: `levels.${index}.${path}`, message });
    if (row.remove && old) {
      const count = taken.injections.get(old.id) ?? 0;
      if (count > 0) {
        at(
          'label',
          `${old.label} holds ${counted(count, 'injection')} of stored files, so it stays. A line can go without it at an end of the range, with a cause.`
        );
      }
      removed.push(old);
      continue;
    }
    if (row.label === '') at('label', 'Name the level as the instrument does, such as L1.');
    else if (labels.has(row.label)) at('label', `There are two levels called ${row.label}.`);
    if (taken.checkLabels.has(row.label)) at('label', `A check of this set is called ${row.label}.`);
    labels.add(row.label);
    const concentrations = new Map(
      Object.entries(row.cells).flatMap(([id, value]) => (value ? [[id, value] as const] : []))
    );
    // What no field was sent for stays as it is.
    for (const [id, value] of old?.concentrations ?? []) {
      if (!(id in row.cells)) concentrations.set(id, value);
      else if (!concentrations.has(id) && hasData(set, old?.id ?? '', id)) {
        at(
          `cells.${id}`,
          `${row.label || 'This level'} has a stored area of ${nameOf(id)}, so its concentration can be corrected, not taken away.`
        );
      }
    }
    if (concentrations.size === 0) at('label', 'Give what this level holds of one analyte at least.');
    levels.push({ key: old?.id ?? `new ${index}`, isNew: old === null, label: row.label, concentrations });
  }
  for (const level of set.levels) {
    if (!form.levels.some(({ id }) => id === level.id)) levels.push(asProposed(level));
  }
  if (levels.length === 0) problems.push({ path: 'levels', message: 'A set needs at least one level.' });
  problems.push(...innerProblems(data, set, levels));
  if (problems.length > 0) throw new Invalid(problems);
  return { levels, removed, ...cellsThatDiffer(set, levels, removed, nameOf) };
}

const asProposed = (level: LevelData): ProposedLevel => ({
  key: level.id,
  isNew: false,
  label: level.label,
  concentrations: level.concentrations
});

/** True where a stored area of an analyte, or one divided by its area, needs what the level holds of it. */
function hasData(set: StudyCalibrationSet, levelId: string, entryId: string): boolean {
  return set.reported.some(
    (item) => item.levelId === levelId && (item.entryId === entryId || item.internalEntryId === entryId)
  );
}

/** A level that a line goes without may not come to lie within its range by a corrected concentration. */
function innerProblems(
  data: StudyData,
  set: StudyCalibrationSet,
  levels: readonly ProposedLevel[]
): readonly Problem[] {
  const nameOf = namesIn(data);
  return [...set.choices].flatMap(([entryId, { levelsLeftOut }]) => {
    const left = levelsLeftOut.filter((id) => levels.some(({ key }) => key === id));
    if (left.length === 0) return [];
    const held = levels.map(({ key, label, concentrations }) => ({
      id: key,
      label,
      concentration: concentrations.get(entryId) ?? null
    }));
    const problem = leavingOutProblem(held, left, 0);
    return problem
      ? [
          {
            path: 'levels',
            message: `${nameOf(entryId)} goes without ${listed(held.filter(({ id }) => left.includes(id)).map(({ label }) => label))}. With these concentrations: ${problem} Choose its line anew first.`
          }
        ]
      : [];
  });
}

function cellsThatDiffer(
  set: StudyCalibrationSet,
  levels: readonly ProposedLevel[],
  removed: readonly LevelData[],
  nameOf: (id: string) => string
): Pick<Change, 'before' | 'after'> {
  const before: Record<string, string | number | null> = {};
  const after: Record<string, string | number | null> = {};
  const put = (what: string, old: string | number | null, now: string | number | null): void => {
    if (old === now) return;
    before[what] = old;
    after[what] = now;
  };
  for (const level of [
    ...levels,
    ...removed.map((gone) => ({ ...asProposed(gone), concentrations: new Map<string, number>(), gone }))
  ]) {
    const old = set.levels.find(({ id }) => id === level.key);
    const name = old?.label ?? level.label;
    put(`Level ${name}`, old?.label ?? null, 'gone' in level ? null : level.label);
    for (const id of new Set([...(old?.concentrations.keys() ?? []), ...level.concentrations.keys()])) {
      put(
        `${nameOf(id)} in ${name}, ng/mL`,
        old?.concentrations.get(id) ?? null,
        level.concentrations.get(id) ?? null
      );
    }
  }
  return { before, after };
}

const proposedSet = (set: StudyCalibrationSet, { levels }: Change): StudyCalibrationSet => ({
  ...set,
  levels: levels.map(({ key, label, concentrations }, index) => ({
    id: key,
    number: set.levels.find(({ id }) => id === key)?.number ?? set.levels.length + index + 1,
    label,
    concentrations
  }))
});

/** What stands in the way of taking a level out, or of a name for one. */
interface Taken {
  /** Injections that stored files brought of each level, those of withdrawn and covered imports too. */
  readonly injections: ReadonlyMap<string, number>;
  /** A file could not tell a level from a check of the same name. */
  readonly checkLabels: ReadonlySet<string>;
}

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
  { levels, removed }: Change
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
