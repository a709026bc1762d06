import { mkdirSync } from 'node:fs';
import { resolve } from 'node:path';
import { chromium as browserType, type Page } from '@playwright/test';
import { demoAccounts } from '../seeders/demo-accounts';
import { demoStudyCode } from '../seeders/demo/study';
import { chromium } from '../tests/browser';

/*
 * npm run screenshots [address]: the pictures of the README, taken from the demo lab of a running server.
 */
const address = process.argv[2] ?? 'http://127.0.0.1:3000';
const folder = resolve('scripts', 'screenshots');

interface Picture {
  readonly name: string;
  readonly theme: 'light' | 'dark';
  readonly open: (page: Page) => Promise<void>;
}

const study = `${address}/studies/${demoStudyCode}`;

const pictures: readonly Picture[] = [
  { name: 'stages-light', theme: 'light', open: async (page) => void (await page.goto(study)) },
  {
    name: 'mass-balance-light',
    theme: 'light',
    open: async (page) => void (await page.goto(`${study}/balance`))
  },
  {
    name: 'provenance-dark',
    theme: 'dark',
    open: async (page) => {
      await page.goto(`${study}/balance`);
      await page
        .getByRole('link', { name: /Caffeine/ })
        .first()
        .click();
      await page.getByText('Provenance', { exact: true }).first().waitFor();
    }
  }
];

async function signIn(page: Page): Promise<void> {
  const account = demoAccounts.find(({ role }) => role === 'reviewer');
  await page.goto(`${address}/sign-in`);
  await page.getByLabel('E-mail address').fill(account?.email ?? '');
  await page.getByLabel('Password', { exact: true }).fill(account?.password ?? '');
  await page
    .locator('form', { has: page.getByLabel('E-mail address') })
    .getByRole('button')
    .click();
  await page.waitForURL((url) => url.pathname !== '/sign-in');
}

mkdirSync(folder, { recursive: true });
const browser = await browserType.launch(chromium);
try {
  for (const { name, theme, open } of pictures) {
    const context = await browser.newContext({ viewport: { width: 1440, height: 940 }, colorScheme: theme });
    const page = await context.newPage();
    await signIn(page);
    await open(page);
    await page.waitForLoadState('networkidle');
    // Nothing is pointed at in a picture.
    await page.mouse.move(0, 0);
    await page.waitForTimeout(300);
    await page.screenshot({ path: resolve(folder, `${name}.png`) });
    console.log(`scripts/screenshots/${name}.png`);
    await context.close();
  }
} finally {
  await browser.close();
}
