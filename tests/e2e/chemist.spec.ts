import { expect, test, type Page } from '@playwright/test';
import { openAs } from './sessions';
import { freshCode, makeSmallStudy, smallAmounts, type SmallStudy } from './small-study';
import { csvUpload } from './spreadsheets';

/** The chemist's day: a list that is nearly right, forms that come back, two tabs, no JavaScript. */

test('a pasted list finds names, numbers and synonyms, and offers what is near to the rest', async ({
  browser
}) => {
  const chemist = await openAs(browser, 'chemist');
  await chemist.goto('/studies/new');
  await chemist
    .getByLabel('Targets')
    .fill('atrazine\n1912-24-9\nCarbamazepin\n298-46-5\nDiclofenac\t15307-86-5\nGlimmerol');
  await chemist.getByRole('button', { name: 'Look them up' }).click();
  await expect(chemist.getByRole('heading', { name: '2 found' })).toBeVisible();
  await expect(chemist.getByText('One more stands in the list twice and counts once.')).toBeVisible();
  await expect(chemist.getByRole('heading', { name: '3 not recognised' })).toBeVisible();
  const missing = chemist.getByRole('listitem');
  await expect(missing.filter({ hasText: 'Carbamazepin' }).first()).toContainText('Carbamazepine');
  await expect(missing.filter({ hasText: '298-46-5' })).toContainText('check digit');
  await expect(missing.filter({ hasText: 'Glimmerol' })).toContainText('The library has no such name.');
  await expect(chemist.getByLabel('Targets')).toHaveValue(/Glimmerol/);
});

test('a form that comes back keeps what was typed, names what is wrong at its field, and stores when mended', async ({
  browser
}) => {
  const chemist = await openAs(browser, 'chemist');
  const { base } = await makeSmallStudy(chemist);
  await chemist.goto(`${base}/experiments/new?stage=extraction`);
  await chemist.getByLabel('Title').fill('A third series');
  await chemist.getByLabel('Sample volume').fill('half a litre');
  await chemist
    .getByRole('region', { name: 'Fractions' })
    .getByRole('listitem')
    .nth(1)
    .getByLabel('Fraction', { exact: true })
    .fill('Aqueous layer');
  const spiked = chemist.getByRole('region', { name: 'Preparations' }).getByRole('listitem').first();
  await spiked.getByLabel('How many').fill('2');
  await spiked.getByLabel('Labels').fill('One\nTwo\nThree');
  await chemist.getByLabel('All targets, spiked', { exact: true }).fill('0.2 µg');
  await chemist.getByRole('button', { name: 'Store the plan' }).click();

  await expect(chemist.getByText('2 entries need mending')).toBeVisible();
  await expect(chemist.getByLabel('Title')).toHaveValue('A third series');
  await expect(chemist.getByLabel('Sample volume')).toHaveValue('half a litre');
  await expect(chemist.getByLabel('Sample volume')).toHaveAccessibleDescription(/half a litre|number|mL/);
  await expect(chemist.getByLabel('Spike level')).toHaveAccessibleDescription(/Name the spike level/);
  await expect(spiked.getByLabel('Labels')).toHaveValue('One\nTwo\nThree');
  await expect(chemist.getByLabel('All targets, spiked', { exact: true })).toHaveValue('0.2 µg');

  await chemist.getByLabel('Sample volume').fill('0.5 L');
  await chemist.getByLabel('Spike level').fill('200 ng');
  await chemist.getByRole('button', { name: 'Store the plan' }).click();
  await expect(chemist.getByText('One entry needs mending')).toBeVisible();
  await expect(spiked.getByLabel('Labels')).toHaveAccessibleDescription(
    /3 labels stand here for 2 preparations/
  );
  await spiked.getByLabel('Labels').fill('One\nTwo');
  await chemist.getByRole('button', { name: 'Store the plan' }).click();
  await expect(chemist.getByText('The experiment is planned.')).toBeVisible();
  await expect(chemist.getByRole('row', { name: /One/ })).toContainText('500 mL');
  await expect(chemist.getByText(/200 ng of Atrazine, Carbamazepine/)).toBeVisible();
});

test('two people who change the same thing are told, and nothing of either is lost', async ({ browser }) => {
  const chemist = await openAs(browser, 'chemist');
  const { base } = await makeSmallStudy(chemist);
  const manager = await openAs(browser, 'manager');
  for (const page of [chemist, manager]) await page.goto(`${base}/variants/A?edit=name`);
  await chemist.getByLabel('Name').fill('Polymer, pH 7');
  await chemist.getByRole('button', { name: 'Save' }).click();
  await expect(chemist.getByRole('heading', { level: 1 })).toHaveText('Variant A, Polymer, pH 7');
  await manager.getByLabel('Name').fill('Polymer, pH 2');
  await manager.getByRole('button', { name: 'Save' }).click();
  await expect(manager.getByLabel('Name')).toHaveValue('Polymer, pH 2');
  await expect(manager.getByRole('main')).toContainText('Polymer, pH 7');
});

test.describe('without JavaScript', () => {
  const still = { javaScriptEnabled: false };
  let study: SmallStudy;

  test('a study is created, an experiment planned and a replicate set aside', async ({ browser }) => {
    const chemist: Page = await openAs(browser, 'chemist', still);
    const code = freshCode('STILL');
    await chemist.goto('/studies/new');
    await chemist.getByLabel('Targets').fill('Atrazine\nCarbamazepine');
    await chemist.getByRole('button', { name: 'Look them up' }).click();
    await expect(chemist.getByRole('heading', { name: '2 found' })).toBeVisible();
    await chemist.getByLabel('Title').fill('Without a script');
    await chemist.getByRole('button', { name: 'Create the study' }).click();
    await expect(chemist.getByLabel('Title')).toHaveValue('Without a script');
    await expect(chemist.getByLabel('Matrix')).toHaveAccessibleDescription(/Say what is extracted/);
    await chemist.getByLabel('Matrix').fill('tap water');
    await chemist.getByLabel('Acceptance criteria').selectOption({ label: 'Example of EPA 3535A' });
    await chemist.getByLabel('Code').fill(code);
    await chemist.getByRole('button', { name: 'Create the study' }).click();
    await expect(chemist.getByRole('rowheader', { name: 'Carbamazepine' })).toBeVisible();

    const base = `/studies/${code}`;
    await chemist.goto(`${base}/experiments/new?stage=extraction`);
    await chemist.getByLabel('Title').fill('First series');
    await chemist.getByLabel('Spike level').fill('100 ng');
    await chemist.getByLabel('How many').first().fill('3');
    await chemist.getByLabel('All targets, spiked', { exact: true }).fill('100');
    await chemist.getByRole('button', { name: 'Store the plan' }).click();
    await expect(chemist.getByText('The experiment is planned.')).toBeVisible();
    study = { code, base };
  });

  test('a file is uploaded, looked at and stored, and a figure opens its provenance', async ({ browser }) => {
    const analyst = await openAs(browser, 'analyst', still);
    await analyst.goto(`${study.base}/data?experiment=1`);
    await analyst.getByLabel('File', { exact: true }).setInputFiles(csvUpload('first.csv', smallAmounts()));
    await analyst.getByRole('button', { name: 'Look at the file' }).click();
    await analyst.getByRole('button', { name: 'Store 6 values' }).click();
    await expect(analyst.getByText('6 values are on record.')).toBeVisible();
    await analyst.goto(`${study.base}/balance`);
    await analyst.getByText('The same figures as a table').click();
    await analyst.getByRole('table').getByRole('link', { name: '84.0' }).first().click();
    await expect(analyst.getByText('Carbamazepine, method recovery')).toBeVisible();
    await analyst.getByRole('link', { name: 'Close' }).click();
    await expect(analyst.getByText('Carbamazepine, method recovery')).toHaveCount(0);

    await analyst.goto(`${study.base}/experiments/1`);
    await analyst.getByRole('link', { name: 'Set E1-S3 aside' }).click();
    await analyst.getByLabel('Why?').fill('The vial was cracked');
    await analyst.getByRole('button', { name: 'Set it aside' }).click();
    await expect(analyst.getByText('It is set aside.')).toBeVisible();
    await analyst.goto(`${study.base}/balance`);
    await analyst.getByText('The same figures as a table').click();
    await expect(analyst.getByRole('table').getByRole('link', { name: '83.0' }).first()).toBeVisible();
  });
});
