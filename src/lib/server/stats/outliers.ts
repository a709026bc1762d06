import { studentUpper } from './distributions';
import { StatsError } from './errors';
import { fisherQuantile, studentQuantile } from './quantiles';
import { finiteGroups, finiteValues, fractionOfOne } from './guards';
import { moments } from './moments';

/** An outlier test only points; nothing is ever removed by it. */
export type GrubbsResult = {
  /** Null when all values are equal. */
  readonly statistic: number | null;
  readonly critical: number;
  readonly p: number | null;
  /** Index (from 0) of the value pointed at. */
  readonly index: number | null;
  readonly outlier: boolean;
  readonly note: string | null;
};

/**
 * Grubbs' test for one outlying value: G = max|x - mean|/s (`both`), (mean - min)/s (`low`) or (max - mean)/s (`high`), held
 * against (n - 1)/sqrt(n) sqrt(t^2/(n - 2 + t^2)), t the upper a/(2n) (both) or a/n quantile with n - 2 degrees of freedom.
 * `p` is Bonferroni's bound, exact for the larger half of G. Assumes normal values and at most one outlier.
 *
 * @throws StatsError for fewer than three values, one that is not finite, or alpha outside 0 to 1.
 * Source: F. E. Grubbs, Technometrics 11 (1969) 1; NIST/SEMATECH e-Handbook 1.3.5.17.
 */
export function grubbs(
  values: readonly number[],
  options: { readonly alpha?: number; readonly side?: 'both' | 'low' | 'high' } = {}
): GrubbsResult {
  const { alpha = 0.05, side = 'both' } = options;
  finiteValues(values, 'Values', 3);
  fractionOfOne(alpha, 'Significance level');
  if (side !== 'both' && side !== 'low' && side !== 'high') {
    throw new StatsError('out-of-range', `Side must be both, low or high, found "${String(side)}".`);
  }
  const { n, mean, sd, min, max } = moments(values);
  const chances = side === 'both' ? 2 * n : n;
  const t = studentQuantile(alpha / chances, n - 2);
  const critical = ((n - 1) / Math.sqrt(n)) * Math.sqrt((t * t) / (n - 2 + t * t));
  if (!(sd! > 0)) {
    return { statistic: null, critical, p: null, index: null, outlier: false, note: 'All values are equal.' };
  }
  const low = side === 'low' || (side === 'both' && mean - min > max - mean);
  const extreme = low ? min : max;
  const statistic = (low ? mean - extreme : extreme - mean) / sd!;
  // The largest possible G is (n - 1)/sqrt(n); rounding may pass it by a hair.
  const room = Math.max(0, (n - 1) ** 2 - n * statistic * statistic);
  const p =
    room === 0 ? 0 : Math.min(1, chances * studentUpper(statistic * Math.sqrt((n * (n - 2)) / room), n - 2));
  return {
    statistic,
    critical,
    p,
    index: values.indexOf(extreme),
    outlier: statistic > critical,
    note: n === 3 ? 'With three values the test says next to nothing: its limit is almost its ceiling.' : null
  };
}

export type CochranResult = {
  /** Null when no group scatters. */
  readonly statistic: number | null;
  readonly critical: number;
  /** Index (from 0) of the group with the largest variance. */
  readonly index: number | null;
  readonly outlier: boolean;
  readonly note: string | null;
};

/**
 * Cochran's test for one variance that stands out: C = max s^2/sum s^2 over k groups, held against 1/(1 + (k - 1)/F), F the upper
 * a/k quantile with n - 1 and (k - 1)(n - 1) degrees of freedom. For groups of unequal size the mean size is used, and noted.
 *
 * @throws StatsError for fewer than two groups, a group of fewer than two values, non-finite values, alpha outside 0 to 1.
 * Source: W. G. Cochran, Ann. Eugen. 11 (1941) 47; ISO 5725-2 (from memory).
 */
export function cochran(groups: readonly (readonly number[])[], alpha = 0.05): CochranResult {
  finiteGroups(groups, 'Groups', 2, 2);
  fractionOfOne(alpha, 'Significance level');
  const k = groups.length;
  const size = groups.reduce((sum, group) => sum + group.length, 0) / k;
  const f = fisherQuantile(alpha / k, size - 1, (k - 1) * (size - 1));
  const critical = 1 / (1 + (k - 1) / f);
  const variances = groups.map((group) => moments(group).variance!);
  const largest = Math.max(...variances);
  const total = variances.reduce((sum, variance) => sum + variance, 0);
  if (!(total > 0)) {
    return { statistic: null, critical, index: null, outlier: false, note: 'No group scatters.' };
  }
  const statistic = largest / total;
  return {
    statistic,
    critical,
    index: variances.indexOf(largest),
    outlier: statistic > critical,
    note: groups.some((group) => group.length !== size)
      ? `Groups differ in size; their mean size ${Number(size.toPrecision(3))} stands for all.`
      : null
  };
}
