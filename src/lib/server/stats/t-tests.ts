import { studentTwoSided, studentUpper } from './distributions';
import { finite, finiteValues, fractionOfOne, positive } from './guards';
import { meanInterval } from './describe';
import { moments } from './moments';
import type { Interval } from './types';
import { totalVariance, welchSatterthwaite } from './variance-terms';

/** Comparison of means. With a standard error of zero `t` and `p` do not exist and `ci` is the difference itself. */
export type MeanTest = {
  readonly difference: number;
  readonly se: number;
  /** Null when both groups are without scatter. */
  readonly df: number | null;
  readonly t: number | null;
  readonly p: number | null;
  readonly ci: Interval | null;
};

/**
 * Welch's test of two means with unequal variances, two-sided: difference = mean(a) - mean(b),
 * se^2 = s_a^2/n_a + s_b^2/n_b, df by Welch and Satterthwaite. Unit that of the values.
 *
 * @throws StatsError when a group has fewer than two values or one is not finite.
 * Source: B. L. Welch, Biometrika 34 (1947) 28.
 */
export function welch(a: readonly number[], b: readonly number[], level = 0.95): MeanTest {
  fractionOfOne(level, 'Level');
  const { difference, se, df } = welchDifference(a, b);
  return { difference, se, df, ...test(difference, se, df, level) };
}

/**
 * Student's test of a mean against a given value, two-sided: difference = mean - mu, se = s/sqrt(n), df = n - 1.
 *
 * @throws StatsError for fewer than two values or one that is not finite.
 */
export function oneSampleT(values: readonly number[], mu: number, level = 0.95): MeanTest {
  finiteValues(values, 'Values', 2);
  finite(mu, 'Value to compare with');
  fractionOfOne(level, 'Level');
  const { n, mean, sd } = moments(values);
  const difference = mean - mu;
  const se = sd! / Math.sqrt(n);
  return { difference, se, df: n - 1, ...test(difference, se, n - 1, level) };
}

export type Equivalence = {
  readonly difference: number;
  readonly df: number | null;
  /** p of the hypothesis that the difference is at or below -margin, and of that at or above +margin. */
  readonly pLower: number | null;
  readonly pUpper: number | null;
  /** The larger of the two. */
  readonly p: number | null;
  readonly equivalent: boolean;
  /** Interval of the difference at 1 - 2 alpha: inside -+ margin exactly when equivalent. */
  readonly ci: Interval | null;
};

/**
 * Two one-sided Welch tests: are two means equal within -+ margin? Equivalent when the larger p is below alpha, and, without
 * any scatter, when |difference| < margin.
 *
 * @throws StatsError for fewer than two values in a group, a margin not above zero, alpha outside 0 to 0.5.
 * Source: D. J. Schuirmann, J. Pharmacokinet. Biopharm. 15 (1987) 657, with Welch's variance.
 */
export function tost(a: readonly number[], b: readonly number[], margin: number, alpha = 0.05): Equivalence {
  positive(margin, 'Equivalence margin');
  fractionOfOne(2 * finite(alpha, 'Significance level'), 'Twice the significance level');
  const { difference, se, df } = welchDifference(a, b);
  const ci = meanInterval(difference, se, df, 1 - 2 * alpha);
  if (se === 0 || df === null) {
    const equivalent = Math.abs(difference) < margin;
    return { difference, df, pLower: null, pUpper: null, p: null, equivalent, ci };
  }
  const pLower = studentUpper((difference + margin) / se, df);
  const pUpper = studentUpper((margin - difference) / se, df);
  const p = Math.max(pLower, pUpper);
  return { difference, df, pLower, pUpper, p, equivalent: p < alpha, ci };
}

function welchDifference(a: readonly number[], b: readonly number[]) {
  finiteValues(a, 'First group', 2);
  finiteValues(b, 'Second group', 2);
  const first = moments(a);
  const second = moments(b);
  const terms = [first, second].map(({ variance, n }) => ({ variance: variance! / n, df: n - 1 }));
  return {
    difference: first.mean - second.mean,
    se: Math.sqrt(totalVariance(terms)),
    df: welchSatterthwaite(terms)
  };
}

function test(difference: number, se: number, df: number | null, level: number) {
  const ci = meanInterval(difference, se, df, level);
  if (se === 0 || df === null) return { t: null, p: null, ci };
  const t = difference / se;
  return Number.isFinite(t) ? { t, p: studentTwoSided(t, df), ci } : { t: null, p: null, ci };
}
