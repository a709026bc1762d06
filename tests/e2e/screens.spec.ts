import { expect, test, type Page } from '@playwright/test';
import axe from 'axe-core';
import { openAs } from './sessions';

/** Every main screen, as chemist, who sees the most of it: readable for everybody in both themes, and no wider than a phone. */

const study = '/studies/TARROW-1';
const screens = [
  '/',
  '/studies',
  '/studies/new',
  study,
  `${study}/aim`,
  `${study}/panel`,
  `${study}/panel/chemistry`,
  `${study}/variants`,
  `${study}/variants/A`,
  `${study}/variants/A?edit=steps`,
  `${study}/experiments`,
  `${study}/experiments/8`,
  `${study}/experiments/new`,
  `${study}/data`,
  `${study}/calibration`,
  `${study}/calibration/new`,
  `${study}/balance`,
  `${study}/walk-back`,
  `${study}/compare`,
  `${study}/validation`,
  `${study}/validation/experiment`,
  '/studies/TARROW-2/validation',
  `${study}/summary`,
  `${study}/history`,
  '/library/analytes',
  '/library/criteria',
  '/help',
  '/help/figures',
  '/help/chemistry',
  '/help/data-files'
];
/** Reached by a link of the screen before them, since their addresses hold ids. */
const behind = [
  { from: `${study}/data`, link: /\/data\/[0-9a-f-]{36}$/ },
  { from: `${study}/calibration`, link: /\/calibration\/[0-9a-f-]{36}$/ },
  { from: `${study}/panel/chemistry`, link: /[?&]analyte=/ },
  { from: `${study}/balance`, link: /figure=recovery/ },
  { from: '/library/analytes', link: /\/library\/analytes\/[0-9a-f-]{36}$/ },
  { from: '/library/criteria', link: /\/library\/criteria\/[0-9a-f-]{36}$/ }
];

type Only = { readonly type: 'tag' | 'rule'; readonly values: string[] };
const checks: Readonly<Record<'light' | 'dark', Only>> = {
  light: { type: 'tag', values: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'] },
  dark: { type: 'rule', values: ['color-contrast', 'link-in-text-block'] }
};
/** What the summary shows of each variant is drawn by the pieces of the pages of findings, which are looked at by themselves. */
const seenElsewhere = 'section[aria-labelledby^="findings-"]';

/** What is serious or critical on the page in a theme; of the dark one the colours, since the rest is the same in both. */
function seriousIn(page: Page, theme: 'light' | 'dark'): Promise<string[]> {
  return page.evaluate(
    async ([name, runOnly, exclude]) => {
      // A colour on its way to another has a contrast of its own.
      const still = new CSSStyleSheet();
      still.replaceSync('*, ::before, ::after { transition: none !important; animation: none !important }');
      document.adoptedStyleSheets = [still];
      document.documentElement.dataset.theme = name;
      const { violations } = await (window as unknown as { axe: typeof axe }).axe.run(
        { include: [['html']], exclude: [[exclude]] },
        {
          runOnly,
          resultTypes: ['violations']
        }
      );
      return violations
        .filter(({ impact }) => impact === 'serious' || impact === 'critical')
        .map(
          ({ id, nodes }) =>
            `${name}, ${id} at ${nodes
              .slice(0, 3)
              .map(({ target }) => target.join(' '))
              .join('; ')}`
        );
    },
    [theme, checks[theme], seenElsewhere] as const
  );
}

test('axe finds nothing serious in either theme, and nothing scrolls sideways on a phone', async ({
  browser
}) => {
  test.setTimeout(240_000);
  const page = await openAs(browser, 'chemist');
  const found: string[] = [];

  async function look(path: string): Promise<void> {
    await page.setViewportSize({ width: 1440, height: 900 });
    await page.goto(path);
    await page.evaluate(axe.source);
    for (const theme of ['light', 'dark'] as const)
      found.push(...(await seriousIn(page, theme)).map((text) => `${path}: ${text}`));
    await page.setViewportSize({ width: 390, height: 844 });
    const [needed = 0, there = 0] = await page.evaluate(() => [
      document.documentElement.scrollWidth,
      window.innerWidth
    ]);
    if (needed > there) found.push(`${path}: ${needed} wide on a phone of ${there}`);
  }

  for (const path of screens) await look(path);
  for (const { from, link } of behind) {
    await page.goto(from);
    const addresses = await page
      .locator('main a[href]')
      .evaluateAll((links) => links.map((item) => (item as HTMLAnchorElement).href));
    const address = addresses.find((href) => link.test(href));
    expect(address, `${from} should have a link like ${link}`).toBeDefined();
    await look(address ?? from);
  }
  expect(found).toEqual([]);
});
