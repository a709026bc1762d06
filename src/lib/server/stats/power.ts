import { chiSquareCdf } from './distributions';
import { chiSquareQuantile, studentQuantile } from './quantiles';
import { StatsError } from './errors';
import { finite, fractionOfOne, positive } from './guards';
import { noncentralUpper } from './noncentral-t';

/** More preparations than this are not a plan. */
const mostReplicates = 1_000_000;

export type Sides = 1 | 2;

/**
 * Chance that a two-sample t test with n values per group finds a difference of means, at the common SD `sd` (both in one unit):
 * P(|T'| > t(1 - alpha/2)) with T' noncentral t, 2n - 2 degrees of freedom, noncentrality |difference|/(sd sqrt(2/n)). Both
 * tails count when `sides` is 2; one-sided tests look in the direction of the difference.
 *
 * @throws StatsError for n below 2, sd not above zero, alpha outside 0 to 1, sides other than 1 or 2.
 */
export function powerTwoSample(plan: {
  readonly difference: number;
  readonly sd: number;
  readonly n: number;
  readonly alpha?: number;
  readonly sides?: Sides;
}): number {
  const { alpha = 0.05, sides = 2 } = plan;
  const difference = Math.abs(finite(plan.difference, 'Difference'));
  positive(plan.sd, 'SD');
  fractionOfOne(alpha, 'Significance level');
  if (finite(plan.n, 'Replicates per group') < 2) {
    throw new StatsError('too-few-values', `Replicates per group: ${plan.n} given, at least 2 needed.`);
  }
  if (sides !== 1 && sides !== 2) {
    throw new StatsError('out-of-range', `Sides must be 1 or 2, found ${String(sides)}.`);
  }
  const df = 2 * plan.n - 2;
  const noncentrality = difference / (plan.sd * Math.sqrt(2 / plan.n));
  const critical = studentQuantile(alpha / sides, df);
  const near = noncentralUpper(critical, df, noncentrality);
  const far = sides === 2 ? noncentralUpper(critical, df, -noncentrality) : 0;
  return Math.min(1, near + far);
}

/**
 * Smallest number of replicates per group with which {@link powerTwoSample} reaches `power`.
 *
 * @throws StatsError for a difference of zero, or when more than a million would be needed.
 */
export function replicatesForDifference(plan: {
  readonly difference: number;
  readonly sd: number;
  readonly power?: number;
  readonly alpha?: number;
  readonly sides?: Sides;
}): number {
  const { power = 0.8 } = plan;
  fractionOfOne(power, 'Power');
  if (finite(plan.difference, 'Difference') === 0) {
    throw new StatsError('out-of-range', 'Difference is zero: no number of replicates would find it.');
  }
  return smallest((n) => powerTwoSample({ ...plan, n }) >= power);
}

/**
 * Smallest n with t(n - 1) sd/sqrt(n) <= halfWidth: replicates for an interval of the mean no wider than +- halfWidth, were the
 * SD of those replicates exactly `sd` (same unit).
 *
 * @throws StatsError for sd or half width not above zero, or when more than a million would be needed.
 */
export function replicatesForHalfWidth(plan: {
  readonly sd: number;
  readonly halfWidth: number;
  readonly level?: number;
}): number {
  const { level = 0.95 } = plan;
  positive(plan.sd, 'SD');
  positive(plan.halfWidth, 'Half width');
  fractionOfOne(level, 'Level');
  const tail = (1 - level) / 2;
  return smallest((n) => (studentQuantile(tail, n - 1) * plan.sd) / Math.sqrt(n) <= plan.halfWidth);
}

/**
 * Smallest n that shows, with chance `power`, an RSD at or below `limit` when it truly is `rsd` (both in percent): with v = n - 1
 * the least n with P(chi-square_v <= chi-square_(v, alpha) (limit/rsd)^2) >= power.
 *
 * @throws StatsError when rsd is at or above the limit, or when more than a million would be needed.
 */
export function replicatesForRsd(plan: {
  readonly rsd: number;
  readonly limit: number;
  readonly power?: number;
  readonly alpha?: number;
}): number {
  const { power = 0.8, alpha = 0.05 } = plan;
  positive(plan.rsd, 'RSD');
  positive(plan.limit, 'Limit of the RSD');
  fractionOfOne(power, 'Power');
  fractionOfOne(alpha, 'Significance level');
  if (plan.rsd >= plan.limit) {
    throw new StatsError(
      'out-of-range',
      `RSD ${plan.rsd} is not below the limit ${plan.limit}: no number of replicates would show it.`
    );
  }
  const stretch = (plan.limit / plan.rsd) ** 2;
  return smallest((n) => chiSquareCdf(chiSquareQuantile(alpha, n - 1) * stretch, n - 1) >= power);
}

/** Least n from 2 on for which `reached` holds; `reached` stays true once it is. */
function smallest(reached: (n: number) => boolean): number {
  let low = 1;
  let high = 2;
  while (!reached(high)) {
    if (high >= mostReplicates) {
      throw new StatsError('out-of-range', `More than ${mostReplicates} replicates would be needed.`);
    }
    low = high;
    high = Math.min(2 * high, mostReplicates);
  }
  while (high - low > 1) {
    const middle = Math.floor((low + high) / 2);
    if (reached(middle)) high = middle;
    else low = middle;
  }
  return high;
}
