import { expect, test } from 'vitest';
import { analyteForm, analyteVersionForm } from '../../../src/lib/schemas/analyte';
import {
  createAnalyte,
  findByNames,
  getAnalyte,
  listAnalytes,
  newAnalyteVersion
} from '../../../src/lib/server/services/library';
import {
  createCriteriaSet,
  listCriteriaSets,
  newCriteriaVersion
} from '../../../src/lib/server/services/criteria-sets';
import { Conflict, Forbidden, Invalid, NotFound } from '../../../src/lib/server/errors';
import { makeAnalyte } from '../../factories/analyte';
import { makeCriteriaSet, makeRule } from '../../factories/criteria-set';
import { makeLab } from '../../factories/lab';
import { makeMember } from '../../factories/member';

const form = (fields: object) => analyteForm.parse(fields);
const version = (fields: object) => analyteVersionForm.parse(fields);

test('an analyte keeps every version with its sources', async () => {
  const actor = await makeMember();
  const id = await createAnalyte(
    actor,
    form({
      name: 'Caffeine',
      cas: '58-08-2',
      logKow: '-0,07',
      pkaAcid: '14',
      sources: { logKow: 'handbook' }
    })
  );
  expect(
    await newAnalyteVersion(
      actor,
      id,
      version({ name: 'Caffeine', cas: '58-08-2', logKow: '-0.05', seenVersion: 1 })
    )
  ).toBe(2);
  const view = await getAnalyte(actor, id);
  expect(view.versions.map(({ version: number, logKow }) => [number, logKow])).toEqual([
    [2, -0.05],
    [1, -0.07]
  ]);
  expect(view.versions[1]?.sources).toEqual({ logKow: 'handbook' });
});

test('a change on top of a version that somebody else replaced is refused and shows the new one', async () => {
  const actor = await makeMember();
  const id = await createAnalyte(actor, form({ name: 'Atrazine' }));
  await newAnalyteVersion(actor, id, version({ name: 'Atrazine', formula: 'C8H14ClN5', seenVersion: 1 }));
  const stale = newAnalyteVersion(actor, id, version({ name: 'Atrazine', formula: 'C8', seenVersion: 1 }));
  await expect(stale).rejects.toBeInstanceOf(Conflict);
  await expect(stale).rejects.toMatchObject({ current: { formula: 'C8H14ClN5', version: 2 } });
});

test('names and CAS numbers of the library are distinct, capitals and dashes folded', async () => {
  const actor = await makeMember();
  await createAnalyte(actor, form({ name: '2,4-Dichlorophenol', synonyms: '2,4-DCP', cas: '120-83-2' }));
  for (const twin of [
    { name: '2,4-dichloro\u2010phenol' },
    { name: '2,4-dcp' },
    { name: 'Other', cas: '120-83-2' }
  ]) {
    await expect(createAnalyte(actor, form(twin)), JSON.stringify(twin)).rejects.toBeInstanceOf(Invalid);
  }
  await Promise.allSettled([1, 2, 3].map(() => createAnalyte(actor, form({ name: 'Only once' }))));
  expect((await listAnalytes(actor, { text: 'only once' })).total).toBe(1);
});

test('pasted lines are recognised by CAS number, name and synonym, in any cell', async () => {
  const actor = await makeMember();
  await makeAnalyte(actor.labId, { name: 'Caffeine', cas: '58-08-2', synonyms: ['1,3,7-Trimethylxanthine'] });
  await makeAnalyte(actor.labId, { name: '\u03b1-Endosulfan', cas: '959-98-8' });
  await makeAnalyte(actor.labId, { name: 'Carbamazepine', cas: '298-46-4' });
  const found = await findByNames(actor, [
    'caffeine',
    '58-08-2',
    'Caffeine (CAS 58-08-2)',
    '17\t58\u201108\u20112\tcafeine from the list',
    '1,3,7-trimethyl-xanthine',
    'alpha endosulfan',
    '',
    'Carbamazepin',
    'Caffeine 298-46-4',
    '58-08-3',
    'Unobtainium'
  ]);
  expect(found.map(({ analyte, matchedBy }) => [analyte?.name ?? null, matchedBy])).toEqual([
    ['Caffeine', 'name'],
    ['Caffeine', 'CAS number'],
    ['Caffeine', 'CAS number'],
    ['Caffeine', 'CAS number'],
    ['Caffeine', 'synonym'],
    ['\u03b1-Endosulfan', 'name'],
    [null, null],
    [null, null],
    [null, null],
    [null, null]
  ]);
  const [near, contradiction, checkDigit, nothing] = found.slice(-4);
  expect(near?.near.map(({ name }) => name)).toEqual(['Carbamazepine']);
  expect(contradiction?.problem).toBe('The CAS number is that of Carbamazepine, the name that of Caffeine.');
  expect(checkDigit?.problem).toMatch(/check digit/);
  expect(nothing).toMatchObject({ near: [], problem: 'The library has no such name.' });
});

test('two analytes that share a synonym are both offered instead of one being guessed', async () => {
  const actor = await makeMember();
  for (const name of ['o-Cresol', 'm-Cresol']) await makeAnalyte(actor.labId, { name, synonyms: ['Cresol'] });
  const [match] = await findByNames(actor, ['cresol']);
  expect(match?.analyte).toBeNull();
  expect(match?.near.map(({ name }) => name).sort()).toEqual(['m-Cresol', 'o-Cresol']);
});

test('the library of another lab is neither listed, found nor opened', async () => {
  const actor = await makeMember();
  const stranger = await makeMember();
  const { id } = await makeAnalyte(actor.labId, { name: 'Diuron', cas: '330-54-1' });
  const criteria = await makeCriteriaSet(actor.labId);
  expect((await listAnalytes(stranger)).total).toBe(0);
  expect((await findByNames(stranger, ['Diuron', '330-54-1'])).every(({ analyte }) => analyte === null)).toBe(
    true
  );
  await expect(getAnalyte(stranger, id)).rejects.toBeInstanceOf(NotFound);
  await expect(getAnalyte(stranger, 'no id at all')).rejects.toBeInstanceOf(NotFound);
  await expect(
    newAnalyteVersion(stranger, id, version({ name: 'X', seenVersion: 1 }))
  ).rejects.toBeInstanceOf(NotFound);
  const rules = { name: 'X', rules: [makeRule()], seenVersion: 1 };
  await expect(newCriteriaVersion(stranger, criteria.id, rules)).rejects.toBeInstanceOf(NotFound);
  expect(await listCriteriaSets(stranger)).toEqual([]);
});

test('analysts and reviewers read the library and do not change it', async () => {
  const lab = await makeLab();
  for (const role of ['analyst', 'reviewer'] as const) {
    const actor = await makeMember({ lab, role });
    await expect(createAnalyte(actor, form({ name: 'New' }))).rejects.toBeInstanceOf(Forbidden);
    await expect(createCriteriaSet(actor, { name: 'New', rules: [makeRule()] })).rejects.toBeInstanceOf(
      Forbidden
    );
    expect((await listAnalytes(actor)).total).toBe(0);
  }
});
