import { expect, it } from 'vitest';
import { validationPartTitles, type ValidationPartKey } from '../../../src/lib/domain/validation-parts';
import { validationView } from '../../../src/lib/server/services/validation';
import { provenanceView } from '../../../src/lib/server/services/results';
import type { ValidationRow, ValidationTable } from '../../../src/lib/views/validation';
import { fluorine, quinoneStudies } from '../../reference/data/epa';
import { openBench, portions, type Bench } from '../by-hand/bench';

/*
 * Published examples, typed into files as a laboratory would bring them and read back from the validation. ng in a litre of sample is
 * ng/L, so that the published figures stand as they are.
 */
const litre = '1000';

async function tableOf(bench: Bench, part: ValidationPartKey): Promise<ValidationTable> {
  const view = await validationView(bench.actor, bench.code, {}, (address) => address);
  const found = view.parts.find(({ key }) => key === part)?.tables[0];
  if (!found) throw new Error(`${validationPartTitles[part]} has no table`);
  return found;
}

function valueIn(table: ValidationTable, row: ValidationRow | undefined, key: string): number {
  const index = table.columns.findIndex((column) => column.key === key);
  const value = row?.cells[index]?.value;
  if (typeof value !== 'number') throw new Error(`no number in ${key}`);
  return value;
}

/** A mid-level experiment, so that the other one is the lower of two levels. */
async function midLevel(bench: Bench): Promise<void> {
  await bench.experiment({
    title: 'Middle level',
    medium: 'reagent water',
    levelLabel: 'middle',
    performedOn: '2026-02-02',
    spikes: [{ kind: 'spiked', targetsNg: '100' }],
    replicates: [portions('spiked', ['M1', 'M2'])]
  });
}

/** An experiment at a low level: amounts of one analyte by label, blanks too. */
async function lowLevel(
  bench: Bench,
  spikeNg: number,
  spiked: readonly number[],
  blanks: readonly (number | string)[],
  performedOn = '2026-03-02'
): Promise<number> {
  const labels = spiked.map((_, index) => `${performedOn} S${index + 1}`);
  const blankLabels = blanks.map((_, index) => `${performedOn} B${index + 1}`);
  const experiment = await bench.experiment({
    title: 'Low level',
    medium: 'reagent water',
    levelLabel: 'low',
    performedOn,
    sampleVolumeMl: litre,
    spikes: [{ kind: 'spiked', targetsNg: String(spikeNg) }],
    replicates: [
      ...(labels.length > 0 ? [portions('spiked', labels, { sampleVolumeMl: litre })] : []),
      ...(blankLabels.length > 0 ? [portions('method blank', blankLabels, { sampleVolumeMl: litre })] : [])
    ]
  });
  await bench.upload(
    [
      ['Sample', 'Analyte', 'Amount (ng)'],
      ...labels.map((label, index) => [label, 'Placein', spiked[index] ?? null] as const),
      ...blankLabels.map((label, index) => [label, 'Placein', blanks[index] ?? null] as const)
    ],
    { experiment, confirmed: true }
  );
  return experiment;
}

it.each(
  quinoneStudies.map(({ values, fromTheData }, index) => ({
    study: `study ${index + 1}`,
    values,
    mdl: fromTheData.mdl
  }))
)(
  '$study of 6PPD-quinone: MDLs from its rounded data, and no MDL without blanks',
  async ({ values, mdl }) => {
    // EPA Research Summary, draft SPE method for 6PPD-quinone (Nov 2023), Table 5-2; t s worked from the rounded data.
    const bench = await openBench();
    await bench.entry('Placein');
    await midLevel(bench);
    await lowLevel(bench, 2, values, []);
    const table = await tableOf(bench, 'detection');
    const [row] = table.rows;
    expect(Math.abs(valueIn(table, row, 'mdls') - mdl)).toBeLessThan(0.00006);
    expect(row?.verdict).toBe('too few');
    expect(row?.why).toContain('0 of 7 method blanks');
    expect(row?.cells[table.columns.findIndex(({ key }) => key === 'mdl')]?.value).toBeNull();
  }
);

it.each([
  // EPA AOF single-laboratory validation report (April 2022), Table 5-1; exact figures worked from its data.
  { spiked: fluorine.spikedAt5, spike: 5, mdls: 2.44223 },
  { spiked: fluorine.spikedAt8, spike: 8, mdls: 2.63995 }
])(
  'adsorbable fluorine spiked at $spike: MDLb 1.94485, MDLs $mdls, the larger counts',
  async ({ spiked, spike, mdls }) => {
    const bench = await openBench();
    await bench.entry('Placein');
    await midLevel(bench);
    await lowLevel(bench, spike, spiked, fluorine.blanks);
    const table = await tableOf(bench, 'detection');
    const [row] = table.rows;
    expect(Math.abs(valueIn(table, row, 'mdlb') - 1.94485)).toBeLessThan(5e-6);
    expect(Math.abs(valueIn(table, row, 'mdls') - mdls)).toBeLessThan(6e-6);
    expect(valueIn(table, row, 'mdl')).toBe(valueIn(table, row, 'mdls'));
    // One batch on one day: the figure stands, and what the procedure wants besides is said.
    expect(row?.verdict).toBe('watch');
    const view = await validationView(bench.actor, bench.code, {}, (address) => address);
    const missing = view.parts.find(({ key }) => key === 'detection')?.missing ?? [];
    expect(missing).toContain('1 of 3 batches with spiked preparations.');
    expect(missing).toContain('1 of 3 dates of method blanks.');
  }
);

it('some blanks without a number: the highest of the others is MDLb; none with one: it does not apply', async () => {
  // 40 CFR 136 Appendix B revision 2, as the AOF report quotes it.
  const bench = await openBench();
  await bench.entry('Placein');
  await midLevel(bench);
  const none = ['<0.05', '<0.05', '<0.05', '<0.05', '<0.05', '<0.05'];
  await lowLevel(bench, 5, fluorine.spikedAt5, [...none, 0.31]);
  const some = await tableOf(bench, 'detection');
  expect(valueIn(some, some.rows[0], 'mdlb')).toBe(0.31);

  const other = await openBench();
  await other.entry('Placein');
  await midLevel(other);
  await lowLevel(other, 5, fluorine.spikedAt5, [...none, '<0.05']);
  const nothing = await tableOf(other, 'detection');
  expect(nothing.rows[0]?.cells[nothing.columns.findIndex(({ key }) => key === 'mdlb')]?.value).toBeNull();
  expect(Math.abs(valueIn(nothing, nothing.rows[0], 'mdl') - 2.44223)).toBeLessThan(6e-6);
});

it('a spiked preparation with nothing found leaves no limit and says which', async () => {
  const bench = await openBench();
  await bench.entry('Placein');
  await midLevel(bench);
  await lowLevel(bench, 5, [4.45, 4.74, 5.31, 4.66, 4.69, 6.23, 0], fluorine.blanks);
  const table = await tableOf(bench, 'detection');
  expect(table.rows[0]?.verdict).toBe('outside');
  expect(table.rows[0]?.why).toBe('nothing above zero in 2026-03-02 S7: the spike has to be higher');
});

it.each([
  // EPA Method 539: 3.963 at seven; the others t(n - 1, 0.995) sqrt(1 + 1/n), worked outside the program.
  { n: 5, factor: 5.044 },
  { n: 6, factor: 4.355 },
  { n: 7, factor: 3.963 },
  { n: 8, factor: 3.712 },
  { n: 10, factor: 3.408 }
])('the half-range of $n preparations is $factor s', async ({ n, factor }) => {
  const bench = await openBench();
  await bench.entry('Placein');
  await midLevel(bench);
  // Percent of the spike as they are typed; s by hand.
  const values = Array.from({ length: n }, (_, index) => 90 + 4 * Math.sin(index * 2.3));
  const mean = values.reduce((sum, value) => sum + value, 0) / n;
  const s = Math.sqrt(values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (n - 1));
  await lowLevel(
    bench,
    10,
    values.map((value) => value / 10),
    []
  );
  const table = await tableOf(bench, 'confirmation');
  const [row] = table.rows;
  expect(Math.abs(valueIn(table, row, 'half') / s - factor)).toBeLessThan(0.0006);
  expect(valueIn(table, row, 'lower')).toBeCloseTo(mean - valueIn(table, row, 'half'), 9);
  expect(valueIn(table, row, 'level')).toBeCloseTo(10, 12);
  expect(row?.verdict).toBe(n < 7 ? 'too few' : 'inside');
});

it('five barrels of sodium chlorate as batches: F 30, sampling variance 0.47', async () => {
  // J. N. Miller and J. C. Miller, Statistics and Chemometrics for Analytical Chemistry: MSB 1.96, MSW 0.0653, F 30,
  // (1.96 - 0.0653)/4 = 0.47; data from memory, the printed figures agree.
  const barrels = [
    [98.8, 98.7, 98.9, 98.8],
    [99.3, 98.7, 98.8, 99.2],
    [98.3, 98.5, 98.8, 98.8],
    [98.0, 97.7, 97.4, 97.3],
    [99.3, 99.4, 99.9, 99.4]
  ];
  const bench = await openBench();
  const entry = await bench.entry('Placein');
  for (const [index, values] of barrels.entries()) {
    await lowLevel(bench, 100, values, [], `2026-03-0${index + 1}`);
  }
  const table = await tableOf(bench, 'precision');
  const [row] = table.rows;
  expect(Math.abs(valueIn(table, row, 'f') - 30)).toBeLessThan(0.05);
  expect(valueIn(table, row, 'n')).toBe(20);
  expect(valueIn(table, row, 'batches')).toBe(5);
  const view = await provenanceView(bench.actor, bench.code, `precision:-:${entry.id}`, (address) => address);
  const input = (label: string): number =>
    Number(view.inputs.find((item) => item.label.startsWith(label))?.value.replace('\u2212', '-'));
  expect(input('Repeatability SD') ** 2).toBeCloseTo(0.0653, 4);
  expect(input('SD between batches') ** 2).toBeCloseTo(0.47, 2);
  // Satterthwaite by hand, four in each: (MSB + 3 MSW)^2/(MSB^2/4 + (3 MSW)^2/15), rounded mean squares.
  const byHand = (1.96 + 3 * 0.0653) ** 2 / (1.96 ** 2 / 4 + (3 * 0.0653) ** 2 / 15);
  expect(Math.abs(valueIn(table, row, 'df') - byHand)).toBeLessThan(0.01);
});

it('a negative variance between batches counts as zero, and is said', async () => {
  const bench = await openBench();
  await bench.entry('Placein');
  // Means of the batches are alike (90), the portions are not.
  await lowLevel(bench, 100, [80, 90, 100], [], '2026-03-01');
  await lowLevel(bench, 100, [81, 90, 99], [], '2026-03-02');
  await lowLevel(bench, 100, [79, 90, 101], [], '2026-03-03');
  const table = await tableOf(bench, 'precision');
  const [row] = table.rows;
  expect(valueIn(table, row, 'between')).toBe(0);
  // Within: (200 + 162 + 242)/6 = 100.667, of a mean of 90.
  expect(valueIn(table, row, 'intermediate')).toBeCloseTo((100 * Math.sqrt(604 / 6)) / 90, 9);
  expect(row?.why).toContain('between batches negative');
});
