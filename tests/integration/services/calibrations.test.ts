import { expect, test } from 'vitest';
import { calibrationSetForm, fitForm } from '../../../src/lib/schemas/calibration';
import { Conflict, Forbidden, Invalid, NotFound } from '../../../src/lib/server/errors';
import { chooseFit } from '../../../src/lib/server/services/calibration-choices';
import {
  createCalibrationSet,
  getCalibrationSet,
  getCalibrationSets
} from '../../../src/lib/server/services/calibrations';
import { makeMember } from '../../factories/member';
import { makePanelEntry } from '../../factories/panel-entry';
import { makeStoredImport } from '../../factories/stored-import';
import { makeStudy } from '../../factories/study';

async function calibrated() {
  const actor = await makeMember();
  const { study } = await makeStudy(actor);
  const standard = await makePanelEntry(study, { name: 'Standard', role: 'injection internal standard' });
  const one = await makePanelEntry(study, { name: 'One' });
  const double = await makePanelEntry(study, { name: 'Double', internalStandardEntryId: standard.id });
  const absent = await makePanelEntry(study, { name: 'Absent' });
  const setId = await createCalibrationSet(
    actor,
    study.code,
    calibrationSetForm.parse({
      name: 'March standards',
      instrument: 'Instrument 1',
      calibratedOn: '2026-03-02',
      defaultModel: 'linear',
      defaultWeighting: '1/x',
      levels: [1, 2, 5, 10, 20].map((value, index) => ({
        label: `L${index + 1}`,
        concentrationNgPerMl: `${value} \u00b5g/L`
      })),
      factors: { [double.id]: '2', [absent.id]: '0' },
      constants: { [standard.id]: '10' },
      concentrations: { [double.id]: { L5: '41' } }
    })
  );
  return { actor, study, code: study.code, setId, standard, one, double };
}

const fit = (fields: object) =>
  fitForm.parse({ model: 'linear', weighting: '1/x', reason: 'residuals', seenRevision: 0, ...fields });

test('levels hold their concentration times the factor, a constant for standards, and single values in place', async () => {
  const { actor, code, setId, standard, one, double } = await calibrated();
  const view = await getCalibrationSet(actor, code, setId);
  const row = (id: string) => view.levelList.map((level) => view.concentrations[id]?.[level.id]);
  expect(row(one.id)).toEqual([1, 2, 5, 10, 20]);
  expect(row(double.id)).toEqual([2, 4, 10, 20, 41]);
  expect(row(standard.id)).toEqual([10, 10, 10, 10, 10]);
  expect(view.missing).toEqual(['Absent']);
  expect(view.fits.map(({ name }) => name)).toEqual(['One', 'Double']);
  expect(await getCalibrationSets(actor, code)).toMatchObject([
    { levels: 5, entries: 3, values: 0, calibratedOn: '2026-03-02' }
  ]);
});

test('the fit is read from the stored areas: level errors, RSE and r\u00b2', async () => {
  const { actor, code, study, setId, one, double, standard } = await calibrated();
  const { levelList } = await getCalibrationSet(actor, code, setId);
  const areas = [103, 205, 495, 1010, 1980];
  await makeStoredImport(actor, study, [
    ...levelList.map((level, index) => ({
      calibrationSetId: setId,
      levelId: level.id,
      analyteId: one.analyteId,
      reported: areas[index]!
    })),
    ...levelList.map((level, index) => ({
      calibrationSetId: setId,
      levelId: level.id,
      analyteId: double.analyteId,
      reported: areas[index]! * 2,
      internalArea: 1000,
      internalAnalyteId: standard.analyteId
    }))
  ]);
  await chooseFit(actor, code, setId, fit({ panelEntryId: one.id, model: 'average response factor' }));
  const view = await getCalibrationSet(actor, code, setId);
  const [external, ratio] = view.fits;
  // By hand: factors 103, 102.5, 99, 101, 99 have the mean 100.9; L1 reads back 103/100.9 = 1.02081, 2.08 % high.
  expect(external?.coefficients[0]).toBeCloseTo(100.9, 10);
  expect(external?.points[0]?.errorPercent).toBeCloseTo(2.0813, 3);
  // SD of the factors: sqrt((4.41 + 2.56 + 3.61 + 0.01 + 3.61)/4) = 1.88414, 1.8673 % of 100.9.
  expect(external?.responseFactorRsd).toBeCloseTo(1.8673, 3);
  expect(external).toMatchObject({
    revision: 1,
    scale: 'concentration',
    choice: { by: actor.name, reason: 'residuals' }
  });
  expect(ratio).toMatchObject({ revision: 0, scale: 'ratio', standardName: 'Standard', refusal: null });
  expect(ratio?.points.map(({ x }) => x)).toEqual([0.2, 0.4, 1, 2, 4.1]);
});

test('levels are left out at the ends only, and enough of them stay', async () => {
  const { actor, code, setId, one } = await calibrated();
  const { levelList } = await getCalibrationSet(actor, code, setId);
  const ids = levelList.map(({ id }) => id);
  const choose = (levelsLeftOut: readonly (string | undefined)[], fields: object = {}) =>
    chooseFit(actor, code, setId, fit({ panelEntryId: one.id, levelsLeftOut, ...fields }));
  await expect(choose([ids[2]])).rejects.toThrow(/L3 lies within the range/);
  await expect(choose([ids[0], ids[1], ids[4]])).rejects.toThrow(/2 levels are left/);
  await expect(choose(ids)).rejects.toBeInstanceOf(Invalid);
  expect(await choose([ids[0], ids[4]])).toBe(1);
  await expect(choose([])).rejects.toBeInstanceOf(Conflict);
  expect(await choose([], { seenRevision: 1, model: 'quadratic' })).toBe(2);
  const view = await getCalibrationSet(actor, code, setId);
  expect(view.fits[0]?.earlier.map(({ revision }) => revision)).toEqual([1]);
});

test('an analyst does not choose, and another lab finds nothing', async () => {
  const { actor, code, setId, one } = await calibrated();
  const analyst = await makeMember({ role: 'analyst' });
  await expect(chooseFit(analyst, code, setId, fit({ panelEntryId: one.id }))).rejects.toBeInstanceOf(
    Forbidden
  );
  const stranger = await makeMember();
  await expect(getCalibrationSet(stranger, code, setId)).rejects.toBeInstanceOf(NotFound);
  await expect(chooseFit(stranger, code, setId, fit({ panelEntryId: one.id }))).rejects.toBeInstanceOf(
    NotFound
  );
  await expect(chooseFit(actor, code, 'not an id', fit({ panelEntryId: one.id }))).rejects.toBeInstanceOf(
    NotFound
  );
});
