import type { CalibrationFit } from './calibration';
import { curveVariance, heightAt, powersOf, rootOf, slopeAt, weightAt } from './calibration-curve';
import { StatsError } from './errors';
import { finite } from './guards';

export type SolvedLevel = {
  /** Null when the curve never takes this response. Given outside the range too. */
  readonly x: number | null;
  readonly se: number | null;
  readonly df: number | null;
  readonly outside: 'below' | 'above' | null;
};

/**
 * Reads a level x from a response y (the mean of `replicates` measurements) on a fitted curve.
 *
 * se^2 = (residualSd^2/(w(x) replicates) + g' Cov g)/slope^2 with g the derivatives of the height in the coefficients: the delta
 * method, for a straight line the textbook formula (s/b) sqrt(1/m + 1/n + (y - mean y)^2/(b^2 Sxx)). Of two roots the one in
 * range, else the nearest. Below zero a weighted curve has no weight, so se is null there; where the slope is zero too.
 *
 * @throws StatsError for a response that is not finite or a number of replicates below 1.
 */
export function solveCalibration(
  fit: CalibrationFit,
  y: number,
  options: { readonly replicates?: number } = {}
): SolvedLevel {
  finite(y, 'Response');
  const replicates = finite(options.replicates ?? 1, 'Number of replicate measurements');
  if (replicates < 1) {
    throw new StatsError(
      'out-of-range',
      `Number of replicate measurements must be at least 1, found ${replicates}.`
    );
  }
  const powers = powersOf(fit.coefficients, fit.model);
  const x = rootOf(fit.coefficients, fit.model, fit.range, y);
  if (x === null) return { x, se: null, df: null, outside: sideOf(powers, fit.range, y) };

  const outside = x < fit.range[0] ? 'below' : x > fit.range[1] ? 'above' : null;
  const weight = weightAt(x, fit.weighting);
  const slope = slopeAt(powers, x);
  if (weight === null || slope === 0) return { x, se: null, df: null, outside };
  const variance = fit.residualSd ** 2 / (weight * replicates) + curveVariance(fit, x);
  const se = Math.sqrt(variance) / Math.abs(slope);
  return Number.isFinite(se) ? { x, se, df: fit.df, outside } : { x, se: null, df: null, outside };
}

/** On which side of the range a response lies that the curve never reaches. */
function sideOf(
  powers: readonly number[],
  range: readonly [number, number],
  y: number
): 'below' | 'above' | null {
  const start = heightAt(powers, range[0]);
  const end = heightAt(powers, range[1]);
  if (start === end) return null;
  return y > Math.max(start, end) === end > start ? 'above' : 'below';
}
