import { expect, it } from 'vitest';
import { surrogatesView } from '../../../src/lib/server/services/results';
import { openBench, portions, type Row } from './bench';

const address = (text: string): string => text;
const head = ['Sample', 'Fraction', 'Analyte', 'Peak area', 'IS area'];

it('a relative recovery loses the native amount of its own batch, by its own volume', async () => {
  const bench = await openBench();
  const label = await bench.entry('LabelStd', 'extraction internal standard');
  await bench.entry('Labelled', 'target', label);
  const calibrationSetId = await bench.calibration({
    levels: [
      { label: 'L1', concentrationNgPerMl: '1' },
      { label: 'L2', concentrationNgPerMl: '40' }
    ],
    constants: { [label.id]: '10' }
  });
  const experiment = await bench.experiment({
    calibrationSetId,
    subtract: 'native',
    spikes: [
      { kind: 'spiked', targetsNg: '20', extractionStandardsNg: '10' },
      { kind: 'unspiked', extractionStandardsNg: '10' }
    ],
    replicates: [
      portions('spiked', ['S1', 'S2'], { batch: 'A', sampleVolumeMl: '1 L' }),
      portions('spiked', ['S3'], { batch: 'B', sampleVolumeMl: '500 mL' }),
      portions('spiked', ['S4'], { batch: 'C', sampleVolumeMl: '1 L' }),
      portions('unspiked', ['U1'], { batch: 'A', sampleVolumeMl: '1 L' }),
      portions('unspiked', ['U2'], { batch: 'B', sampleVolumeMl: '1 L' })
    ]
  });
  /*
   * A/A_is = q (areas 1000 a ng/mL over 10000), m = q · 10 ng: the area over 1000 is the ng. S1 22 - 2 = 20 ng, 100 %; S2 21 - 2 = 19, 95 %;
   * S3 of half a litre 24 - 8/2 = 20, 100 %; S4 without a batch of its own 23 - (2 + 8)/2 = 18, 90 %. Mean 96.25.
   */
  const found = { S1: 22, S2: 21, S3: 24, S4: 23, U1: 2, U2: 8 };
  await bench.upload(
    [
      head,
      ['L1', '', 'Labelled', 1000, 10000],
      ['L2', '', 'Labelled', 40000, 10000],
      ...Object.entries(found).map(([sample, ng]): Row => [sample, 'Elution', 'Labelled', 1000 * ng, 10000])
    ],
    { experiment }
  );
  const row = await bench.result(experiment, 'Labelled');
  expect(row.mean).toBeNull();
  expect(row.relative).toMatchObject({ n: 4, standard: 'LabelStd' });
  expect(row.relative?.mean).toBeCloseTo(96.25, 10);
  expect(row.notes.join('; ')).toContain('pooled for batch C');
});

it('above range at first and not detected when diluted is no zero', async () => {
  const bench = await openBench();
  await bench.entry('Contradictin');
  const calibrationSetId = await bench.calibration({
    levels: [
      { label: 'L1', concentrationNgPerMl: '1' },
      { label: 'L2', concentrationNgPerMl: '10' }
    ]
  });
  const experiment = await bench.experiment({
    calibrationSetId,
    spikes: [{ kind: 'spiked', targetsNg: '10' }],
    finalVolumeMl: '1',
    replicates: [portions('spiked', ['S1', 'S2'])]
  });
  await bench.upload(
    [
      ['Sample', 'Analyte', 'Peak area', 'Injection', 'Dilution'],
      ['L1', 'Contradictin', 1000, 1, ''],
      ['L2', 'Contradictin', 10000, 1, ''],
      ['S1', 'Contradictin', 9000, 1, ''],
      ['S2', 'Contradictin', 20000, 1, ''],
      ['S2', 'Contradictin', 'ND', 2, 5]
    ],
    { experiment, confirmed: true }
  );
  // S1 alone: 9 of 10 ng.
  const row = await bench.result(experiment, 'Contradictin');
  expect(row.n).toBe(1);
  expect(row.mean).toBeCloseTo(90, 10);
  expect(row.notes.join('; ')).toContain('contradict each other');
});

it('a surrogate that was not detected is outside only where its limit is too', async () => {
  const bench = await openBench([{ type: 'surrogate recovery', low: 50, high: 150 }]);
  await bench.entry('Surrogin', 'surrogate');
  const experiment = await bench.experiment({
    spikes: [{ kind: 'spiked', surrogatesNg: '10' }],
    replicates: [portions('spiked', ['S1', 'S2', 'S3', 'S4'])]
  });
  // 10 ng added: 80 % inside; 40 % outside; below 20 % outside at either end; below 60 % could be either.
  await bench.upload(
    [
      ['Sample', 'Analyte', 'Amount (ng)'],
      ['S1', 'Surrogin', 8],
      ['S2', 'Surrogin', 4],
      ['S3', 'Surrogin', '<2'],
      ['S4', 'Surrogin', '<6']
    ],
    { experiment }
  );
  const view = await surrogatesView(bench.actor, bench.code, experiment, address);
  expect(view.surrogates[0]?.cells.map(({ percent, holds }) => [percent, holds])).toEqual([
    [80, true],
    [40, false],
    [0, false],
    [0, null]
  ]);
  expect(view.surrogates[0]?.cells[3]?.reason).toContain('0 to 60 %');
});
