import { expect, type APIRequestContext, type Page } from '@playwright/test';
import type { Role } from '../../src/lib/domain/roles';
import { demoAccounts, demoLabName, secondLabName, type DemoAccount } from '../../seeders/demo-accounts';

/** The demo account of a role, or the manager of the second lab. */
export function demoAccount(who: Role | 'elsewhere'): DemoAccount {
  const account = demoAccounts.find(({ lab, role }) =>
    who === 'elsewhere' ? lab === secondLabName : lab === demoLabName && role === who
  );
  if (!account) throw new Error(`there is no demo account for ${who}`);
  return account;
}

/** Signs in at the page, as a person does. */
export async function signIn(page: Page, who: Role | 'elsewhere'): Promise<void> {
  const { email, password } = demoAccount(who);
  await page.goto('/sign-in');
  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Password', { exact: true }).fill(password);
  await page
    .locator('form', { has: page.getByLabel('E-mail address') })
    .getByRole('button')
    .click();
  await expect(page.getByRole('heading', { level: 1 })).not.toHaveText('Sign in');
}

/** Signs in without a page, for tests of what the server answers. */
export async function signInByRequest(
  request: APIRequestContext,
  who: Role | 'elsewhere',
  origin: string
): Promise<void> {
  const { email, password } = demoAccount(who);
  const answer = await request.post('/sign-in', {
    form: { email, password },
    headers: { origin, accept: 'text/html' },
    maxRedirects: 0
  });
  expect(answer.status()).toBe(303);
}
