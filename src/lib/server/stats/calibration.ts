import { rootOf, weightAt } from './calibration-curve';
import { relative } from './describe';
import { StatsError } from './errors';
import { finite } from './guards';
import { leastSquares } from './least-squares';
import { moments } from './moments';

export type CalibrationModel = 'average response factor' | 'linear' | 'quadratic';
export type CalibrationWeighting = 'none' | '1/x' | '1/x2';

export type CalibrationPoint = { readonly x: number; readonly y: number };

export type FittedPoint = CalibrationPoint & {
  readonly fitted: number;
  /** x read back from y on the curve; null when the curve never takes this y. */
  readonly backCalculated: number | null;
  /** 100 (backCalculated - x)/x; null at x = 0. */
  readonly errorPercent: number | null;
};

export type CalibrationFit = {
  readonly model: CalibrationModel;
  readonly weighting: CalibrationWeighting;
  /** Ascending powers of x; for the average response factor its one figure. */
  readonly coefficients: number[];
  readonly standardErrors: number[];
  readonly covariance: number[][];
  /** sqrt(sum(w (y - fitted)^2)/df): the SD of y where the weight is 1. */
  readonly residualSd: number;
  readonly df: number;
  readonly r2: number | null;
  /** Relative standard error of the curve, percent. */
  readonly rse: number | null;
  /** RSD of y/x over the levels, percent; null when a level is 0 or the mean is not above zero. */
  readonly responseFactorRsd: number | null;
  readonly range: [number, number];
  readonly points: FittedPoint[];
};

/** Levels are divided by, squared: below this the result would pass the largest double. */
const smallestLevel = 1e-100;

const coefficientsOf: Record<CalibrationModel, number> = {
  'average response factor': 1,
  linear: 2,
  quadratic: 3
};

/**
 * Fits responses y against levels x (x zero or above, any unit; y likewise).
 *
 * - `average response factor`: y = F x with F = mean(y/x), which is least squares through zero with weights 1/x^2; the fit
 *   says so whatever weighting was asked for. `linear`: y = a + b x. `quadratic`: y = a + b x + c x^2.
 * - Minimises sum w (y - fitted)^2, w = 1, 1/x or 1/x^2, by QR on levels centred and scaled.
 * - `covariance` = residualSd^2 (X'WX)^-1. `r2` = 1 - sum w (y - fitted)^2/sum w (y - weighted mean)^2.
 * - `rse` = 100 sqrt(sum(((x' - x)/x)^2)/(n - p)), x' read back from the curve, p = 1, 2, 3 coefficients; levels at zero are
 *   left out and not counted. Null when no degree of freedom is left for it or a response lies off the curve.
 *
 * @throws StatsError for no more points than coefficients, too few distinct levels, a negative level, a level at zero where
 * it would be divided by, non-finite values.
 * Source: EPA SW-846 Method 8000D, 11.4 to 11.7 (models, weights, % error, RSE).
 */
export function fitCalibration(
  points: readonly CalibrationPoint[],
  options: { readonly model: CalibrationModel; readonly weighting: CalibrationWeighting }
): CalibrationFit {
  const { model } = options;
  const weighting = model === 'average response factor' ? '1/x2' : options.weighting;
  const p = coefficientsOf[model];
  checkPoints(points, model, weighting, p);

  const fit = model === 'average response factor' ? fitAverage(points) : fitPolynomial(points, p, weighting);
  const levels = points.map((point) => point.x);
  const range: [number, number] = [Math.min(...levels), Math.max(...levels)];
  const back = points.map(({ x, y }): FittedPoint => {
    const backCalculated = rootOf(fit.coefficients, model, range, y);
    return {
      x,
      y,
      fitted: y - fit.residual(x, y),
      backCalculated,
      errorPercent: backCalculated === null || x === 0 ? null : (100 * (backCalculated - x)) / x
    };
  });
  const df = points.length - p;
  const residualSd = Math.sqrt(fit.weightedResiduals / df);
  const covariance = fit.unscaledCovariance.map((row) => row.map((value) => value * residualSd * residualSd));
  if (![...fit.coefficients, residualSd, ...covariance.flat()].every(Number.isFinite)) {
    throw new StatsError('out-of-range', 'Levels and responses span more than can be computed.');
  }
  return {
    model,
    weighting,
    coefficients: fit.coefficients,
    standardErrors: covariance.map((row, i) => Math.sqrt(Math.max(0, row[i]!))),
    covariance,
    residualSd,
    df,
    r2: model === 'average response factor' ? null : determination(points, weighting, fit.weightedResiduals),
    rse: relativeStandardError(back, p),
    responseFactorRsd: responseFactorRsd(points),
    range,
    points: back
  };
}

type RawFit = {
  readonly coefficients: number[];
  readonly unscaledCovariance: number[][];
  readonly weightedResiduals: number;
  readonly residual: (x: number, y: number) => number;
};

function fitAverage(points: readonly CalibrationPoint[]): RawFit {
  const { n, mean, variance } = moments(points.map(({ x, y }) => y / x));
  return {
    coefficients: [mean],
    unscaledCovariance: [[1 / n]],
    weightedResiduals: variance! * (n - 1),
    residual: (x, y) => y - mean * x
  };
}

/** Polynomial in u = (x - centre)/scale, then taken back to powers of x with its covariance. */
function fitPolynomial(
  points: readonly CalibrationPoint[],
  p: number,
  weighting: CalibrationWeighting
): RawFit {
  const weights = points.map(({ x }) => weightAt(x, weighting)!);
  const total = weights.reduce((sum, w) => sum + w, 0);
  const centre = points.reduce((sum, { x }, i) => sum + weights[i]! * x, 0) / total;
  const height = points.reduce((sum, { y }, i) => sum + weights[i]! * y, 0) / total;
  const scale = Math.max(...points.map(({ x }) => Math.abs(x - centre)));
  if (!(scale > 0)) {
    throw new StatsError('singular-design', `All ${points.length} points sit at the level ${points[0]!.x}.`);
  }
  const roots = weights.map((w) => Math.sqrt(w / total));
  const powers = Array.from({ length: p }, (_, power) =>
    points.map(({ x }, i) => roots[i]! * ((x - centre) / scale) ** power)
  );
  const local = leastSquares(
    powers,
    points.map(({ y }, i) => roots[i]! * (y - height))
  );

  // Row k of `back`: how the coefficient of x^k is made of those of u^j.
  const back = Array.from({ length: p }, (_, k) =>
    Array.from({ length: p }, (__, j) => (j < k ? 0 : (binomial(j, k) * (-centre) ** (j - k)) / scale ** j))
  );
  const coefficients = back.map((row) => dot(row, local.coefficients));
  coefficients[0] = coefficients[0]! + height;
  const half = back.map((row) => local.unscaledCovariance.map((column) => dot(row, column)));
  return {
    coefficients,
    unscaledCovariance: half.map((row) => back.map((column) => dot(row, column) / total)),
    weightedResiduals: local.residualSumOfSquares * total,
    residual: (x, y) => {
      const u = (x - centre) / scale;
      return y - height - local.coefficients.reduceRight((sum, c) => sum * u + c, 0);
    }
  };
}

function determination(
  points: readonly CalibrationPoint[],
  weighting: CalibrationWeighting,
  weightedResiduals: number
): number | null {
  const weights = points.map(({ x }) => weightAt(x, weighting)!);
  const total = weights.reduce((sum, w) => sum + w, 0);
  const mean = points.reduce((sum, { y }, i) => sum + weights[i]! * y, 0) / total;
  const squares = points.reduce((sum, { y }, i) => sum + weights[i]! * (y - mean) ** 2, 0);
  return squares > 0 ? 1 - weightedResiduals / squares : null;
}

function relativeStandardError(points: readonly FittedPoint[], p: number): number | null {
  const counted = points.filter(({ x }) => x !== 0);
  const df = counted.length - p;
  if (df <= 0) return null;
  let sum = 0;
  for (const { errorPercent } of counted) {
    if (errorPercent === null) return null;
    sum += errorPercent * errorPercent;
  }
  return Number.isFinite(sum) ? Math.sqrt(sum / df) : null;
}

function responseFactorRsd(points: readonly CalibrationPoint[]): number | null {
  if (points.some(({ x }) => x === 0)) return null;
  const { mean, sd } = moments(points.map(({ x, y }) => y / x));
  return relative(sd, mean);
}

function checkPoints(
  points: readonly CalibrationPoint[],
  model: CalibrationModel,
  weighting: CalibrationWeighting,
  p: number | undefined
): void {
  if (p === undefined) {
    throw new StatsError('out-of-range', `The calibration model "${model}" is not one that can be fitted.`);
  }
  if (weighting !== 'none' && weighting !== '1/x' && weighting !== '1/x2') {
    throw new StatsError(
      'out-of-range',
      `The weighting "${String(weighting)}" is none of none, 1/x and 1/x2.`
    );
  }
  if (points.length === 0) throw new StatsError('empty-group', 'No calibration point is given.');
  if (points.length <= p) {
    throw new StatsError(
      'too-few-values',
      `${points.length} calibration points given, at least ${p + 1} needed for the model "${model}".`
    );
  }
  points.forEach(({ x, y }, i) => {
    finite(y, `Response of calibration point ${i + 1}`);
    if (finite(x, `Level of calibration point ${i + 1}`) < 0) {
      throw new StatsError('out-of-range', `Level of calibration point ${i + 1} is below zero: ${x}.`);
    }
    if (x > 0 && x < smallestLevel) {
      throw new StatsError('out-of-range', `Level of calibration point ${i + 1} is too small: ${x}.`);
    }
    if (x === 0 && weighting !== 'none') {
      const why =
        model === 'average response factor' ? 'has no response factor' : `has no weight ${weighting}`;
      throw new StatsError('out-of-range', `Calibration point ${i + 1} at level zero ${why}.`);
    }
  });
}

function dot(a: readonly number[], b: readonly number[]): number {
  let sum = 0;
  for (let i = 0; i < a.length; i += 1) sum += a[i]! * b[i]!;
  return sum;
}

function binomial(n: number, k: number): number {
  let value = 1;
  for (let i = 1; i <= k; i += 1) value = (value * (n - k + i)) / i;
  return value;
}
