import { expect, test } from '@playwright/test';
import { openAs } from './sessions';
import { sheetTexts } from './spreadsheets';

/** The reviewer's day: what to look at first, one figure down to its cell, the record to take along; and no way to change anything. */

const study = '/studies/TARROW-1';

test('the summary begins with four things to look at, and each leads on', async ({ browser }) => {
  const reviewer = await openAs(browser, 'reviewer');
  await reviewer.goto(`${study}/summary`);
  const look = reviewer.getByRole('region', { name: 'What to look at first' });
  for (const title of ['Deviations', 'Exclusions', 'Gaps', 'Late changes'])
    await expect(look.getByRole('heading', { name: new RegExp(`^${title}`) })).toBeVisible();
  await look.getByRole('link', { name: /D-S6/ }).first().click();
  await expect(reviewer.getByRole('heading', { level: 1 })).toContainText('Experiment 8');
  await expect(reviewer.getByRole('main')).toContainText('The bed ran dry while loading');
});

test('the page, the workbook and the comma-separated file give the same figure', async ({ browser }) => {
  const reviewer = await openAs(browser, 'reviewer');
  await reviewer.goto(`${study}/summary`);
  const results = reviewer
    .getByRole('region', { name: /^Variant D/ })
    .getByRole('table', { name: /Method recoveries/ });
  const row = results
    .getByRole('row')
    .filter({ has: reviewer.getByRole('rowheader', { name: 'Metformin' }) });
  const shown = (await row.getByRole('cell').nth(1).innerText()).trim();
  expect(shown).toMatch(/^\d+\.\d$/);

  const coming = reviewer.waitForEvent('download');
  await reviewer.getByRole('link', { name: 'Workbook, XLSX' }).click();
  const file = await (await coming).path();
  const rows = await sheetTexts(file, 'Results');
  const heads = rows.find((cells) => cells.includes('Mean, %')) ?? [];
  const stored = rows.find((cells) => cells[0]?.startsWith('Variant D') && cells[2] === 'Metformin') ?? [];
  const mean = Number(stored[heads.indexOf('Mean, %')]);
  expect(mean.toFixed(1)).toBe(shown);
  expect((await sheetTexts(file, 'Summary')).flat().join('\n')).toMatch(/invented/i);

  const csv = await (await reviewer.request.get(`${study}/results.csv?experiment=8`)).text();
  const line = csv.split('\n').find((text) => text.includes('Metformin')) ?? '';
  expect(line.split(',').map(Number)).toContain(mean);
});

test('on paper, the summary has no buttons, all its figures, and who printed it', async ({ browser }) => {
  const reviewer = await openAs(browser, 'reviewer');
  await reviewer.goto(`${study}/summary`);
  await reviewer.emulateMedia({ media: 'print' });
  await expect(reviewer.getByRole('link', { name: 'Workbook, XLSX' })).toBeHidden();
  await expect(reviewer.getByRole('navigation', { name: 'Study', exact: true })).toBeHidden();
  await expect(reviewer.getByText(/Printed by Samir Vance/).first()).toBeVisible();
  await expect(reviewer.getByRole('table', { name: /Method recoveries/ }).first()).toBeVisible();
  expect((await reviewer.pdf({ preferCSSPageSize: true })).subarray(0, 5).toString()).toBe('%PDF-');
});

test('no page offers to change anything, and a form sent all the same is refused', async ({ browser }) => {
  const reviewer = await openAs(browser, 'reviewer');
  for (const [path, absent] of [
    ['/panel', 'Put them on the panel'],
    ['/experiments/8', 'Bring data'],
    ['/data', 'Look at the file'],
    ['/aim', 'Save']
  ] as const) {
    await reviewer.goto(`${study}${path}`);
    await expect(reviewer.getByRole('heading', { level: 1 })).toBeVisible();
    await expect(reviewer.getByText(absent)).toHaveCount(0);
  }
  const { origin } = new URL(reviewer.url());
  const answer = await reviewer.request.post(`${study}/panel?/paste`, {
    form: { text: 'Atrazine', role: 'target' },
    headers: { origin, accept: 'text/html' }
  });
  expect(answer.status()).toBe(403);
});
