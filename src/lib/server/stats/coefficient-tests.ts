import type { CalibrationFit } from './calibration';
import { studentTwoSided } from './distributions';

/**
 * For each coefficient of a curve the two-sided p of "it is zero": t = b/se(b) with the degrees of freedom of the fit. Null
 * where the standard error is zero. A large p of the highest power says that a simpler curve would do as well; a small one of the
 * constant, that the curve does not go through zero.
 *
 * Source: as in R's `summary(lm)`.
 */
export function coefficientTests(
  fit: Pick<CalibrationFit, 'coefficients' | 'standardErrors' | 'df'>
): (number | null)[] {
  return fit.coefficients.map((coefficient, index) => {
    const t = coefficient / (fit.standardErrors[index] ?? 0);
    return Number.isFinite(t) ? studentTwoSided(t, fit.df) : null;
  });
}
