import { QueryTypes } from 'sequelize';
import type { Actor } from '../../domain/actor';
import type { CheckStandardChange, CheckStandardForm } from '../../schemas/check-standard';
import type { CheckEntryView, CheckStandardsView, CheckStandardView } from '../../views/sequences';
import { CalibrationLevel } from '../db/models/calibration-level';
import { CalibrationSet } from '../db/models/calibration-set';
import { CheckStandard } from '../db/models/check-standard';
import { CheckStandardConcentration } from '../db/models/check-standard-concentration';
import type { Study } from '../db/models/study';
import { sequelize } from '../db/sequelize';
import { audit, inTransaction } from '../db/transaction';
import { Conflict, Invalid, NotFound, type Problem } from '../errors';
import { checkContents, type CheckContent } from './check-contents';
import { changesBetween, counted } from './changes';
import { knownId } from './known-id';
import { panelOf } from './panel-entries';
import { require } from './permissions';
import { requireUnchanged } from './stale';
import { studyKeys, studyOf } from './study-of';

const kindNames = {
  'second source': 'second-source check',
  continuing: 'continuing check',
  'instrument blank': 'instrument blank'
} as const;

async function setOf(study: Study, setId: string): Promise<CalibrationSet> {
  const set = await CalibrationSet.findOne({ where: { ...studyKeys(study), id: knownId(setId) } });
  if (!set) throw new NotFound();
  return set;
}

async function checkOf(study: Study, set: CalibrationSet, checkId: string): Promise<CheckStandard> {
  const check = await CheckStandard.findOne({
    where: { ...studyKeys(study), calibrationSetId: set.id, id: knownId(checkId) }
  });
  if (!check) throw new NotFound();
  return check;
}

/** The panel with what the levels of a set hold of it, in panel order. */
async function entriesOf(study: Study, set: CalibrationSet): Promise<CheckEntryView[]> {
  const panel = await panelOf(study);
  const ranges = await sequelize.query<{ entry_id: string; lowest: number; highest: number }>(
    `SELECT k.panel_entry_id AS entry_id, min(k.concentration_ng_per_ml) AS lowest, max(k.concentration_ng_per_ml) AS highest
      FROM calibration_levels l JOIN calibration_level_concentrations k ON k.level_id = l.id
      WHERE l.lab_id = $1 AND l.study_id = $2 AND l.calibration_set_id = $3 GROUP BY k.panel_entry_id`,
    { bind: [study.labId, study.id, set.id], type: QueryTypes.SELECT }
  );
  const rangeOf = new Map(
    ranges.map(({ entry_id: id, lowest, highest }) => [id, [lowest, highest] as const])
  );
  return panel.map(({ id, role, analyte }) => ({
    panelEntryId: id,
    name: analyte.name,
    role,
    isStandard: role === 'injection internal standard' || role === 'extraction internal standard',
    range: rangeOf.get(id) ?? null
  }));
}

/** The checks and blanks described for a set, and what they may hold. @throws NotFound */
export async function getCheckStandards(
  actor: Actor,
  code: string,
  setId: string
): Promise<CheckStandardsView> {
  require(actor, 'studies.see');
  const study = await studyOf(actor, code);
  const set = await setOf(study, setId);
  const entries = await entriesOf(study, set);
  const checks = await sequelize.query<Omit<CheckStandardView, 'concentrations'>>(
    `SELECT c.id, c.kind, c.label, c.source, c.note, c.version,
        (SELECT count(*)::int FROM injections j JOIN imports i ON i.id = j.import_id AND i.state = 'stored'
          WHERE j.check_standard_id = c.id) AS injections
      FROM check_standards c WHERE c.lab_id = $1 AND c.study_id = $2 AND c.calibration_set_id = $3
      ORDER BY c.created_at, c.id`,
    { bind: [study.labId, study.id, set.id], type: QueryTypes.SELECT }
  );
  const contents = await CheckStandardConcentration.findAll({
    where: { ...studyKeys(study), checkStandardId: checks.map(({ id }) => id) }
  });
  return {
    set: { id: set.id, name: set.name, instrument: set.instrument },
    entries,
    checks: checks.map((check) => ({
      ...check,
      concentrations: entries.flatMap(({ panelEntryId, name }) => {
        const held = contents.find(
          (item) => item.checkStandardId === check.id && item.panelEntryId === panelEntryId
        );
        return held ? [{ panelEntryId, name, concentrationNgPerMl: held.concentrationNgPerMl }] : [];
      })
    }))
  };
}

/** Why a label cannot be taken: another check or a level of the set has it. */
async function labelProblem(
  study: Study,
  set: CalibrationSet,
  label: string,
  ownId: string | null
): Promise<Problem | null> {
  const where = { ...studyKeys(study), calibrationSetId: set.id, label };
  const check = await CheckStandard.findOne({ where });
  if (check && check.id !== ownId)
    return { path: 'label', message: `${set.name} has a ${kindNames[check.kind]} called ${label} already.` };
  return (await CalibrationLevel.findOne({ where }))
    ? {
        path: 'label',
        message: `A level of ${set.name} is called ${label}: a file could not tell them apart.`
      }
    : null;
}

async function storeContents(
  study: Study,
  checkStandardId: string,
  contents: readonly CheckContent[]
): Promise<void> {
  await CheckStandardConcentration.destroy({ where: { ...studyKeys(study), checkStandardId } });
  await CheckStandardConcentration.bulkCreate(
    contents.map((content) => ({ ...studyKeys(study), checkStandardId, ...content }))
  );
}

/**
 * Describes a check or an instrument blank of a set. Its injections come in with data files.
 * @returns its id @throws NotFound, Invalid
 */
export async function createCheckStandard(
  actor: Actor,
  code: string,
  setId: string,
  form: CheckStandardForm
): Promise<string> {
  require(actor, 'calibrations.choose');
  const seen = await studyOf(actor, code);
  return inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    const set = await setOf(study, setId);
    const problems: Problem[] = [];
    const contents = checkContents(form, await entriesOf(study, set), problems);
    const twin = await labelProblem(study, set, form.label, null);
    if (twin) problems.push(twin);
    if (problems.length > 0) throw new Invalid(problems);

    const { kind, label, source, note } = form;
    const check = await CheckStandard.create({
      ...studyKeys(study),
      calibrationSetId: set.id,
      kind,
      label,
      source,
      note
    });
    await storeContents(study, check.id, contents);
    audit({
      action: 'created',
      entity: 'check standard',
      entityId: check.id,
      studyId: study.id,
      sentence: `Described the ${kindNames[kind]} ${label} of ${set.name}, with ${counted(contents.length, 'concentration')}.`,
      after: { calibrationSetId: set.id, kind, label, source, note, concentrations: byEntry(contents) }
    });
    return check.id;
  });
}

/**
 * Corrects what was described. What was injected under it keeps hanging on it, so that its readings are held against the corrected
 * concentrations from now on.
 * @throws NotFound, Invalid, Conflict when somebody changed it meanwhile
 */
export async function changeCheckStandard(
  actor: Actor,
  code: string,
  setId: string,
  checkId: string,
  form: CheckStandardChange
): Promise<void> {
  require(actor, 'calibrations.choose');
  const seen = await studyOf(actor, code);
  await inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    const set = await setOf(study, setId);
    const check = await checkOf(study, set, checkId);
    requireUnchanged(check.label, form.seenVersion, check.version, check.get({ plain: true }));
    const problems: Problem[] = [];
    const contents = checkContents(form, await entriesOf(study, set), problems);
    const twin = await labelProblem(study, set, form.label, check.id);
    if (twin) problems.push(twin);
    if (form.kind !== check.kind && (await isInjected(study, check.id))) {
      problems.push({
        path: 'kind',
        message: `${check.label} has been injected as a ${kindNames[check.kind]}. Describe another check under a label of its own.`
      });
    }
    if (problems.length > 0) throw new Invalid(problems);

    const { kind, label, source, note } = form;
    const held = await CheckStandardConcentration.findAll({
      where: { ...studyKeys(study), checkStandardId: check.id },
      order: [['panelEntryId', 'ASC']]
    });
    const { before, after, names } = changesBetween(
      {
        kind: check.kind,
        label: check.label,
        source: check.source,
        note: check.note,
        concentrations: byEntry(held)
      },
      { kind, label, source, note, concentrations: byEntry(contents) }
    );
    if (names.length === 0) return;
    await check.update({ kind, label, source, note, version: check.version + 1 });
    await storeContents(study, check.id, contents);
    audit({
      action: 'changed',
      entity: 'check standard',
      entityId: check.id,
      studyId: study.id,
      sentence: `Changed the ${kindNames[kind]} ${label} of ${set.name}: ${names.join(', ')}.`,
      before,
      after
    });
  });
}

/** Removes a check that no file has brought an injection of. @throws NotFound, Conflict when one has */
export async function removeCheckStandard(
  actor: Actor,
  code: string,
  setId: string,
  checkId: string
): Promise<void> {
  require(actor, 'calibrations.choose');
  const seen = await studyOf(actor, code);
  await inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    const set = await setOf(study, setId);
    const check = await checkOf(study, set, checkId);
    if (await isInjected(study, check.id)) {
      throw new Conflict(`A data file has brought injections of ${check.label}, so that it stays.`);
    }
    const before = { kind: check.kind, label: check.label, source: check.source, note: check.note };
    await check.destroy();
    audit({
      action: 'removed',
      entity: 'check standard',
      entityId: check.id,
      studyId: study.id,
      sentence: `Removed the ${kindNames[check.kind]} ${check.label} of ${set.name}, which was never injected.`,
      before
    });
  });
}

/** By any import, withdrawn ones too: they point at it for ever. */
async function isInjected(study: Study, checkId: string): Promise<boolean> {
  const [row] = await sequelize.query<{ found: boolean }>(
    'SELECT EXISTS (SELECT 1 FROM injections WHERE lab_id = $1 AND check_standard_id = $2) AS found',
    { bind: [study.labId, checkId], type: QueryTypes.SELECT }
  );
  return row?.found ?? false;
}

function byEntry(
  contents: readonly { readonly panelEntryId: string; readonly concentrationNgPerMl: number }[]
): Record<string, number> {
  return Object.fromEntries(
    [...contents]
      .sort((a, b) => (a.panelEntryId < b.panelEntryId ? -1 : 1))
      .map(({ panelEntryId, concentrationNgPerMl }) => [panelEntryId, concentrationNgPerMl])
  );
}
