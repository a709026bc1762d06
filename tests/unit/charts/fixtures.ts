import type { MassBalanceRow, MassBalanceView } from '../../../src/lib/views/mass-balance';

export const fractions: MassBalanceView['fractions'] = [
  { key: 'first', name: 'First elution', countsAs: 'method', slot: 0 },
  { key: 'aqueous', name: 'Aqueous layer', countsAs: 'balance', slot: 3 },
  { key: 'carbon', name: 'Second cartridge', countsAs: 'method', slot: 2 }
];

interface Parts {
  readonly first?: number;
  readonly carbon?: number;
  readonly aqueous?: number;
}

/** A row of invented figures; `parts` are its fractions in percent of the spike. */
export function balanceRow(
  name: string,
  { first = 0, carbon = 0, aqueous = 0 }: Parts = {},
  rest: Partial<MassBalanceRow> = {}
): MassBalanceRow {
  const mean = first + carbon;
  const means = { first, carbon, aqueous };
  return {
    panelEntryId: `entry-${name}`,
    name,
    role: 'target',
    class: '',
    verdict: 'inside',
    reasons: [],
    method: {
      mean,
      n: 6,
      halfWidth: 4,
      sd: 3.8,
      rsd: 4,
      interval: { lower: mean - 4, upper: mean + 4, level: 0.95 }
    },
    segments: fractions.map(({ key, name: fraction, countsAs }) => ({
      fractionKey: key,
      name: fraction,
      countsAs,
      mean: means[key as keyof Parts] ?? 0,
      notDetected: 0,
      href: `?figure=${name}-${key}`
    })),
    downstream: null,
    open: null,
    openSignificant: false,
    total: mean + aqueous,
    incomplete: null,
    flagged: null,
    href: `?figure=${name}`,
    ...rest
  };
}

export function balanceView(...rows: readonly MassBalanceRow[]): MassBalanceView {
  return { criteria: { low: 70, high: 130 }, fractions, rows };
}
