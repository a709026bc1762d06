import { meanInterval } from './describe';
import { studentQuantile } from './quantiles';
import { noEstimate, type Estimate } from './types';

/** One source of variance of a figure and the degrees of freedom it is known with. */
export type VarianceTerm = { readonly variance: number; readonly df: number };

/** The variance of a figure: the sum over its sources. */
export function totalVariance(terms: readonly VarianceTerm[]): number {
  let total = 0;
  for (const term of terms) total += term.variance;
  return total;
}

/**
 * Effective degrees of freedom of a sum of variances, (sum v)^2 / sum(v^2/df). One term keeps its own; terms that are
 * all zero have none (null). Source: Welch, Biometrika 34 (1947) 28; Satterthwaite, Biometrics Bull. 2 (1946) 110.
 */
export function welchSatterthwaite(terms: readonly VarianceTerm[]): number | null {
  if (terms.length === 1) return terms[0]!.df;
  const total = totalVariance(terms);
  if (!(total > 0)) return null;
  let denominator = 0;
  for (const term of terms) {
    const share = term.variance / total;
    denominator += (share * share) / term.df;
  }
  return 1 / denominator;
}

/**
 * Estimate whose interval is symmetric: estimate -+ t se. `terms` null means the variance is unknown; one beyond the largest
 * double counts as unknown too.
 */
export function linearEstimate(
  estimate: number,
  terms: readonly VarianceTerm[] | null,
  level: number
): Estimate {
  if (!Number.isFinite(estimate)) return noEstimate;
  const variance = terms === null ? null : totalVariance(terms);
  if (terms === null || !Number.isFinite(variance)) return { estimate, se: null, df: null, ci: null };
  const se = Math.sqrt(variance!);
  const df = welchSatterthwaite(terms);
  return { estimate, se, df, ci: meanInterval(estimate, se, df, level) };
}

/**
 * Estimate whose interval is symmetric on the log scale: exp(log estimate -+ t se). `terms` are variances of the
 * logarithm, and `se` is that of the logarithm. An estimate that is not above zero, or beyond the largest double, does not exist.
 */
export function logEstimate(
  estimate: number,
  terms: readonly VarianceTerm[] | null,
  level: number
): Estimate {
  if (!(estimate > 0 && Number.isFinite(estimate))) return noEstimate;
  const variance = terms === null ? null : totalVariance(terms);
  if (terms === null || !Number.isFinite(variance)) return { estimate, se: null, df: null, ci: null };
  const se = Math.sqrt(variance!);
  const df = welchSatterthwaite(terms);
  if (se === 0) return { estimate, se, df, ci: { lower: estimate, upper: estimate, level } };
  if (df === null) return { estimate, se, df, ci: null };
  const factor = Math.exp(studentQuantile((1 - level) / 2, df) * se);
  // A factor beyond the largest double means the interval says nothing: it does not exist.
  const upper = estimate * factor;
  const ci = Number.isFinite(upper) ? { lower: estimate / factor, upper, level } : null;
  return { estimate, se, df, ci };
}
