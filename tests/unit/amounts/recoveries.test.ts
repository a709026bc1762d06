import { describe, expect, it } from 'vitest';
import { amountsOf } from '../../../src/lib/server/amounts/experiment-amounts';
import { methodFigures, type MethodFigures } from '../../../src/lib/server/amounts/method-figures';
import { recoveryInput } from '../../../src/lib/server/amounts/recovery-input';
import { relativeFigures } from '../../../src/lib/server/amounts/relative-recovery';
import { surrogateFigures } from '../../../src/lib/server/amounts/surrogates';
import { variantFigures } from '../../../src/lib/server/amounts/variant-figures';
import type { Exclusion, ExperimentData, PanelEntry } from '../../../src/lib/server/amounts/types';
import { aqueous, area, elution, entry, experiment, panelOf, replicate } from './numbers';

const target = entry({ id: 'target' });
const criteria = { low: 70, high: 130, rsdMax: 20, nMin: 3 };

/** ng as reported, so that the recoveries stand in the test as they come out: spike 100 ng, so ng are percent. */
const ng = (id: string, fraction: string | null, value: number | null, more = {}) =>
  area('target', id, fraction, value, { basis: 'ng', ...more });
const spiked100 = { replicateKind: 'spiked', entryId: 'target', amountNg: 100 } as const;

function inputOf(data: ExperimentData, of: PanelEntry = target, panel = panelOf(of)) {
  const input = recoveryInput(amountsOf(data, panel, null), of);
  if (!input.ready) throw new Error(input.reason);
  return input;
}

const figures = (data: ExperimentData): MethodFigures => methodFigures(inputOf(data), criteria);
const three = [replicate('S1'), replicate('S2'), replicate('S3')];

describe('a recovery', () => {
  it('is 100 m/m_spike, summed over the method fractions of one replicate', () => {
    const second = { ...elution, id: 'second', name: 'Second elution' };
    const { balance } = figures(
      experiment({
        fractions: [elution, second, aqueous],
        replicates: three,
        spikes: [{ ...spiked100, amountNg: 200 }],
        reported: [
          ...[120, 130, 140].map((value, i) => ng(`S${i + 1}`, 'elution', value)),
          ...[40, 30, 20].map((value, i) => ng(`S${i + 1}`, 'second', value)),
          ...[10, 20, 30].map((value, i) => ng(`S${i + 1}`, 'aqueous', value))
        ]
      })
    );
    // Totals 160, 160, 160 ng of 200: 80 % each, SD 0, though each fraction scatters; balance 170, 180, 190 ng: 85, 90, 95 %.
    expect(balance.method).toMatchObject({ n: 3, mean: expect.closeTo(80, 9), sd: expect.closeTo(0, 9) });
    expect(balance.balance).toMatchObject({ mean: expect.closeTo(90, 9), sd: expect.closeTo(5, 9) });
  });

  it('loses the native amount of its own batch, and its interval holds the scatter of it', () => {
    const batch = (id: string, name: string, kind: 'spiked' | 'unspiked' = 'spiked') =>
      replicate(id, { batch: name, kind });
    const data = experiment({
      subtract: 'native',
      replicates: [
        batch('S1', 'A'),
        batch('S2', 'A'),
        batch('S3', 'B'),
        batch('U1', 'A', 'unspiked'),
        batch('U2', 'A', 'unspiked'),
        batch('U3', 'B', 'unspiked')
      ],
      spikes: [spiked100],
      reported: [
        ...[100, 110, 130].map((value, i) => ng(`S${i + 1}`, 'elution', value)),
        ...[10, 20, 40].map((value, i) => ng(`U${i + 1}`, 'elution', value))
      ]
    });
    // Batch A loses (10 + 20)/2 = 15, batch B loses 40: 85, 95, 90 %.
    const { balance, input } = figures(data);
    expect(balance.method).toMatchObject({
      mean: expect.closeTo(90, 9),
      min: expect.closeTo(85, 9),
      max: expect.closeTo(95, 9)
    });
    // Net values scatter with s = 5: 25/3. Natives: s_u^2 = 50 within A, times (2/3)^2/2 + (1/3)^2/1 = 1/3.
    expect(balance.method?.se).toBeCloseTo(Math.sqrt(25 / 3 + 50 / 3), 9);
    expect(input.subtracted?.notes).toEqual(['each portion loses the mean of its own batch']);
  });

  it('says when a batch has no unspiked portion of its own', () => {
    const data = experiment({
      subtract: 'native',
      replicates: [
        replicate('S1', { batch: 'A' }),
        replicate('S2', { batch: 'B' }),
        replicate('U1', { batch: 'A', kind: 'unspiked' })
      ],
      spikes: [spiked100],
      reported: [ng('S1', 'elution', 90), ng('S2', 'elution', 90), ng('U1', 'elution', 5)]
    });
    expect(inputOf(data).subtracted?.notes.join()).toContain('pooled for batch B');
  });

  it('scales the native amount by sample volume', () => {
    // Native 10 ng in 500 mL is 20 ng in the 1000 mL of the spiked portions: 100 - 20 = 80 %.
    const data = experiment({
      subtract: 'native',
      replicates: [...three, replicate('U1', { kind: 'unspiked', sampleVolumeMl: 500 })],
      spikes: [spiked100],
      reported: [
        ...[95, 100, 105].map((value, i) => ng(`S${i + 1}`, 'elution', value)),
        ng('U1', 'elution', 10)
      ]
    });
    expect(figures(data).balance.method?.mean).toBeCloseTo(80, 9);
  });

  it('of portions with another spike or volume takes their own', () => {
    // S1: (100 - 10)/100 = 90 %. S2, half the volume and a spike of 50: (50 - 5)/50 = 90 %. S3, 1000 mL, spike 200: (190 - 10)/200 = 90 %.
    const data = experiment({
      subtract: 'native',
      replicates: [
        replicate('S1'),
        replicate('S2', { sampleVolumeMl: 500 }),
        replicate('S3'),
        replicate('U1', { kind: 'unspiked' }),
        replicate('U2', { kind: 'unspiked' })
      ],
      spikes: [spiked100],
      replicateSpikes: [
        { replicateId: 'S2', entryId: 'target', amountNg: 50 },
        { replicateId: 'S3', entryId: 'target', amountNg: 200 }
      ],
      reported: [
        ng('S1', 'elution', 100),
        ng('S2', 'elution', 50),
        ng('S3', 'elution', 190),
        ng('U1', 'elution', 8),
        ng('U2', 'elution', 12)
      ]
    });
    expect(figures(data).balance.method).toMatchObject({
      min: expect.closeTo(90, 9),
      max: expect.closeTo(90, 9),
      mean: expect.closeTo(90, 9)
    });
  });

  it('is not formed when there is nothing to subtract', () => {
    const data = experiment({
      subtract: 'native',
      replicates: three,
      spikes: [spiked100],
      reported: [ng('S1', 'elution', 100)]
    });
    expect(recoveryInput(amountsOf(data, panelOf(target), null), target)).toMatchObject({
      ready: false,
      kind: 'nothing to subtract'
    });
  });

  it('names portions that lack a fraction and does not count them as zero', () => {
    const { balance, incomplete } = figures(
      experiment({
        fractions: [elution, aqueous],
        replicates: three,
        spikes: [spiked100],
        reported: [
          ...[80, 90, 100].map((value, i) => ng(`S${i + 1}`, 'elution', value)),
          ng('S1', 'aqueous', 5),
          ng('S2', 'aqueous', null, { state: 'missing', rawText: '' })
        ]
      })
    );
    expect(balance.method?.n).toBe(3);
    expect(balance.balance?.n).toBe(1);
    expect(incomplete.method).toEqual([]);
    expect(incomplete.balance.map((item) => [item.portion.replicate.label, ...item.lacks])).toEqual([
      ['S2', 'Aqueous layer: the cell was left empty'],
      ['S3', 'Aqueous layer: nothing was measured']
    ]);
  });
});

describe('an exclusion', () => {
  const base = experiment({
    fractions: [elution, aqueous],
    replicates: three,
    spikes: [spiked100],
    reported: [
      ...[80, 90, 130].map((value, i) => ng(`S${i + 1}`, 'elution', value)),
      ...[5, 5, 5].map((value, i) => ng(`S${i + 1}`, 'aqueous', value))
    ]
  });
  const setAside = (override: Partial<Exclusion>): ExperimentData => ({
    ...base,
    exclusions: [
      {
        id: 'x1',
        replicateId: 'S3',
        fractionId: null,
        entryId: null,
        cause: 'vial cracked',
        by: 'An analyst',
        at: '2026-10-14T09:00:00Z',
        ...override
      }
    ]
  });

  it('of a replicate takes it out, and lifting brings the figure back', () => {
    expect(figures(base).balance.method?.mean).toBeCloseTo(100, 9);
    expect(figures(setAside({})).balance.method).toMatchObject({ n: 2, mean: expect.closeTo(85, 9) });
    expect(figures(base).balance.method?.mean).toBeCloseTo(100, 9);
  });

  it('of one analyte leaves the others', () => {
    expect(figures(setAside({ entryId: 'another' })).balance.method?.n).toBe(3);
    expect(figures(setAside({ entryId: 'target' })).balance.method?.n).toBe(2);
  });

  it('of one fraction makes the replicate incomplete and says why', () => {
    const { balance, incomplete } = figures(setAside({ fractionId: 'aqueous' }));
    expect([balance.method?.n, balance.balance?.n]).toEqual([3, 2]);
    expect(incomplete.balance[0]?.lacks).toEqual(['Aqueous layer: set aside (vial cracked)']);
  });
});

describe('a verdict', () => {
  const eachND = (values: readonly (number | null)[], limit: number) =>
    experiment({
      replicates: values.map((_, i) => replicate(`S${i + 1}`)),
      spikes: [spiked100],
      reported: values.map((value, i) =>
        ng(
          `S${i + 1}`,
          'elution',
          value,
          value === null ? { state: 'below', limit, rawText: `<${limit}` } : {}
        )
      )
    });

  it('is formed with not detected as zero and at its limit, and is watch where they differ', () => {
    // 80, 80, 0 -> 53 % is outside; 80, 80, 75 -> 78 % is not: the truth is not known.
    const unsure = figures(eachND([80, 80, null], 75));
    expect(unsure.verdict).toBe('watch');
    expect(unsure.ends?.high).toBeCloseTo(235 / 3, 9);
    // All three below 2 %: outside at either end.
    expect(figures(eachND([null, null, null], 2)).verdict).toBe('outside');
  });

  it('turns from inside to watch where the native amount exceeds the spike, and is none over four times', () => {
    const withNative = (native: number) =>
      figures(
        experiment({
          subtract: 'native',
          replicates: [
            ...three,
            replicate('U1', { kind: 'unspiked' }),
            replicate('U2', { kind: 'unspiked' })
          ],
          spikes: [spiked100],
          reported: [
            ...[99, 100, 101].map((value, i) => ng(`S${i + 1}`, 'elution', native + value)),
            ...[-0.5, 0.5].map((delta, i) => ng(`U${i + 1}`, 'elution', native + delta))
          ]
        })
      );
    expect(withNative(50).verdict).toBe('inside');
    expect(withNative(150)).toMatchObject({
      verdict: 'watch',
      reasons: [expect.stringContaining('1.5 times the spike')]
    });
    expect(withNative(450)).toMatchObject({
      verdict: null,
      reasons: [expect.stringContaining('not assessable')]
    });
  });
});

describe('an analyte read against an extraction internal standard', () => {
  const label = entry({ id: 'label', name: 'd5-target', role: 'extraction internal standard' });
  const paired = entry({ id: 'target', internalStandardId: 'label' });
  const panel = panelOf(paired, label);
  const data = experiment({
    subtract: 'native',
    replicates: [...three, replicate('U1', { kind: 'unspiked' })],
    spikes: [spiked100, { replicateKind: 'spiked', entryId: 'label', amountNg: 50 }],
    reported: [...[97, 100, 103].map((value, i) => ng(`S${i + 1}`, 'elution', value)), ng('U1', 'elution', 4)]
  });
  const amounts = amountsOf(data, panel, null);

  it('refuses absolute figures and says why', () => {
    const input = recoveryInput(amounts, paired);
    expect(input).toMatchObject({ ready: false, kind: 'relative only' });
    if (input.ready) throw new Error('not refused');
    expect(input.reason).toContain('d5-target, which was added before extraction');
    const variant = variantFigures(
      [
        {
          key: 'extraction',
          name: 'Extraction',
          kind: 'loss',
          evidence: { amounts, medium: 'sample matrix' }
        }
      ],
      [paired]
    ).entries.get('target');
    expect(variant).toMatchObject({
      rows: [],
      refusal: expect.stringContaining('stage loss'),
      open: { available: false }
    });
  });

  it('has a relative recovery: 100 (q m_added - n)/m_spike', () => {
    // 97, 100, 103 less 4, of 100 spiked: 93, 96, 99 %.
    const relative = relativeFigures(amounts, paired);
    if (!relative?.available) throw new Error('no relative recovery');
    expect(relative.portions.map((item) => item.percent)).toEqual([93, 96, 99]);
    expect(relative.estimate.estimate).toBeCloseTo(96, 9);
  });

  it('takes q m_added by its line, without volume, dilution or share', () => {
    // Level ratio = q (areas 1:1 at equal concentration). A/A_is = 3000/2000 = 1.5: q m_added = 1.5 x 50 = 75 ng.
    const levels = [10, 20, 40].map((concentration, index) => ({
      id: `l${index}`,
      number: index + 1,
      label: `L${index + 1}`,
      concentrations: new Map([
        ['target', concentration],
        ['label', 20]
      ])
    }));
    const set = {
      id: 'set',
      name: 'Set',
      defaultModel: 'linear',
      defaultWeighting: 'none',
      levels,
      choices: new Map(),
      reported: levels.map((level, index) => ({
        ...area('target', '', null, [500, 1000, 2000][index]!, {
          internalArea: 1000,
          internalEntryId: 'label'
        }),
        levelId: level.id
      }))
    } as const;
    const withAreas = experiment({
      ...data,
      subtract: 'none',
      reported: [
        area('target', 'S1', 'elution', 3000, {
          internalArea: 2000,
          internalEntryId: 'label',
          finalVolumeMl: 7,
          dilution: 3,
          aliquotShare: 0.5
        })
      ]
    });
    expect(amountsOf(withAreas, panel, set).at('target', 'S1', 'elution').amount).toMatchObject({
      ng: expect.closeTo(75, 9)
    });
  });

  it('needs a single method fraction', () => {
    const two = { ...data, fractions: [elution, { ...elution, id: 'second', name: 'Second elution' }] };
    expect(relativeFigures(amountsOf(two, panel, null), paired)).toMatchObject({ available: false });
  });
});

describe('a surrogate', () => {
  it('is read in every portion, spiked or not, with nothing subtracted', () => {
    const surrogate = entry({ id: 'surrogate', role: 'surrogate' });
    const data = experiment({
      subtract: 'native',
      replicates: [
        replicate('S1'),
        replicate('U1', { kind: 'unspiked' }),
        replicate('B1', { kind: 'method blank' })
      ],
      spikes: (['spiked', 'unspiked', 'method blank'] as const).map((replicateKind) => ({
        replicateKind,
        entryId: 'surrogate',
        amountNg: 50
      })),
      reported: [45, 40, 35].map((value, i) =>
        area('surrogate', ['S1', 'U1', 'B1'][i]!, 'elution', value, { basis: 'ng' })
      )
    });
    const read = surrogateFigures(amountsOf(data, panelOf(surrogate), null), surrogate, {
      low: 75,
      high: 125
    });
    // 45/50, 40/50, 35/50: 90, 80, 70 %; mean 80.
    expect(read.portions.map((item) => [item.percent, item.holds])).toEqual([
      [90, true],
      [80, true],
      [70, false]
    ]);
    expect(read.description?.mean).toBeCloseTo(80, 9);
  });
});

describe('the stages of a variant', () => {
  const stage = (key: string, kind: 'signal' | 'loss', means: number, elsewhere = 0) => {
    const standards = kind === 'signal';
    const ids = ['S1', 'S2', 'S3', 'S4', 'S5'];
    const data = experiment({
      id: key,
      stageKind: kind,
      fractions: standards ? [] : [elution, aqueous],
      replicates: ids.map((id) => replicate(id, { kind: standards ? 'solvent standard' : 'spiked' })),
      spikes: [{ ...spiked100, replicateKind: standards ? 'solvent standard' : 'spiked' }],
      reported: ids.flatMap((id, i) => {
        const scatter = (i - 2) * 0.4;
        return standards
          ? [ng(id, null, means + scatter)]
          : [ng(id, 'elution', Math.max(0, means + scatter)), ng(id, 'aqueous', elsewhere)];
      })
    });
    return {
      key,
      name: key,
      kind,
      evidence: { amounts: amountsOf(data, panelOf(target), null), medium: 'solvent' as const }
    };
  };

  it('take points of 100 in the sample, and a clear loss is named', () => {
    // y: concentration 90/100, drying 81/90 = 0.9, extraction 40.5/81 = 0.5. Of 100: extraction 50, drying 50 x 0.1 = 5, concentration 45 x 0.1 = 4.5.
    const { entries } = variantFigures(
      [
        stage('instrument', 'signal', 100),
        stage('concentration', 'loss', 90),
        stage('drying', 'loss', 81),
        stage('extraction', 'loss', 40.5, 30)
      ],
      [target]
    );
    const rows = entries.get('target')?.rows ?? [];
    expect(rows.map((row) => row.lost?.estimate ?? null)).toEqual([
      null,
      expect.closeTo(4.5, 9),
      expect.closeTo(5, 9),
      expect.closeTo(50, 9)
    ]);
    expect(rows.map((row) => row.named)).toEqual([false, false, false, true]);
    const open = entries.get('target')?.open;
    // 40.5 + 30 found, nothing passed a stage in this set-up, so 29.5 are open.
    if (!open?.available) throw new Error('not available');
    expect(open.found.estimate).toBeCloseTo(70.5, 9);
    expect(open.open.estimate).toBeCloseTo(29.5, 9);
  });

  it('without an experiment leave what they take to the stage above, and say so', () => {
    const missing = { key: 'drying', name: 'Drying', kind: 'loss', evidence: null } as const;
    const { entries } = variantFigures(
      [
        stage('instrument', 'signal', 100),
        stage('concentration', 'loss', 90),
        missing,
        stage('extraction', 'loss', 45)
      ],
      [target]
    );
    const found = entries.get('target');
    expect(found?.rows.at(-1)).toMatchObject({ stage: 'extraction', covers: ['drying'] });
    expect(found?.gaps).toEqual([{ key: 'drying', reason: 'Nothing has been spiked at drying yet.' }]);
  });

  it('of a wholly lost analyte read outside, though the balance finds it elsewhere', () => {
    const top = stage('extraction', 'loss', -5, 96);
    const input = recoveryInput(top.evidence.amounts, target);
    if (!input.ready) throw new Error(input.reason);
    const lost = methodFigures(input, criteria);
    expect(lost.verdict).toBe('outside');
    expect(lost.balance.method?.mean).toBe(0);
    expect(lost.balance.balance?.mean).toBeCloseTo(96, 9);
  });
});
