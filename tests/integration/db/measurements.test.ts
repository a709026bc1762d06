import { expect, test } from 'vitest';
import { copyMeasurements, type NewMeasurement } from '../../../src/lib/server/db/measurement-copy';
import {
  readCalibrationMeasurements,
  readExperimentMeasurements,
  readStudyMeasurements
} from '../../../src/lib/server/db/measurement-read';
import { newId } from '../../../src/lib/server/db/entity-id';
import { Measurement } from '../../../src/lib/server/db/models/measurement';
import { inTransaction } from '../../../src/lib/server/db/transaction';
import { makeCalibrationSet } from '../../factories/calibration-set';
import { makeExperiment } from '../../factories/experiment';
import { makeMember } from '../../factories/member';
import { makePanelEntry } from '../../factories/panel-entry';
import { makeReceivedImport, makeStoredImport } from '../../factories/stored-import';
import { makeStudy, setStudyState } from '../../factories/study';

async function bench() {
  const actor = await makeMember();
  const made = await makeStudy(actor);
  const entry = await makePanelEntry(made.study);
  const other = await makePanelEntry(made.study);
  const { experiment, fractions, replicates } = await makeExperiment(made);
  const place = (index: number) => ({
    experimentId: experiment.id,
    replicateId: replicates[index]?.id ?? '',
    fractionId: fractions[0]?.id ?? ''
  });
  const where = { labId: actor.labId, studyId: made.study.id, experimentIds: [experiment.id] };
  return { actor, ...made, entry, other, experiment, place, where };
}

const row = (labId: string, importId: string, extra: Partial<NewMeasurement>): NewMeasurement => ({
  labId,
  importId,
  injectionId: newId(),
  experimentId: newId(),
  calibrationSetId: null,
  analyteId: newId(),
  basis: 'area',
  state: 'value',
  reported: 1,
  internalArea: null,
  internalAnalyteId: null,
  limitValue: null,
  rawText: '1',
  sheet: 1,
  sheetRow: 1,
  sheetColumn: 1,
  ...extra
});

test('numbers and texts come back exactly as they went in', async () => {
  const { actor, study, entry, other, place, where } = await bench();
  const values = [0.1 + 0.2, 1e-300, 1.7976931348623157e308];
  const texts = ['back\\slash\tand tab', 'line\r\nbreak', '\\N'];
  await makeStoredImport(
    actor,
    study,
    values.map((reported, index) => ({
      ...place(index),
      analyteId: entry.analyteId,
      reported,
      internalArea: reported / 3,
      internalAnalyteId: other.analyteId,
      rawText: texts[index] ?? '',
      finalVolumeMl: 0.5,
      dilution: 10
    }))
  );
  const read = await readExperimentMeasurements(where);
  const sorted = [...read].sort((a, b) => a.sheetRow - b.sheetRow);
  expect(sorted.map((found) => found.reported)).toEqual(values);
  expect(sorted.map((found) => found.internalArea)).toEqual(values.map((value) => value / 3));
  expect(sorted.map((found) => found.rawText)).toEqual(texts);
  expect(sorted[0]?.injection).toMatchObject({ dilution: 10, number: 1 });
  expect(sorted[0]?.injection.extract).toMatchObject({ ...place(0), finalVolumeMl: 0.5, aliquotShare: 1 });
});

test('a copy that breaks anywhere stores nothing', async () => {
  const { actor, study, experiment, entry } = await bench();
  const before = await Measurement.count({ where: { labId: actor.labId } });
  const failing = inTransaction(actor, { study: study.id }, async () => {
    const received = await makeReceivedImport(actor, study);
    const good = { experimentId: experiment.id, analyteId: entry.analyteId };
    function* rows() {
      for (let index = 0; index < 5000; index += 1) yield row(actor.labId, received.id, good);
      yield row(actor.labId, received.id, { ...good, calibrationSetId: newId() });
    }
    await copyMeasurements(rows());
  });
  await expect(failing).rejects.toThrow(/violates check constraint/);
  expect(await Measurement.count({ where: { labId: actor.labId } })).toBe(before);
});

test('rows that break while they are produced, and numbers that are none, store nothing', async () => {
  const { actor, study } = await bench();
  const copy = (make: (importId: string) => Iterable<NewMeasurement>) =>
    inTransaction(actor, { study: study.id }, async () => {
      const received = await makeReceivedImport(actor, study);
      return copyMeasurements(make(received.id));
    });
  await expect(
    copy(function* (importId) {
      yield row(actor.labId, importId, {});
      throw new Error('the reader stopped');
    })
  ).rejects.toThrow('the reader stopped');
  await expect(copy((importId) => [row(actor.labId, importId, { reported: Number.NaN })])).rejects.toThrow(
    /finite/
  );
  expect(await Measurement.count({ where: { labId: actor.labId } })).toBe(0);
});

test('measurements enter only with an import that is being stored, of the same lab, in an open study', async () => {
  const { actor, study, place, entry } = await bench();
  const stored = await makeStoredImport(actor, study, [
    { ...place(0), analyteId: entry.analyteId, reported: 1 }
  ]);
  const into = (labId: string, importId: string) =>
    inTransaction(null, {}, () => copyMeasurements([row(labId, importId, {})]));
  await expect(into(actor.labId, stored.id)).rejects.toThrow(/being stored/);
  await expect(into(actor.labId, newId())).rejects.toThrow(/being stored/);
  const received = await makeReceivedImport(actor, study);
  const stranger = await makeMember();
  await expect(into(stranger.labId, received.id)).rejects.toThrow(/being stored/);
  await setStudyState(study.id, 'in review');
  await expect(into(actor.labId, received.id)).rejects.toThrow(/being stored/);
});

test('a later import covers the places it has rows for, and withdrawing it brings the earlier ones back', async () => {
  const { actor, study, entry, other, place, where } = await bench();
  const { analyteId } = entry;
  await makeStoredImport(actor, study, [
    { ...place(0), analyteId, reported: 10 },
    { ...place(1), analyteId, reported: 20 },
    { ...place(0), analyteId: other.analyteId, reported: 30 }
  ]);
  const later = await makeStoredImport(actor, study, [
    { ...place(0), analyteId, reported: 11 },
    { ...place(1), analyteId, reported: null }
  ]);
  const values = async () =>
    (await readExperimentMeasurements(where))
      .map(({ reported }) => reported)
      .sort((a, b) => Number(a) - Number(b));
  expect(await values()).toEqual([null, 11, 30]);
  await later.update({
    state: 'withdrawn',
    endReason: 'wrong file',
    endedBy: actor.userId,
    endedAt: new Date()
  });
  expect(await values()).toEqual([10, 20, 30]);
  expect(await readStudyMeasurements(where)).toHaveLength(3);
});

test('of three imports that overlap in part the last one with a number counts, place by place and analyte by analyte', async () => {
  const { actor, study, entry, other, place, where } = await bench();
  const third = await makePanelEntry(study);
  const analytes = [entry.analyteId, other.analyteId, third.analyteId];
  const store = (numbers: readonly (readonly [place: number, analyte: number, reported: number])[]) =>
    makeStoredImport(
      actor,
      study,
      numbers.map(([at, analyte, reported]) => ({ ...place(at), analyteId: analytes[analyte]!, reported }))
    );
  await store([
    [0, 0, 1],
    [0, 1, 2],
    [0, 2, 3],
    [1, 0, 4],
    [1, 1, 5],
    [2, 0, 6]
  ]);
  await store([
    [0, 0, 11],
    [0, 1, 12],
    [1, 0, 14]
  ]);
  const last = await store([
    [0, 1, 22],
    [2, 0, 26],
    [2, 1, 27]
  ]);
  const values = async () =>
    (await readExperimentMeasurements(where)).map(({ reported }) => Number(reported)).sort((a, b) => a - b);
  expect(await values()).toEqual([3, 5, 11, 14, 22, 26, 27]);
  await last.update({
    state: 'withdrawn',
    endReason: 'wrong file',
    endedBy: actor.userId,
    endedAt: new Date()
  });
  expect(await values()).toEqual([3, 5, 6, 11, 12, 14]);
});

test('an import that is only received does not count, and another lab reads nothing', async () => {
  const { actor, study, entry, place, where } = await bench();
  const stranger = await makeMember();
  await inTransaction(actor, { study: study.id }, async () => {
    const received = await makeReceivedImport(actor, study);
    await copyMeasurements([row(actor.labId, received.id, { experimentId: place(0).experimentId })]);
  });
  expect(await readExperimentMeasurements(where)).toEqual([]);
  await makeStoredImport(actor, study, [{ ...place(0), analyteId: entry.analyteId, reported: 1 }]);
  expect(await readExperimentMeasurements(where)).toHaveLength(1);
  expect(await readExperimentMeasurements({ ...where, labId: stranger.labId })).toEqual([]);
});

test('the counting measurements of a calibration set come with their levels', async () => {
  const { actor, study, entry } = await bench();
  const { set, levels } = await makeCalibrationSet(study, { panelEntryIds: [entry.id] });
  const { analyteId } = entry;
  const numbers = levels.map((level, index) => ({
    calibrationSetId: set.id,
    levelId: level.id,
    analyteId,
    reported: (index + 1) * 100
  }));
  await makeStoredImport(actor, study, numbers);
  await makeStoredImport(actor, study, [{ ...numbers[0]!, reported: 111 }]);
  const read = await readCalibrationMeasurements({
    labId: actor.labId,
    studyId: study.id,
    calibrationSetId: set.id
  });
  const byLevel = new Map(read.map((found) => [found.injection.levelId, found.reported]));
  expect(levels.map((level) => byLevel.get(level.id))).toEqual([111, 200, 300, 400, 500]);
});
