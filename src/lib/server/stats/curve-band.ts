import type { CalibrationFit } from './calibration';
import { curveVariance, heightAt, powersOf, slopeAt, weightAt } from './calibration-curve';
import { StatsError } from './errors';
import { finite, finiteValues, fractionOfOne } from './guards';
import { studentQuantile } from './quantiles';
import type { Interval } from './types';

/** The curve at one x, in the unit of the responses. */
export type BandPoint = {
  readonly x: number;
  readonly height: number;
  /** Where the curve itself lies. */
  readonly confidence: Interval;
  /** Where one further response at x would lie; null where a weighted curve has no weight (x not above zero). */
  readonly prediction: Interval | null;
};

/**
 * A fitted curve at each x with its pointwise bands, two-sided at `level`:
 *
 * - confidence: height -+ t(df) sqrt(g' Cov g), g the derivatives of the height in the coefficients;
 * - prediction: height -+ t(df) sqrt(residualSd^2/w(x) + g' Cov g), with w the weighting of the fit.
 *
 * The bands are those of each x by itself, not of all at once.
 *
 * @throws StatsError for no x, one that is not finite or so far out that its height is not, or a level outside 0 to 1.
 * Source: weighted least squares theory; the same as `predict` of an `lm` in R with `interval` and `weights`.
 */
export function curveBand(fit: CalibrationFit, xs: readonly number[], level = 0.95): BandPoint[] {
  const t = studentQuantile((1 - fractionOfOne(level, 'Level of the band')) / 2, fit.df);
  const powers = powersOf(fit.coefficients, fit.model);
  finiteValues(xs, 'Levels of the band');
  return xs.map((x) => {
    const height = heightAt(powers, x);
    const curve = curveVariance(fit, x);
    const weight = weightAt(x, fit.weighting);
    const around = (variance: number): Interval => {
      const half = t * Math.sqrt(variance);
      if (!Number.isFinite(half) || !Number.isFinite(height)) {
        throw new StatsError('out-of-range', `Level ${x} is too far out for a band.`);
      }
      return { lower: height - half, upper: height + half, level };
    };
    return {
      x,
      height,
      confidence: around(curve),
      prediction: weight === null ? null : around(curve + fit.residualSd ** 2 / weight)
    };
  });
}

/**
 * True when the curve only rises, or only falls, between the lowest and the highest level: one response then belongs to one
 * level. A curve of second order has a straight slope, so its two ends decide.
 *
 * @throws StatsError for a coefficient or a range that is not finite.
 * Source: EPA SW-846 Method 8000D, 11.5 (the tangents of a curve keep one sign over the range).
 */
export function runsOneWay(fit: Pick<CalibrationFit, 'model' | 'coefficients' | 'range'>): boolean {
  finiteValues(fit.coefficients, 'Coefficients of the curve');
  finiteValues(fit.range, 'Range of the curve', 2);
  const powers = powersOf(fit.coefficients, fit.model);
  return slopeAt(powers, fit.range[0]) * slopeAt(powers, fit.range[1]) > 0;
}

/**
 * Half of the two-sided interval of a level that one response reads, where that response lies on the curve at x: t(df) times the
 * standard error of `solveCalibration` there, sqrt(residualSd^2/w(x) + g' Cov g)/|slope|, in the unit of x. Null where the weight or
 * the slope is none, or the level too far out.
 *
 * @throws StatsError for an x that is not finite, or a level outside 0 to 1.
 * Source: the delta method; for a straight line the textbook formula of inverse prediction.
 */
export function readingHalfWidth(fit: CalibrationFit, x: number, level = 0.95): number | null {
  const t = studentQuantile((1 - fractionOfOne(level, 'Level of the interval')) / 2, fit.df);
  const weight = weightAt(finite(x, 'Level'), fit.weighting);
  const slope = slopeAt(powersOf(fit.coefficients, fit.model), x);
  if (weight === null || slope === 0) return null;
  const half = (t * Math.sqrt(fit.residualSd ** 2 / weight + curveVariance(fit, x))) / Math.abs(slope);
  return Number.isFinite(half) ? half : null;
}
