import { expect, type Page } from '@playwright/test';
import { replicateKinds } from '../../src/lib/domain/vocabulary';

/** Where a study that was made for a test is found. */
export interface SmallStudy {
  readonly code: string;
  readonly base: string;
}

let made = 0;
/** A code that no other run of the tests has given. */
export const freshCode = (letters: string): string =>
  `${letters}-${Date.now().toString(36).toUpperCase()}${made++}`;

/** Sends a form as the browser would without JavaScript; answers with the address that it leads to. */
async function send(page: Page, path: string, form: Record<string, string>): Promise<string> {
  const { origin } = new URL(page.url());
  const answer = await page.request.post(path, {
    form,
    headers: { origin, accept: 'text/html' },
    maxRedirects: 0
  });
  expect(answer.status(), `${path} answers: ${answer.status() === 303 ? '' : await answer.text()}`).toBe(303);
  return answer.headers().location ?? '';
}

/**
 * A study of two targets that are read externally, with one variant and two extraction experiments of three spiked portions
 * and one fraction each, in which nothing is measured yet. It is sent form by form, because what the test is about begins after it.
 * @param page somebody's who may plan
 */
export async function makeSmallStudy(page: Page): Promise<SmallStudy> {
  await page.goto('/studies/new');
  const code = freshCode('SMALL');
  const base = `/studies/${code}`;
  await page.getByLabel('Targets').fill('x');
  await page.getByRole('button', { name: 'Look them up' }).click();
  const criteriaSetId = await page
    .getByLabel('Acceptance criteria')
    .getByRole('option', { name: 'Example of EPA 3535A' })
    .getAttribute('value');
  await send(page, '/studies/new?/create', {
    title: 'A small study',
    matrix: 'tap water',
    sampleVolumeMl: '500',
    criteriaSetId: criteriaSetId ?? '',
    code,
    panelText: 'Atrazine\nCarbamazepine'
  });
  await send(page, `${base}/variants/new`, { code: 'A', name: 'Polymer' });
  for (const title of ['First series', 'Second series']) {
    await send(page, `${base}/experiments/new`, {
      title,
      stageKey: 'extraction',
      medium: 'sample matrix',
      levelLabel: '100 ng',
      subtract: 'none',
      variantCode: title === 'First series' ? 'A' : '',
      'fractions.0.name': 'Elution',
      'fractions.0.kind': 'elution',
      'fractions.0.countsAs': 'method',
      'replicates.0.kind': 'spiked',
      'replicates.0.count': '3',
      ...Object.fromEntries(replicateKinds.map((kind, index) => [`spikes.${index}.kind`, kind])),
      'spikes.0.targetsNg': '100'
    });
  }
  return { code, base };
}

/** What the portions of the first series hold, ng: Carbamazepine 82, 84, 86 and Atrazine 95, 96, 97 by default. */
export const smallAmounts = (carbamazepine: readonly (string | number)[] = [82, 84, 86]) => [
  ['Sample', 'Fraction', 'Analyte', 'Amount (ng)'],
  ...carbamazepine.map((ng, index) => [`E1-S${index + 1}`, 'Elution', 'Carbamazepine', ng]),
  ...[95, 96, 97].map((ng, index) => [`E1-S${index + 1}`, 'Elution', 'Atrazine', ng])
];
