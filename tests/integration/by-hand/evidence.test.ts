import { expect, it } from 'vitest';
import { chooseStageEvidence } from '../../../src/lib/server/services/variants';
import { walkBackView } from '../../../src/lib/server/services/results';
import { makeVariant } from '../../factories/variant';
import { openBench, portions, type Bench } from './bench';

/** Three portions around a recovery, as evidence of variant A in a matrix. */
async function measured(bench: Bench, stageKey: string, matrix: string, recovery: number): Promise<void> {
  const labels = [1, 2, 3].map((index) => `${stageKey} ${matrix} ${index}`);
  const experiment = await bench.experiment({
    stageKey,
    matrix,
    spikes: [{ kind: 'spiked', targetsNg: '100' }],
    replicates: [portions('spiked', labels)]
  });
  await bench.upload(
    [
      ['Sample', 'Analyte', 'Amount (ng)'],
      ...labels.map((label, index) => [label, 'Placein', recovery - 1 + index])
    ],
    { experiment }
  );
  await chooseStageEvidence(bench.actor, bench.code, 'A', {
    stageKey,
    experimentNumber: experiment,
    matrix,
    levelLabel: ''
  });
}

async function losses(bench: Bench): Promise<readonly (number | null)[]> {
  const { walkBack } = await walkBackView(bench.actor, bench.code, { variant: 'A' }, (address) => address);
  return walkBack.rows[0]!.losses.map((loss) => (loss === null ? null : Number(loss.lost.toFixed(9))));
}

it('a stage is read in the matrix of the whole method, never in another', async () => {
  const bench = await openBench();
  await bench.entry('Placein');
  await makeVariant(bench.made.study, { code: 'A' });
  await measured(bench, 'extraction', 'river water', 30);
  await measured(bench, 'concentration', 'tap water', 90);
  // Nothing speaks for the concentration in river water: all 70 points are lost somewhere from the extraction on.
  expect(await losses(bench)).toEqual([70, null, null]);
  await measured(bench, 'concentration', 'river water', 60);
  // Extraction 100 (1 - 30/60) = 50, concentration 100 · 0.5 · (1 - 0.6) = 20.
  expect(await losses(bench)).toEqual([50, null, 20]);
});
