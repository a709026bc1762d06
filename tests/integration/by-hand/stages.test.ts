import { beforeAll, describe, expect, it } from 'vitest';
import { stageLadderView, walkBackView } from '../../../src/lib/server/services/results';
import { makeVariant } from '../../factories/variant';
import { openBench, portions, type Bench, type Row } from './bench';

/*
 * Three stages of loss with step recoveries 0.5 (extraction), 0.9 (drying), 0.6 (concentration) and an instrument that reads 110 of 100:
 * recoveries 66 = 110 · 0.6, 59.4 = 66 · 0.9, 29.7 = 59.4 · 0.5, each of four portions around it (-1, 0, 1, 0). By hand: of 100 in the
 * sample the extraction loses 100 (1 - 0.5) = 50, drying 100 · 0.5 · 0.1 = 5, concentration 100 · 0.5 · 0.9 · 0.4 = 18; 27 are left. Plain
 * differences, 29.7, 6.6 and 44, would blame the concentration.
 *
 * Intervals, p (t.test, Holm over the stages, Benjamini-Hochberg over the three analytes) by base R 4:
 *   se <- function(x) sd(x)/sqrt(4); w: derivatives of 100 R3/Rk - 100 R3/R(k-1) in its means; v <- w^2 se^2
 *   est -+ qt(.975, sum(v)^2/sum(v^2/3)) * sqrt(sum(v))
 *   p.adjust(c(t.test(inst, conc)$p.value, ...), "holm"), p.adjust(c(one, another, third), "BH")
 */
const recoveries = {
  instrument: { Threein: [109, 110, 111, 110], Stayin: [109, 110, 111, 110], Lostin: [109, 110, 111, 110] },
  concentration: { Threein: [65, 66, 67, 66], Stayin: [108, 110, 112, 110], Lostin: [65, 66, 67, 66] },
  drying: {
    Threein: [58.4, 59.4, 60.4, 59.4],
    Stayin: [108, 110, 112, 110],
    Lostin: [58.4, 59.4, 60.4, 59.4]
  },
  extraction: {
    Threein: [28.7, 29.7, 30.7, 29.7],
    Stayin: [102, 106, 110, 106],
    Lostin: ['ND', 'ND', 'ND', 'ND']
  }
} as const;
const byR = {
  extraction: { lost: 50, lower: 47.94283339, upper: 52.05716661, p: 2.172554068e-8 },
  drying: { lost: 5, lower: 3.906068058, upper: 6.093931942, p: 4.032387311e-5 },
  concentration: { lost: 18, lower: 17.08077569, upper: 18.91922431, p: 1.546177491e-9 }
} as const;
const stages = ['extraction', 'drying', 'concentration'] as const;
const names = ['Threein', 'Stayin', 'Lostin'] as const;
const address = (text: string): string => text;

async function measureStages(bench: Bench, media: Readonly<Record<string, string>> = {}): Promise<number> {
  await makeVariant(bench.made.study, { code: 'A' });
  let number = 0;
  for (const [stageKey, found] of Object.entries(recoveries)) {
    const kind = stageKey === 'instrument' ? 'solvent standard' : 'spiked';
    const labels = [1, 2, 3, 4].map((index) => `${stageKey} ${index}`);
    const isTop = stageKey === 'extraction';
    const method = {
      name: 'Elution',
      kind: 'elution',
      countsAs: 'method',
      passedStages: isTop ? ['concentration', 'drying'] : []
    };
    number = await bench.experiment({
      stageKey,
      variantCode: 'A',
      medium: media[stageKey] ?? 'solvent',
      spikes: [{ kind, targetsNg: '100' }],
      fractions:
        stageKey === 'instrument'
          ? []
          : isTop
            ? [method, { name: 'Effluent', kind: 'load effluent', countsAs: 'balance', passedStages: [] }]
            : [method],
      replicates: [portions(kind, labels)]
    });
    const rows = names.flatMap((name) =>
      labels.flatMap((label, index): Row[] => [
        [
          label,
          stageKey === 'instrument' ? '' : 'Elution',
          name,
          `${found[name][index]}`.replace('ND', '<0.5')
        ],
        ...(isTop ? [[label, 'Effluent', name, 33]] : [])
      ])
    );
    await bench.upload([['Sample', 'Fraction', 'Analyte', 'Amount (ng)'], ...rows], { experiment: number });
  }
  return number;
}

describe('three stages of loss under an instrument that reads high', () => {
  let bench: Bench;
  let top: number;

  beforeAll(async () => {
    bench = await openBench();
    for (const name of names) await bench.entry(name);
    top = await measureStages(bench);
  });

  it('are told apart as in the procedure, with intervals and p as by R', async () => {
    const { walkBack } = await walkBackView(bench.actor, bench.code, { variant: 'A' }, address);
    const row = walkBack.rows.find(({ name }) => name === 'Threein')!;
    expect(row.losses.map((loss) => loss?.stageKey)).toEqual(stages);
    for (const [index, stage] of stages.entries()) {
      const { lost, interval, pAdjusted } = row.losses[index]!;
      const expected = byR[stage];
      expect(lost).toBeCloseTo(expected.lost, 9);
      expect(interval?.lower).toBeCloseTo(expected.lower, 6);
      expect(interval?.upper).toBeCloseTo(expected.upper, 6);
      expect((pAdjusted ?? 1) / expected.p).toBeCloseTo(1, 6);
    }
    expect(row.remaining).toBeCloseTo(27, 9);
  });

  it('only a loss that is sure and above 5 points is named: not drying, nothing of what stays', async () => {
    const { findings } = await stageLadderView(bench.actor, bench.code, { variant: 'A' }, address);
    const named = findings.named.map(({ text }) => text).join(' | ');
    expect(named).toContain('Threein');
    expect(named).not.toContain('Stayin');
    expect(named.toLowerCase()).toContain('extraction');
    expect(named.toLowerCase()).toContain('concentration');
    expect(named.toLowerCase()).not.toContain('drying');
    // Stayin loses 100 · (1 - 106/110) = 3.64 points, p 0.26.
    const { walkBack } = await walkBackView(bench.actor, bench.code, { variant: 'A' }, address);
    const stays = walkBack.rows.find(({ name }) => name === 'Stayin')!;
    expect(stays.losses[0]?.lost).toBeCloseTo(100 * (1 - 106 / 110), 9);
    expect(stays.losses[0]?.pAdjusted).toBeCloseTo(0.2617583149, 8);
  });

  it('what is open counts no loss twice', async () => {
    // Collected: 29.7/(0.6 · 0.9 · 1.1) = 50 and 33/1.1 = 30, so 20 are open; found 62.7, lost on the way 80 - 62.7 = 17.3.
    const row = await bench.balance(top, 'Threein');
    expect(row.method?.mean).toBeCloseTo(29.7, 9);
    expect(row.total).toBeCloseTo(62.7, 9);
    expect(row.downstream).toBeCloseTo(17.3, 9);
    expect(row.open).toBeCloseTo(20, 9);
  });

  it('a wholly lost analyte has no losses told apart, a recovery of 0 and is outside', async () => {
    const { walkBack } = await walkBackView(bench.actor, bench.code, { variant: 'A' }, address);
    const row = walkBack.rows.find(({ name }) => name === 'Lostin')!;
    expect(row.losses).toEqual([null, null, null]);
    expect(row.gap).toContain('Nothing came back at some stage');
    const result = await bench.result(top, 'Lostin');
    expect(result).toMatchObject({ n: 4, mean: 0, interval: null });
    // Collected in the effluent 33/1.1 = 30.
    expect((await bench.balance(top, 'Lostin')).open).toBeCloseTo(70, 9);
  });
});

describe('a matrix that halves the signal', () => {
  it('is divided out of the stages where media differ, and only there', async () => {
    const bench = await openBench();
    await bench.entry('Maskin');
    await makeVariant(bench.made.study, { code: 'A' });
    const stage = async (typed: Readonly<Record<string, unknown>>, rows: readonly Row[]): Promise<number> => {
      const experiment = await bench.experiment({ variantCode: 'A', ...typed });
      await bench.upload([['Sample', 'Fraction', 'Analyte', 'Amount (ng)'], ...rows], { experiment });
      return experiment;
    };
    const concentration = await stage(
      {
        stageKey: 'concentration',
        medium: 'solvent',
        spikes: [{ kind: 'spiked', targetsNg: '100' }],
        replicates: [portions('spiked', ['C1', 'C2', 'C3'])]
      },
      [
        ['C1', '', 'Maskin', 79],
        ['C2', '', 'Maskin', 80],
        ['C3', '', 'Maskin', 81]
      ]
    );
    const extraction = await stage(
      {
        stageKey: 'extraction',
        medium: 'sample matrix',
        subtract: 'native',
        fractions: [
          { name: 'Elution', kind: 'elution', countsAs: 'method', passedStages: ['concentration'] }
        ],
        spikes: [
          { kind: 'spiked', targetsNg: '100' },
          { kind: 'post-extraction spike', targetsNg: '100' },
          { kind: 'solvent standard', targetsNg: '100' }
        ],
        replicates: [
          portions('spiked', ['S1', 'S2', 'S3']),
          portions('unspiked', ['U1', 'U2', 'U3']),
          portions('post-extraction spike', ['P1', 'P2', 'P3']),
          portions('solvent standard', ['N1', 'N2', 'N3'])
        ]
      },
      [
        ...[39, 40, 41].map((ng, index): Row => [`S${index + 1}`, 'Elution', 'Maskin', ng]),
        ...[9, 10, 11].map((ng, index): Row => [`U${index + 1}`, 'Elution', 'Maskin', ng]),
        ...[59, 60, 61].map((ng, index): Row => [`P${index + 1}`, 'Elution', 'Maskin', ng]),
        ...[99, 100, 101].map((ng, index): Row => [`N${index + 1}`, '', 'Maskin', ng])
      ]
    );
    // ME = 100 (60 - 10)/100 = 50. Method recovery 40 - 10 = 30; on the scale of solvent 60; concentration 80 in solvent.
    expect((await bench.result(extraction, 'Maskin')).mean).toBeCloseTo(30, 9);
    expect((await bench.result(concentration, 'Maskin')).mean).toBeCloseTo(80, 9);
    const { walkBack } = await walkBackView(bench.actor, bench.code, { variant: 'A' }, address);
    const [row] = walkBack.rows;
    // Extraction (drying included, unmeasured): 100 (1 - 60/80) = 25; concentration 100 · 0.75 · (1 - 0.8) = 15; left 60.
    expect(row?.losses[0]?.lost).toBeCloseTo(25, 9);
    expect(row?.losses[1]).toBeNull();
    expect(row?.losses[2]?.lost).toBeCloseTo(15, 9);
    expect(row?.remaining).toBeCloseTo(60, 9);
    expect(row?.gap).toContain('includes drying');
    // The same 25 stay open in the balance: the fraction passed the concentration and is masked by half, 30/(0.8 · 0.5) = 75 collected.
    const balance = await bench.balance(extraction, 'Maskin');
    expect(balance.total).toBeCloseTo(30, 9);
    expect(balance.downstream).toBeCloseTo(45, 9);
    expect(balance.open).toBeCloseTo(25, 9);
  });
});
