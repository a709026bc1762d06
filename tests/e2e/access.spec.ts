import AxeBuilder from '@axe-core/playwright';
import { randomBytes } from 'node:crypto';
import { expect, test, type Browser, type Page } from '@playwright/test';
import { demoAccount, signIn } from './access-people';

const newcomer = (): string => `newcomer-${randomBytes(4).toString('hex')}@lab.example`;

async function signInWith(page: Page, email: string, password: string): Promise<void> {
  await page.goto('/sign-in');
  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Password', { exact: true }).fill(password);
  await page.getByRole('button', { name: 'Sign in', exact: true }).first().click();
}

/** Waits for a message in the mailbox of this machine and opens the link in it. */
async function openLinkSentTo(page: Page, email: string, subject: RegExp): Promise<void> {
  const message = page.getByRole('article').filter({ hasText: email }).filter({ hasText: subject }).first();
  await expect(async () => {
    await page.goto('/mailbox');
    await expect(message).toBeVisible({ timeout: 1000 });
  }).toPass({ timeout: 30_000 });
  await message.getByRole('link').first().click();
}

async function newPage(browser: Browser): Promise<Page> {
  return (await browser.newContext()).newPage();
}

test('a stranger is asked to sign in and comes back to the page that was asked for', async ({ page }) => {
  await page.goto('/lab/members?a=1');
  await expect(page).toHaveURL(/\/sign-in\?next=/);
  const { email, password } = demoAccount('analyst');
  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Password', { exact: true }).fill('not the password');
  await page.getByRole('button', { name: 'Sign in', exact: true }).first().click();
  await expect(page.getByText('do not belong together')).toBeVisible();
  await expect(page.getByLabel('E-mail address')).toHaveValue(email);
  await page.getByLabel('Password', { exact: true }).fill(password);
  await page.getByRole('button', { name: 'Sign in', exact: true }).first().click();
  await expect(page).toHaveURL(/\/lab\/members\?a=1$/);
  await expect(page.getByText('Tobias Renn, you')).toBeVisible();
});

test('the sign-in page says that the demo is invented, and signs in as one of its people', async ({
  page
}) => {
  await page.goto('/sign-in');
  await expect(page.getByText('figures behind these accounts are invented')).toBeVisible();
  await page.getByRole('button', { name: 'Sign in as Ines Marlow, chemist' }).click();
  await expect(page.getByText('(invented demo data)')).toBeVisible();
  await page.getByText('Ines Marlow').first().click();
  await page.getByRole('button', { name: 'Sign out' }).click();
  await expect(page).toHaveURL(/\/sign-in$/);
  await page.goto('/');
  await expect(page).toHaveURL(/\/sign-in$/);
});

test.describe('without JavaScript', () => {
  test.use({ javaScriptEnabled: false });

  test('one can sign in, look at the history, and sign out', async ({ page }) => {
    await page.goto('/sign-in');
    await page.getByRole('button', { name: 'Sign in as Greta Holm, lab manager' }).click();
    await expect(page.getByRole('heading', { level: 1 })).toHaveText('Fennick Weir Laboratory');
    await page.goto('/lab/history');
    await page.getByLabel('What', { exact: true }).selectOption('study');
    await page.getByRole('button', { name: 'Show' }).click();
    await expect(page).toHaveURL(/entity=study/);
    await expect(page.getByText('Created the study TARROW-1', { exact: false })).toBeVisible();
    await page.locator('summary', { hasText: 'Greta Holm' }).click();
    await page.getByRole('button', { name: 'Sign out' }).click();
    await expect(page).toHaveURL(/\/sign-in$/);
  });

  test('the removal of a member is asked about, and the last manager stays', async ({ page }) => {
    await page.goto('/sign-in');
    await page.getByRole('button', { name: 'Sign in as Greta Holm, lab manager' }).click();
    await page.goto('/lab/members');
    await page.getByRole('link', { name: 'Remove Greta Holm' }).click();
    await expect(page.getByText('Remove Greta Holm from the lab?')).toBeVisible();
    await page.getByRole('button', { name: 'Remove Greta Holm' }).click();
    await expect(page.getByText('Greta Holm is the only lab manager.')).toBeVisible();
    await expect(page.getByText('Greta Holm, you')).toBeVisible();
  });
});

test('a newcomer is invited, joins, forgets the password, gets another role, and leaves', async ({
  browser
}) => {
  const email = newcomer();
  const manager = await newPage(browser);
  await signIn(manager, 'manager');
  await manager.goto('/lab/members');
  await manager.getByLabel('E-mail address').fill(email);
  await manager.getByLabel('Role', { exact: true }).selectOption('analyst');
  await manager.getByRole('button', { name: 'Send the invitation' }).click();
  await expect(manager.getByText('The invitation is on its way.')).toBeVisible();
  await expect(manager.getByText(email)).toBeVisible();
  await expect(manager.getByLabel('E-mail address')).toHaveValue('');

  const person = await newPage(browser);
  await openLinkSentTo(person, email, /invites you to Fennick Weir Laboratory/);
  await expect(person.getByRole('heading', { level: 1 })).toHaveText('Join Fennick Weir Laboratory');
  await person.getByLabel('Your name').fill('Nia Rill');
  await person.getByLabel('New password', { exact: true }).fill('short');
  await person.getByLabel('New password again').fill('short');
  await person.getByRole('button', { name: 'Join the lab' }).click();
  await expect(person.getByText('at least 12 are needed')).toBeVisible();
  await expect(person.getByLabel('Your name')).toHaveValue('Nia Rill');
  await person.getByLabel('New password', { exact: true }).fill('brown otters dive');
  await person.getByLabel('New password again').fill('brown otters dive');
  await person.getByRole('button', { name: 'Join the lab' }).click();
  await expect(person.locator('summary', { hasText: 'Nia Rill' })).toContainText('analyst');

  await test.step('a new password ends this session with its next request', async () => {
    const elsewhere = await newPage(browser);
    await elsewhere.goto('/forgot-password');
    await elsewhere.getByLabel('E-mail address').fill(email);
    await elsewhere.getByRole('button', { name: 'Send me a link' }).click();
    await expect(elsewhere.getByText(`If ${email} has an account here`)).toBeVisible();
    await openLinkSentTo(elsewhere, email, /Set a new password/);
    await elsewhere.getByLabel('New password', { exact: true }).fill('red squirrels run');
    await elsewhere.getByLabel('New password again').fill('red squirrels run');
    await elsewhere.getByRole('button', { name: 'Set the password' }).click();
    await expect(elsewhere.getByText('The new password is set. Sign in with it.')).toBeVisible();
    await elsewhere.goBack();
    await elsewhere.reload();
    await expect(elsewhere.getByText('This link has done its work')).toBeVisible();
    await person.goto('/account');
    await expect(person).toHaveURL(/\/sign-in/);
    await signInWith(person, email, 'red squirrels run');
    await expect(person.locator('summary', { hasText: 'Nia Rill' })).toBeVisible();
  });

  await test.step('a second lab is joined with the account, and one switches between the two', async () => {
    const other = await newPage(browser);
    await signIn(other, 'elsewhere');
    await other.goto('/lab/members');
    await other.getByLabel('E-mail address').fill(email);
    await other.getByLabel('Role', { exact: true }).selectOption('reviewer');
    await other.getByRole('button', { name: 'Send the invitation' }).click();
    await openLinkSentTo(person, email, /invites you to Pellow Bay Laboratory/);
    await person.getByRole('button', { name: 'Join with the account you are signed in with' }).click();
    await expect(person.getByRole('heading', { level: 1 })).toHaveText('Pellow Bay Laboratory');
    await person.goto('/studies/TARROW-1/history');
    await expect(person.getByRole('heading', { level: 1 })).toHaveText('Nothing here');
    await person.goto('/account');
    await person.getByRole('button', { name: 'Work in Fennick Weir Laboratory' }).click();
    await expect(person.getByRole('heading', { level: 1 })).toHaveText('Fennick Weir Laboratory');
  });

  await test.step('a changed role and a removal hold from the next request on', async () => {
    await manager.goto('/lab/members');
    const row = manager.getByRole('listitem').filter({ hasText: email });
    await row.getByLabel('Role of Nia Rill', { exact: true }).selectOption('chemist');
    await row.getByRole('button', { name: 'Change the role of Nia Rill' }).click();
    await expect(manager.getByText('The role is changed.')).toBeVisible();
    await person.reload();
    await expect(person.locator('summary', { hasText: 'Nia Rill' })).toContainText('chemist');
    await row.getByRole('link', { name: 'Remove Nia Rill' }).click();
    await manager.getByRole('button', { name: 'Remove Nia Rill' }).click();
    await expect(manager.getByText('no longer a member')).toBeVisible();
    await person.reload();
    await expect(person).toHaveURL(/\/sign-in/);
  });

  await test.step('and all of it stands in the history', async () => {
    await manager.goto('/lab/history?entity=member');
    await expect(manager.getByText(`Nia Rill (${email}) joined the lab as analyst.`)).toBeVisible();
    await expect(manager.getByText('Nia Rill is now chemist (before: analyst).').first()).toBeVisible();
    await expect(manager.getByText(`Nia Rill (${email}) is no longer a member of the lab.`)).toBeVisible();
  });
});

test('who may not is told who may', async ({ page }) => {
  await signIn(page, 'reviewer');
  const response = await page.goto('/lab/history');
  expect(response?.status()).toBe(403);
  await expect(page.getByText('This takes a lab manager. You are signed in as a reviewer.')).toBeVisible();
});

test('the history of a study says who did what, filters in its address, and opens what changed', async ({
  page
}) => {
  await signIn(page, 'reviewer');
  await page.goto('/studies/TARROW-1/history?entity=exclusion');
  await expect(page.getByText('Set D-S6 aside in experiment 8.')).toBeVisible();
  await expect(page.getByText('The bed ran dry while loading')).toBeVisible();
  await page.locator('summary', { hasText: 'What changed' }).first().click();
  await expect(page.getByText(/Event \d+, /).first()).toBeVisible();
  await page.goto('/studies/TARROW-1/history?text=nothing+like+this');
  await expect(page.getByText('No event fits these filters.')).toBeVisible();
});

const strangerPages = ['/sign-in', '/forgot-password', '/mailbox'];
const managerPages = [
  '/',
  '/account',
  '/lab/members',
  '/lab/settings',
  '/lab/history',
  '/studies/TARROW-1/history'
];

for (const theme of ['light', 'dark'] as const) {
  test(`axe finds nothing serious on these pages, ${theme}`, async ({ page, baseURL }) => {
    await page.context().addCookies([{ name: 'headwater-theme', value: theme, url: baseURL ?? '' }]);
    const found: string[] = [];
    const look = async (path: string) => {
      await page.goto(path);
      const { violations } = await new AxeBuilder({ page }).analyze();
      for (const { id, impact, nodes } of violations) {
        if (impact === 'serious' || impact === 'critical')
          found.push(`${path}: ${id} at ${nodes[0]?.target.join(' ')}`);
      }
    };
    for (const path of strangerPages) await look(path);
    await signIn(page, 'manager');
    for (const path of managerPages) await look(path);
    expect(found).toEqual([]);
  });
}
