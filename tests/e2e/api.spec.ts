import { execFile } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { delimiter, join } from 'node:path';
import { existsSync } from 'node:fs';
import AxeBuilder from '@axe-core/playwright';
import ExcelJS from 'exceljs';
import { expect, test, type Page } from '@playwright/test';
import {
  bringScript,
  languages,
  readScript,
  templateScript,
  type ExampleNames,
  type Language,
  type Script
} from '../../src/routes/(public)/help/api/examples';
import { makeKey } from './access-keys';
import { openAs } from './sessions';
import { makeSmallStudy, smallAmounts, type SmallStudy } from './small-study';
import { workbook } from './spreadsheets';

/*
 * The scripts of the help page, run as they stand there against the served program: only the study they name is another one.
 */
const programs: Readonly<Record<Language, { readonly program: string; readonly ending: string }>> = {
  curl: { program: 'sh', ending: 'sh' },
  R: { program: 'Rscript', ending: 'R' },
  Python: { program: 'python3', ending: 'py' }
};
const needed: Readonly<Record<Language, readonly string[]>> = {
  curl: ['sh', 'curl'],
  R: ['Rscript', 'curl'],
  Python: ['python3']
};

const isInstalled = (program: string): boolean =>
  (process.env.PATH ?? '').split(delimiter).some((folder) => existsSync(join(folder, program)));

interface Outcome {
  readonly code: number;
  readonly said: string;
}

/** Runs a script in a folder of its own, with the address and the key where the help page says they are. */
function run(
  folder: string,
  language: Language,
  script: Script,
  env: Readonly<Record<string, string>>
): Promise<Outcome> {
  const { program, ending } = programs[language];
  const file = join(folder, `script.${ending}`);
  writeFileSync(file, script[language]);
  return new Promise((resolve) => {
    const options = { cwd: folder, timeout: 60_000, env: { ...process.env, ...env } };
    execFile(program, [file], options, (error, stdout, stderr) =>
      resolve({ code: error ? Number(error.code ?? 1) : 0, said: `${stdout}${stderr}` })
    );
  });
}

/** The mean that a script printed behind the name of an analyte and n. */
function meanOf(language: Language, said: string, analyte: string): { n: number; mean: number } {
  const line = said.split(/\r?\n/).find((each) => each.includes(analyte)) ?? '';
  if (language === 'curl') {
    // The columns of the table: study, experiment, analyte, class, n, mean.
    const [n, mean] = /,(\d+),([\d.]+),/.exec(line.slice(line.indexOf(analyte)))?.slice(1) ?? [];
    return { n: Number(n), mean: Number(mean) };
  }
  const [n, mean] = /\s(\d+)\s+([\d.]+)\s/.exec(line.slice(line.indexOf(analyte)))?.slice(1) ?? [];
  return { n: Number(n), mean: Number(mean) };
}

let origin = '';
test.beforeAll(({ baseURL }) => {
  origin = new URL(baseURL ?? '').origin;
});

let folder = '';
test.beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'headwater-script-'));
});
test.afterEach(() => rmSync(folder, { recursive: true, force: true }));

async function studyWithKey(page: Page): Promise<SmallStudy & { readonly key: string }> {
  const study = await makeSmallStudy(page);
  return { ...study, ...(await makeKey(page.request, origin, 'script', ['read', 'import'])) };
}

for (const language of languages) {
  test(`the ${language} scripts of the help page bring a file in and read its recoveries`, async ({
    browser
  }) => {
    const missing = needed[language].filter((program) => !isInstalled(program));
    test.skip(missing.length > 0, `skipped: ${missing.join(' and ')} is not installed`);
    const page = await openAs(browser, 'chemist');
    const { code, key } = await studyWithKey(page);
    const names: ExampleNames = { study: code, experiment: 1, file: 'areas.xlsx' };
    const env = { HEADWATER_URL: origin, HEADWATER_KEY: key };
    const data = join(folder, names.file);

    // One cell is wrong: the script ends with a failure, and says where.
    writeFileSync(data, await workbook('Values', smallAmounts([82, '8A', 86])));
    const refused = await run(folder, language, bringScript(names), env);
    expect(refused.code, refused.said).not.toBe(0);
    expect(refused.said).toContain('D3');
    expect(refused.said).toContain('8A');

    writeFileSync(data, await workbook('Values', smallAmounts()));
    const stored = await run(folder, language, bringScript(names), env);
    expect(stored.code, stored.said).toBe(0);
    expect(stored.said).toContain('stored');
    expect(stored.said).toContain('6');
    const again = await run(folder, language, bringScript(names), env);
    expect(again.code, again.said).toBe(0);
    expect(again.said).toContain('known');

    // 100 ng were spiked; 82, 84 and 86 ng are 84 % in the mean, 95, 96 and 97 ng are 96 %.
    const figures = await run(folder, language, readScript(names), env);
    expect(figures.code, figures.said).toBe(0);
    for (const [analyte, expected] of [
      ['Carbamazepine', 84],
      ['Atrazine', 96]
    ] as const) {
      const { n, mean } = meanOf(language, figures.said, analyte);
      expect(n, figures.said).toBe(3);
      expect(mean).toBeCloseTo(expected, 9);
    }

    const template = await run(folder, language, templateScript(names), env);
    expect(template.code, template.said).toBe(0);
    const book = new ExcelJS.Workbook();
    await book.xlsx.load(readFileSync(join(folder, 'template.xlsx')) as unknown as ExcelJS.Buffer);
    expect(book.getWorksheet('Results')?.getSheetValues().flat(2).join(' ')).toContain('Carbamazepine');

    const wrong = await run(folder, language, readScript(names), { ...env, HEADWATER_KEY: 'wrong' });
    expect(wrong.code).not.toBe(0);
    expect(wrong.said).toContain('401');
    await page.context().close();
  });
}

test('the help page shows the scripts that are tested, and leads to the description', async ({ page }) => {
  await page.goto('/help/api');
  const names: ExampleNames = { study: 'TARROW-1', experiment: 1, file: 'areas.xlsx' };
  const shown = await page.locator('pre code').allTextContents();
  for (const script of [readScript(names), templateScript(names), bringScript(names)]) {
    for (const language of languages) expect(shown).toContain(script[language]);
  }
  const { violations } = await new AxeBuilder({ page }).analyze();
  expect(violations.map(({ id }) => id)).toEqual([]);
  await page.getByRole('link', { name: '/api/v1/openapi.json' }).click();
  await expect(page.locator('body')).toContainText('"openapi":"3.1.0"');
});

test('a file comes as a form too, without an Origin, and what is too large is turned down', async ({
  browser
}) => {
  const page = await openAs(browser, 'chemist');
  const { code, key } = await studyWithKey(page);
  const address = `${origin}/api/v1/studies/${code}/imports`;
  const headers = { authorization: `Bearer ${key}` };
  const form = new FormData();
  form.set('file', new File([new Uint8Array(await workbook('Values', smallAmounts()))], 'a.xlsx'));
  const stored = await fetch(address, { method: 'POST', headers, body: form });
  expect(stored.status).toBe(201);
  // Without a key the answer is a problem like any other, and not a page.
  const nobody = await fetch(address, { method: 'POST', body: form });
  expect(nobody.status).toBe(401);
  expect(nobody.headers.get('content-type')).toBe('application/problem+json');

  // Its length is not told beforehand: it is counted while it comes.
  let pieces = 0;
  const large = new ReadableStream<Uint8Array>({
    pull(controller) {
      pieces += 1;
      if (pieces > 90) controller.close();
      else controller.enqueue(new Uint8Array(1024 * 1024).fill(65));
    }
  });
  const refused = await fetch(`${address}?file=large.csv`, {
    method: 'POST',
    headers: { ...headers, 'content-type': 'text/csv' },
    body: large,
    duplex: 'half'
  } as RequestInit);
  expect(refused.status).toBe(413);
  expect(await refused.json()).toMatchObject({ code: 'too-large', status: 413 });
  await page.context().close();
});

test('a key is made, shown once and revoked on its page, without JavaScript too', async ({ browser }) => {
  const page = await openAs(browser, 'analyst', { javaScriptEnabled: false });
  await page.goto('/lab/access-keys');
  await page.getByLabel('Held by').fill('Rig in room 12');
  await page.getByRole('checkbox', { name: /^import/ }).check();
  await page.getByRole('button', { name: 'Make the key' }).click();
  const key = (await page.locator('code').first().textContent()) ?? '';
  expect(key).toMatch(/^hw_/);
  const ask = (): Promise<Response> =>
    fetch(`${origin}/api/v1/studies`, { headers: { authorization: `Bearer ${key}` } });
  expect((await ask()).status).toBe(200);
  await page.goto('/lab/access-keys');
  await expect(page.getByText(key)).toHaveCount(0);
  await expect(page.getByText('Rig in room 12')).toBeVisible();
  await page.getByRole('link', { name: 'Revoke Rig in room 12' }).click();
  await page.getByRole('button', { name: 'Revoke Rig in room 12' }).click();
  await expect(page.getByText('The key is revoked.')).toBeVisible();
  expect((await ask()).status).toBe(401);
  await page.context().close();
});
