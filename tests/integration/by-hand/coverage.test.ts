import { beforeEach, describe, expect, it } from 'vitest';
import type { PanelEntry } from '../../../src/lib/server/db/models/panel-entry';
import { exclude, lift } from '../../../src/lib/server/services/exclusions';
import { withdrawImport } from '../../../src/lib/server/services/imports';
import { newAnalyteVersion } from '../../../src/lib/server/services/library';
import { analyteVersionForm } from '../../../src/lib/schemas/analyte';
import { openBench, portions, type Bench, type Row } from './bench';

/*
 * Which numbers count: later files, withdrawals, exclusions. Two analytes, five portions, two fractions (Elution for the method, Effluent
 * for the balance), 100 ng spiked, ng brought. Firstin 80, 82, 84, 86, 88 and 10 each; Secondin 90, 92, 94, 96, 98 and 2 each.
 */
const labels = ['S1', 'S2', 'S3', 'S4', 'S5'];
const head = ['Sample', 'Fraction', 'Analyte', 'Amount (ng)'];
const elution = { Firstin: [80, 82, 84, 86, 88], Secondin: [90, 92, 94, 96, 98] } as const;
const effluent = { Firstin: 10, Secondin: 2 } as const;
const names = ['Firstin', 'Secondin'] as const;
let bench: Bench;
let experiment: number;
let first: PanelEntry;

beforeEach(async () => {
  bench = await openBench();
  first = await bench.entry('Firstin');
  await bench.entry('Secondin');
  experiment = await bench.experiment({
    spikes: [{ kind: 'spiked', targetsNg: '100' }],
    fractions: [
      { name: 'Elution', kind: 'elution', countsAs: 'method' },
      { name: 'Effluent', kind: 'load effluent', countsAs: 'balance' }
    ],
    replicates: [portions('spiked', labels)]
  });
  const rows = labels.flatMap((label, index) =>
    names.flatMap((name): Row[] => [
      [label, 'Elution', name, elution[name][index]!],
      [label, 'Effluent', name, effluent[name]]
    ])
  );
  await bench.upload([head, ...rows], { experiment });
});

async function figures(
  name: string
): Promise<readonly [n: number | null, mean: number | null, total: number | null]> {
  const { n, mean } = await bench.result(experiment, name);
  return [n, rounded(mean), rounded((await bench.balance(experiment, name)).total)];
}

const rounded = (value: number | null): number | null => (value === null ? null : Number(value.toFixed(9)));
const set = async (label: string, fraction: string | null, analyteId: string | null): Promise<string> => {
  const { replicates, fractions } = await bench.places(experiment);
  return exclude(bench.actor, bench.code, experiment, {
    replicateId: replicates.get(label)!,
    fractionId: fraction === null ? null : fractions.get(fraction)!,
    analyteId,
    cause: 'vial cracked'
  });
};

describe('what is set aside', () => {
  it('a portion leaves every figure of every analyte, and comes back', async () => {
    const exclusionId = await set('S5', null, null);
    // (80 + 82 + 84 + 86)/4 = 83, with the effluent 93; (90 + 92 + 94 + 96)/4 = 93, 95.
    expect(await figures('Firstin')).toEqual([4, 83, 93]);
    expect(await figures('Secondin')).toEqual([4, 93, 95]);
    await lift(bench.actor, bench.code, { exclusionId, reason: 'it was the rack' });
    expect(await figures('Firstin')).toEqual([5, 84, 94]);
  });

  it('one analyte of a portion leaves the others', async () => {
    await set('S1', null, first.analyteId);
    // (82 + 84 + 86 + 88)/4 = 85.
    expect(await figures('Firstin')).toEqual([4, 85, 95]);
    expect(await figures('Secondin')).toEqual([5, 94, 96]);
  });

  it('a balance fraction of a portion leaves its method figure', async () => {
    await set('S1', 'Effluent', null);
    expect(await figures('Firstin')).toEqual([5, 84, 95]);
  });

  it('a method fraction of one analyte makes that portion incomplete, never zero', async () => {
    await set('S5', 'Elution', first.analyteId);
    expect(await figures('Firstin')).toEqual([4, 83, 93]);
    expect(await figures('Secondin')).toEqual([5, 94, 96]);
    expect((await bench.result(experiment, 'Firstin')).notes.join('; ')).toContain(
      'S5 lacks Elution: set aside (vial cracked)'
    );
  });

  it('stays aside when a later file brings the place anew', async () => {
    await set('S5', null, null);
    await bench.upload([head, ['S5', 'Elution', 'Firstin', 500], ['S4', 'Elution', 'Firstin', 90]], {
      experiment,
      reason: 'integrated again'
    });
    // S4 now 90: (80 + 82 + 84 + 90)/4 = 84.
    expect(await figures('Firstin')).toEqual([4, 84, 94]);
  });
});

describe('a later file', () => {
  it('covers the places it fills and no others, and gives them back when withdrawn', async () => {
    const importId = await bench.upload(
      [head, ['S1', 'Elution', 'Firstin', 85], ['S2', 'Effluent', 'Secondin', 12]],
      {
        experiment,
        reason: 'integrated again'
      }
    );
    // Firstin (85 + 82 + 84 + 86 + 88)/5 = 85, balance 95; Secondin 94, its effluent (4 · 2 + 12)/5 = 4.
    expect(await figures('Firstin')).toEqual([5, 85, 95]);
    expect(await figures('Secondin')).toEqual([5, 94, 98]);
    await withdrawImport(bench.actor, bench.code, importId, 'the wrong sequence');
    expect(await figures('Firstin')).toEqual([5, 84, 94]);
    expect(await figures('Secondin')).toEqual([5, 94, 96]);
  });

  it('asks why before it covers anything, and stores nothing until it is told', async () => {
    await expect(bench.upload([head, ['S1', 'Elution', 'Firstin', 85]], { experiment })).rejects.toThrow(
      'Say why'
    );
    expect(await figures('Firstin')).toEqual([5, 84, 94]);
  });

  it('three deep: the last one stored counts, then the one before, then the first', async () => {
    const bring = (ng: number): Promise<string> =>
      bench.upload([head, ['S1', 'Elution', 'Firstin', ng]], { experiment, reason: 'integrated again' });
    const second = await bring(90);
    const third = await bring(100);
    // 84 + (90 - 80)/5 = 86, 84 + 20/5 = 88.
    expect(await figures('Firstin')).toEqual([5, 88, 98]);
    await withdrawImport(bench.actor, bench.code, second, 'a wrong file');
    expect(await figures('Firstin')).toEqual([5, 88, 98]);
    await withdrawImport(bench.actor, bench.code, third, 'a wrong file');
    expect(await figures('Firstin')).toEqual([5, 84, 94]);
  });

  it('with an injection diluted further replaces what was above range before', async () => {
    await bench.upload([head, ['S1', 'Elution', 'Firstin', '>max']], { experiment, reason: 'off scale' });
    expect(await figures('Firstin')).toEqual([4, 85, 95]);
    await bench.upload([head, ['S1', 'Elution', 'Firstin', 95]], { experiment, reason: 'diluted' });
    // 84 + 15/5 = 87.
    expect(await figures('Firstin')).toEqual([5, 87, 97]);
  });
});

describe('an analyte of the library', () => {
  it('keeps the version that the study was made with', async () => {
    const before = await bench.result(experiment, 'Firstin');
    await newAnalyteVersion(
      bench.actor,
      first.analyteId,
      analyteVersionForm.parse({ name: 'Firstin, renamed', seenVersion: 1 })
    );
    expect(await bench.result(experiment, 'Firstin')).toEqual(before);
  });
});
