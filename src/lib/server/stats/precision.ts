import { oneWayAnova } from './anova';
import { relative } from './describe';
import { moments } from './moments';

export type PrecisionComponents = {
  /** Of all values. */
  readonly mean: number;
  readonly repeatabilitySd: number;
  readonly betweenSd: number;
  readonly intermediateSd: number;
  /** Percent of the mean; null when it is not above zero. */
  readonly repeatabilityRsd: number | null;
  readonly intermediateRsd: number | null;
  readonly f: number | null;
  readonly p: number | null;
  readonly note: string | null;
};

/**
 * Repeatability and intermediate precision from groups (days, batches, analysts) by one-way random-effects analysis of variance:
 * s_r^2 = MS_within; s_between^2 = (MS_between - MS_within)/n0 with n0 = (N - sum n_i^2/N)/(k - 1);
 * intermediate s^2 = s_r^2 + s_between^2. A negative between-group variance counts as zero, and `note` says so.
 *
 * @throws StatsError for fewer than two groups, an empty one, no group with two values, non-finite values.
 * Source: ISO 5725-2 and 5725-3 (from memory).
 */
export function precisionComponents(groups: readonly (readonly number[])[]): PrecisionComponents {
  const { between, within, f, p } = oneWayAnova(groups);
  const total = groups.reduce((sum, group) => sum + group.length, 0);
  const squares = groups.reduce((sum, group) => sum + group.length ** 2, 0);
  const size = (total - squares / total) / (groups.length - 1);
  const variance = (between.ms - within.ms) / size;
  const betweenVariance = Math.max(0, variance);
  const { mean } = moments(groups.flat());
  const repeatabilitySd = Math.sqrt(within.ms);
  const intermediateSd = Math.sqrt(within.ms + betweenVariance);
  return {
    mean,
    repeatabilitySd,
    betweenSd: Math.sqrt(betweenVariance),
    intermediateSd,
    repeatabilityRsd: relative(repeatabilitySd, mean),
    intermediateRsd: relative(intermediateSd, mean),
    f,
    p,
    note: variance < 0 ? 'The between-group variance came out negative and counts as zero.' : null
  };
}
