import { expect, test } from 'vitest';
import { panelEntryForm } from '../../../src/lib/schemas/panel';
import { studyChangeForm, studyForm } from '../../../src/lib/schemas/study';
import { historyFilter } from '../../../src/lib/schemas/history';
import { verifyChain } from '../../../src/lib/server/db/audit-verify';
import { Conflict, Forbidden, Invalid, NotFound } from '../../../src/lib/server/errors';
import { listHistory } from '../../../src/lib/server/services/audit';
import {
  getPanel,
  pastePanel,
  removePanelEntry,
  setPanelEntry
} from '../../../src/lib/server/services/panels';
import { createStudy, getStudy, listStudies, updateStudy } from '../../../src/lib/server/services/studies';
import { makeAnalyte } from '../../factories/analyte';
import { makeCriteriaSet } from '../../factories/criteria-set';
import { makeExperiment } from '../../factories/experiment';
import { makeLab } from '../../factories/lab';
import { makeMember } from '../../factories/member';
import { makePanelEntry } from '../../factories/panel-entry';
import { makeStoredImport } from '../../factories/stored-import';
import { makeStudy, setStudyState } from '../../factories/study';

const filter = (fields: object = {}) => historyFilter.parse(fields);

test('a study begins with its four stages and the analytes that were pasted', async () => {
  const actor = await makeMember();
  const criteria = await makeCriteriaSet(actor.labId);
  await makeAnalyte(actor.labId, { name: 'Caffeine' });
  await makeAnalyte(actor.labId, { name: 'Diuron' });
  const form = studyForm.parse({
    title: 'Polar organics',
    matrix: 'river water',
    sampleVolumeMl: '0,5 L',
    criteriaSetId: criteria.id,
    panelText: 'caffeine\ndiuron\nDiuron\nNo such thing'
  });
  const { code, panel } = await createStudy(actor, form);
  expect(panel.added.map(({ name }) => name)).toEqual(['Caffeine', 'Diuron']);
  expect(panel.already).toEqual([{ line: 'Diuron', name: 'Diuron' }]);
  expect(panel.notFound.map(({ line }) => line)).toEqual(['No such thing']);
  const study = await getStudy(actor, code.toLowerCase());
  expect(study).toMatchObject({ code: 'S-1', sampleVolumeMl: 500, isOpen: true, counts: { panel: 2 } });
  expect(study.stages.map(({ key }) => key)).toEqual(['instrument', 'concentration', 'drying', 'extraction']);
  const { events } = await listHistory(actor, { study: code, filter: filter() });
  expect(events.map(({ sentence }) => sentence)).toEqual([
    'Put 2 targets on the panel: Caffeine and Diuron.',
    'Created the study S-1, Polar organics.'
  ]);
  expect(await verifyChain(actor.labId)).toMatchObject({ verified: 2, broken: null });
});

test('codes are given on, a taken one is refused, and two people at once get two', async () => {
  const actor = await makeMember();
  const { id } = await makeCriteriaSet(actor.labId);
  const form = (code: string) => studyForm.parse({ title: 'T', matrix: 'M', criteriaSetId: id, code });
  await createStudy(actor, form('S-2'));
  const made = await Promise.all([1, 2, 3].map(() => createStudy(actor, form(''))));
  expect(new Set(made.map(({ code }) => code)).size).toBe(3);
  await expect(createStudy(actor, form('s-2'))).rejects.toBeInstanceOf(Invalid);
});

test('of two people who change a study at once, the second gets a conflict and nothing of theirs is stored', async () => {
  const actor = await makeMember();
  const { study } = await makeStudy(actor);
  const change = (title: string) =>
    updateStudy(
      actor,
      study.code,
      studyChangeForm.parse({ title, matrix: 'lake', criteriaSetId: study.criteriaSetId, version: 1 })
    );
  const outcomes = await Promise.allSettled([change('First'), change('Second')]);
  const rejected = outcomes.filter((outcome) => outcome.status === 'rejected');
  expect(rejected).toHaveLength(1);
  expect(rejected[0]?.reason).toBeInstanceOf(Conflict);
  const stored = await getStudy(actor, study.code);
  expect(['First', 'Second']).toContain(stored.title);
  expect(stored.version).toBe(2);
  expect((rejected[0]?.reason as Conflict).current).toMatchObject({ title: stored.title });
});

test('another lab neither lists nor opens nor changes a study, its panel or its history', async () => {
  const actor = await makeMember();
  const stranger = await makeMember({ role: 'manager' });
  const { study } = await makeStudy(actor);
  const entry = await makePanelEntry(study);
  const criteria = await makeCriteriaSet(stranger.labId);
  expect(await listStudies(stranger)).toEqual([]);
  const form = { title: 'x', matrix: 'x', criteriaSetId: criteria.id, version: 1 };
  const attempts = [
    () => getStudy(stranger, study.code),
    () => updateStudy(stranger, study.code, studyChangeForm.parse(form)),
    () => getPanel(stranger, study.code),
    () => pastePanel(stranger, study.code, { text: 'x', role: 'target' }),
    () => removePanelEntry(stranger, study.code, entry.id),
    () => listHistory(stranger, { study: study.code, filter: filter() })
  ];
  for (const attempt of attempts) await expect(attempt()).rejects.toBeInstanceOf(NotFound);
});

test('criteria of another lab cannot be chosen', async () => {
  const actor = await makeMember();
  const stranger = await makeMember();
  const criteria = await makeCriteriaSet(stranger.labId);
  const form = studyForm.parse({ title: 'T', matrix: 'M', criteriaSetId: criteria.id });
  await expect(createStudy(actor, form)).rejects.toBeInstanceOf(Invalid);
});

test('analysts and reviewers see studies and do not change them', async () => {
  const lab = await makeLab();
  const { study } = await makeStudy(await makeMember({ lab }));
  for (const role of ['analyst', 'reviewer'] as const) {
    const actor = await makeMember({ lab, role });
    expect(await listStudies(actor)).toHaveLength(1);
    await expect(pastePanel(actor, study.code, { text: 'x', role: 'target' })).rejects.toBeInstanceOf(
      Forbidden
    );
    await expect(listHistory(actor, { study: null, filter: filter() })).rejects.toBeInstanceOf(Forbidden);
  }
});

const entryForm = (fields: object) => panelEntryForm.parse({ role: 'target', ...fields });

test('an entry is read against an internal standard of its panel, and that keeps its role', async () => {
  const actor = await makeMember();
  const { study } = await makeStudy(actor);
  await makePanelEntry(study, { name: 'Target one' });
  await makePanelEntry(study, { name: 'Standard', role: 'injection internal standard' });
  const panel = async () =>
    Object.fromEntries((await getPanel(actor, study.code)).map((e) => [e.analyte.name, e]));
  const first = await panel();
  const target = first['Target one']!;
  const standard = first.Standard!;
  await expect(
    setPanelEntry(
      actor,
      study.code,
      entryForm({ entryId: target.id, seen: target.seen, internalStandardEntryId: target.id })
    )
  ).rejects.toBeInstanceOf(Invalid);
  await setPanelEntry(
    actor,
    study.code,
    entryForm({
      entryId: target.id,
      seen: target.seen,
      internalStandardEntryId: standard.id,
      low: '50',
      high: '150',
      rsdMax: '30',
      nMin: '4',
      reason: 'volatile'
    })
  );
  expect((await panel())['Target one']).toMatchObject({
    internalStandard: { name: 'Standard' },
    criteriaOverride: { low: 50, high: 150, rsdMax: 30, nMin: 4, reason: 'volatile' }
  });
  await expect(
    setPanelEntry(actor, study.code, entryForm({ entryId: standard.id, seen: standard.seen, role: 'target' }))
  ).rejects.toThrow(/internal standard of Target one/);
  await expect(removePanelEntry(actor, study.code, standard.id)).rejects.toThrow(
    /internal standard of Target one/
  );
  await expect(
    setPanelEntry(actor, study.code, entryForm({ entryId: target.id, seen: target.seen, role: 'surrogate' }))
  ).rejects.toBeInstanceOf(Conflict);
});

test('an entry with stored values stays on the panel; one that was only planned leaves with its plans', async () => {
  const actor = await makeMember();
  const made = await makeStudy(actor);
  const measured = await makePanelEntry(made.study);
  const planned = await makePanelEntry(made.study);
  const { experiment, fractions, replicates } = await makeExperiment(made, {
    spikes: { [measured.id]: 50, [planned.id]: 50 }
  });
  await makeStoredImport(actor, made.study, [
    {
      experimentId: experiment.id,
      replicateId: replicates[0]?.id ?? '',
      fractionId: fractions[0]?.id ?? '',
      analyteId: measured.analyteId,
      reported: 5
    }
  ]);
  await expect(removePanelEntry(actor, made.study.code, measured.id)).rejects.toThrow(/values .* are stored/);
  await removePanelEntry(actor, made.study.code, planned.id);
  expect((await getPanel(actor, made.study.code)).map(({ id }) => id)).toEqual([measured.id]);
});

test('a study in review takes no change, and the list says whose move it is', async () => {
  const actor = await makeMember();
  const { study } = await makeStudy(actor);
  await setStudyState(study.id, 'in review');
  await expect(pastePanel(actor, study.code, { text: 'x', role: 'target' })).rejects.toBeInstanceOf(Conflict);
  expect((await listStudies(actor))[0]).toMatchObject({
    state: 'in review',
    waitsFor: 'a reviewer',
    daysWaiting: 0,
    stageReached: null
  });
});

test('the history is filtered and paged', async () => {
  const actor = await makeMember({ role: 'manager' });
  const { study } = await makeStudy(actor);
  for (let index = 0; index < 60; index += 1) {
    await makeAnalyte(actor.labId, { name: `Thing ${index}` });
    await pastePanel(actor, study.code, { text: `Thing ${index}`, role: 'target' });
  }
  const first = await listHistory(actor, { study: study.code, filter: filter() });
  expect(first.events).toHaveLength(50);
  const rest = await listHistory(actor, { study: study.code, filter: filter({ before: first.older }) });
  expect(rest.events.at(-1)?.sentence).toBe('Put 1 target on the panel: Thing 0.');
  expect(rest.older).toBeNull();
  const found = await listHistory(actor, {
    study: null,
    filter: filter({ text: 'thing 59', from: '2020-01-01' })
  });
  expect(found.events).toMatchObject([{ studyCode: study.code, actorName: actor.name }]);
  expect((await listHistory(actor, { study: null, filter: filter({ to: '2020-01-01' }) })).events).toEqual(
    []
  );
  expect((await listHistory(actor, { study: null, filter: filter({ text: '%' }) })).events).toEqual([]);
});
