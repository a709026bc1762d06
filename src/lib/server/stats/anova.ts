import { median } from 'simple-statistics';
import { fisherUpper } from './distributions';
import { StatsError } from './errors';
import { finiteGroups } from './guards';
import { moments } from './moments';

export type VarianceLine = { readonly ss: number; readonly df: number; readonly ms: number };

export type OneWayAnova = {
  readonly between: VarianceLine;
  readonly within: VarianceLine;
  /** Null when nothing varies within the groups. */
  readonly f: number | null;
  readonly p: number | null;
};

/**
 * One-way analysis of variance over groups of any size: between = sum n_i (mean_i - mean)^2, within = sum (x - mean_i)^2,
 * F = between mean square/within mean square. Squares are in the squared unit of the values.
 *
 * Values are first taken relative to the first of them, which is exact for values that agree in their leading digits.
 *
 * @throws StatsError for fewer than two groups, an empty group, no more values than groups, non-finite values.
 */
export function oneWayAnova(groups: readonly (readonly number[])[]): OneWayAnova {
  finiteGroups(groups, 'Groups');
  const origin = groups[0]![0]!;
  const described = groups.map((group) => moments(group.map((value) => value - origin)));
  const total = described.reduce((sum, group) => sum + group.n, 0);
  const dfWithin = total - groups.length;
  if (dfWithin === 0) {
    throw new StatsError('too-few-values', 'Groups: one value in each, at least one group needs two.');
  }
  const grand = described.reduce((sum, group) => sum + group.n * group.mean, 0) / total;
  const ssBetween = described.reduce((sum, group) => sum + group.n * (group.mean - grand) ** 2, 0);
  const ssWithin = described.reduce((sum, group) => sum + (group.variance ?? 0) * (group.n - 1), 0);
  const between = line(ssBetween, groups.length - 1);
  const within = line(ssWithin, dfWithin);
  const f = within.ms > 0 ? between.ms / within.ms : null;
  if (f === null || !Number.isFinite(f)) return { between, within, f: null, p: null };
  return { between, within, f, p: fisherUpper(f, between.df, within.df) };
}

export type BrownForsythe = {
  /** Null when no group has absolute deviations that vary. */
  readonly f: number | null;
  readonly df1: number;
  readonly df2: number;
  readonly p: number | null;
};

/**
 * Brown and Forsythe's test of equal variances: one-way analysis of variance on absolute deviations from the group medians.
 *
 * @throws StatsError for fewer than two groups, a group of fewer than two values, non-finite values.
 * Source: M. B. Brown and A. B. Forsythe, J. Am. Stat. Assoc. 69 (1974) 364.
 */
export function brownForsythe(groups: readonly (readonly number[])[]): BrownForsythe {
  finiteGroups(groups, 'Groups', 2, 2);
  const deviations = groups.map((group) => {
    const middle = median([...group]);
    return group.map((value) => Math.abs(value - middle));
  });
  const { between, within, f, p } = oneWayAnova(deviations);
  return { f, df1: between.df, df2: within.df, p };
}

function line(ss: number, df: number): VarianceLine {
  return { ss, df, ms: ss / df };
}
