import { chiSquareQuantile, chiSquareUpperQuantile, studentQuantile } from './quantiles';
import { finiteValues, fractionOfOne } from './guards';
import { moments } from './moments';
import type { Description, Interval } from './types';

/**
 * Describes replicate values: count, mean, SD, RSD, standard error, extremes and three intervals.
 *
 * - `sd` = sqrt(sum((x - mean)^2)/(n - 1)), in the unit of the values; `rsd` = 100 sd/mean in percent.
 * - `ci` of the mean: mean -+ t(n - 1) sd/sqrt(n). `sdCi`: sd sqrt((n - 1)/chi-square). `rsdCi`: see {@link rsdInterval}.
 * - One value has no `sd`, `se` or interval; a mean that is not above zero has no `rsd`.
 *
 * @throws StatsError when empty, when a value is not finite, or when the level is not between 0 and 1.
 * Source: textbook formulas; RSD interval Vangel, Am. Stat. 50 (1996) 21.
 */
export function describe(values: readonly number[], level = 0.95): Description {
  finiteValues(values, 'Values to describe');
  fractionOfOne(level, 'Level');
  const { n, mean, sd, min, max } = moments(values);
  const se = sd === null ? null : sd / Math.sqrt(n);
  return {
    n,
    mean,
    sd,
    rsd: relative(sd, mean),
    se,
    min,
    max,
    ci: meanInterval(mean, se, n - 1, level),
    sdCi: sdInterval(sd, n, level),
    rsdCi: rsdInterval(sd, mean, n, level)
  };
}

/** 100 sd/mean, or null when there is no SD or the mean is not above zero. */
export function relative(sd: number | null, mean: number): number | null {
  if (sd === null || !(mean > 0)) return null;
  const rsd = (100 * sd) / mean;
  return Number.isFinite(rsd) ? rsd : null;
}

/** estimate -+ t(df) se; a standard error of zero gives the point itself, whatever df. */
export function meanInterval(
  estimate: number,
  se: number | null,
  df: number | null,
  level: number
): Interval | null {
  if (se === null) return null;
  if (se === 0) return { lower: estimate, upper: estimate, level };
  if (df === null) return null;
  const half = studentQuantile((1 - level) / 2, df) * se;
  // With hardly any degrees of freedom the quantile passes the largest double: no interval.
  if (!Number.isFinite(half)) return null;
  return { lower: estimate - half, upper: estimate + half, level };
}

/** Chi-square interval of a standard deviation from n normal values. */
export function sdInterval(sd: number | null, n: number, level: number): Interval | null {
  if (sd === null) return null;
  const tail = (1 - level) / 2;
  return {
    lower: sd * Math.sqrt((n - 1) / chiSquareUpperQuantile(tail, n - 1)),
    upper: sd * Math.sqrt((n - 1) / chiSquareQuantile(tail, n - 1)),
    level
  };
}

/**
 * Vangel's modification of McKay's interval for a relative standard deviation, in percent: with k = sd/mean and
 * v = n - 1 the bounds are k/sqrt(((u + 2)/n - 1) k^2 + u/v), u the 1 - a/2 chi-square quantile for the lower and the
 * a/2 quantile for the upper bound. Null when a bound does not exist (few, widely scattered values).
 * Source: M. G. Vangel, The American Statistician 50 (1996) 21-26.
 */
export function rsdInterval(sd: number | null, mean: number, n: number, level: number): Interval | null {
  const rsd = relative(sd, mean);
  if (rsd === null) return null;
  const tail = (1 - level) / 2;
  const lower = vangelBound(rsd, n, chiSquareUpperQuantile(tail, n - 1));
  const upper = vangelBound(rsd, n, chiSquareQuantile(tail, n - 1));
  return lower === null || upper === null ? null : { lower, upper, level };
}

/** One-sided upper bound of an RSD in percent at `level`, in Vangel's form; null when none is finite. */
export function rsdUpperBound(rsd: number, n: number, level: number): number | null {
  return vangelBound(rsd, n, chiSquareQuantile(1 - level, n - 1));
}

function vangelBound(rsd: number, n: number, u: number): number | null {
  const k = rsd / 100;
  const radicand = ((u + 2) / n - 1) * k * k + u / (n - 1);
  return radicand > 0 ? rsd / Math.sqrt(radicand) : null;
}
