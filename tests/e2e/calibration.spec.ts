import { expect, test, type Locator } from '@playwright/test';
import { openAs } from './sessions';
import { makeSmallStudy } from './small-study';
import { csvUpload } from './spreadsheets';

/** A chemist describes levels, compares lines, looks at what a choice moves, stores it; then corrects a level. */

/*
 * Levels 20 to 500 ng/mL; the response factors 13, 10.8, 10.3, 10 and 9.8 have the mean 10.78. Portions of 1 mL read 900, 950 and 1000,
 * 100 ng were spiked: by the average response factor 83.49, 88.13 and 92.76 %, on average 88.1.
 */
const levels = [20, 50, 100, 200, 500];
const areas = [260, 540, 1030, 2000, 4900];
const portions = [900, 950, 1000];
const measured = [
  ['Sample', 'Fraction', 'Analyte', 'Peak area'],
  ...['Atrazine', 'Carbamazepine'].flatMap((name) => [
    ...areas.map((area, index) => [`L${index + 1}`, '', name, area]),
    ...portions.map((area, index) => [`E1-S${index + 1}`, 'Elution', name, area])
  ])
];

async function paste(cell: Locator, text: string): Promise<void> {
  await cell.focus();
  await cell.evaluate((field, block) => {
    const clipboardData = new DataTransfer();
    clipboardData.setData('text/plain', block);
    field.dispatchEvent(new ClipboardEvent('paste', { clipboardData, bubbles: true, cancelable: true }));
  }, text);
}

test('a choice of a line moves the figures as the page foretold, and a corrected level too', async ({
  browser
}) => {
  const chemist = await openAs(browser, 'chemist');
  const { base } = await makeSmallStudy(chemist);

  await test.step('describes the levels by pasting a block, decimal commas and all', async () => {
    await chemist.goto(`${base}/calibration/new`);
    await chemist.getByLabel('Name').fill('Spring standards');
    await chemist.getByLabel('Instrument').fill('Chromatograph 1');
    await chemist.getByLabel('Day').fill('2026-03-02');
    await chemist.getByText('Each analyte at concentrations of its own').click();
    await paste(
      chemist.getByLabel('L1, Atrazine', { exact: true }),
      levels.map((value) => `${value},0\t${value},0`).join('\n')
    );
    await expect(chemist.getByText('10 cells pasted.')).toBeVisible();
    await chemist.getByRole('button', { name: 'Store the set' }).click();
    await expect(chemist.getByRole('heading', { level: 1 })).toHaveText('Spring standards');
  });

  await test.step('brings the areas', async () => {
    await chemist.goto(`${base}/experiments/1/edit`);
    await chemist.getByLabel('Calibration', { exact: true }).selectOption({ label: 'Spring standards' });
    await chemist.getByLabel('Final volume').fill('1 mL');
    await chemist.getByRole('button', { name: 'Store the change' }).click();
    await expect(chemist.getByRole('heading', { level: 1 })).toContainText('First series');
    await chemist.goto(`${base}/data`);
    await chemist.getByLabel('Experiment').selectOption({ index: 1 });
    await chemist.getByLabel('File', { exact: true }).setInputFiles(csvUpload('areas.csv', measured));
    await chemist.getByRole('button', { name: 'Look at the file' }).click();
    await chemist.getByRole('button', { name: /^Store \d+ values$/ }).click();
    await expect(chemist.getByText('16 values are on record.')).toBeVisible();
  });

  const then = async (): Promise<string> =>
    chemist
      .getByRole('table', { name: 'Figures that move' })
      .getByRole('row', { name: /Atrazine/ })
      .getByRole('cell')
      .nth(3)
      .innerText();
  const figure = chemist.getByRole('link', { name: /Atrazine/ }).first();

  await test.step('compares the lines and looks at what one of them moves', async () => {
    await chemist.goto(`${base}/calibration`);
    await chemist.getByRole('link', { name: 'Spring standards' }).click();
    await chemist.getByRole('link', { name: 'Atrazine' }).click();
    await expect(chemist.getByRole('region', { name: 'Atrazine', exact: true })).toContainText(
      'Area, read without a standard, straight line, weighted 1/x, over L1 to L5 (20 to 500 ng/mL).'
    );
    const candidates = chemist.getByRole('table', { name: 'Candidate lines of Atrazine' });
    await expect(candidates.getByRole('rowheader')).toHaveCount(7);
    await candidates.getByRole('link', { name: /What it moves.*average response factor/ }).click();
    await expect(chemist.getByRole('heading', { name: 'What it moves' })).toBeVisible();
    await expect(chemist.getByText('Nothing is stored yet.')).toBeVisible();
    expect(await then()).toBe('88.1');
  });

  await test.step('stores it with a reason, and the figure is what was foretold', async () => {
    await chemist.getByLabel('Why?').fill('The factors hardly scatter.');
    await chemist.getByRole('button', { name: 'Store the choice' }).click();
    await expect(chemist.getByText('The choice is stored')).toBeVisible();
    await expect(chemist.getByText('Chosen by').first()).toContainText('The factors hardly scatter.');
    await chemist.goto(`${base}/balance?experiment=1`);
    await expect(figure).toContainText('88.1');
  });

  await test.step('corrects the levels, and the figure moves as foretold again', async () => {
    await chemist.goto(`${base}/calibration`);
    await chemist.getByRole('link', { name: 'Spring standards' }).click();
    await chemist.getByRole('link', { name: 'Change the levels' }).click();
    await paste(
      chemist.getByLabel('L1, Atrazine', { exact: true }),
      levels.map((value) => String(value * 1.1).replace('.', ',')).join('\n')
    );
    await chemist.getByRole('button', { name: 'See what it moves' }).click();
    // A tenth more in every level is a tenth more in every reading.
    await expect(chemist.getByRole('heading', { name: 'What it moves' })).toBeVisible();
    expect(await then()).toBe('96.9');
    await chemist.getByLabel('Why?').fill('The stock was made up too strong.');
    await chemist.getByRole('button', { name: 'Store the change' }).click();
    await expect(chemist.getByText('The levels are changed')).toBeVisible();
    await expect(chemist.getByText('Atrazine in L1, ng/mL: 20 → 22')).toBeVisible();
    await chemist.goto(`${base}/balance?experiment=1`);
    await expect(figure).toContainText('96.9');
  });
});

test('somebody who may not choose sees what a choice would move, and no way to store it', async ({
  browser
}) => {
  const reviewer = await openAs(browser, 'reviewer');
  await reviewer.goto('/studies/TARROW-1/calibration');
  await reviewer.getByRole('link', { name: 'First calibration' }).click();
  await reviewer.getByRole('link', { name: 'Caffeine' }).click();
  await reviewer.getByRole('link', { name: /What it moves.*average response factor/ }).click();
  await expect(reviewer.getByRole('heading', { name: 'What it moves' })).toBeVisible();
  await expect(reviewer.getByRole('button', { name: 'Store the choice' })).toHaveCount(0);
  await expect(reviewer.getByRole('link', { name: 'Change the levels' })).toHaveCount(0);
});
