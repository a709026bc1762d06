import { expect, test } from '@playwright/test';
import { openAs } from './sessions';

/** A run of the instrument: what its checks say, which figures rest on what they flag, and a check that is described. */

test('from the calibration to a run, to what it flags, and from the figure back to its place in the run', async ({
  browser
}) => {
  const reviewer = await openAs(browser, 'reviewer');
  await reviewer.goto('/studies/TARROW-1/calibration');
  const runs = reviewer.getByRole('table', { name: 'Sequences' });
  // Experiment 7: one continuing check was made to drift for Diuron and Caffeine (seeders/demo/sequence.ts).
  const flagged = runs.getByRole('row').filter({ hasText: 'flagged' }).filter({ hasNotText: 'nothing' });
  await expect(flagged).toHaveCount(1);
  await flagged.getByRole('link').first().click();
  await expect(reviewer.getByRole('heading', { level: 1 })).toContainText('19 Oct 2026');
  await expect(reviewer.getByRole('img', { name: /Sequence of/ })).toBeVisible();
  const reasons = reviewer.getByRole('region', { name: 'What is flagged, and why' }).getByRole('listitem');
  await expect(reasons).toHaveCount(2);
  await expect(reasons.filter({ hasText: 'Diuron' })).toContainText('8270E');
  const diuron = reviewer
    .getByRole('row')
    .filter({ has: reviewer.getByRole('rowheader', { name: 'Diuron' }) });
  await expect(diuron).toContainText('fails');

  await reviewer.goto('/studies/TARROW-1/balance?variant=C');
  const notice = reviewer.getByRole('main').getByText(/figures rest on flagged injections/);
  await expect(notice).toBeVisible();
  await reviewer
    .getByRole('listitem')
    .filter({ hasText: /^Diuron rests on/ })
    .getByRole('link')
    .click();
  const drawer = reviewer.getByRole('dialog');
  await expect(drawer).toContainText('It rests on');
});

test('a chemist describes a check without a script, mends it and removes it', async ({ browser }) => {
  const chemist = await openAs(browser, 'chemist', { javaScriptEnabled: false });
  await chemist.goto('/studies/TARROW-1/calibration');
  await chemist.getByRole('link', { name: 'First calibration' }).click();
  await chemist.getByRole('link', { name: 'Checks', exact: true }).click();
  await chemist.getByLabel('Label in the sample column').fill('CAL 1-1');
  await chemist.getByLabel('Concentration of its analytes').fill('25 µg/L');
  await chemist.getByRole('button', { name: 'Store the check' }).click();
  await expect(chemist.getByText(/A level of First calibration is called CAL 1-1/)).toBeVisible();
  await chemist.getByLabel('Label in the sample column').fill('CCV low');
  await chemist.getByRole('button', { name: 'Store the check' }).click();
  await expect(chemist.getByRole('row', { name: /CCV low/ })).toContainText('at 25 ng/mL');
  await chemist.getByRole('link', { name: 'CCV low' }).click();
  await chemist.getByRole('button', { name: 'Remove CCV low' }).click();
  await expect(chemist.getByText('The check is removed.')).toBeVisible();
  await expect(chemist.getByRole('link', { name: 'CCV low' })).toHaveCount(0);
});
