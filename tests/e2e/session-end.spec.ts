import { expect, test } from '@playwright/test';
import { demoAccount, signIn } from './access-people';

test('a form that is sent after the session ended stays on the page with what was typed', async ({
  page,
  context
}) => {
  await signIn(page, 'chemist');
  await page.goto('/account');
  await expect(page.getByLabel('Your name')).toHaveValue(demoAccount('chemist').name);

  await context.clearCookies();
  await page.getByLabel('Your name').fill('Ines Marlow-Okoro');
  await page.getByRole('button', { name: 'Change the name' }).click();
  await expect(page.getByText('Your session has ended')).toBeVisible();
  await expect(page.getByLabel('Your name')).toHaveValue('Ines Marlow-Okoro');
});
