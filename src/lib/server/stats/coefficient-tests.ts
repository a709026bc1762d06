import type { CalibrationFit } from './calibration';
import { studentTwoSided } from './distributions';
import { StatsError } from './errors';
import { finite, finiteValues, sameLength } from './guards';

/**
 * For each coefficient of a curve the two-sided p of "it is zero": t = b/se(b) with the degrees of freedom of the fit. Null
 * where the standard error is zero. A large p of the highest power says that a simpler curve would do as well; a small one of the
 * constant, that the curve does not go through zero.
 *
 * @throws StatsError for no coefficient, a figure that is not finite, lists of different length, or no degree of freedom.
 * Source: as in R's `summary(lm)`.
 */
export function coefficientTests(
  fit: Pick<CalibrationFit, 'coefficients' | 'standardErrors' | 'df'>
): (number | null)[] {
  finiteValues(fit.coefficients, 'Coefficients');
  finiteValues(fit.standardErrors, 'Standard errors');
  sameLength(fit.standardErrors.length, fit.coefficients.length, 'Standard errors');
  if (finite(fit.df, 'Degrees of freedom') < 1) {
    throw new StatsError('too-few-values', `Degrees of freedom: ${fit.df} given, at least 1 needed.`);
  }
  return fit.coefficients.map((coefficient, index) => {
    const t = coefficient / (fit.standardErrors[index] ?? 0);
    return Number.isFinite(t) ? studentTwoSided(t, fit.df) : null;
  });
}
