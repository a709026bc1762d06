import { beforeAll, describe, expect, it } from 'vitest';
import { setReplicateSpike } from '../../../src/lib/server/services/replicates';
import { surrogatesView } from '../../../src/lib/server/services/results';
import { openBench, portions, type Bench, type Row } from './bench';

/* What is subtracted, worked by hand; 100 ng spiked throughout, amounts brought in ng, so that percent and ng are one. */

const twoFractions = [
  { name: 'Elution', kind: 'elution', countsAs: 'method' },
  { name: 'Effluent', kind: 'load effluent', countsAs: 'balance' }
];
const spikes = [{ kind: 'spiked', targetsNg: '100' }];
let bench: Bench;

beforeAll(async () => {
  bench = await openBench();
  await bench.entry('Nativin');
});

/** One analyte, one fraction: sample and ng. */
const amounts = (found: Readonly<Record<string, number | string>>): Row[] => [
  ['Sample', 'Fraction', 'Analyte', 'Amount (ng)'],
  ...Object.entries(found).map(([sample, ng]): Row => [sample, 'Elution', 'Nativin', ng])
];

describe('a native amount by batch', () => {
  it('each loses the mean of its own batch, and of all where its batch has none', async () => {
    const experiment = await bench.experiment({
      subtract: 'native',
      spikes,
      replicates: [
        portions('spiked', ['S1', 'S2', 'S3'], { batch: 'A' }),
        portions('spiked', ['S4'], { batch: 'B' }),
        portions('spiked', ['S5'], { batch: 'C' }),
        portions('unspiked', ['U1', 'U2'], { batch: 'A' }),
        portions('unspiked', ['U3'], { batch: 'B' })
      ]
    });
    const found = { S1: 130, S2: 132, S3: 134, S4: 150, S5: 140, U1: 20, U2: 24, U3: 40 };
    await bench.upload(amounts(found), { experiment });
    const row = await bench.result(experiment, 'Nativin');
    // A loses 22, B 40, C (20 + 24 + 40)/3 = 28: 108, 110, 112, 110, 112.
    expect(row.n).toBe(5);
    expect(row.mean).toBeCloseTo(110.4, 10);
    expect(row.sd).toBeCloseTo(Math.sqrt(2.8), 10);
    /*
     * Each native of A weighs 3/5/2 + 1/5/3 = 11/30, that of B 1/5 + 1/15 = 4/15: squares add up to 0.34. s_u^2 within batches 8, 1 df.
     * se^2 = 2.8/5 + 8 · 0.34 = 3.28; df = 3.28^2/(0.56^2/4 + 2.72^2/1) = 1.43890. R: qt(.975, df) * sqrt(3.28) = 11.568802
     */
    expect(((row.interval?.upper ?? 0) - (row.interval?.lower ?? 0)) / 2).toBeCloseTo(11.568802, 4);
    expect(row.notes.join('; ')).toContain('pooled for batch C');
  });

  it('a portion without one fraction is subtracted where it is complete, and nowhere else', async () => {
    const experiment = await bench.experiment({
      subtract: 'native',
      spikes,
      fractions: twoFractions,
      replicates: [portions('spiked', ['V1', 'V2', 'V3']), portions('unspiked', ['W1', 'W2'])]
    });
    await bench.upload(
      [
        ['Sample', 'Fraction', 'Analyte', 'Amount (ng)'],
        ['V1', 'Elution', 'Nativin', 90],
        ['V1', 'Effluent', 'Nativin', 30],
        ['V2', 'Elution', 'Nativin', 92],
        ['V2', 'Effluent', 'Nativin', 32],
        ['V3', 'Elution', 'Nativin', 94],
        ['V3', 'Effluent', 'Nativin', 34],
        ['W1', 'Elution', 'Nativin', 10],
        ['W1', 'Effluent', 'Nativin', 4],
        ['W2', 'Elution', 'Nativin', 14],
        ['W2', 'Effluent', 'Nativin', '']
      ],
      { experiment }
    );
    // Method: 92 - (10 + 14)/2. Balance: 124 - (10 + 4), since only W1 is complete there.
    const row = await bench.balance(experiment, 'Nativin');
    expect(row.method?.mean).toBeCloseTo(80, 10);
    expect(row.total).toBeCloseTo(110, 10);
    expect(row.segments.map(({ mean }) => mean)).toEqual([expect.closeTo(82, 10), expect.closeTo(28, 10)]);
  });

  it('a batch whose portion lacks a balance fraction still has its own native amount in the method', async () => {
    const experiment = await bench.experiment({
      subtract: 'native',
      spikes,
      fractions: twoFractions,
      replicates: [
        portions('spiked', ['A1', 'A2'], { batch: 'A' }),
        portions('spiked', ['B1', 'B2'], { batch: 'B' }),
        portions('unspiked', ['AU'], { batch: 'A' }),
        portions('unspiked', ['BU'], { batch: 'B' })
      ]
    });
    await bench.upload(
      [
        ['Sample', 'Fraction', 'Analyte', 'Amount (ng)'],
        ...['A1', 'A2', 'B1', 'B2'].flatMap((sample, index): Row[] => [
          [sample, 'Elution', 'Nativin', [110, 112, 130, 132][index]!],
          [sample, 'Effluent', 'Nativin', 5]
        ]),
        ['AU', 'Elution', 'Nativin', 10],
        ['AU', 'Effluent', 'Nativin', 2],
        ['BU', 'Elution', 'Nativin', 30]
      ],
      { experiment }
    );
    // Method: 110 - 10, 112 - 10, 130 - 30, 132 - 30.
    const row = await bench.result(experiment, 'Nativin');
    expect(row.mean).toBeCloseTo(101, 10);
    expect(row.notes.join('; ')).not.toContain('pooled for batch');
    expect(row.notes.join('; ')).toContain('pooled in the balance for batch B');
    // Balance: A loses its own 12, B the only complete one, 12 too: 103, 105, 123, 125.
    expect((await bench.balance(experiment, 'Nativin')).total).toBeCloseTo(114, 10);
  });

  it('natives that are complete in the method alone still stand for their own batch', async () => {
    const experiment = await bench.experiment({
      subtract: 'native',
      spikes,
      fractions: twoFractions,
      replicates: [
        portions('spiked', ['G1', 'G2', 'G3'], { batch: 'A' }),
        portions('spiked', ['H1'], { batch: 'B' }),
        portions('unspiked', ['GU'], { batch: 'A' }),
        portions('unspiked', ['HU'], { batch: 'B' })
      ]
    });
    const found = { G1: 110, G2: 112, G3: 114, H1: 132, GU: 10, HU: 30 };
    await bench.upload(amounts(found), { experiment });
    // 100, 102, 104, 102; pooled it would be 97 with an SD of 10.
    const row = await bench.result(experiment, 'Nativin');
    expect(row.mean).toBeCloseTo(102, 10);
    expect(row.sd).toBeCloseTo(Math.sqrt(8 / 3), 10);
  });
});

describe('a native amount and sample volumes', () => {
  it('is scaled to the volume of the spiked portions', async () => {
    const experiment = await bench.experiment({
      subtract: 'native',
      spikes,
      replicates: [
        portions('spiked', ['C1', 'C2', 'C3'], { sampleVolumeMl: '1 L' }),
        portions('unspiked', ['CU1', 'CU2'], { sampleVolumeMl: '0,5 L' })
      ]
    });
    // 10 and 12 ng in half a litre are 22 ng in a litre on average: 98, 100, 105.
    await bench.upload(amounts({ C1: 120, C2: 122, C3: 127, CU1: 10, CU2: 12 }), { experiment });
    const row = await bench.result(experiment, 'Nativin');
    expect(row.mean).toBeCloseTo(101, 10);
    expect(row.subtracted).toBeCloseTo(22, 10);
  });

  it('is scaled portion by portion where volumes and spikes differ', async () => {
    const experiment = await bench.experiment({
      subtract: 'native',
      spikes,
      replicates: [
        portions('spiked', ['D1', 'D4'], { sampleVolumeMl: '1 L' }),
        portions('spiked', ['D2'], { sampleVolumeMl: '500 mL' }),
        portions('spiked', ['D3'], { sampleVolumeMl: '2 L' }),
        portions('unspiked', ['DU1', 'DU2'], { sampleVolumeMl: '500 mL' })
      ]
    });
    const { replicates } = await bench.places(experiment);
    const [entry] = await bench.panel();
    await setReplicateSpike(bench.actor, bench.code, experiment, {
      replicateId: replicates.get('D4')!,
      panelEntryId: entry!,
      amountNg: 50,
      reason: 'syringe half filled'
    });
    // 22 ng a litre: 120 - 22 = 98; 110 - 11 = 99; 140 - 44 = 96; (69 - 22)/50 = 94 %.
    const found = { D1: 120, D2: 110, D3: 140, D4: 69, DU1: 10, DU2: 12 };
    await bench.upload(amounts(found), { experiment });
    const row = await bench.result(experiment, 'Nativin');
    expect(row.mean).toBeCloseTo((98 + 99 + 96 + 94) / 4, 10);
    // Deviations 1.25, 2.25, -0.75, -2.75: squares 14.75, over 3.
    expect(row.sd).toBeCloseTo(Math.sqrt(14.75 / 3), 10);
  });

  it('ng/L of sample becomes ng by each portion’s own volume', async () => {
    const experiment = await bench.experiment({
      subtract: 'native',
      spikes,
      replicates: [
        portions('spiked', ['E1', 'E2'], { sampleVolumeMl: '2 L' }),
        portions('unspiked', ['EU1', 'EU2'], { sampleVolumeMl: '250 mL' })
      ]
    });
    // 0.06 µg/L · 2 L = 120 ng, 0.063 · 2 = 126; native 0.01 and 0.012 µg/L: 20 and 24 ng in two litres, mean 22: 98 and 104.
    await bench.upload(
      [
        ['Sample', 'Fraction', 'Analyte', 'Concentration in the sample (µg/L)'],
        ['E1', 'Elution', 'Nativin', '0,06'],
        ['E2', 'Elution', 'Nativin', '0,063'],
        ['EU1', 'Elution', 'Nativin', '0,01'],
        ['EU2', 'Elution', 'Nativin', '0,012']
      ],
      { experiment }
    );
    expect((await bench.result(experiment, 'Nativin')).mean).toBeCloseTo(101, 10);
  });
});

describe('a method blank, and surrogates', () => {
  it('the blank is taken off targets, nothing off surrogates', async () => {
    await bench.entry('Surrogin', 'surrogate');
    const experiment = await bench.experiment({
      subtract: 'method blank',
      spikes: [
        { kind: 'spiked', targetsNg: '100', surrogatesNg: '50' },
        { kind: 'unspiked', surrogatesNg: '50' },
        { kind: 'method blank', surrogatesNg: '50' }
      ],
      replicates: [
        portions('spiked', ['F1', 'F2', 'F3'], { sampleVolumeMl: '2 L' }),
        portions('unspiked', ['FU'], { sampleVolumeMl: '2 L' }),
        portions('method blank', ['FB1', 'FB2'], { sampleVolumeMl: '1 L' })
      ]
    });
    await bench.uploadBook(
      {
        Targets: amounts({ F1: 104, F2: 106, F3: 108, FU: 60, FB1: 3, FB2: 5 }),
        Surrogates: [
          ['Sample', 'Fraction', 'Analyte', 'Amount (µg)'],
          ...Object.entries({ F1: 0.044, F2: 0.045, F3: 0.046, FU: 0.04, FB1: 0.048, FB2: 0.047 }).map(
            ([sample, found]): Row => [sample, 'Elution', 'Surrogin', found]
          )
        ]
      },
      { experiment }
    );
    // 106 - 4, whatever volumes are: what a blank holds comes from the laboratory.
    expect((await bench.result(experiment, 'Nativin')).mean).toBeCloseTo(102, 10);
    const view = await surrogatesView(bench.actor, bench.code, experiment, (address) => address);
    const percents = view.surrogates[0]!.cells.map(({ percent }) => percent);
    expect(percents).toEqual([88, 90, 92, 80, 96, 94].map((percent) => expect.closeTo(percent, 10)));
    expect(view.surrogates[0]!.mean).toBeCloseTo(90, 10);
  });
});

describe('a native amount beside the spike (common practice, no source)', () => {
  it.each([
    { native: 100, verdict: 'inside' },
    { native: 101, verdict: 'watch' },
    { native: 400, verdict: 'watch' },
    { native: 401, verdict: null }
  ])('$native % of the spike reads $verdict', async ({ native, verdict }) => {
    const labels = [1, 2, 3, 4, 5].map((index) => `N${native}-${index}`);
    const unspiked = [`N${native}-U1`, `N${native}-U2`];
    const experiment = await bench.experiment({
      subtract: 'native',
      spikes,
      replicates: [portions('spiked', labels), portions('unspiked', unspiked)]
    });
    const found = [
      ...labels.map((label, index) => [label, native + 98 + index]),
      ...unspiked.map((label) => [label, native])
    ];
    await bench.upload(amounts(Object.fromEntries(found) as Record<string, number>), { experiment });
    const row = await bench.result(experiment, 'Nativin');
    expect(row.mean).toBeCloseTo(100, 10);
    expect(row.verdict).toBe(verdict);
  });
});
