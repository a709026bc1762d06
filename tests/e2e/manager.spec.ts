import { expect, test } from '@playwright/test';
import { openAs } from './sessions';

/** The lab manager's day: what goes on, which variant is better and what it would lose, who did what. */

test('from the studies to the variants side by side, and into one figure of them', async ({ browser }) => {
  const manager = await openAs(browser, 'manager');
  await manager.goto('/studies');
  await manager
    .getByRole('row', { name: /Polar and volatile organics at the Tarrow intake/ })
    .getByRole('link', { name: 'TARROW-1' })
    .click();
  await manager
    .getByRole('navigation', { name: 'Study', exact: true })
    .getByRole('link', { name: 'Compare' })
    .click();
  await expect(manager.getByRole('heading', { level: 1 })).toHaveText('Compare');
  const table = manager.getByRole('table', { name: /Method recovery/ });
  await expect(table.getByRole('columnheader')).toContainText(['Analyte', 'A', 'B', 'C', 'D']);
  // The generator lets gabapentin run through every sorbent: no variant has it inside.
  const gabapentin = table.getByRole('row').filter({
    has: manager.getByRole('rowheader', { name: 'Gabapentin' })
  });
  for (const index of [0, 1, 2, 3])
    await expect(gabapentin.getByRole('cell').nth(index)).toContainText(/outside/i);
  await expect(table).toContainText('mL');
  await gabapentin.getByRole('cell').nth(3).getByRole('link').first().click();
  const drawer = manager.getByRole('dialog');
  await expect(drawer).toContainText('Gabapentin, method recovery');
  await expect(gabapentin).toHaveAttribute('aria-current', 'true');
  await drawer.getByRole('link', { name: 'Close' }).click();
  await expect(drawer).toHaveCount(0);
  await manager.goBack();
  await expect(manager.getByRole('dialog')).toContainText('Gabapentin');
});

test('the page of the lab leads to who did what, filtered by its address', async ({ browser }) => {
  const manager = await openAs(browser, 'manager');
  await manager.goto('/lab/history?entity=exclusion');
  const events = manager.getByRole('main').getByRole('listitem');
  await expect(events.filter({ hasText: 'Set D-S6 aside in experiment 8.' })).toContainText('Tobias Renn');
  await expect(events.filter({ hasText: 'Created the study' })).toHaveCount(0);
});

test('nothing of it is there for another lab', async ({ browser }) => {
  const stranger = await openAs(browser, 'elsewhere');
  for (const path of [
    '',
    '/balance',
    '/summary',
    '/experiments/8',
    '/data',
    '/summary.xlsx',
    '/results.csv'
  ]) {
    const answer = await stranger.request.get(`/studies/TARROW-1${path}`);
    expect(answer.status(), path).toBe(404);
    expect(await answer.text(), path).not.toContain('Tarrow');
  }
  await stranger.goto('/studies');
  await expect(stranger.getByText('Tarrow')).toHaveCount(0);
});
