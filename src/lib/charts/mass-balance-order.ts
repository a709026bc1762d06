import type { MassBalanceRow } from '$lib/views/mass-balance';
import type { Verdict } from '$lib/views/verdict';

export const massBalanceOrders = ['verdict', 'open', 'name', 'class', 'panel'] as const;
export type MassBalanceOrder = (typeof massBalanceOrders)[number];

/** As they read in a sentence: "Order: verdict, then open part". */
export const massBalanceOrderLabels: Readonly<Record<MassBalanceOrder, string>> = {
  verdict: 'Verdict, then open part',
  open: 'Open part',
  name: 'Name',
  class: 'Class, then name',
  panel: 'As on the panel'
};

const rank = (verdict: Verdict | null): number =>
  verdict === null ? 2 : { outside: 0, watch: 1, 'too few': 2, inside: 3 }[verdict];
const byName = (a: MassBalanceRow, b: MassBalanceRow): number =>
  a.name.localeCompare(b.name, 'en', { numeric: true });
const byOpen = (a: MassBalanceRow, b: MassBalanceRow): number =>
  (b.open ?? Number.NEGATIVE_INFINITY) - (a.open ?? Number.NEGATIVE_INFINITY) || 0;

/** The rows in the asked order; the given rows stay as they are. */
export function orderMassBalance(
  rows: readonly MassBalanceRow[],
  order: MassBalanceOrder
): readonly MassBalanceRow[] {
  if (order === 'panel') return rows;
  const compare: Record<Exclude<MassBalanceOrder, 'panel'>, typeof byName> = {
    verdict: (a, b) => rank(a.verdict) - rank(b.verdict) || byOpen(a, b) || byName(a, b),
    open: (a, b) => byOpen(a, b) || byName(a, b),
    name: byName,
    class: (a, b) => a.class.localeCompare(b.class, 'en') || byName(a, b)
  };
  return [...rows].sort(compare[order]);
}
