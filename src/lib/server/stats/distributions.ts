import { createRequire } from 'node:module';
import { StatsError } from './errors';

/**
 * The distributions everything else rests on, in both tails, from the special functions of the cephes library
 * (S. L. Moshier, Methods and Programs for Mathematical Functions, 1989). Only incomplete beta and gamma and the
 * normal integral are used: they accept degrees of freedom that are not whole.
 *
 * The CommonJS build is loaded because it is ready at once; the ES module has to be awaited.
 */
const cephes = createRequire(import.meta.url)('cephes') as SpecialFunctions;

/** The part of cephes that is used; the package's own types do not reach its CommonJS build. */
type SpecialFunctions = {
  readonly incbet: (a: number, b: number, x: number) => number;
  readonly incbi: (a: number, b: number, y: number) => number;
  readonly igam: (a: number, x: number) => number;
  readonly igamc: (a: number, x: number) => number;
  readonly lgam: (x: number) => number;
  readonly ndtr: (z: number) => number;
  readonly ndtri: (p: number) => number;
};

/** Degrees of freedom above which t is taken from the normal distribution by expansions that are then exact to rounding. */
const nearlyNormal = 1e5;

/** cephes throws where a result is smaller than the smallest double; that result is zero. */
function orZero(compute: () => number): number {
  try {
    return compute();
  } catch (error) {
    if (error instanceof Error && error.message.includes('underflow')) return 0;
    throw error;
  }
}

/** Regularised incomplete beta function I_x(a, b). */
function beta(a: number, b: number, x: number): number {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  return orZero(() => cephes.incbet(a, b, x));
}

/** Natural logarithm of the gamma function for x > 0. */
export function logGamma(x: number): number {
  return cephes.lgam(x);
}

/** P(Z <= z) for a standard normal Z. */
export function normalCdf(z: number): number {
  // Below this the result is smaller than the smallest double, where cephes throws.
  return z < -37.5 ? 0 : cephes.ndtr(z);
}

/** z with P(Z > z) = `upper`, 0 < upper < 1. */
export function normalQuantile(upper: number): number {
  return -cephes.ndtri(probability(upper));
}

/** P(|T| > |t|) for Student's t with `df` degrees of freedom, whole or not. */
export function studentTwoSided(t: number, df: number): number {
  requireDf(df);
  const square = t * t;
  if (df <= nearlyNormal) return beta(df / 2, 0.5, df / (df + square));
  // G. W. Hill, algorithm 395, Commun. ACM 13 (1970) 617, to the first correction.
  const a = df - 0.5;
  const z = Math.sqrt(a * Math.log1p(square / df));
  return 2 * normalCdf(-(z + (z ** 3 + 3 * z) / (48 * a * a)));
}

/** P(T > t) for Student's t. */
export function studentUpper(t: number, df: number): number {
  const half = studentTwoSided(t, df) / 2;
  return t >= 0 ? half : 1 - half;
}

/** t with P(T > t) = `upper`; kept for the few arguments that every description of a study asks for. */
export function studentQuantile(upper: number, df: number): number {
  requireDf(df);
  return remembered(0, probability(upper), df, studentQuantileOf);
}

function studentQuantileOf(upper: number, df: number): number {
  if (df > nearlyNormal) {
    // Cornish and Fisher's expansion (Abramowitz and Stegun 26.7.5).
    const z = normalQuantile(upper);
    return z + (z ** 3 + z) / (4 * df) + (5 * z ** 5 + 16 * z ** 3 + 3 * z) / (96 * df * df);
  }
  if (upper > 0.5) return -studentQuantileOf(1 - upper, df);
  if (upper === 0.5) return 0;
  const both = 2 * upper;
  const x = cephes.incbi(df / 2, 0.5, both);
  if (x < 0.5) return Math.sqrt((df * (1 - x)) / x);
  // Near the centre 1 - x would cancel: ask for the complement.
  const y = cephes.incbi(0.5, df / 2, 1 - both);
  return Math.sqrt((df * y) / (1 - y));
}

/** P(F > f) for Fisher's F. */
export function fisherUpper(f: number, df1: number, df2: number): number {
  requireDf(df1);
  requireDf(df2);
  if (f <= 0) return 1;
  return beta(df2 / 2, df1 / 2, df2 / (df2 + df1 * f));
}

/** f with P(F > f) = `upper`. */
export function fisherQuantile(upper: number, df1: number, df2: number): number {
  requireDf(df1);
  requireDf(df2);
  probability(upper);
  const x = cephes.incbi(df2 / 2, df1 / 2, upper);
  if (x < 0.5) return (df2 * (1 - x)) / (df1 * x);
  const y = cephes.incbi(df1 / 2, df2 / 2, 1 - upper);
  return (df2 * y) / (df1 * (1 - y));
}

/** P(X <= x) for chi-square. */
export function chiSquareCdf(x: number, df: number): number {
  requireDf(df);
  if (x === Infinity) return 1;
  return x <= 0 ? 0 : orZero(() => cephes.igam(df / 2, x / 2));
}

/** P(X > x) for chi-square. */
export function chiSquareUpper(x: number, df: number): number {
  requireDf(df);
  if (x === Infinity) return 0;
  return x <= 0 ? 1 : orZero(() => cephes.igamc(df / 2, x / 2));
}

/** x with P(X <= x) = `lower`. */
export function chiSquareQuantile(lower: number, df: number): number {
  requireDf(df);
  return remembered(1, probability(lower), df, (p, v) => chiSquareSolve(p, v, chiSquareCdf, 1));
}

/** x with P(X > x) = `upper`; accurate where 1 - upper would round. */
export function chiSquareUpperQuantile(upper: number, df: number): number {
  requireDf(df);
  return remembered(2, probability(upper), df, (p, v) => chiSquareSolve(p, v, chiSquareUpper, -1));
}

/**
 * Newton's method on the tail probability, held inside a bracket. cephes' own inverse (igami) gives up for
 * large df and knows the upper tail only.
 */
function chiSquareSolve(
  target: number,
  df: number,
  tail: (x: number, df: number) => number,
  direction: 1 | -1
): number {
  const logDensityConstant = -(df / 2) * Math.LN2 - logGamma(df / 2);
  const density = (x: number) => Math.exp((df / 2 - 1) * Math.log(x) - x / 2 + logDensityConstant);
  const excess = (x: number) => direction * (tail(x, df) - target);
  const z = direction * -normalQuantile(target);
  // Wilson and Hilferty's cube (PNAS 17 (1931) 684) as a start; below it the leading power of the lower tail.
  const cube = df * (1 - 2 / (9 * df) + z * Math.sqrt(2 / (9 * df))) ** 3;
  let x = cube > 0.05 * df ? cube : Number.MIN_VALUE;
  if (direction === 1 && !(cube > 0.05 * df)) {
    x = 2 * Math.exp((2 / df) * (Math.log(target) + logGamma(df / 2 + 1)));
  }
  let low = 0;
  let high = Math.max(2 * x, 2 * df);
  while (excess(high) < 0) high *= 2;
  if (!(x > low && x < high)) x = high / 2;
  for (let step = 0; step < 300; step += 1) {
    const over = excess(x);
    if (over === 0) return x;
    if (over > 0) high = x;
    else low = x;
    let next = x - over / density(x);
    if (!(next > low && next < high)) next = (low + high) / 2;
    if (Math.abs(next - x) <= 2e-16 * x) return next;
    x = next;
  }
  return x;
}

/** A study asks for a handful of quantiles thousands of times; the figures are the same with or without this. */
const quantiles: Map<number, Map<number, number>>[] = [new Map(), new Map(), new Map()];
const mostRemembered = 500;

function remembered(
  kind: 0 | 1 | 2,
  tail: number,
  df: number,
  compute: (tail: number, df: number) => number
): number {
  const byTail = quantiles[kind]!;
  let byDf = byTail.get(tail);
  if (!byDf) {
    if (byTail.size > mostRemembered) byTail.clear();
    byTail.set(tail, (byDf = new Map<number, number>()));
  }
  let quantile = byDf.get(df);
  if (quantile === undefined) {
    if (byDf.size > mostRemembered) byDf.clear();
    byDf.set(df, (quantile = compute(tail, df)));
  }
  return quantile;
}

function requireDf(df: number): void {
  if (!(df > 0)) throw new StatsError('out-of-range', `Degrees of freedom must be above zero, found ${df}.`);
}

function probability(p: number): number {
  if (p > 0 && p < 1) return p;
  throw new StatsError('out-of-range', `A tail probability must lie between 0 and 1, found ${p}.`);
}
