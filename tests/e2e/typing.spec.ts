import { expect, test, type Page } from '@playwright/test';
import { openAs } from './sessions';
import { makeSmallStudy, type SmallStudy } from './small-study';

/** The analyst types and pastes in place of bringing a file; a lost connection loses nothing. */

test.describe.configure({ mode: 'serial' });
let study: SmallStudy;
let analyst: Page;

test.beforeAll(async ({ browser }) => {
  study = await makeSmallStudy(await openAs(browser, 'chemist'));
  analyst = await openAs(browser, 'analyst');
});

const cell = (sample: string, analyte: string) =>
  analyst.getByRole('textbox', { name: `${sample}, ${analyte}`, exact: true });

/** Pastes as a spreadsheet's clipboard would. */
async function paste(sample: string, analyte: string, rows: readonly (readonly string[])[]): Promise<void> {
  await cell(sample, analyte).evaluate(
    (input, text) => {
      const clipboardData = new DataTransfer();
      clipboardData.setData('text/plain', text);
      input.dispatchEvent(new ClipboardEvent('paste', { clipboardData, bubbles: true, cancelable: true }));
    },
    rows.map((row) => row.join('\t')).join('\r\n')
  );
}

test('a block is pasted, kept, and still there after the page was left', async () => {
  await analyst.goto(`${study.base}/experiments/1`);
  await analyst.getByRole('link', { name: 'Type the values' }).click();
  await analyst.getByLabel('The numbers are').selectOption('ng in the whole fraction');
  await analyst.getByRole('button', { name: 'Lay out the grid' }).click();
  await expect(cell('E1-S1', 'Final volume')).toHaveCount(0);
  await paste('E1-S1', 'Atrazine', [
    ['95', '82'],
    ['96', '84,2l3'],
    ['97', '86']
  ]);
  await expect(analyst.getByText('6 cells pasted.')).toBeVisible();
  await expect(analyst.getByText('6 cells kept, not stored.')).toBeVisible();
  await analyst.goto(`${study.base}/data`);
  await analyst.goto(`${study.base}/experiments/1/type`);
  await expect(cell('E1-S2', 'Carbamazepine')).toHaveValue('84,2l3');
});

test('Enter and Tab lead on, and Undo takes the last step back', async () => {
  // Before the page is awake, Enter only keeps.
  await expect(async () => {
    await cell('E1-S1', 'Atrazine').press('Enter');
    await expect(cell('E1-S2', 'Atrazine')).toBeFocused({ timeout: 1000 });
  }).toPass();
  await analyst.keyboard.press('Tab');
  await expect(cell('E1-S2', 'Carbamazepine')).toBeFocused();
  await cell('E1-S3', 'Carbamazepine').fill('12');
  await analyst.getByRole('button', { name: 'Undo', exact: true }).click();
  await expect(cell('E1-S3', 'Carbamazepine')).toHaveValue('86');
});

test('what is typed without a connection stays in the browser and is sent when it is back', async () => {
  await analyst.context().setOffline(true);
  await cell('E1-S3', 'Carbamazepine').fill('86.5');
  await expect(analyst.getByText('Kept in this browser, not yet with the server.')).toBeVisible();
  await analyst.context().setOffline(false);
  await expect(analyst.getByText('6 cells kept, not stored.')).toBeVisible();
  await analyst.reload();
  await expect(cell('E1-S3', 'Carbamazepine')).toHaveValue('86.5');
});

test('an error is told at its cell; mended, what was typed is stored and read', async () => {
  await analyst.getByRole('button', { name: 'Check and hand on' }).click();
  await expect(analyst.getByText('Not stored yet: some cells need mending')).toBeVisible();
  await expect(cell('E1-S2', 'Carbamazepine')).toHaveAttribute('aria-invalid', 'true');
  await expect(analyst.getByText(/E1-S2, Carbamazepine.*holds “84,2l3”/)).toBeVisible();

  await cell('E1-S2', 'Carbamazepine').fill('84');
  await cell('E1-S3', 'Carbamazepine').fill('86');
  await analyst.getByRole('button', { name: 'Check and hand on' }).click();
  await analyst.waitForURL(/\/data\//);
  await expect(analyst.getByText('typed-experiment-1.csv').first()).toBeVisible();
  await analyst.getByRole('button', { name: /^Store / }).click();
  await expect(analyst.getByRole('button', { name: /^Store / })).toHaveCount(0);
  await analyst.goto(`${study.base}/balance`);
  await analyst.getByText('The same figures as a table').click();
  // By hand: the mean of 82, 84 and 86 ng of 100 ng.
  const row = analyst
    .getByRole('table', { name: /Mass balance/ })
    .getByRole('row', { name: /Carbamazepine/ });
  await expect(row.getByRole('cell').nth(1)).toHaveText('84.0');

  await analyst.goto(`${study.base}/experiments/1/type`);
  await expect(analyst.getByText('6 values of this experiment are stored already')).toBeVisible();
  await expect(cell('E1-S1', 'Atrazine')).toHaveValue('');
});
