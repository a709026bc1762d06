import type { CalibrationFit, CalibrationModel, CalibrationWeighting } from './calibration';

/** Weight of a level: 1, 1/x or 1/x^2; null where it does not exist. */
export function weightAt(x: number, weighting: CalibrationWeighting): number | null {
  if (weighting === 'none') return 1;
  if (!(x > 0)) return null;
  return weighting === '1/x' ? 1 / x : 1 / (x * x);
}

/** Coefficients in ascending powers of x, the constant included. */
export function powersOf(coefficients: readonly number[], model: CalibrationModel): readonly number[] {
  return model === 'average response factor' ? [0, coefficients[0]!] : coefficients;
}

/** Height of the curve at x. */
export function heightAt(powers: readonly number[], x: number): number {
  return powers.reduceRight((sum, coefficient) => sum * x + coefficient, 0);
}

/** Slope of the curve at x. */
export function slopeAt(powers: readonly number[], x: number): number {
  return powers.reduceRight(
    (sum, coefficient, power) => (power === 0 ? sum : sum * x + power * coefficient),
    0
  );
}

/** Variance of the curve's height at x: g' Cov g, g the derivatives of the height in the coefficients. Never below zero. */
export function curveVariance(
  fit: Pick<CalibrationFit, 'model' | 'coefficients' | 'covariance'>,
  x: number
): number {
  const gradient =
    fit.model === 'average response factor' ? [x] : fit.coefficients.map((_, power) => x ** power);
  let sum = 0;
  fit.covariance.forEach((row, i) =>
    row.forEach((value, j) => {
      sum += gradient[i]! * value * gradient[j]!;
    })
  );
  return Math.max(0, sum);
}

/**
 * The x at which the curve takes the height y, or null when it never does. Of two the one inside the range, else the nearest to
 * it; when both are inside, the one on the branch that runs the way the whole range does.
 */
export function rootOf(
  coefficients: readonly number[],
  model: CalibrationModel,
  range: readonly [number, number],
  y: number
): number | null {
  const powers = powersOf(coefficients, model);
  const [a = 0, b = 0, c = 0] = powers;
  const roots = quadraticRoots(a - y, b, c);
  if (roots.length < 2) return roots[0] ?? null;
  const distance = (x: number) => Math.max(range[0] - x, x - range[1], 0);
  const [first, second] = roots as [number, number];
  const apart = distance(first) - distance(second);
  if (apart !== 0) return apart < 0 ? first : second;
  const direction = Math.sign(heightAt(powers, range[1]) - heightAt(powers, range[0]));
  return Math.sign(slopeAt(powers, first)) === direction ? first : second;
}

/** Real roots of c + b x + a x^2 given as (c, b, a), without cancellation between b and the square root. */
function quadraticRoots(c: number, b: number, a: number): number[] {
  if (a === 0) return b === 0 ? [] : finiteOnly([-c / b]);
  const discriminant = b * b - 4 * a * c;
  if (discriminant < 0) return [];
  const q = -(b + (b < 0 ? -1 : 1) * Math.sqrt(discriminant)) / 2;
  // b and the discriminant both zero: the vertex lies at zero.
  return q === 0 ? [0] : finiteOnly([q / a, c / q]);
}

function finiteOnly(roots: readonly number[]): number[] {
  return roots.filter(Number.isFinite);
}
