import { beforeAll, describe, expect, it } from 'vitest';
import { openBench, portions, type Bench, type Row } from './bench';

/*
 * Not detected, from the cell to the verdict; 100 ng spiked, 70 to 130 % wanted. External line A = 1000 x, levels 1, 10 and 100 ng/mL;
 * V = 1 mL: an area is 1000 times the percent.
 */
const spikes = [{ kind: 'spiked', targetsNg: '100' }];
const threeFractions = [
  { name: 'First', kind: 'elution', countsAs: 'method' },
  { name: 'Second', kind: 'second elution', countsAs: 'method' },
  { name: 'Effluent', kind: 'load effluent', countsAs: 'balance' }
];
let bench: Bench;
let calibrationSetId: string;

beforeAll(async () => {
  bench = await openBench();
  const absent = await bench.entry('Absentin');
  await bench.entry('Lineless');
  const following = (await bench.panel()).filter((id) => id !== absent.id);
  calibrationSetId = await bench.calibration({
    levels: [
      { label: 'L1', concentrationNgPerMl: '1' },
      { label: 'L2', concentrationNgPerMl: '10' },
      { label: 'L3', concentrationNgPerMl: '100' }
    ],
    factors: Object.fromEntries(following.map((id) => [id, '0']))
  });
  await bench.upload([
    ['Sample', 'Analyte', 'Peak area'],
    ['L1', 'Absentin', 1000],
    ['L2', 'Absentin', 10000],
    ['L3', 'Absentin', 100000]
  ]);
});

const labelsOf = (prefix: string): string[] => [1, 2, 3, 4, 5].map((index) => `${prefix}${index}`);

/** Five spiked portions: percent in the first fraction, and what stands in the cells of the second and of the effluent. */
async function spiked(
  prefix: string,
  first: readonly (number | string)[],
  second: readonly (number | string)[],
  effluent: readonly (number | string)[]
): Promise<number> {
  const labels = labelsOf(prefix);
  const experiment = await bench.experiment({
    calibrationSetId,
    spikes,
    finalVolumeMl: '1000 µL',
    fractions: threeFractions,
    replicates: [portions('spiked', labels)]
  });
  const rows = labels.flatMap((label, index): Row[] => [
    [label, 'First', 'Absentin', areaOf(first[index]!)],
    [label, 'Second', 'Absentin', areaOf(second[index]!)],
    [label, 'Effluent', 'Absentin', areaOf(effluent[index]!)]
  ]);
  await bench.upload([['Sample', 'Fraction', 'Analyte', 'Peak area'], ...rows], { experiment });
  return experiment;
}

const areaOf = (given: number | string): number | string =>
  typeof given === 'number' ? 1000 * given : given;
const five = <Item>(item: Item): Item[] => [item, item, item, item, item];

describe('not detected in a fraction of the method', () => {
  it('is zero and at the lowest level: 69.5 outside, 70.5 inside, so watch', async () => {
    const experiment = await spiked('A', [69.3, 69.5, 69.7, 69.4, 69.6], five('ND'), five(5));
    const row = await bench.result(experiment, 'Absentin');
    expect(row).toMatchObject({ n: 5, verdict: 'watch' });
    expect(row.mean).toBeCloseTo(69.5, 10);
    expect(row.reasons.join('; ')).toContain('outside at the one end, inside at the other');
  });

  it('takes the limit that stands in the cell instead: 69.9 at the most, outside', async () => {
    const experiment = await spiked('B', [69.3, 69.5, 69.7, 69.4, 69.6], five('<400'), five(5));
    expect(await bench.result(experiment, 'Absentin')).toMatchObject({ verdict: 'outside' });
  });

  it('is not the same as missing', async () => {
    const experiment = await spiked('C', [90, 91, 92, 93, 94], [1, 1, 1, 'ND', ''], five(5));
    const row = await bench.result(experiment, 'Absentin');
    // C4 counts with 93 + 0, C5 is incomplete: 91, 92, 93, 93.
    expect(row).toMatchObject({ n: 4, verdict: 'too few' });
    expect(row.mean).toBeCloseTo(92.25, 10);
    expect(row.notes.join('; ')).toContain('C5 lacks Second');
  });
});

describe('not detected in a fraction of the balance alone', () => {
  it('leaves the verdict, and no loss is found that the limit could hide', async () => {
    const experiment = await spiked('D', [98.1, 98.2, 98, 97.9, 97.8], five(0.5), five('<2000'));
    const row = await bench.balance(experiment, 'Absentin');
    // 98 + 0.5 = 98.5; the balance 98.5 with zero, 100.5 with 2: 1.5 points open, and perhaps nothing.
    expect(row.verdict).toBe('inside');
    expect(row.method?.mean).toBeCloseTo(98.5, 10);
    expect(row.total).toBeCloseTo(98.5, 10);
    expect(row.open).toBeCloseTo(1.5, 10);
    expect(row.openSignificant).toBe(false);
    const sure = await spiked('E', [98.1, 98.2, 98, 97.9, 97.8], five(0.5), five('<1000'));
    expect((await bench.balance(sure, 'Absentin')).openSignificant).toBe(true);
  });

  it('method figures count portions that lack a balance fraction, balance figures do not', async () => {
    const experiment = await spiked('F', [80, 82, 84, 86, 88], five(1), [5, '', 5, 'ND', 5]);
    const row = await bench.balance(experiment, 'Absentin');
    expect(row.method).toMatchObject({ n: 5 });
    expect(row.method?.mean).toBeCloseTo(85, 10);
    // Without F2: 86, 90, 87 (not detected as zero), 94.
    expect(row.total).toBeCloseTo(89.25, 10);
    expect(row.incomplete).toContain('F2 lacks Effluent');
  });
});

describe('not detected in the native portion', () => {
  it('70.5 inside with nothing subtracted, 69.5 outside with the limit: watch', async () => {
    const labels = labelsOf('G');
    const experiment = await bench.experiment({
      calibrationSetId,
      spikes,
      subtract: 'native',
      finalVolumeMl: '1',
      replicates: [portions('spiked', labels), portions('unspiked', ['GU1', 'GU2'])]
    });
    await bench.upload(
      [
        ['Sample', 'Fraction', 'Analyte', 'Peak area'],
        ...[70.3, 70.5, 70.7, 70.4, 70.6].map((percent, index): Row => [
          labels[index]!,
          '',
          'Absentin',
          1000 * percent
        ]),
        ['GU1', '', 'Absentin', 'n.d.'],
        ['GU2', '', 'Absentin', 'not detected']
      ],
      { experiment }
    );
    const row = await bench.result(experiment, 'Absentin');
    expect(row.mean).toBeCloseTo(70.5, 10);
    expect(row.verdict).toBe('watch');
  });
});

describe('a limit in every basis is an amount of the same size as a value would be', () => {
  /*
   * 69.5 % in the first fraction; the limit of the second is 2 ng each time, so that the far end is 71.5 and inside: "<0,002" µg;
   * "<2" ng/L in 1 L; "<1,0" µg/L in the vial, diluted 4-fold, 0.5 mL, the whole: 1 · 4 · 0.5 = 2. With a tenth of it the far end is 69.7.
   */
  it.each([
    { head: 'Amount (µg)', value: (ng: number) => ng / 1000, limit: 0.002, prefix: 'H' },
    { head: 'Concentration in the sample (ng/L)', value: (ng: number) => ng, limit: 2, prefix: 'I' },
    { head: 'Concentration in the vial (µg/L)', value: (ng: number) => ng / 2, limit: 1, prefix: 'J' }
  ])('$head', async ({ head, value, limit, prefix }) => {
    for (const [part, verdict] of [
      [1, 'watch'],
      [0.1, 'outside']
    ] as const) {
      const labels = labelsOf(`${prefix}${part === 1 ? 'a' : 'b'}`);
      const experiment = await bench.experiment({
        calibrationSetId,
        spikes,
        sampleVolumeMl: '1 L',
        fractions: threeFractions.slice(0, 2),
        replicates: [portions('spiked', labels)]
      });
      const inVial = head.includes('vial');
      const comma = (given: number): string => String(Number(given.toPrecision(10))).replace('.', ',');
      const rows = labels.flatMap((label, index): Row[] => [
        [label, 'First', 'Absentin', comma(value(69.3 + 0.1 * index)), inVial ? 4 : '', inVial ? '0,5' : ''],
        [label, 'Second', 'Absentin', `<${comma(limit * part)}`, inVial ? 4 : '', inVial ? '0,5' : '']
      ]);
      await bench.upload(
        [['Sample', 'Fraction', 'Analyte', head, 'Dilution', 'Final volume (mL)'], ...rows],
        { experiment }
      );
      const row = await bench.result(experiment, 'Absentin');
      expect(row.mean).toBeCloseTo(69.5, 10);
      expect(row.verdict).toBe(verdict);
    }
  });

  it('a bare ND among concentrations in the vial takes the lowest level of the experiment’s set', async () => {
    const labels = labelsOf('K');
    const experiment = await bench.experiment({
      calibrationSetId,
      spikes,
      fractions: threeFractions.slice(0, 2),
      replicates: [portions('spiked', labels)]
    });
    // 1 ng/mL · 2-fold · 0.5 mL = 1 ng: 69.5 and 70.5.
    const rows = labels.flatMap((label, index): Row[] => [
      [label, 'First', 'Absentin', 69.3 + 0.1 * index, 2, 0.5],
      [label, 'Second', 'Absentin', 'ND', 2, 0.5]
    ]);
    await bench.upload(
      [
        [
          'Sample',
          'Fraction',
          'Analyte',
          'Concentration in the vial (ng/mL)',
          'Dilution',
          'Final volume (mL)'
        ],
        ...rows
      ],
      { experiment }
    );
    expect(await bench.result(experiment, 'Absentin')).toMatchObject({ n: 5, verdict: 'watch' });
  });

  it('a bare ND with nothing to stand for its limit is asked about, and then leaves the portion incomplete', async () => {
    const experiment = await bench.experiment({ spikes, replicates: [portions('spiked', labelsOf('M'))] });
    const file: Row[] = [
      ['Sample', 'Analyte', 'Amount (ng)'],
      ...labelsOf('M').flatMap((label, index): Row[] => [
        [label, 'Absentin', index === 0 ? 'ND' : 90],
        [label, 'Lineless', index === 0 ? 'ND' : 90]
      ])
    ];
    await expect(bench.upload(file, { experiment })).rejects.toMatchObject({
      problems: [expect.objectContaining({ found: '“ND”' }), expect.objectContaining({ found: '“ND”' })]
    });
    await bench.upload(file, { experiment, confirmed: true });
    for (const name of ['Absentin', 'Lineless']) {
      const row = await bench.result(experiment, name);
      expect(row).toMatchObject({ n: 4, verdict: 'too few' });
      expect(row.notes.join('; ')).toContain('gives no limit');
    }
  });
});
