import { expect, test, type Page } from '@playwright/test';
import { openAs } from './sessions';
import { freshCode, makeSmallStudy, type SmallStudy } from './small-study';
import { csvUpload } from './spreadsheets';

/** A sheet of an instrument that nobody has seen yet: its columns get their meaning once, and the next file is read by itself. */

test.describe.configure({ mode: 'serial' });
let study: SmallStudy;
let analyst: Page;

test.beforeAll(async ({ browser }) => {
  study = await makeSmallStudy(await openAs(browser, 'chemist'));
  analyst = await openAs(browser, 'analyst');
});

// Of this run alone: a layout that an earlier run kept would be read by itself.
const run = freshCode('RUN');
const layout = `Vessel sheet ${run}`;
const head = [`Vessel ${run}`, 'Peak 1', 'Peak 2', 'Remark'];
const faulty = [
  head,
  ['E1-S1', '95', '82', ''],
  ['E1-S2', '96', '8o', ''],
  ['E1-S3', 'lost', '86', ''],
  ['E1-S33', '91', '81', '']
];
const corrected = [head, ['E1-S1', '95', '82', ''], ['E1-S2', '96', '8o', ''], ['E1-S3', '97', '86', '']];

async function bring(name: string, rows: readonly (readonly string[])[]): Promise<void> {
  await analyst.goto(`${study.base}/data`);
  await analyst.getByLabel('Experiment').selectOption('1 First series');
  await analyst.getByLabel('File', { exact: true }).setInputFiles({ ...csvUpload(name, rows) });
  await analyst.getByRole('button', { name: 'Look at the file' }).click();
  await expect(analyst.getByRole('heading', { name, level: 1 })).toBeVisible();
}

async function says(
  column: string,
  means: string,
  more: Readonly<Record<string, string>> = {}
): Promise<void> {
  await analyst.getByRole('link', { name: new RegExp(`^Column ${column}: `) }).click();
  const form = analyst.locator('form#column');
  await form.getByLabel('It means').selectOption(means);
  for (const [label, value] of Object.entries(more)) {
    const field = form.getByLabel(label, { exact: true });
    if (label === 'Unit') await field.fill(value);
    else await field.selectOption(value);
  }
  await form.getByRole('button', { name: 'Read it so' }).click();
  await expect(form).toHaveCount(0);
}

test('columns of an unknown sheet get their meaning, and the records follow', async () => {
  await bring('vessels.csv', faulty);
  await expect(analyst.getByText('Nothing in this file was recognised')).toBeVisible();
  await analyst.getByRole('button', { name: 'Read this sheet' }).click();
  await says('A', 'sample');
  await says('B', 'amount or concentration', {
    Of: 'Atrazine',
    'Amount in': 'the whole fraction',
    Unit: 'ng'
  });
  await says('C', 'amount or concentration', {
    Of: 'Carbamazepine',
    'Amount in': 'the whole fraction',
    Unit: 'ng'
  });
  await says('D', 'not read, as chosen');
  await expect(analyst.getByText(/3 problems keep it from being stored/)).toBeVisible();
});

test('one cell is mended on the page, the layout is kept, and a copy to mend has every problem', async () => {
  await analyst
    .getByRole('listitem')
    .filter({ hasText: '8o' })
    .getByRole('link', { name: 'mend this cell' })
    .click();
  await analyst.getByLabel(/C3 as/).fill('84');
  await analyst.getByRole('button', { name: 'Mend the cell' }).click();
  await expect(analyst.getByText(/2 problems keep it from being stored/)).toBeVisible();
  await expect(analyst.getByRole('heading', { name: 'Mended cells' })).toBeVisible();

  await analyst.getByLabel('Name of the layout').fill(layout);
  await analyst.getByRole('button', { name: 'Keep it' }).click();
  await expect(analyst.getByText(/version 1|Read as it was changed/).first()).toBeVisible();

  const [copy] = await Promise.all([
    analyst.waitForEvent('download'),
    analyst.getByRole('link', { name: /noted at its cell/ }).click()
  ]);
  expect(copy.suggestedFilename()).toBe('vessels-to-mend.xlsx');
});

test('the corrected file is read by the kept layout, mended and stored, and the chemist sees its figures', async ({
  browser
}) => {
  await bring('vessels again.csv', corrected);
  await expect(analyst.getByText(layout, { exact: true }).first()).toBeVisible();
  await analyst.getByRole('link', { name: 'mend this cell' }).first().click();
  await analyst.getByLabel(/C3 as/).fill('84');
  await analyst.getByRole('button', { name: 'Mend the cell' }).click();
  const store = analyst.getByRole('button', { name: /^Store / });
  await store.click();
  await expect(store).toHaveCount(0);

  const chemist = await openAs(browser, 'chemist');
  await chemist.goto(`${study.base}/balance`);
  await chemist.getByText('The same figures as a table').click();
  // By hand: the mean of 82, 84 and 86 ng of 100 ng.
  const row = chemist
    .getByRole('table', { name: /Mass balance/ })
    .getByRole('row', { name: /Carbamazepine/ });
  await expect(row.getByRole('cell').nth(1)).toHaveText('84.0');
  await chemist.goto('/lab/layouts');
  await expect(chemist.getByRole('row', { name: layout })).toBeVisible();
});
