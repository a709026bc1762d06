import { expect, test } from 'vitest';
import { experimentChangeForm, replicatesForm } from '../../../src/lib/schemas/experiment';
import { stepsForm } from '../../../src/lib/schemas/variant';
import type { Actor } from '../../../src/lib/domain/actor';
import { Conflict, Forbidden, Invalid, NotFound, type ExpectedError } from '../../../src/lib/server/errors';
import { exclude, lift, listExclusions, recentCauses } from '../../../src/lib/server/services/exclusions';
import {
  createExperiment,
  getExperiment,
  getExperiments,
  updateExperiment
} from '../../../src/lib/server/services/experiments';
import {
  addReplicates,
  recordObservation,
  removeReplicate,
  setReplicateSpike
} from '../../../src/lib/server/services/replicates';
import {
  chooseStageEvidence,
  createVariant,
  getVariant,
  removeVariant,
  setProcedureSteps
} from '../../../src/lib/server/services/variants';
import { makeExperimentForm } from '../../factories/experiment-form';
import { makeMember } from '../../factories/member';
import { makePanelEntry } from '../../factories/panel-entry';
import { makeStoredImport } from '../../factories/stored-import';
import { makeStudy } from '../../factories/study';
import { makeVariant } from '../../factories/variant';

async function planned() {
  const actor = await makeMember();
  const made = await makeStudy(actor);
  const target = await makePanelEntry(made.study, { name: 'Target' });
  const other = await makePanelEntry(made.study, { name: 'Other target' });
  const surrogate = await makePanelEntry(made.study, { name: 'Surrogate', role: 'surrogate' });
  const labelled = await makePanelEntry(made.study, {
    name: 'Labelled',
    role: 'extraction internal standard'
  });
  const injected = await makePanelEntry(made.study, {
    name: 'Injected',
    role: 'injection internal standard'
  });
  return { actor, ...made, code: made.study.code, target, other, surrogate, labelled, injected };
}

const changeOf = async (actor: Actor, code: string, number: number, fields: object) => {
  const view = await getExperiment(actor, code, number);
  return experimentChangeForm.parse({
    title: view.title,
    medium: view.medium,
    matrix: view.matrix ?? '',
    levelLabel: view.levelLabel,
    subtract: view.subtract,
    sampleVolumeMl: view.sampleVolumeMl,
    version: view.version,
    fractions: view.fractions.map(({ id, name, kind, countsAs, passedStages }) => ({
      id,
      name,
      kind,
      countsAs,
      passedStages
    })),
    spikes: [{ kind: 'spiked', targetsNg: 50 }],
    ...fields
  });
};

test('one amount goes to all targets, others take its place entry by entry, and units are converted', async () => {
  const { actor, code, target, other, surrogate, labelled, injected } = await planned();
  const number = await createExperiment(
    actor,
    code,
    makeExperimentForm({
      subtract: 'native',
      replicates: [
        { kind: 'spiked', count: '5', batch: 'Monday' },
        { kind: 'unspiked', count: 2 }
      ],
      spikes: [
        {
          kind: 'spiked',
          targetsNg: '50 ng',
          surrogatesNg: '0,1 \u00b5g',
          extractionStandardsNg: '20',
          entries: { [other.id]: '75' }
        },
        { kind: 'unspiked', surrogatesNg: '100' }
      ],
      additions: [{ panelEntryId: injected.id, point: 'vial', concentrationNgPerMl: '10 \u00b5g/L' }]
    })
  );
  const view = await getExperiment(actor, code, number);
  const amounts = view.spikes.map(({ kind, panelEntryId, amountNg }) => [kind, panelEntryId, amountNg]);
  expect(amounts).toEqual([
    ['spiked', target.id, 50],
    ['spiked', other.id, 75],
    ['spiked', surrogate.id, 100],
    ['spiked', labelled.id, 20],
    ['unspiked', surrogate.id, 100]
  ]);
  expect(view.additions).toMatchObject([
    { panelEntryId: labelled.id, point: 'sample', amountNg: 20 },
    { panelEntryId: injected.id, point: 'vial', concentrationNgPerMl: 10, amountNg: null }
  ]);
  expect(view.replicates.map(({ label, batch, sampleVolumeMl }) => [label, batch, sampleVolumeMl])).toEqual([
    ['E1-S1', 'Monday', 1000],
    ['E1-S2', 'Monday', 1000],
    ['E1-S3', 'Monday', 1000],
    ['E1-S4', 'Monday', 1000],
    ['E1-S5', 'Monday', 1000],
    ['E1-U1', null, 1000],
    ['E1-U2', null, 1000]
  ]);
});

test('what does not make sense is refused all at once, at its place', async () => {
  const { actor, code, injected, target } = await planned();
  const attempt = createExperiment(
    actor,
    code,
    makeExperimentForm({
      subtract: 'native',
      fractions: [
        { name: 'Effluent', kind: 'load effluent', countsAs: 'balance', passedStages: ['boiling'] }
      ],
      replicates: [{ kind: 'spiked', count: 2, labels: 'A\na' }],
      spikes: [
        { kind: 'spiked', targetsNg: 50, entries: { [injected.id]: 5 } },
        { kind: 'method blank', targetsNg: 50 }
      ],
      additions: [
        { panelEntryId: injected.id, point: 'sample', amountNg: 5 },
        { panelEntryId: target.id, point: 'vial', concentrationNgPerMl: 5 }
      ]
    })
  );
  const error = await attempt.catch((thrown: ExpectedError) => thrown);
  expect(error).toBeInstanceOf(Invalid);
  const paths = new Set((error as Invalid).problems.map(({ path }) => path));
  expect([...paths].sort()).toEqual(
    [
      'additions.0.point',
      'additions.1.point',
      'fractions',
      'fractions.0.passedStages',
      'replicates.0.labels',
      `spikes.0.entries.${injected.id}`,
      'spikes.1.targetsNg',
      'subtract'
    ].sort()
  );
  expect(await getExperiments(actor, code)).toEqual([]);
});

test('preparations are added later, numbered on, and taken out only while nothing rests on them', async () => {
  const { actor, code, study, target } = await planned();
  const number = await createExperiment(actor, code, makeExperimentForm());
  const more = replicatesForm.parse({ kind: 'spiked', count: 2, batch: 'Tuesday' });
  expect(await addReplicates(actor, code, number, more)).toEqual(['E1-S4', 'E1-S5']);
  await expect(
    addReplicates(actor, code, number, replicatesForm.parse({ kind: 'unspiked', count: 1, labels: 'e1 s5' }))
  ).rejects.toBeInstanceOf(Invalid);
  const view = await getExperiment(actor, code, number);
  const [first, second] = view.replicates;
  await makeStoredImport(actor, study, [
    {
      experimentId: view.id,
      replicateId: first!.id,
      fractionId: view.fractions[0]!.id,
      analyteId: target.analyteId,
      reported: 1
    }
  ]);
  await expect(removeReplicate(actor, code, number, first!.id)).rejects.toBeInstanceOf(Conflict);
  await removeReplicate(actor, code, number, second!.id);
  expect((await getExperiment(actor, code, number)).replicates).toHaveLength(4);
});

test('fractions are renamed and reordered; one with data stays; a change under data asks why', async () => {
  const { actor, code, study, target } = await planned();
  const fractions = [
    { name: 'First', kind: 'elution', countsAs: 'method' },
    { name: 'Second', kind: 'second elution', countsAs: 'balance', passedStages: ['drying', 'concentration'] }
  ];
  const number = await createExperiment(actor, code, makeExperimentForm({ fractions }));
  const view = await getExperiment(actor, code, number);
  const [first, second] = view.fractions;
  const swapped = [
    { ...fractions[1], id: second!.id, name: 'First' },
    { ...fractions[0], id: first!.id, name: 'Second' }
  ];
  await updateExperiment(actor, code, number, await changeOf(actor, code, number, { fractions: swapped }));
  const after = await getExperiment(actor, code, number);
  expect(after.fractions.map(({ id, name }) => [id, name])).toEqual([
    [second!.id, 'First'],
    [first!.id, 'Second']
  ]);
  expect(after.fractions[0]?.passedStages).toEqual(['drying', 'concentration']);

  await makeStoredImport(actor, study, [
    {
      experimentId: view.id,
      replicateId: view.replicates[0]!.id,
      fractionId: first!.id,
      analyteId: target.analyteId,
      reported: 1
    }
  ]);
  const without = await changeOf(actor, code, number, {
    fractions: [{ ...swapped[0], countsAs: 'method' }],
    reason: 'tidying'
  });
  await expect(updateExperiment(actor, code, number, without)).rejects.toThrow(/Stored data speak of Second/);
  const silent = await changeOf(actor, code, number, { spikes: [{ kind: 'spiked', targetsNg: 60 }] });
  await expect(updateExperiment(actor, code, number, silent)).rejects.toThrow(/Say why/);
  await updateExperiment(actor, code, number, { ...silent, reason: 'stock was 20 % stronger' });
  expect((await getExperiment(actor, code, number)).spikes.every(({ amountNg }) => amountNg === 60)).toBe(
    true
  );
});

test('of two people who change an experiment, the second gets a conflict', async () => {
  const { actor, code } = await planned();
  const number = await createExperiment(actor, code, makeExperimentForm());
  const form = await changeOf(actor, code, number, { title: 'Changed' });
  const outcomes = await Promise.allSettled([1, 2].map(() => updateExperiment(actor, code, number, form)));
  expect(outcomes.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
  expect(outcomes.find(({ status }) => status === 'rejected')).toMatchObject({
    reason: expect.any(Conflict)
  });
});

test('the same place is set aside once, by two people at once too, and counts again when lifted', async () => {
  const { actor, code } = await planned();
  const number = await createExperiment(actor, code, makeExperimentForm());
  const view = await getExperiment(actor, code, number);
  const form = {
    replicateId: view.replicates[0]!.id,
    fractionId: null,
    analyteId: null,
    cause: 'Cartridge ran dry'
  };
  const outcomes = await Promise.allSettled([1, 2].map(() => exclude(actor, code, number, form)));
  expect(outcomes.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
  const refused = outcomes.find((outcome) => outcome.status === 'rejected');
  expect(refused?.reason).toBeInstanceOf(Conflict);
  expect(refused?.reason).toMatchObject({ current: { cause: 'Cartridge ran dry', by: actor.name } });

  const [standing] = await listExclusions(actor, code);
  const lifting = { exclusionId: standing!.id, reason: 'It was S2' };
  await lift(actor, code, lifting);
  await expect(lift(actor, code, lifting)).rejects.toBeInstanceOf(Conflict);
  await exclude(actor, code, number, { ...form, cause: 'Spilled' });
  expect(
    (await listExclusions(actor, code)).map(({ cause, lifted }) => [cause, lifted?.reason ?? null])
  ).toEqual([
    ['Spilled', null],
    ['Cartridge ran dry', 'It was S2']
  ]);
  expect(await recentCauses(actor)).toEqual(['Spilled', 'Cartridge ran dry']);
});

test('an analyst notes observations and sets aside, and plans nothing; a reviewer does neither', async () => {
  const { actor, code } = await planned();
  const number = await createExperiment(actor, code, makeExperimentForm());
  const [replicate] = (await getExperiment(actor, code, number)).replicates;
  const analyst: Actor = { ...(await makeMember({ role: 'analyst' })), labId: actor.labId };
  const reviewer: Actor = { ...(await makeMember({ role: 'reviewer' })), labId: actor.labId };
  const note = { replicateId: replicate!.id, seen: replicate!.seen, observations: 'Foam at 200 mL' };
  await recordObservation(analyst, code, number, note);
  await expect(recordObservation(analyst, code, number, note)).rejects.toBeInstanceOf(Conflict);
  await expect(createExperiment(analyst, code, makeExperimentForm())).rejects.toBeInstanceOf(Forbidden);
  const place = { replicateId: replicate!.id, fractionId: null, analyteId: null, cause: 'Foam' };
  await exclude(analyst, code, number, place);
  await expect(exclude(reviewer, code, number, place)).rejects.toBeInstanceOf(Forbidden);
});

test('ids of another study or lab are not found', async () => {
  const { actor, code } = await planned();
  const elsewhere = await planned();
  const number = await createExperiment(actor, code, makeExperimentForm());
  const theirs = await createExperiment(elsewhere.actor, elsewhere.code, makeExperimentForm());
  const foreign = (await getExperiment(elsewhere.actor, elsewhere.code, theirs)).replicates[0]!;
  const place = { replicateId: foreign.id, fractionId: null, analyteId: null, cause: 'Foam' };
  await expect(exclude(actor, code, number, place)).rejects.toBeInstanceOf(NotFound);
  await expect(getExperiment(elsewhere.actor, code, number)).rejects.toBeInstanceOf(NotFound);
  await expect(getExperiment(actor, code, 99)).rejects.toBeInstanceOf(NotFound);
  await expect(removeReplicate(actor, code, number, foreign.id)).rejects.toBeInstanceOf(NotFound);
  const calibration = makeExperimentForm({ analystId: elsewhere.actor.userId });
  await expect(createExperiment(actor, code, calibration)).rejects.toBeInstanceOf(Invalid);
});

test('one preparation can have received another amount, and then what the experiment says again', async () => {
  const { actor, code, target } = await planned();
  const number = await createExperiment(actor, code, makeExperimentForm());
  const replicateId = (await getExperiment(actor, code, number)).replicates[0]!.id;
  const spike = { replicateId, panelEntryId: target.id, amountNg: 40, reason: 'pipette stuck' };
  await setReplicateSpike(actor, code, number, spike);
  expect((await getExperiment(actor, code, number)).replicates[0]?.spikes).toMatchObject([
    { amountNg: 40, name: 'Target' }
  ]);
  await setReplicateSpike(actor, code, number, { ...spike, amountNg: null, reason: 'it was not' });
  expect((await getExperiment(actor, code, number)).replicates[0]?.spikes).toEqual([]);
});

test('a variant has ordered steps and at most one experiment for each stage', async () => {
  const { actor, code, study } = await planned();
  await createVariant(actor, code, { code: 'A', name: 'Mixed mode', description: '' });
  const steps = [
    { stageKey: 'extraction', kind: 'load', instruction: 'Load 1 L at pH 7.', ph: '7,0', minutes: '1 h' },
    {
      stageKey: 'extraction',
      kind: 'elute',
      instruction: 'Elute.',
      solvent: 'methanol',
      volumeMl: '5 mL',
      minutes: '10'
    },
    { stageKey: 'concentration', kind: 'evaporate', instruction: 'To 1 mL.', temperatureC: '40' }
  ];
  await setProcedureSteps(actor, code, 'A', stepsForm.parse({ version: 1, steps }));
  const variant = await getVariant(actor, code, 'a');
  expect(variant.steps.map(({ kind }) => kind)).toEqual(['load', 'elute', 'evaporate']);
  expect(variant.steps[0]?.parameters).toEqual({ ph: 7, minutes: 60 });
  expect(variant.totals).toEqual({ solventMl: 5, minutes: 70 });
  await expect(
    setProcedureSteps(actor, code, 'A', stepsForm.parse({ version: 1, steps: [] }))
  ).rejects.toBeInstanceOf(Conflict);

  await createExperiment(actor, code, makeExperimentForm({ variantCode: 'A' }));
  await createExperiment(actor, code, makeExperimentForm({ stageKey: 'drying', medium: 'solvent' }));
  const choice = { matrix: '', levelLabel: '' };
  await chooseStageEvidence(actor, code, 'A', { stageKey: 'drying', experimentNumber: 2, ...choice });
  expect((await getVariant(actor, code, 'A')).evidence.map((e) => [e.stageKey, e.experimentNumber])).toEqual([
    ['drying', 2],
    ['extraction', 1]
  ]);
  await expect(
    chooseStageEvidence(actor, code, 'A', { stageKey: 'concentration', experimentNumber: 2, ...choice })
  ).rejects.toThrow(/not spiked at this stage/);
  await makeVariant(study, { code: 'B' });
  await chooseStageEvidence(actor, code, 'B', { stageKey: 'drying', experimentNumber: 2, ...choice });
  await expect(
    chooseStageEvidence(actor, code, 'B', { stageKey: 'extraction', experimentNumber: 1, ...choice })
  ).rejects.toThrow(/already stands for variant A/);
  await expect(removeVariant(actor, code, 'B', 1)).rejects.toBeInstanceOf(Conflict);
  await chooseStageEvidence(actor, code, 'B', { stageKey: 'drying', experimentNumber: 0, ...choice });
  await removeVariant(actor, code, 'B', 1);
  await expect(getVariant(actor, code, 'B')).rejects.toBeInstanceOf(NotFound);
});
