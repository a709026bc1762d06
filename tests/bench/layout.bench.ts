import { massBalanceLayout } from '../../src/lib/charts/mass-balance-layout';
import type { MassBalanceRow, MassBalanceView } from '../../src/lib/views/mass-balance';
import { medianOwnMs, type Benchmark } from './benchmark';

const fractions: MassBalanceView['fractions'] = Array.from({ length: 6 }, (_, slot) => ({
  key: `fraction-${slot}`,
  name: `Fraction ${slot + 1}`,
  countsAs: slot < 3 ? 'method' : 'balance',
  slot
}));

function row(_: unknown, index: number): MassBalanceRow {
  const means = fractions.map((_fraction, slot) => ((index * 31 + slot * 17) % 23) + 1);
  const method = means.slice(0, 3).reduce((sum, mean) => sum + mean, 0);
  return {
    panelEntryId: `entry-${index}`,
    name: `Compound ${index + 1}`,
    role: 'target',
    class: '',
    verdict: 'inside',
    reasons: [],
    method: { mean: method, n: 8, halfWidth: 4, sd: 5, rsd: 8, interval: null },
    segments: fractions.map(({ key, name, countsAs }, slot) => ({
      fractionKey: key,
      name,
      countsAs,
      mean: means[slot] ?? 0,
      notDetected: 0,
      href: `?figure=${index}-${slot}`
    })),
    downstream: 5,
    open: 10,
    openSignificant: true,
    total: null,
    incomplete: null,
    flagged: null,
    href: `?figure=${index}`
  };
}

export const benchmarks: readonly Benchmark[] = [
  {
    name: 'layout of 200 stacked bars × 6 fractions, for a wide and a narrow screen',
    goal: { ratio: 1, is: 'at most' },
    run: async () => {
      const view = { criteria: { low: 70, high: 130 }, fractions, rows: Array.from({ length: 200 }, row) };
      const both = (): void => {
        massBalanceLayout(view);
        massBalanceLayout(view, [0.48, 0.84], 'bars');
      };
      return { figure: await medianOwnMs(both), floor: 5, unit: 'ms' };
    }
  }
];
