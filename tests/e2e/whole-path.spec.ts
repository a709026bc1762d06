import { expect, test, type Locator, type Page } from '@playwright/test';
import { openAs } from './sessions';
import { csvUpload, fillTemplate, sheetTexts, workbook, xlsxUpload, type Upload } from './spreadsheets';
import {
  analytes,
  areaOf,
  byHand,
  concentration,
  drying,
  extractDilution,
  extraction,
  extractFractions,
  extractVolumeMl,
  instrument,
  levelsNgPerMl,
  standard,
  standardArea,
  standardNgPerMl
} from './walk-truth';

/*
 * Four people walk the whole path: a chemist plans a study, an analyst brings its data, the chemist reads them, a reviewer
 * opens a figure down to its cell and takes the summary along, a manager sees who did what. Expected figures are worked by
 * hand beside the truth that the areas are made from.
 */

const code = `WALK-${Date.now().toString(36).toUpperCase()}`;
const base = `/studies/${code}`;

const part = (page: Page, name: string): Locator => page.getByRole('region', { name, exact: true });
const rowOf = (table: Locator, head: string): Locator =>
  table.getByRole('row').filter({ has: table.page().getByRole('rowheader', { name: head, exact: true }) });

interface Plan {
  readonly stage: string;
  readonly title: string;
  readonly medium: string;
  readonly fractions: readonly {
    readonly name: string;
    readonly counts: string;
    readonly passed: string[];
  }[];
  readonly kinds: Readonly<Record<string, number>>;
  readonly subtract?: string;
}

async function planExperiment(page: Page, plan: Plan): Promise<void> {
  await page.goto(`${base}/experiments/new`);
  await page.getByLabel('Title').fill(plan.title);
  await page.getByLabel('Spiked at').selectOption({ label: plan.stage });
  await page.getByLabel('Medium').selectOption(plan.medium);
  await page.getByLabel('Spike level').fill('100 ng');
  await page.getByLabel('Calibration', { exact: true }).selectOption({ label: 'Walk standards' });
  if (plan.subtract) await page.getByRole('radio', { name: plan.subtract }).check();

  const fractions = part(page, 'Fractions').getByRole('listitem');
  if (plan.fractions.length === 0) await fractions.first().getByLabel('Fraction', { exact: true }).fill('');
  for (const [index, { name, counts, passed }] of plan.fractions.entries()) {
    const row = fractions.nth(index);
    await row.getByLabel('Fraction', { exact: true }).fill(name);
    await row
      .getByLabel('Kind')
      .selectOption(
        name === 'Aqueous layer' ? 'aqueous layer' : name === 'Second elution' ? 'second elution' : 'elution'
      );
    await row.getByLabel('Counts for').selectOption(counts);
    for (const stage of passed) await row.getByRole('checkbox', { name: stage }).check();
  }
  const kindRow = { spiked: 0, unspiked: 1, 'method blank': 2, 'solvent standard': 4 };
  for (const [kind, row] of Object.entries(kindRow)) {
    const count = plan.kinds[kind];
    if (count === undefined) continue;
    await part(page, 'Preparations')
      .getByRole('listitem')
      .nth(row)
      .getByLabel('How many')
      .fill(String(count));
    if (kind === 'spiked' || kind === 'solvent standard')
      await page.getByLabel(`All targets, ${kind}`, { exact: true }).fill('100');
    await page.getByLabel(`All surrogates, ${kind}`, { exact: true }).fill('80');
  }
  const added = page.getByRole('listitem').filter({ hasText: standard });
  await added.getByLabel('Added').selectOption({ label: 'into the vial, after dilution' });
  await added.getByLabel('Concentration in the vial').fill(String(standardNgPerMl));
  await page.getByRole('button', { name: 'Store the plan' }).click();
  await expect(page.getByText('The experiment is planned.')).toBeVisible();
}

async function describeVariant(page: Page, letter: string, name: string, solvent: string): Promise<void> {
  await page.goto(`${base}/variants/new`);
  await page.getByLabel('Code').fill(letter);
  await page.getByLabel('Name').fill(name);
  await page.getByRole('button', { name: 'Add the variant' }).click();
  await page.getByRole('link', { name: 'Describe the steps' }).click();
  const steps = part(page, 'Procedure').getByRole('listitem');
  await steps.nth(0).getByLabel('Instruction').fill('Load 500 mL at 5 mL/min');
  await steps.nth(0).getByLabel('pH').fill('7');
  await steps.nth(1).getByLabel('Step', { exact: true }).selectOption('elute');
  await steps.nth(1).getByLabel('Instruction').fill(`Elute twice with ${solvent}`);
  await steps.nth(1).getByLabel('Solvent').fill(solvent);
  await steps.nth(1).getByLabel('Volume').fill('12');
  await page.getByRole('button', { name: 'Store the procedure' }).click();
  await expect(page.getByText('The procedure is stored')).toBeVisible();
  await expect(page.getByText('By its steps: 12 mL of solvent')).toBeVisible();
}

async function chooseEvidence(page: Page, letter: string, evidence: Readonly<Record<string, string>>) {
  await page.goto(`${base}/variants/${letter}`);
  for (const [stage, label] of Object.entries(evidence)) {
    const form = page.locator('form', { has: page.getByLabel(`Experiment for ${stage}`) });
    await form.getByLabel(`Experiment for ${stage}`).selectOption({ label });
    await form.getByRole('button', { name: 'Choose' }).click();
    await expect(page.getByText('The choice is stored.')).toBeVisible();
    await expect(form.getByLabel(`Experiment for ${stage}`).locator('option:checked')).toHaveText(label);
  }
}

/** Hands a file over, looks at what it becomes, stores it. */
async function bring(page: Page, file: Upload, values: number, look?: () => Promise<void>): Promise<void> {
  await page.goto(`${base}/data`);
  await page.getByLabel('File', { exact: true }).setInputFiles({ ...file });
  await page.getByRole('button', { name: 'Look at the file' }).click();
  await expect(page.getByRole('heading', { level: 1 })).toHaveText(file.name);
  if (look) await look();
  await page.getByRole('button', { name: `Store ${values} values` }).click();
  await expect(page.getByText(`${values} values are on record.`)).toBeVisible();
}

test('four people take a study from its first line to the summary', async ({ browser }) => {
  test.setTimeout(240_000);
  const chemist = await openAs(browser, 'chemist');

  await test.step('the chemist pastes what is to be measured and sets the aim', async () => {
    await chemist.goto('/studies');
    await chemist.getByRole('link', { name: 'New study' }).first().click();
    await chemist.getByLabel('Targets').fill('Atrazine\n298-46-4\nGlimmerol');
    await chemist.getByRole('button', { name: 'Look them up' }).click();
    await expect(chemist.getByRole('heading', { name: '2 found' })).toBeVisible();
    await expect(chemist.getByText('Glimmerol').last()).toBeVisible();
    await chemist.getByLabel('Title').fill('Two targets on a polymer');
    await chemist.getByLabel('Matrix').fill('river water');
    await chemist.getByLabel('Sample volume').fill('0.5 L');
    await chemist
      .getByLabel('Acceptance criteria')
      .selectOption({ label: 'Initial demonstration of EPA 539' });
    await chemist.getByLabel('Code').fill(code);
    await chemist.getByRole('button', { name: 'Create the study' }).click();
    await expect(chemist).toHaveURL(`${base}/panel?left=1`);
    await expect(chemist.getByText('One line was not recognised')).toBeVisible();
  });

  await test.step('puts a surrogate and an internal standard on the panel, and says what is read against it', async () => {
    for (const [name, role] of [
      ['Atrazine-d5', 'surrogate'],
      [standard, 'injection internal standard']
    ] as const) {
      await chemist.getByLabel('Names or CAS numbers').fill(name);
      await chemist.getByLabel('Role').selectOption(role);
      await chemist.getByRole('button', { name: 'Put them on the panel' }).click();
      await expect(chemist.getByText('1 added')).toBeVisible();
      await expect(chemist.getByRole('rowheader', { name, exact: true })).toBeVisible();
    }
    for (const name of ['Carbamazepine', 'Atrazine-d5']) {
      await chemist.getByRole('link', { name: `Change ${name}`, exact: true }).click();
      await chemist
        .getByLabel('Its area is read against')
        .selectOption({ label: `${standard} (injection internal standard)` });
      await chemist.getByRole('button', { name: 'Save the entry' }).click();
      await expect(chemist.getByText('The entry is changed.')).toBeVisible();
      await expect(rowOf(chemist.getByRole('table'), name)).toContainText(standard);
    }
  });

  await test.step('describes two variants by their steps', async () => {
    await describeVariant(chemist, 'A', 'Polymer, two elutions', 'methanol');
    await describeVariant(chemist, 'B', 'Polymer, acetone', 'acetone');
  });

  await test.step('describes the calibration levels', async () => {
    await chemist.goto(`${base}/calibration`);
    await chemist.getByRole('link', { name: 'Describe the levels' }).click();
    await chemist.getByLabel('Name').fill('Walk standards');
    await chemist.getByLabel('Instrument').fill('Chromatograph 1');
    await chemist.getByLabel('Day').fill('2026-10-05');
    for (const [index, concentrationNgPerMl] of levelsNgPerMl.entries())
      await chemist.getByLabel(`Level ${index + 1}, Concentration`).fill(String(concentrationNgPerMl));
    await chemist.getByLabel(`${standard}, Concentration`).fill(String(standardNgPerMl));
    await chemist.getByRole('button', { name: 'Store the set' }).click();
    await expect(chemist.getByRole('heading', { level: 1 })).toContainText('Walk standards');
  });

  await test.step('plans an experiment at each stage, from the detector to the sample', async () => {
    const whole = { name: 'Extract', counts: 'method' };
    await planExperiment(chemist, {
      stage: '1 Instrument',
      title: 'Standards in solvent',
      medium: 'solvent',
      fractions: [],
      kinds: { 'solvent standard': 3 }
    });
    await planExperiment(chemist, {
      stage: '2 Concentration',
      title: 'Blowing down',
      medium: 'solvent',
      fractions: [{ ...whole, passed: [] }],
      kinds: { spiked: 3 }
    });
    await planExperiment(chemist, {
      stage: '3 Drying',
      title: 'Drying over sulfate',
      medium: 'solvent',
      fractions: [{ ...whole, passed: ['concentration'] }],
      kinds: { spiked: 3 }
    });
    await planExperiment(chemist, {
      stage: '4 Extraction',
      title: 'River water on polymer',
      medium: 'sample matrix',
      fractions: [
        { name: 'Elution', counts: 'method', passed: ['concentration', 'drying'] },
        { name: 'Second elution', counts: 'method', passed: ['concentration', 'drying'] },
        { name: 'Aqueous layer', counts: 'balance', passed: [] }
      ],
      kinds: { spiked: 5, unspiked: 2, 'method blank': 1 },
      subtract: 'The native amount'
    });
    await expect(part(chemist, 'Fractions').getByRole('row', { name: /Aqueous layer/ })).toContainText(
      'balance'
    );
    await expect(part(chemist, 'Preparations').getByRole('row', { name: /E4-S5/ })).toContainText('none yet');
  });

  await test.step('and chooses what stands for each stage', async () => {
    const shared = {
      instrument: '1 Standards in solvent (no data yet)',
      concentration: '2 Blowing down (no data yet)',
      drying: '3 Drying over sulfate (no data yet)'
    };
    await chooseEvidence(chemist, 'A', { ...shared, extraction: '4 River water on polymer (no data yet)' });
    await chooseEvidence(chemist, 'B', { drying: shared.drying });
  });

  const analyst = await openAs(browser, 'analyst');
  let cellOfS2 = '';
  await test.step('the analyst fills the template of the extraction and sees what it becomes before it is stored', async () => {
    await analyst.goto('/');
    await analyst.goto(`${base}/experiments/4`);
    const coming = analyst.waitForEvent('download');
    await analyst.getByRole('link', { name: 'Get the template' }).click();
    const download = await coming;
    expect(download.suggestedFilename()).toBe(`${code}-experiment-4-long.xlsx`);
    let vial = 0;
    const filled = await fillTemplate(await download.path(), (row) => {
      vial += 1;
      const found = analytes.find((name) => name === row.text('Analyte'));
      const portion = extraction[row.text('Sample').replace('E4-', '')];
      const fraction = extractFractions.findIndex((name) => name === row.text('Fraction'));
      if (!found) throw new Error(`the template asks for ${row.text('Analyte')}`);
      const signal = standardArea(vial);
      row.set('Final volume (mL)', extractVolumeMl);
      row.set('Dilution', extractDilution);
      row.set('Aliquot share', 1);
      if (found !== 'Atrazine') row.set('Internal standard area', signal);
      // The method blank has the surrogate alone.
      const ng = portion
        ? portion[fraction]?.[found]
        : found === 'Atrazine-d5'
          ? [72, 2, 4][fraction]
          : undefined;
      if (ng === undefined) row.set('Area', 'ND');
      else row.set('Area', areaOf(found, ng / (extractVolumeMl * extractDilution), signal));
      if (row.text('Sample') === 'E4-S2' && row.text('Fraction') === 'Elution' && found === 'Carbamazepine')
        cellOfS2 = `D${row.number}`;
    });
    await bring(analyst, xlsxUpload('river water.xlsx', filled), 72, async () => {
      await expect(
        analyst.getByText('72 values for River water on polymer, 6 of them not detected.')
      ).toBeVisible();
      await expect(
        analyst.getByRole('region', { name: 'Sheet Results' }).getByRole('columnheader', { name: /^D/ })
      ).toContainText('area');
      const record = analyst
        .getByRole('region', { name: 'Records' })
        .getByRole('row')
        .filter({
          has: analyst.getByRole('cell', { name: cellOfS2, exact: true })
        });
      await expect(record).toContainText('E4-S2');
      await expect(record).toContainText('Carbamazepine');
    });
  });

  await test.step('brings the levels and the other experiments, each in a layout of its own', async () => {
    await bring(
      analyst,
      xlsxUpload(
        'levels.xlsx',
        await workbook('Levels', [
          ['Level', 'Analyte', 'Area', 'Internal standard area'],
          ...levelsNgPerMl.flatMap((ngPerMl, level) =>
            analytes.map((name) => [
              `L${level + 1}`,
              name,
              areaOf(name, ngPerMl, standardArea(level)),
              name === 'Atrazine' ? null : standardArea(level)
            ])
          )
        ])
      ),
      18
    );
    const wide = ([2, 3] as const).flatMap((experiment) =>
      (experiment === 2 ? concentration : drying).map((portion, index) => [
        `E${experiment}-S${index + 1}`,
        'Extract',
        1,
        1,
        ...analytes.map((name) => areaOf(name, portion[name], standardArea(index))),
        standardArea(index)
      ])
    );
    await bring(
      analyst,
      xlsxUpload(
        'stages.xlsx',
        await workbook('Wide', [
          [
            'Sample',
            'Fraction',
            'Final volume (mL)',
            'Dilution',
            ...analytes.map((name) => `${name} area`),
            `${standard} area`
          ],
          ...wide
        ])
      ),
      24
    );
    await bring(
      analyst,
      csvUpload('standards.csv', [
        ['Sample', 'Analyte', 'Area', 'Internal standard area', 'Final volume (mL)', 'Dilution'],
        ...instrument.flatMap((portion, index) =>
          analytes.map((name) => [
            `E1-N${index + 1}`,
            name,
            areaOf(name, portion[name], standardArea(index)),
            name === 'Atrazine' ? '' : standardArea(index),
            1,
            1
          ])
        )
      ]),
      9
    );
  });

  const balanceRow = (page: Page) =>
    rowOf(page.getByRole('table', { name: /Mass balance, variant A/ }), 'Carbamazepine');
  const cells = async (row: Locator): Promise<readonly string[]> =>
    (await row.getByRole('cell').allInnerTexts()).map((text) => text.trim());
  const openTable = (page: Page) => page.getByText('The same figures as a table').click();

  await test.step('the chemist reads five portions, of which one pulls the recovery out of its limits', async () => {
    await chemist.goto(`${base}/balance`);
    await openTable(chemist);
    const texts = await cells(balanceRow(chemist));
    expect(texts[0]).toContain('Outside');
    expect(texts[0]).toContain('RSD 26 > 20');
    expect(texts).toEqual(expect.arrayContaining([byHand.all.mean, byHand.all.rsd, byHand.all.n]));
  });

  await test.step('sets it aside with a cause and sees the figures change', async () => {
    await chemist.goto(`${base}/experiments/4`);
    await chemist.getByRole('link', { name: 'Set E4-S5 aside' }).click();
    await chemist.getByLabel('Why?').fill('The bed ran dry while loading');
    await chemist.getByRole('button', { name: 'Set it aside' }).click();
    await expect(chemist.getByText('It is set aside.')).toBeVisible();
    await chemist.goto(`${base}/balance`);
    await openTable(chemist);
    const { mean, halfWidth, rsd, n } = byHand.withoutS5;
    // Verdict, recovery, ±, RSD, n, three fractions, lost downstream, open, found in all.
    expect(await cells(balanceRow(chemist))).toEqual([
      'Inside',
      mean,
      halfWidth,
      rsd,
      n,
      '79.0',
      '4.0',
      byHand.aqueous,
      byHand.downstream,
      byHand.open,
      byHand.total
    ]);
  });

  await test.step('reads what each stage takes, on the ladder and in the walk-back', async () => {
    await chemist.goto(base);
    await openTable(chemist);
    const ladder = rowOf(chemist.getByRole('table', { name: /Stage ladder/ }), 'Carbamazepine');
    const texts = await cells(ladder);
    const { extractionTakes, dryingTakes, concentrationTakes } = byHand;
    expect(texts.slice(0, 5)).toEqual([
      byHand.withoutS5.mean,
      extractionTakes,
      dryingTakes,
      concentrationTakes,
      '0.0'
    ]);
    await chemist.goto(`${base}/walk-back`);
    await openTable(chemist);
    const walk = rowOf(chemist.getByRole('table', { name: /Walk-back, variant A/ }), 'Carbamazepine');
    for (const figure of [extractionTakes, dryingTakes, concentrationTakes])
      await expect(walk).toContainText(figure);
    await chemist.goto(`${base}/validation/experiment?variant=A`);
    const surrogates = part(chemist, 'Surrogates').getByRole('row');
    for (const portion of ['E4-S1 spiked', 'E4-U2 unspiked', 'E4-B1 method blank'])
      await expect(surrogates.filter({ hasText: portion })).toContainText(byHand.surrogate);
  });

  await test.step('is told that variant B, not spiked in the sample yet, has no figure of the whole method', async () => {
    await chemist.goto(`${base}/compare`);
    const row = rowOf(chemist.getByRole('table', { name: /Method recovery/ }), 'Carbamazepine');
    await expect(row.getByRole('cell').nth(0)).toContainText(byHand.withoutS5.mean);
    await expect(row.getByRole('cell').nth(1)).toHaveText('not spiked in the sample yet');
    await chemist.goto(`${base}/balance?variant=B`);
    await expect(chemist.getByText('There is nothing to add up yet')).toBeVisible();
  });

  await test.step('lifts the exclusion, finds the old figure, and sets it aside again', async () => {
    await chemist.goto(`${base}/experiments/4`);
    await chemist.getByRole('link', { name: 'Lift the exclusion of E4-S5' }).click();
    await chemist.getByLabel('Why?').fill('The bench notes are read once more');
    await chemist.getByRole('button', { name: 'Let it count' }).click();
    await expect(chemist.getByText('It counts again.')).toBeVisible();
    await chemist.goto(`${base}/balance`);
    await openTable(chemist);
    expect(await cells(balanceRow(chemist))).toContain(byHand.all.mean);
    await chemist.goto(`${base}/experiments/4`);
    await chemist.getByRole('link', { name: 'Set E4-S5 aside' }).click();
    await chemist.getByLabel('Why?').fill('The bed ran dry while loading');
    await chemist.getByRole('button', { name: 'Set it aside' }).click();
    await expect(chemist.getByText('It is set aside.')).toBeVisible();
  });

  const reviewer = await openAs(browser, 'reviewer');
  await test.step('the reviewer opens a figure of the summary down to its cell', async () => {
    await reviewer.goto(`${base}/summary`);
    await expect(reviewer.getByText('The bed ran dry while loading').first()).toBeVisible();
    const results = reviewer.getByRole('table', { name: /Method recoveries/ }).first();
    await expect(rowOf(results, 'Carbamazepine')).toContainText(byHand.withoutS5.mean);
    await rowOf(results, 'Carbamazepine').getByRole('link', { name: byHand.withoutS5.mean }).click();
    const drawer = reviewer.getByRole('dialog');
    await expect(drawer).toContainText('Carbamazepine, method recovery');
    await expect(drawer).toContainText('n = 4 of 5');
    await expect(drawer).toContainText('E4-S5 is set aside: The bed ran dry while loading. Ines Marlow');
    await drawer.getByRole('row', { name: /E4-S2/ }).getByRole('link').first().click();
    await expect(drawer).toContainText('Carbamazepine in E4-S2, elution');
    await expect(drawer).toContainText('88.00 % of the 100 ng that E4-S2 received.');
    // 151 360 / 43 000 = 3.52; slope 2: q = 1.76; 1.76 · 50 ng/mL · 2 · 0.5 mL = 88 ng.
    for (const [label, value] of [
      ['Area', '151 360'],
      ['Area ratio', '3.52'],
      ['Ratio of concentrations, q', '1.76'],
      ['Dilution of the vial, DF', '2']
    ] as const) {
      const term = drawer.getByRole('term').filter({ hasText: new RegExp(`^${label}$`) });
      await expect(term.locator('xpath=following-sibling::dd')).toContainText(
        new RegExp(value.replace(' ', '\\s'))
      );
    }
    await drawer.getByRole('link', { name: `river water.xlsx › Results › ${cellOfS2}` }).click();
    await expect(reviewer.getByRole('heading', { level: 1 })).toHaveText('river water.xlsx');
    await expect(reviewer.locator(`#cell-${cellOfS2}`)).toHaveText('151360');
    await expect(reviewer.locator(`#cell-${cellOfS2}`)).toBeInViewport();
  });

  await test.step('takes the workbook along and finds the figure in it', async () => {
    await reviewer.goto(`${base}/summary`);
    const coming = reviewer.waitForEvent('download');
    await reviewer.getByRole('link', { name: 'Workbook, XLSX' }).click();
    const rows = await sheetTexts(await (await coming).path(), 'Results');
    const row = rows.find((cellTexts) => cellTexts[2] === 'Carbamazepine' && cellTexts[1] === '4') ?? [];
    expect(Number(row[3])).toBe(4);
    expect(Number(row[4])).toBeCloseTo(83, 9);
  });

  const manager = await openAs(browser, 'manager');
  await test.step('the manager sees who did what', async () => {
    await manager.goto(`${base}/history`);
    const events = manager.getByRole('main').getByRole('listitem');
    const count = (who: string, what: string | RegExp) =>
      events.filter({ hasText: who }).filter({ hasText: what });
    for (const what of [`Created the study ${code}`, 'Set E4-S5 aside in experiment 4.', 'Added variant A'])
      await expect(count('Ines Marlow', what).first()).toBeVisible();
    await expect(count('Ines Marlow', 'Set E4-S5 aside in experiment 4.')).toHaveCount(2);
    for (const file of ['river water.xlsx', 'levels.xlsx', 'stages.xlsx', 'standards.csv'])
      await expect(count('Tobias Renn', file).first()).toBeVisible();
    await expect(count('Samir Vance', /./)).toHaveCount(0);
  });
});
