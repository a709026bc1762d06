import { expect, test, type Page } from '@playwright/test';
import { openAs } from './sessions';

/** The validation of a study: who chooses what it rests on, and the way of a detection limit down to a cell. */

const validation = '/studies/TARROW-2/validation';
const part = (page: Page, name: string) => page.getByRole('region', { name, exact: true });

test('a manager chooses what a part rests on; the reason is asked for, kept and shown', async ({
  browser
}) => {
  const manager = await openAs(browser, 'manager');
  await manager.goto(`${validation}?choose=precision`);
  const precision = part(manager, 'Repeatability and intermediate precision');
  await expect(precision.getByText('Suggested, not chosen')).toBeVisible();
  await precision.getByRole('checkbox', { name: /^4, Low level/ }).uncheck();
  await precision.getByRole('button', { name: 'Choose' }).click();
  await expect(precision.getByText('Say why these experiments stand for it.')).toBeVisible();
  await precision.getByLabel('Why these').fill('The third batch is still being looked at');
  await precision.getByRole('button', { name: 'Choose' }).click();
  await expect(precision.getByText(/^Chosen by .*The third batch is still being looked at\.$/)).toBeVisible();
  await expect(precision.getByText('2 of 3 batches at one level in one matrix.')).toBeVisible();
  await expect(precision.getByRole('row').nth(1)).toContainText('2 of 3 batches');

  await manager.goto('/studies/TARROW-2/history');
  await expect(manager.getByRole('main')).toContainText(
    'Repeatability and intermediate precision of variant E rests on experiments 2 and 3.'
  );

  // Back to how the lab was found.
  await manager.goto(`${validation}?choose=precision`);
  for (const box of await precision.getByRole('checkbox').all()) await box.uncheck();
  await precision.getByLabel('Why these').fill('All three batches again');
  await precision.getByRole('button', { name: 'Choose' }).click();
  await expect(precision.getByText('Suggested, not chosen')).toBeVisible();
});

test('a reviewer opens a detection limit down to the cell, and can choose nothing', async ({ browser }) => {
  const reviewer = await openAs(browser, 'reviewer');
  await reviewer.goto(validation);
  const detection = part(reviewer, 'Detection limits');
  await expect(detection.getByText('40 CFR 136, Appendix B', { exact: false }).first()).toBeVisible();
  await expect(reviewer.getByRole('button', { name: 'Choose' })).toHaveCount(0);
  await detection
    .getByRole('row', { name: /^Phenol/ })
    .getByRole('link', { name: 'Phenol' })
    .click();
  const drawer = reviewer
    .getByRole('dialog')
    .or(reviewer.getByRole('complementary', { name: /detection limit/i }));
  await expect(drawer.getByText('Phenol, method detection limit')).toBeVisible();
  const spiked = drawer.getByRole('table', { name: 'Spiked preparations' });
  await expect(spiked.getByRole('row')).toHaveCount(10);
  await spiked
    .getByRole('row', { name: /^W1-S1/ })
    .getByRole('link')
    .first()
    .click();
  await expect(drawer.getByText(/Phenol in W1-S1/).first()).toBeVisible();
  await expect(drawer.getByText('run-2026-11-10-w1.xlsx').first()).toBeVisible();
});
