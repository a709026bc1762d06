import type { Actor } from '../../domain/actor';
import type { CriteriaOverride } from '../../domain/criteria';
import type { PanelRole } from '../../domain/vocabulary';
import type { PanelEntryForm, PanelPasteForm } from '../../schemas/panel';
import type { PanelEntryView, PanelPaste } from '../../views/panel';
import { CalibrationFit } from '../db/models/calibration-fit';
import { CalibrationLevelConcentration } from '../db/models/calibration-level-concentration';
import { CheckStandardConcentration } from '../db/models/check-standard-concentration';
import { ExperimentSpike } from '../db/models/experiment-spike';
import { InternalStandardAddition } from '../db/models/internal-standard-addition';
import { PanelEntry } from '../db/models/panel-entry';
import { ReplicateSpike } from '../db/models/replicate-spike';
import { Analyte } from '../db/models/analyte';
import type { Study } from '../db/models/study';
import { audit, inTransaction } from '../db/transaction';
import { Conflict, Invalid, NotFound } from '../errors';
import { changesBetween, counted, listed } from './changes';
import { currentAnalytes } from './library-rows';
import { matchNames } from './name-matching';
import { panelOf } from './panel-entries';
import { require } from './permissions';
import { requireUnchanged } from './stale';
import { studyKeys, studyOf } from './study-of';

/** The panel of a study in its order. @throws NotFound */
export async function getPanel(actor: Actor, code: string): Promise<readonly PanelEntryView[]> {
  require(actor, 'studies.see');
  return panelOf(await studyOf(actor, code));
}

/**
 * Puts analytes of the library on the panel, recognised from pasted lines (names, CAS numbers, or both). What is there already, and
 * what is not found, changes nothing and is told.
 */
export async function pastePanel(actor: Actor, code: string, form: PanelPasteForm): Promise<PanelPaste> {
  require(actor, 'studies.edit');
  const seen = await studyOf(actor, code);
  return inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    return addLines(study, form);
  });
}

/** The same inside a transaction that holds the study's row. */
export async function addLines(study: Study, form: PanelPasteForm): Promise<PanelPaste> {
  const analytes = await currentAnalytes(study.labId);
  const versions = new Map(analytes.map(({ id, versionId }) => [id, versionId]));
  const entries = await PanelEntry.findAll({
    where: studyKeys(study),
    attributes: ['analyteId', 'position']
  });
  const present = new Set(entries.map(({ analyteId }) => analyteId));
  let position = Math.max(0, ...entries.map((entry) => entry.position));
  const paste = {
    added: [] as PanelPaste['added'][number][],
    already: [] as PanelPaste['already'][number][]
  };
  const notFound = [];
  for (const match of matchNames(form.text.split(/\r?\n/), analytes)) {
    const { analyte, line } = match;
    if (!analyte) {
      notFound.push(match);
    } else if (present.has(analyte.id)) {
      paste.already.push({ line, name: analyte.name });
    } else {
      position += 1;
      present.add(analyte.id);
      const entry = await PanelEntry.create({
        ...studyKeys(study),
        analyteId: analyte.id,
        analyteVersionId: versions.get(analyte.id) ?? '',
        role: form.role,
        position
      });
      paste.added.push({ id: entry.id, line, name: analyte.name });
    }
  }
  if (paste.added.length > 0) {
    const names = paste.added.map(({ name }) => name);
    audit({
      action: 'added',
      entity: 'panel',
      studyId: study.id,
      sentence: `Put ${counted(names.length, form.role)} on the panel: ${listed(names)}.`,
      after: { role: form.role, names }
    });
  }
  return { ...paste, notFound };
}

const isStandard = (role: PanelRole): boolean =>
  role === 'extraction internal standard' || role === 'injection internal standard';

function overrideOf(form: PanelEntryForm): CriteriaOverride | null {
  const { low, high, rsdMax, nMin, reason } = form;
  return low === null || high === null || nMin === null ? null : { low, high, rsdMax, nMin, reason };
}

function checkEntry(form: PanelEntryForm, panel: readonly PanelEntryView[]): void {
  const standard = panel.find(({ id }) => id === form.internalStandardEntryId);
  const dependents = panel.filter(({ internalStandard }) => internalStandard?.id === form.entryId);
  const problems = [];
  const path = 'internalStandardEntryId';
  if (form.internalStandardEntryId !== null && (!standard || !isStandard(standard.role))) {
    problems.push({ path, message: 'Choose an internal standard of this panel.' });
  }
  if (standard?.id === form.entryId) {
    problems.push({ path, message: 'An analyte cannot be its own internal standard.' });
  }
  if (form.role === 'injection internal standard' && form.internalStandardEntryId !== null) {
    problems.push({ path, message: 'An injection internal standard is not corrected by another one.' });
  }
  if (dependents.length > 0 && !isStandard(form.role)) {
    const names = listed(dependents.map(({ analyte }) => analyte.name));
    problems.push({
      path: 'role',
      message: `It is the internal standard of ${names}. Give these another one first.`
    });
  }
  if (problems.length > 0) throw new Invalid(problems);
}

async function entryOf(actor: Actor, study: Study, entryId: string): Promise<PanelEntry> {
  const entry = await PanelEntry.findOne({ where: { ...studyKeys(study), id: entryId } });
  if (!entry) throw new NotFound();
  return entry;
}

/** Changes an entry's role, its internal standard, or the criteria that it has in place of the study's. */
export async function setPanelEntry(actor: Actor, code: string, form: PanelEntryForm): Promise<void> {
  require(actor, 'studies.edit');
  const seen = await studyOf(actor, code);
  await inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    const entry = await entryOf(actor, study, form.entryId);
    const panel = await panelOf(study);
    const view = panel.find(({ id }) => id === entry.id);
    const name = view?.analyte.name ?? '';
    requireUnchanged(name, form.seen, entry.updatedAt.toISOString(), view ?? null);
    checkEntry(form, panel);
    const values = {
      role: form.role,
      internalStandardEntryId: form.internalStandardEntryId,
      criteriaOverride: overrideOf(form)
    };
    const { before, after, names } = changesBetween(entry.get({ plain: true }), values);
    if (names.length === 0) return;
    await entry.update(values);
    const standard = panel.find(({ id }) => id === form.internalStandardEntryId)?.analyte.name;
    const said = [
      names.includes('role') ? `role ${form.role}` : '',
      names.includes('internalStandardEntryId')
        ? standard
          ? `read against ${standard}`
          : 'calibrated externally'
        : '',
      names.includes('criteriaOverride')
        ? values.criteriaOverride
          ? 'criteria of its own'
          : "the study's criteria"
        : ''
    ].filter((part) => part !== '');
    audit({
      action: 'changed',
      entity: 'panel',
      entityId: entry.id,
      studyId: study.id,
      sentence: `${name} on the panel: ${listed(said)}.`,
      before,
      after,
      reason: names.includes('criteriaOverride') ? form.reason || null : null
    });
  });
}

/** Takes the library's current version of an analyte over into the study. */
export async function takeCurrentVersion(actor: Actor, code: string, entryId: string): Promise<void> {
  require(actor, 'studies.edit');
  const study = await studyOf(actor, code);
  await inTransaction(actor, { study: study.id }, async () => {
    const entry = await entryOf(actor, study, entryId);
    const before = (await panelOf(study)).find(({ id }) => id === entry.id);
    const analyte = await Analyte.findOne({ where: { labId: actor.labId, id: entry.analyteId } });
    if (!analyte?.currentVersionId || analyte.currentVersionId === entry.analyteVersionId) return;
    await entry.update({ analyteVersionId: analyte.currentVersionId });
    const after = (await panelOf(study)).find(({ id }) => id === entry.id);
    audit({
      action: 'changed',
      entity: 'panel',
      entityId: entry.id,
      studyId: study.id,
      sentence: `${after?.analyte.name} on the panel now uses version ${after?.analyte.version} of the library (before: ${before?.analyte.version}).`,
      before: before?.analyte,
      after: after?.analyte
    });
  });
}

/** Why an entry cannot leave the panel, in a sentence; null: it can. */
async function hold(view: PanelEntryView, panel: readonly PanelEntryView[]): Promise<string | null> {
  if (view.hasData)
    return `Reported values of ${view.analyte.name} are stored in this study, so it stays on the panel.`;
  const dependents = panel.filter(({ internalStandard }) => internalStandard?.id === view.id);
  if (dependents.length > 0) {
    const names = listed(dependents.map(({ analyte }) => analyte.name));
    return `${view.analyte.name} is the internal standard of ${names}. Give these another one first.`;
  }
  const fits = await CalibrationFit.count({ where: { panelEntryId: view.id } });
  if (fits > 0) return `A calibration was chosen for ${view.analyte.name}, and that choice stays on record.`;
  return null;
}

/** Takes an entry off the panel, with the spikes and concentrations planned for it. @throws Conflict when data rest on it */
export async function removePanelEntry(actor: Actor, code: string, entryId: string): Promise<void> {
  require(actor, 'studies.edit');
  const seen = await studyOf(actor, code);
  await inTransaction(actor, { study: seen.id }, async () => {
    const study = await studyOf(actor, code, { locked: true });
    const entry = await entryOf(actor, study, entryId);
    const panel = await panelOf(study);
    const view = panel.find(({ id }) => id === entry.id);
    if (!view) throw new NotFound();
    const held = await hold(view, panel);
    if (held) throw new Conflict(held);
    const where = { panelEntryId: entry.id };
    const planned =
      (await ExperimentSpike.destroy({ where })) +
      (await ReplicateSpike.destroy({ where })) +
      (await InternalStandardAddition.destroy({ where })) +
      (await CalibrationLevelConcentration.destroy({ where })) +
      (await CheckStandardConcentration.destroy({ where }));
    await entry.destroy();
    const along =
      planned > 0
        ? `, with ${counted(planned, 'planned spike or concentration', 'planned spikes and concentrations')}`
        : '';
    audit({
      action: 'removed',
      entity: 'panel',
      entityId: entry.id,
      studyId: study.id,
      sentence: `Took ${view.analyte.name} (${view.role}) off the panel${along}.`,
      before: view
    });
  });
}
