import { expect, it } from 'vitest';
import { openBench, portions } from './bench';

/*
 * One sheet with two bases: amounts in ng that take neither dilution nor share, and beside them areas that take both. Worked by hand:
 * Reportin 60 ng of 100; Areain 5 ng/mL (A = 1000 x) · 10 · 0.4 mL/0.5 = 40 ng of 100.
 */
it.each([
  { title: 'the amounts first', order: ['Reportin (ng)', 'Areain area'] },
  { title: 'the areas first', order: ['Areain area', 'Reportin (ng)'] }
])('dilution and share reach the areas, and only these: $title', async ({ order }) => {
  const bench = await openBench();
  await bench.entry('Reportin');
  await bench.entry('Areain');
  const calibrationSetId = await bench.calibration({
    levels: [
      { label: 'L1', concentrationNgPerMl: '1' },
      { label: 'L2', concentrationNgPerMl: '10' }
    ]
  });
  await bench.upload([
    ['Sample', 'Analyte', 'Peak area'],
    ['L1', 'Areain', 1000],
    ['L2', 'Areain', 10000]
  ]);
  const experiment = await bench.experiment({
    calibrationSetId,
    spikes: [{ kind: 'spiked', targetsNg: '100' }],
    replicates: [portions('spiked', ['S1', 'S2'])]
  });
  const values = order.map((head) => (head.startsWith('Areain') ? 5000 : 60));
  await bench.upload(
    [
      ['Sample', 'Fraction', ...order, 'Dilution', 'Aliquot share (%)', 'Final volume (mL)'],
      ['S1', 'Elution', ...values, 10, 50, 0.4],
      ['S2', 'Elution', ...values, 10, 50, 0.4]
    ],
    { experiment, confirmed: true }
  );
  expect((await bench.result(experiment, 'Reportin')).mean).toBeCloseTo(60, 10);
  expect((await bench.result(experiment, 'Areain')).mean).toBeCloseTo(40, 10);
});
