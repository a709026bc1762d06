import { rsdInterval, relative, sdInterval } from './describe';
import { StatsError } from './errors';
import {
  countNotDetected,
  readFractions,
  requireFractionNames,
  rowSums,
  splitComplete,
  type FractionRecord,
  type FractionTable
} from './fraction-values';
import { fractionOfOne, sameLength } from './guards';
import { takeApart, varianceTerms } from './net-mean';
import type { Description, Estimate, Sample } from './types';
import { linearEstimate } from './variance-terms';

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
  const spiked = readFractions(replicates, names, 'Replicate');
  const unspiked = native ? readFractions(native, names, 'Native portion') : null;

  const all = names.map((_, column) => column);
  const ofMethod = all.filter((column) => fractions[column]!.countsAs === 'method');
  const methodRows = splitComplete(spiked, ofMethod);
  const allRows = splitComplete(spiked, all);

  const select = (columns: readonly number[], rows: readonly number[], complete: readonly number[]) =>
    describeTotal({ spiked, unspiked, columns, rows, complete, input, level });

  const method = ofMethod.length > 0 ? select(ofMethod, methodRows.complete, ofMethod) : null;
  const balance = select(all, allRows.complete, all);
  return {
    fractions: balance === null ? [] : all.map((column) => fractionFigure(column, balance)),
    method,
    balance,
    unaccounted: balance === null ? null : unaccountedOf(balance),
    incomplete: { method: methodRows.incomplete, balance: allRows.incomplete }
  };

  function fractionFigure(column: number, whole: Total): FractionFigure {
    const { df: _df, high: _high, ...figure } = select([column], allRows.complete, all)!;
    const withoutIntervals = figure.notDetected > 0 ? { ci: null, sdCi: null, rsdCi: null } : {};
    return {
      ...figure,
      ...withoutIntervals,
      name: names[column]!,
      countsAs: fractions[column]!.countsAs,
      share: whole.mean > 0 ? figure.mean / whole.mean : null
    };
  }
}

type Selection = {
  readonly spiked: FractionTable;
  readonly unspiked: FractionTable | null;
  /** Columns that are summed. */
  readonly columns: readonly number[];
  /** Spiked replicates used. */
  readonly rows: readonly number[];
  /** Columns in which a native portion has to be complete. */
  readonly complete: readonly number[];
  readonly input: MassBalanceInput;
  readonly level: number;
};

/** The description of per-replicate sums; null when no replicate, or no native portion, is complete. */
function describeTotal(selection: Selection): Total | null {
  const { spiked, unspiked, columns, rows, complete, input, level } = selection;
  const nativeRows = unspiked ? splitComplete(unspiked, complete).complete : [];
  if (rows.length === 0 || (unspiked && nativeRows.length === 0)) return null;

  const sample: Sample = {
    values: rowSums(spiked, rows, columns, 'low'),
    native: unspiked ? rowSums(unspiked, nativeRows, columns, 'low') : undefined,
    batches: input.batches && rows.map((row) => input.batches![row]!),
    nativeBatches:
      unspiked && input.nativeBatches ? nativeRows.map((row) => input.nativeBatches![row]!) : undefined
  };
  const taken = takeApart(sample);
  const { net } = taken;
  const { se, df, ci } = linearEstimate(net.mean, varianceTerms([{ weight: 1, of: taken }]), level);
  const notDetected = countNotDetected(spiked, rows, columns);
  const high =
    notDetected === 0
      ? net.mean
      : takeApart({ ...sample, values: rowSums(spiked, rows, columns, 'high') }).mean;
  return {
    n: net.n,
    mean: net.mean,
    sd: net.sd,
    rsd: relative(net.sd, net.mean),
    se,
    min: net.min,
    max: net.max,
    ci,
    sdCi: sdInterval(net.sd, net.n, level),
    rsdCi: rsdInterval(net.sd, net.mean, net.n, level),
    df,
    high,
    notDetected
  };
}

function unaccountedOf(balance: Total): Estimate & { significant: boolean } {
  const estimate = 100 - balance.mean;
  const { ci } = balance;
  const excludesZero = ci !== null && (ci.lower > 100 || ci.upper < 100);
  const atLimits = 100 - balance.high;
  return {
    estimate,
    se: balance.se,
    df: balance.df,
    ci: ci && { lower: 100 - ci.upper, upper: 100 - ci.lower, level: ci.level },
    significant: excludesZero && atLimits !== 0 && Math.sign(atLimits) === Math.sign(estimate)
  };
}
