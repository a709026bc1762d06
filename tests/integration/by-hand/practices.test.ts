import { beforeAll, describe, expect, it } from 'vitest';
import { openBench, portions, type Bench, type Row } from './bench';

/*
 * Every way an internal standard goes in, with dilution, aliquot share, repeated injections and a diluted injection in place of one
 * above range. Worked by hand. Lines (average response factor): external A = 1000 x; in the vial A/A_is = 2 q, the standard at 4 ng/mL in
 * L1 and at 5 in L2 and L3; in the extract A/A_is = 0.5 q; in the sample A/A_is = 1.25 q. 20 ng spiked ("0,02 µg").
 *
 * S1, share 50 %, V 500 µL, undiluted, two injections:
 *   external  x 8 and 8.2, mean 8.1; 8.1 · 1 · 0.5/0.5 = 8.1 ng, 40.5 %
 *   vial      q 1.6 and 1.68; q · 5 · 1 · 0.5/0.5 = 8 and 8.4, mean 8.2 ng, 41 %
 *   extract   q 0.4 and 0.42; q · 10/0.5 = 8 and 8.4, mean 8.2 ng, 41 %
 *   sample    q 0.8 and 0.84; q · 10 = 8 and 8.4, mean 8.2 ng, 41 %
 * S2, share 100 %, V 500 µL, undiluted above range, then diluted 4-fold:
 *   external  x 15 > 10, then 4 · 4 · 0.5 = 8 ng; vial q 3 > 2, then 0.8 · 5 · 4 · 0.5 = 8 ng; extract q 1.3 > 1, then 0.8 · 10 = 8 ng (no
 *   dilution); sample q 1.6 > 1.25, then 0.8 · 10 = 8 ng: 40 % each
 * S3, share 25 %, V 400 µL, diluted 2-fold:
 *   external  3 · 2 · 0.4/0.25 = 9.6 ng; vial 0.6 · 5 · 2 · 0.4/0.25 = 9.6; extract 0.24 · 10/0.25 = 9.6; sample 0.96 · 10 = 9.6: 48 % each
 *
 * External: mean of 40.5, 40, 48 = 42.8333; the others: 41, 40, 48 = 43, SD sqrt((4 + 9 + 25)/2) = sqrt(19).
 */
const levels: Readonly<Record<string, Readonly<Record<string, number>>>> = {
  L1: {
    Extern: 1000,
    Vialin: 2000,
    VialStd: 4000,
    Extractin: 1000,
    ExtractStd: 20000,
    Labelled: 2500,
    LabelStd: 16000
  },
  L2: {
    Extern: 2000,
    Vialin: 4000,
    VialStd: 5000,
    Extractin: 2000,
    ExtractStd: 20000,
    Labelled: 5000,
    LabelStd: 16000
  },
  L3: {
    Extern: 10000,
    Vialin: 20000,
    VialStd: 5000,
    Extractin: 10000,
    ExtractStd: 20000,
    Labelled: 25000,
    LabelStd: 16000
  }
};
const standards = { VialStd: 5000, ExtractStd: 20000, LabelStd: 16000 };
const injections = [
  {
    sample: 'S1',
    injection: 1,
    volume: '500,0',
    dilution: 1,
    share: '50',
    areas: { Extern: 8000, Vialin: 16000, Extractin: 4000, Labelled: 16000 }
  },
  {
    sample: 'S1',
    injection: 2,
    volume: '500,0',
    dilution: 1,
    share: '50',
    areas: { Extern: 8200, Vialin: 16800, Extractin: 4200, Labelled: 16800 }
  },
  {
    sample: 'S2',
    injection: 1,
    volume: '500,0',
    dilution: 1,
    share: '100',
    areas: { Extern: 15000, Vialin: 30000, Extractin: 13000, Labelled: 32000 }
  },
  {
    sample: 'S2',
    injection: 2,
    volume: '500,0',
    dilution: 4,
    share: '100',
    areas: { Extern: 4000, Vialin: 8000, Extractin: 8000, Labelled: 16000 }
  },
  {
    sample: 'S3',
    injection: 1,
    volume: '400,0',
    dilution: 2,
    share: '25',
    areas: { Extern: 3000, Vialin: 6000, Extractin: 2400, Labelled: 19200 }
  }
] as const;
const standardOf = {
  Extern: null,
  Vialin: 'VialStd',
  Extractin: 'ExtractStd',
  Labelled: 'LabelStd'
} as const;
const targets = ['Extern', 'Vialin', 'Extractin', 'Labelled'] as const;

/** Decimal commas throughout: "8000,0". */
const comma = (value: number): string => value.toFixed(1).replace('.', ',');

function longFile(): Row[] {
  const rows: Row[] = [
    [
      'Sample',
      'Fraction',
      'Analyte',
      'Peak area',
      'IS area',
      'Final volume (µL)',
      'Dilution',
      'Aliquot share (%)',
      'Injection'
    ]
  ];
  for (const [level, areas] of Object.entries(levels)) {
    for (const target of targets) {
      const standard = standardOf[target];
      rows.push([
        level,
        '',
        target,
        comma(areas[target]!),
        standard ? comma(areas[standard]!) : '',
        '',
        '',
        '',
        1
      ]);
    }
  }
  for (const { sample, injection, volume, dilution, share, areas } of injections) {
    for (const target of targets) {
      const standard = standardOf[target];
      rows.push([
        sample,
        'Elution',
        target,
        comma(areas[target]),
        standard ? comma(standards[standard]) : '',
        volume,
        dilution,
        share,
        injection
      ]);
    }
  }
  return rows;
}

/** A column for each, the standards wherever they fell, some before and some behind what they correct. */
function wideFile(): Row[] {
  const order = ['ExtractStd', 'Labelled', 'VialStd', 'Extern', 'Vialin', 'LabelStd', 'Extractin'] as const;
  return [
    [
      'Aliquot share (%)',
      ...order.slice(0, 3).map((name) => `${name} area`),
      'Sample',
      'Injection',
      ...order.slice(3).map((name) => `${name} area`),
      'Dilution',
      'Final volume (µL)'
    ],
    ...Object.entries(levels).map(([level, areas]): Row => [
      '',
      ...order.slice(0, 3).map((name) => comma(areas[name]!)),
      level,
      1,
      ...order.slice(3).map((name) => comma(areas[name]!)),
      '',
      ''
    ]),
    ...injections.map(({ sample, injection, volume, dilution, share, areas }): Row => {
      const all: Readonly<Record<string, number>> = { ...standards, ...areas };
      return [
        share,
        ...order.slice(0, 3).map((name) => comma(all[name]!)),
        sample,
        injection,
        ...order.slice(3).map((name) => comma(all[name]!)),
        dilution,
        volume
      ];
    })
  ];
}

describe.each([
  ['a long file', longFile],
  ['a wide file', wideFile]
])('amounts from %s with decimal commas and µL', (_, file) => {
  let bench: Bench;
  let experiment: number;

  beforeAll(async () => {
    bench = await openBench();
    const vialStd = await bench.entry('VialStd', 'injection internal standard');
    const extractStd = await bench.entry('ExtractStd', 'injection internal standard');
    const labelStd = await bench.entry('LabelStd', 'extraction internal standard');
    await bench.entry('Extern');
    await bench.entry('Vialin', 'target', vialStd);
    await bench.entry('Extractin', 'target', extractStd);
    await bench.entry('Labelled', 'target', labelStd);
    const calibrationSetId = await bench.calibration({
      levels: [
        { label: 'L1', concentrationNgPerMl: '1,0' },
        { label: 'L2', concentrationNgPerMl: '0,002 mg/L' },
        { label: 'L3', concentrationNgPerMl: '10 µg/L' }
      ],
      constants: { [extractStd.id]: '10 ng/mL', [labelStd.id]: '8000 ng/L' },
      concentrations: { [vialStd.id]: { L1: '4', L2: '5,0 µg/L', L3: '0,005 mg/L' } }
    });
    experiment = await bench.experiment({
      calibrationSetId,
      replicates: [portions('spiked', ['S1', 'S2', 'S3'])],
      spikes: [{ kind: 'spiked', targetsNg: '0,02 µg', extractionStandardsNg: '0,01 µg' }],
      additions: [
        { panelEntryId: vialStd.id, point: 'vial', amountNg: '', concentrationNgPerMl: '5 µg/L' },
        { panelEntryId: extractStd.id, point: 'extract', amountNg: '0,01 µg', concentrationNgPerMl: '' }
      ]
    });
    // Some read above their levels on purpose, and are asked about.
    await bench.upload(file(), { experiment, confirmed: true });
  });

  it('external: volume, dilution and share all count', async () => {
    const row = await bench.result(experiment, 'Extern');
    expect(row.n).toBe(3);
    expect(row.mean).toBeCloseTo((40.5 + 40 + 48) / 3, 10);
  });

  it.each(['Vialin', 'Extractin'])('%s: as worked by hand', async (name) => {
    const row = await bench.result(experiment, name);
    expect(row.n).toBe(3);
    expect(row.mean).toBeCloseTo(43, 10);
    expect(row.sd).toBeCloseTo(Math.sqrt(19), 10);
  });

  it('read against a standard in the sample: relative only, no recovery, no balance', async () => {
    const row = await bench.result(experiment, 'Labelled');
    expect(row.mean).toBeNull();
    expect(row.verdict).toBeNull();
    expect(row.relative).toMatchObject({ n: 3, standard: 'LabelStd' });
    expect(row.relative?.mean).toBeCloseTo(43, 10);
    expect(await bench.balance(experiment, 'Labelled')).toMatchObject({
      method: null,
      total: null,
      open: null
    });
  });
});
