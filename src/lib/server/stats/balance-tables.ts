import { relative, rsdInterval, sdInterval } from './describe';
import { countNotDetected, rowSums, splitComplete, type FractionTable } from './fraction-values';
import type { CountsAs, FractionFigure, MassBalance, Total } from './mass-balance';
import { ownEstimate, takeApart } from './net-mean';
import type { Estimate, Sample } from './types';

/** One analyte of one experiment, read and checked. */
export type BalanceTables = {
  readonly spiked: FractionTable;
  readonly unspiked: FractionTable | null;
  readonly fractions: readonly { readonly name: string; readonly countsAs: CountsAs }[];
  readonly batches: readonly string[] | undefined;
  readonly nativeBatches: readonly string[] | undefined;
  readonly level: number;
};

/** The figures of a mass balance, and the per-replicate method totals they rest on (null where there are none). */
export type Balanced = { readonly figures: MassBalance; readonly methodSample: Sample | null };

/** Mass balance of tables; see massBalance for what each figure is. */
export function balanceTables(tables: BalanceTables): Balanced {
  const { spiked, fractions } = tables;
  const all = fractions.map((_, column) => column);
  const ofMethod = all.filter((column) => fractions[column]!.countsAs === 'method');
  const methodRows = splitComplete(spiked, ofMethod);
  const allRows = splitComplete(spiked, all);
  const nativeRows = tables.unspiked && splitComplete(tables.unspiked, all).complete;

  const methodSample =
    ofMethod.length > 0
      ? sampleOf(
          tables,
          ofMethod,
          methodRows.complete,
          tables.unspiked && splitComplete(tables.unspiked, ofMethod).complete
        )
      : null;
  const method = methodSample && describeTotal(tables, methodSample, ofMethod, methodRows.complete);
  const balance = figuresOf(all);
  const figures: MassBalance = {
    fractions: balance === null ? [] : all.map((column) => fractionFigure(column, balance)),
    method,
    balance,
    unaccounted: balance === null ? null : unaccountedOf(balance),
    incomplete: { method: methodRows.incomplete, balance: allRows.incomplete }
  };
  return { figures, methodSample };

  function figuresOf(columns: readonly number[]): Total | null {
    const sample = sampleOf(tables, columns, allRows.complete, nativeRows);
    return sample && describeTotal(tables, sample, columns, allRows.complete);
  }

  /** Fields one by one: spreading objects would take most of the time of a study. */
  function fractionFigure(column: number, whole: Total): FractionFigure {
    const figure = figuresOf([column])!;
    const known = figure.notDetected === 0;
    return {
      n: figure.n,
      mean: figure.mean,
      sd: figure.sd,
      rsd: figure.rsd,
      se: figure.se,
      min: figure.min,
      max: figure.max,
      ci: known ? figure.ci : null,
      sdCi: known ? figure.sdCi : null,
      rsdCi: known ? figure.rsdCi : null,
      name: fractions[column]!.name,
      countsAs: fractions[column]!.countsAs,
      share: whole.mean > 0 ? figure.mean / whole.mean : null,
      notDetected: figure.notDetected
    };
  }
}

/**
 * Per-replicate sums over columns as a sample, with those of the native portions. Null when no replicate, or no native portion, is
 * complete.
 */
function sampleOf(
  tables: BalanceTables,
  columns: readonly number[],
  rows: readonly number[],
  nativeRows: readonly number[] | null
): Sample | null {
  const { spiked, unspiked, batches, nativeBatches } = tables;
  if (rows.length === 0) return null;
  const values = rowSums(spiked, rows, columns, 'low');
  if (!unspiked || nativeRows === null) return { values };
  if (nativeRows.length === 0) return null;
  return {
    values,
    native: rowSums(unspiked, nativeRows, columns, 'low'),
    batches: batches && rows.map((row) => batches[row]!),
    nativeBatches: nativeBatches && nativeRows.map((row) => nativeBatches[row]!)
  };
}

function describeTotal(
  { spiked, level }: BalanceTables,
  sample: Sample,
  columns: readonly number[],
  rows: readonly number[]
): Total {
  const taken = takeApart(sample);
  const { n, mean, sd, min, max } = taken.net;
  const { se, df, ci } = ownEstimate(taken, level);
  const notDetected = countNotDetected(spiked, rows, columns);
  const high =
    notDetected === 0 ? mean : takeApart({ ...sample, values: rowSums(spiked, rows, columns, 'high') }).mean;
  return {
    n,
    mean,
    sd,
    rsd: relative(sd, mean),
    se,
    min,
    max,
    ci,
    sdCi: sdInterval(sd, n, level),
    rsdCi: rsdInterval(sd, mean, n, level),
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
