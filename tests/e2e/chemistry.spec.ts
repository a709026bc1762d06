import { expect, test } from '@playwright/test';
import { openAs } from './sessions';

/** The chemistry of a panel and of the library, as a chemist walks it. Shares are formed by hand from the library's pKa. */

const panel = '/studies/TARROW-1/panel';

test('a chemist reads the panel at a pH of their own and opens an analyte', async ({ browser }) => {
  const chemist = await openAs(browser, 'chemist');
  await chemist.goto(panel);
  await chemist.getByRole('link', { name: 'Open the chemistry' }).click();
  await expect(chemist.getByRole('heading', { name: 'Chemistry of the panel' })).toBeVisible();
  await expect(chemist.getByText(/^At pH 7, 12 of 26 are at least 99 % neutral\./)).toBeVisible();

  await chemist.getByLabel('At pH').fill('2,5');
  await chemist.getByLabel('At pH').press('Enter');
  await expect(chemist).toHaveURL(/[?&]ph=2%2C5/);
  await expect(chemist.getByText(/^At pH 2\.5, 10 of 26 are/)).toBeVisible();
  // Ibuprofen, pKa 4.91: 1/(1 + 10^(2.5 − 4.91)) = 0.9961
  const row = chemist.getByRole('link', { name: /^Ibuprofen: 99\.6 % neutral at pH 2\.5/ });
  await row.click();
  const drawer = chemist.getByRole('dialog');
  await expect(drawer.getByRole('heading', { name: 'Ibuprofen' })).toBeVisible();
  await expect(drawer.getByRole('img', { name: /^Structure of Ibuprofen/ })).toBeVisible();
  await expect(drawer.getByRole('row', { name: /^2\.5/ })).toContainText('99.6');
  await drawer.getByLabel('Bed mass').fill('200');
  await drawer.getByRole('button', { name: 'Estimate' }).click();
  await expect(drawer.getByText(/is lost from 200.mg of bonded silica/)).toBeVisible();
  await expect(drawer.getByText(/poor empirical models/)).toBeVisible();
  await drawer.getByRole('link', { name: 'Close' }).click();
  await expect(drawer).toBeHidden();

  await chemist.getByLabel('At pH').fill('acid');
  await chemist.getByLabel('At pH').press('Enter');
  await expect(chemist.getByText("'acid' is not a number. Shown at pH 7.")).toBeVisible();
  await expect(chemist.getByLabel('At pH')).toHaveValue('acid');
});

test('it all works without JavaScript, and comes as CSV and by the API', async ({ browser }) => {
  const reviewer = await openAs(browser, 'reviewer', { javaScriptEnabled: false });
  await reviewer.goto(`${panel}/chemistry?ph=2`);
  await reviewer.getByRole('link', { name: /^Pyridine: 0\.1 % neutral at pH 2, mostly positive/ }).click();
  await expect(reviewer.getByRole('heading', { name: 'Breakthrough, estimated' })).toBeVisible();
  const csv = await reviewer.request.get(`${panel}/chemistry.csv?ph=2`);
  expect(csv.headers()['content-disposition']).toContain('TARROW-1-chemistry-at-pH-2.csv');
  expect(await csv.text()).toContain('TARROW-1,Pyridine,target');
  const api = await reviewer.request.get('/api/v1/studies/TARROW-1/chemistry?ph=2');
  expect(await api.json()).toMatchObject({ ph: 2, phReason: 'chosen here' });
  expect((await reviewer.request.get('/api/v1/studies/TARROW-1/chemistry?ph=99')).status()).toBe(400);
});

test('a structure is read, and a double told, before anything is stored', async ({ browser }) => {
  const chemist = await openAs(browser, 'chemist');
  await chemist.goto('/library/analytes/new');
  await chemist.getByLabel('Name', { exact: true }).fill('Azabenzene');
  await chemist.getByLabel('CAS number').fill('110-86-2');
  await chemist.getByLabel('SMILES', { exact: true }).fill('N1=CC=CC=C');
  await chemist.getByRole('button', { name: 'Add to the library' }).click();
  await expect(chemist.getByLabel('CAS number')).toHaveAccessibleDescription(/check digit is 1, not 2/);
  await chemist.getByLabel('CAS number').fill('');
  await chemist.getByRole('button', { name: 'Read the structure' }).click();
  await expect(chemist.getByLabel('SMILES', { exact: true })).toHaveAccessibleDescription(
    /'N1=CC=CC=C' cannot be read as SMILES: .*Write it like/
  );
  await chemist.getByLabel('SMILES', { exact: true }).fill('N1=CC=CC=C1');
  await chemist.getByRole('button', { name: 'Read the structure' }).click();
  await expect(chemist.getByText('Pyridine has this structure.')).toBeVisible();
  await expect(chemist.getByText('C5H5N')).toBeVisible();
  await chemist.getByRole('button', { name: 'Add to the library' }).click();
  await expect(chemist.getByText(/Pyridine in the library has this structure/)).toBeVisible();
  await expect(chemist.getByLabel('Name', { exact: true })).toHaveValue('Azabenzene');
  await chemist.goto('/library/analytes?text=azabenzene');
  await expect(chemist.getByText('Nothing in the library fits.')).toBeVisible();
});
