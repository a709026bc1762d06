import { expect, test, type Page } from '@playwright/test';
import { oneHugeCell } from '../fixtures/workbooks/bombs';
import { openAs } from './sessions';
import { makeSmallStudy, smallAmounts, type SmallStudy } from './small-study';
import { csvUpload, fillTemplate, workbook, xlsxUpload, type Upload } from './spreadsheets';

/** The analyst's day: files that are wrong, one that is right, one that corrects it, one that is withdrawn. */

test.describe.configure({ mode: 'serial' });
let study: SmallStudy;
let analyst: Page;

test.beforeAll(async ({ browser }) => {
  study = await makeSmallStudy(await openAs(browser, 'chemist'));
  analyst = await openAs(browser, 'analyst');
});

async function bring(file: Upload, experiment = ''): Promise<void> {
  await analyst.goto(`${study.base}/data`);
  await analyst.getByLabel('Experiment').selectOption(experiment);
  await analyst.getByLabel('File', { exact: true }).setInputFiles({ ...file });
  await analyst.getByRole('button', { name: 'Look at the file' }).click();
}

/** ng of Carbamazepine of each portion as the mass balance has them. */
async function expectMean(text: string): Promise<void> {
  await analyst.goto(`${study.base}/balance`);
  await analyst.getByText('The same figures as a table').click();
  const row = analyst
    .getByRole('table', { name: /Mass balance/ })
    .getByRole('row', { name: /Carbamazepine/ });
  await expect(row.getByRole('cell').nth(1)).toHaveText(text);
}

const template = async (experiment: number): Promise<Buffer> =>
  (await analyst.request.get(`${study.base}/experiments/${experiment}/template.xlsx?layout=long`)).body();

/** What no workbook has: the head of an older container and the name of its encrypted part. */
const underPassword = Buffer.concat([
  Buffer.from([0xd0, 0xcf, 0x11, 0xe0, 0xa1, 0xb1, 0x1a, 0xe1]),
  Buffer.alloc(504),
  Buffer.from('EncryptedPackage', 'utf16le')
]);

test('a file that cannot be read says why and leaves nothing to store', async () => {
  const refused: readonly (readonly [Upload, RegExp])[] = [
    [xlsxUpload('letter.xlsx', Buffer.from('%PDF-1.7\nnot a table')), /This is a PDF, not a workbook/],
    [xlsxUpload('nothing.xlsx', Buffer.alloc(0)), /nothing.xlsx is empty/],
    [xlsxUpload('locked.xlsx', underPassword), /protected by a password/],
    [xlsxUpload('bomb.xlsx', oneHugeCell()), /Nothing was stored/]
  ];
  for (const [file, reason] of refused) {
    await bring(file);
    await expect(analyst.getByText(reason).first()).toBeVisible();
    await expect(analyst.getByRole('button', { name: /^Store / })).toHaveCount(0);
  }
});

test('a wrong cell is named by sheet and cell, and the file is stored whole or not at all', async () => {
  const at = (file: string, rows: readonly (readonly (string | number)[])[]) =>
    workbook('Amounts', rows).then((bytes) => xlsxUpload(file, bytes));
  const wrong: readonly (readonly [Upload, string, RegExp])[] = [
    [
      await at('letter.xlsx', smallAmounts([82, '84,2l3', 86])),
      'Amounts, D3',
      /^\s*Amounts, D3\s+“84,2l3” stands where an amount \(ng\) belongs/
    ],
    [
      await at('unknown.xlsx', [...smallAmounts(), ['E1-S1', 'Elution', 'Glimmerol', 12]]),
      'Amounts, C8',
      /Glimmerol/
    ],
    [
      await at('twice.xlsx', [...smallAmounts(), ['E1-S2', 'Elution', 'Carbamazepine', 90]]),
      'Amounts, D8',
      /has a result for Carbamazepine already, in Amounts, D3/
    ]
  ];
  for (const [file, place, what] of wrong) {
    await bring(file);
    const problem = analyst
      .getByRole('region', { name: 'Keep the file from being stored' })
      .getByRole('listitem')
      .filter({ has: analyst.getByRole('link', { name: place, exact: true }) });
    await expect(problem).toContainText(what);
    await expect(analyst.getByText('Mend the cells named above here, or in the file')).toBeVisible();
    await expect(analyst.getByRole('button', { name: /^Store / })).toHaveCount(0);
    await problem.getByRole('link', { name: place, exact: true }).click();
    await expect(analyst.locator(`#cell-${place.split(', ')[1] ?? ''}`)).toBeInViewport();
  }
});

test("another experiment's template is noticed, whatever experiment was chosen", async () => {
  const filled = await fillTemplate(await template(2), (row) => row.set('Area', 1000));
  await bring(xlsxUpload('second.xlsx', filled), '1');
  await expect(analyst.getByText(/Second series/).first()).toBeVisible();
  await expect(analyst.getByRole('region', { name: 'Keep the file from being stored' })).toContainText(
    /template/
  );
  await expect(analyst.getByRole('button', { name: /^Store / })).toHaveCount(0);
});

test('nothing of all that was stored', async () => {
  await analyst.goto(`${study.base}/data`);
  const files = analyst.getByRole('region', { name: 'Files of this study' }).getByRole('listitem');
  await expect(files.filter({ hasText: 'Received, not stored yet' })).toHaveCount(await files.count());
  await analyst.goto(`${study.base}/experiments/1`);
  await expect(analyst.getByRole('row', { name: /E1-S1/ })).toContainText('none yet');
});

test('a double click on Store stores once', async () => {
  await bring(csvUpload('first.csv', smallAmounts()));
  const store = analyst.getByRole('button', { name: 'Store 6 values' });
  await store.dblclick();
  await expect(analyst.getByText('6 values are on record.')).toBeVisible();
  await expectMean('84.0');
  await analyst.goto(`${study.base}/history`);
  await expect(analyst.getByText('6 values of first.csv were stored.')).toHaveCount(1);
});

test('two requests to store the same file at the same moment store it once', async () => {
  await bring(
    csvUpload('second.csv', [
      ['Sample', 'Fraction', 'Analyte', 'Amount (ng)'],
      ['E2-S1', 'Elution', 'Atrazine', 91]
    ])
  );
  await expect(analyst.getByRole('button', { name: 'Store 1 value' })).toBeVisible();
  const { origin, pathname } = new URL(analyst.url());
  const store = () =>
    analyst.request.post(`${pathname}?/store`, {
      form: {},
      headers: { origin, accept: 'text/html' },
      maxRedirects: 0
    });
  await Promise.all([store(), store()]);
  await analyst.goto(`${study.base}/history`);
  await expect(analyst.getByText(/of second.csv (was|were) stored\./)).toHaveCount(1);
});

test('the very same file again changes nothing and says so', async () => {
  await bring(csvUpload('first again.csv', smallAmounts()));
  await expect(analyst.getByText('This very file is stored already')).toBeVisible();
  await expect(analyst.getByRole('button', { name: /^Store / })).toHaveCount(0);
});

test('a corrected file covers the earlier values, with a reason', async () => {
  await bring(csvUpload('corrected.csv', smallAmounts([88, 90, 92])));
  await expect(analyst.getByText('6 values on record will be covered')).toBeVisible();
  await analyst.getByRole('button', { name: 'Store 6 values' }).click();
  const why = analyst.getByLabel('Why does this file replace them?');
  // The browser itself asks for what is required.
  expect(await why.evaluate((field: HTMLTextAreaElement) => field.validity.valueMissing)).toBe(true);
  await analyst.getByRole('button', { name: 'integration revised' }).click();
  await analyst.getByRole('button', { name: 'Store 6 values' }).click();
  await expect(analyst.getByText('6 values are on record.')).toBeVisible();
  await expectMean('90.0');
});

test('withdrawing it brings the earlier values back, and both files stay on record', async () => {
  await analyst.goto(`${study.base}/data`);
  const files = analyst.getByRole('region', { name: 'Files of this study' }).getByRole('listitem');
  const corrected = files.filter({ hasText: 'corrected.csv' });
  await corrected.getByRole('button', { name: 'Withdraw' }).click();
  const dialog = analyst.getByRole('dialog', { name: 'Withdraw corrected.csv?' });
  await dialog.getByLabel('Why?').fill('It was the other sequence');
  await dialog.getByRole('button', { name: 'Withdraw the import' }).click();
  await expect(corrected).toContainText('Withdrawn');
  await expect(corrected).toContainText('“It was the other sequence” Tobias Renn');
  await expect(files.filter({ hasText: 'first.csv' })).toContainText('Stored, 6 values');
  await expectMean('84.0');
});
