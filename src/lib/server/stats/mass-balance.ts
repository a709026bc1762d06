import { balanceTables } from './balance-tables';
import { StatsError } from './errors';
import { readFractions, requireFractionNames, type FractionRecord } from './fraction-values';
import { fractionOfOne, sameLength } from './guards';
import type { Description, Estimate } from './types';

export type CountsAs = 'method' | 'balance';

export type MassBalanceInput = {
  /** One record per replicate: fraction name to value in percent of the spike. */
  readonly replicates: readonly FractionRecord[];
  readonly fractions: readonly { readonly name: string; readonly countsAs: CountsAs }[];
  /** One record per unspiked portion, in percent of the same spike. */
  readonly native?: readonly FractionRecord[] | undefined;
  readonly batches?: readonly string[] | undefined;
  readonly nativeBatches?: readonly string[] | undefined;
  readonly level?: number | undefined;
};

export type Total = Description & {
  readonly df: number | null;
  /** Mean with every not-detected value at its limit. */
  readonly high: number;
  readonly notDetected: number;
};

export type FractionFigure = Description & {
  readonly name: string;
  readonly countsAs: CountsAs;
  /** Part of the balance, 0 to 1; null when the balance mean is not above zero. */
  readonly share: number | null;
  readonly notDetected: number;
};

export type MassBalance = {
  readonly fractions: FractionFigure[];
  readonly method: Total | null;
  readonly balance: Total | null;
  readonly unaccounted: (Estimate & { readonly significant: boolean }) | null;
  /** Indices (from 0) of replicates that lack a method fraction, and of those that lack any. */
  readonly incomplete: { readonly method: number[]; readonly balance: number[] };
};

/**
 * Method recovery, mass balance and the fractions they consist of, in percent of the spike.
 *
 * Sums are formed per replicate first and described afterwards, because fractions of one replicate are correlated: an SD
 * of a total put together from the fractions' SDs would be wrong. Method figures use the replicates complete in the
 * method fractions; balance and fractions those complete in all. A missing value (null or absent) makes a replicate
 * incomplete; a not-detected one counts as zero, and at its limit in `high`. Where native portions are given everything
 * is net of them: mean, extremes, shares from net values, se and interval as {@link netMean} forms them, SD that of the
 * net totals. A fraction with a not-detected value has no intervals. `unaccounted` = 100 - balance; it is significant
 * only when its interval excludes zero and 100 - high lies on the same side.
 *
 * @throws StatsError for no replicates or fractions, an empty native list, undeclared or doubled fraction names,
 * non-finite values, batch lists of another length.
 */
export function massBalance(input: MassBalanceInput): MassBalance {
  const { replicates, fractions, native, level = 0.95 } = input;
  fractionOfOne(level, 'Level');
  const names = fractions.map((fraction) => fraction.name);
  requireFractionNames(names);
  if (replicates.length === 0) throw new StatsError('empty-group', 'No replicate is given.');
  if (native?.length === 0) {
    throw new StatsError(
      'empty-group',
      'Native portions: the list is empty. Leave it out when none was measured.'
    );
  }
  if (input.batches) sameLength(input.batches.length, replicates.length, 'Batches of the replicates');
  if (input.nativeBatches && native) {
    sameLength(input.nativeBatches.length, native.length, 'Batches of the native portions');
  }
  return balanceTables({
    spiked: readFractions(replicates, names, 'Replicate'),
    unspiked: native ? readFractions(native, names, 'Native portion') : null,
    fractions,
    batches: input.batches,
    nativeBatches: input.nativeBatches,
    level
  }).figures;
}
