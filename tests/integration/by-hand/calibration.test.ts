import { beforeAll, describe, expect, it } from 'vitest';
import type { PanelEntry } from '../../../src/lib/server/db/models/panel-entry';
import { chooseFit } from '../../../src/lib/server/services/calibration-choices';
import { getCalibrationSet } from '../../../src/lib/server/services/calibrations';
import { getPanel, setPanelEntry } from '../../../src/lib/server/services/panels';
import { provenanceView } from '../../../src/lib/server/services/results';
import { openBench, portions, type Bench, type Row } from './bench';

/*
 * A line that is not straight, so that every choice gives another figure. Levels 1, 2, 5, 10, 20 ng/mL, L3 injected twice; areas below.
 * S1 and S2 read 5000 and 7000 (external); 1 mL, 20 ng spiked. Worked in base R 4 (stats):
 *
 *   x <- c(1, 2, 5, 5, 10, 20); y <- c(1100, 2050, 4900, 5100, 9800, 18500)
 *   s <- c(5000, 7000); recovery <- function(v) mean(v) * 100/20
 *   average    recovery(s/mean(y/x))
 *   weighted   w <- coef(lm(y ~ x, weights = 1/x^2)); recovery((s - w[1])/w[2])
 *   shortened  h <- coef(lm(y ~ x, subset = x > 1 & x < 20)); recovery((s - h[1])/h[2])
 *
 * With the standard: ratios y/A_is against q = c_level/c_is,level, the standard at 4 ng/mL in L1 to L3 and at 5 in L4 and L5, A_is 4000
 * and 5000: lm(r ~ q, weights = 1/q^2). S1, S2: A_is 5000, in the vial 5 ng/mL, m = q · 5; in the extract 5 ng, m = q · 5.
 */
const areas: readonly (readonly [level: string, injection: number, area: number, standard: number])[] = [
  ['L1', 1, 1100, 4000],
  ['L2', 1, 2050, 4000],
  ['L3', 1, 4900, 4000],
  ['L3', 2, 5100, 4000],
  ['L4', 1, 9800, 5000],
  ['L5', 1, 18500, 5000]
];
const samples = { S1: 5000, S2: 7000 } as const;
/** Mean recovery in percent of 20 ng, by R as above. */
const byR = {
  average: 29.8507462687,
  weighted: 30.6700916932,
  shortened: 30.2779953015,
  ratio: 30.5119982831
} as const;

let bench: Bench;
let setId: string;
let experiment: number;
let external: PanelEntry;
let vialStandard: PanelEntry;

beforeAll(async () => {
  bench = await openBench();
  vialStandard = await bench.entry('VialStd', 'injection internal standard');
  const extractStandard = await bench.entry('ExtractStd', 'injection internal standard');
  external = await bench.entry('Extern');
  await bench.entry('Vialin', 'target', vialStandard);
  await bench.entry('Extractin', 'target', extractStandard);
  const four = { L1: '4', L2: '4', L3: '4', L4: '5', L5: '5' };
  setId = await bench.calibration({
    levels: ['1', '2', '5', '10', '20'].map((concentrationNgPerMl, index) => ({
      label: `L${index + 1}`,
      concentrationNgPerMl
    })),
    concentrations: { [vialStandard.id]: four, [extractStandard.id]: four }
  });
  experiment = await bench.experiment({
    calibrationSetId: setId,
    spikes: [{ kind: 'spiked', targetsNg: '20' }],
    finalVolumeMl: '1',
    additions: [
      { panelEntryId: vialStandard.id, point: 'vial', amountNg: '', concentrationNgPerMl: '5' },
      { panelEntryId: extractStandard.id, point: 'extract', amountNg: '5', concentrationNgPerMl: '' }
    ],
    replicates: [portions('spiked', ['S1', 'S2'])]
  });
  const names = ['Extern', 'Vialin', 'Extractin'];
  await bench.upload(
    [
      ['Sample', 'Analyte', 'Peak area', 'IS area', 'Injection'],
      ...areas.flatMap(([level, injection, area, standard]) =>
        names.map((name): Row => [level, name, area, name === 'Extern' ? '' : standard, injection])
      ),
      ...Object.entries(samples).flatMap(([sample, area]) =>
        names.map((name): Row => [sample, name, area, name === 'Extern' ? '' : 5000, 1])
      )
    ],
    { experiment }
  );
});

const meanOf = async (name: string): Promise<number | null> => (await bench.result(experiment, name)).mean;

async function choose(name: string, choice: Readonly<Record<string, unknown>>): Promise<number> {
  const set = await getCalibrationSet(bench.actor, bench.code, setId);
  const fit = set.fits.find((item) => item.name === name)!;
  return chooseFit(bench.actor, bench.code, setId, {
    panelEntryId: fit.entryId,
    seenRevision: fit.revision,
    model: 'linear',
    weighting: 'none',
    levelsLeftOut: [],
    reason: 'the level errors are smaller',
    ...choice
  });
}

describe('a calibration', () => {
  it('averages the response factors of every injection of a level', async () => {
    expect(await meanOf('Extern')).toBeCloseTo(byR.average, 8);
  });

  it('changes its figures with each revision, and the way to a figure names the revision', async () => {
    expect(await choose('Extern', { weighting: '1/x2' })).toBe(1);
    expect(await meanOf('Extern')).toBeCloseTo(byR.weighted, 8);
    const set = await getCalibrationSet(bench.actor, bench.code, setId);
    const ends = set.levelList.filter(({ label }) => label === 'L1' || label === 'L5').map(({ id }) => id);
    expect(await choose('Extern', { levelsLeftOut: ends })).toBe(2);
    expect(await meanOf('Extern')).toBeCloseTo(byR.shortened, 8);
    const way = JSON.stringify(
      await provenanceView(
        bench.actor,
        bench.code,
        `calibration:${experiment}:${external.id}`,
        (address) => address
      )
    );
    expect(way).toMatch(/revision 2/i);
    expect(way).toContain('left out');
  });

  it('leaves out no level within its range', async () => {
    const set = await getCalibrationSet(bench.actor, bench.code, setId);
    const inner = set.levelList.find(({ label }) => label === 'L3')!;
    await expect(choose('Extern', { levelsLeftOut: [inner.id] })).rejects.toThrow('within the range');
    expect(await meanOf('Extern')).toBeCloseTo(byR.shortened, 8);
  });

  it.each(['Vialin', 'Extractin'])(
    'with a standard is a line of ratios, each level by its own standard: %s',
    async (name) => {
      await choose(name, { weighting: '1/x2' });
      expect(await meanOf(name)).toBeCloseTo(byR.ratio, 8);
    }
  );
});

describe('another internal standard once data are stored', () => {
  async function readAgainst(name: string, standardId: string | null): Promise<void> {
    const entry = (await getPanel(bench.actor, bench.code)).find(({ analyte }) => analyte.name === name)!;
    await setPanelEntry(bench.actor, bench.code, {
      entryId: entry.id,
      seen: entry.seen,
      role: 'target',
      internalStandardEntryId: standardId,
      low: null,
      high: null,
      rsdMax: null,
      nMin: null,
      reason: ''
    });
  }

  it('leaves no figure rather than one divided by the wrong area', async () => {
    await readAgainst('Extractin', vialStandard.id);
    const row = await bench.result(experiment, 'Extractin');
    expect(row).toMatchObject({ mean: null, verdict: null });
    expect(JSON.stringify(row)).toContain('recorded against ExtractStd');
  });

  it('leaves none without a standard either, where areas came with one', async () => {
    await readAgainst('Extractin', null);
    const row = await bench.result(experiment, 'Extractin');
    expect(row).toMatchObject({ mean: null, verdict: null });
    expect(JSON.stringify(row)).toContain('recorded against ExtractStd');
  });

  it('leaves none with a standard where areas came without', async () => {
    await readAgainst('Extern', vialStandard.id);
    expect(await bench.result(experiment, 'Extern')).toMatchObject({ mean: null, verdict: null });
    await readAgainst('Extern', null);
    expect(await meanOf('Extern')).toBeCloseTo(byR.shortened, 8);
  });
});
