import { createRequire } from 'node:module';
import { StatsError } from './errors';

/**
 * The distributions everything else rests on, in both tails, from the special functions of the cephes library
 * (S. L. Moshier, Methods and Programs for Mathematical Functions, 1989). Only incomplete beta and gamma and the
 * normal integral are used: they accept degrees of freedom that are not whole. Quantiles are in quantiles.ts.
 *
 * The CommonJS build is loaded because it is ready at once; the ES module has to be awaited.
 */
const cephes = createRequire(import.meta.url)('cephes') as SpecialFunctions;

/** The part of cephes that is used; the package's own types do not reach its CommonJS build. */
type SpecialFunctions = {
  readonly incbet: (a: number, b: number, x: number) => number;
  readonly igam: (a: number, x: number) => number;
  readonly igamc: (a: number, x: number) => number;
  readonly lgam: (x: number) => number;
  readonly ndtr: (z: number) => number;
  readonly ndtri: (p: number) => number;
};

/** Degrees of freedom above which t is taken from the normal distribution by expansions that are then exact to rounding. */
export const nearlyNormal = 1e5;

/** cephes throws where a probability, or the complement it works with, is smaller than the smallest double. */
function orLimit(compute: () => number, limit: 0 | 1): number {
  try {
    return compute();
  } catch (error) {
    if (error instanceof Error && error.message.includes('underflow')) return limit;
    throw error;
  }
}

/** Regularised incomplete beta function I_x(a, b). */
function beta(a: number, b: number, x: number): number {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  // The mean of the distribution tells on which side x lies far out.
  return orLimit(() => cephes.incbet(a, b, x), x < a / (a + b) ? 0 : 1);
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
  return -cephes.ndtri(requireProbability(upper));
}

/** P(|T| > |t|) for Student's t with `df` degrees of freedom, whole or not. */
export function studentTwoSided(t: number, df: number): number {
  requireDf(df);
  const square = t * t;
  // Near the centre df/(df + t^2) rounds to 1: the complement keeps its digits there.
  if (square < 0.1 * Math.min(1, df)) return 1 - studentCentral(t, df);
  if (df <= nearlyNormal) return beta(df / 2, 0.5, df / (df + square));
  // G. W. Hill, algorithm 395, Commun. ACM 13 (1970) 617, to the first correction.
  const a = df - 0.5;
  const z = Math.sqrt(a * Math.log1p(square / df));
  return 2 * normalCdf(-(z + (z ** 3 + 3 * z) / (48 * a * a)));
}

/** P(|T| < |t|): the complement of {@link studentTwoSided}, with its digits where t is near zero. */
export function studentCentral(t: number, df: number): number {
  requireDf(df);
  const square = t * t;
  return beta(0.5, df / 2, square / (df + square));
}

/** P(T > t) for Student's t. */
export function studentUpper(t: number, df: number): number {
  const half = studentTwoSided(t, df) / 2;
  return t >= 0 ? half : 1 - half;
}

/** P(F > f) for Fisher's F. */
export function fisherUpper(f: number, df1: number, df2: number): number {
  requireDf(df1);
  requireDf(df2);
  if (f <= 0) return 1;
  return beta(df2 / 2, df1 / 2, df2 / (df2 + df1 * f));
}

/** P(X <= x) for chi-square. */
export function chiSquareCdf(x: number, df: number): number {
  requireDf(df);
  if (x === Infinity) return 1;
  return x <= 0 ? 0 : orLimit(() => cephes.igam(df / 2, x / 2), x < df ? 0 : 1);
}

/** P(X > x) for chi-square. */
export function chiSquareUpper(x: number, df: number): number {
  requireDf(df);
  if (x === Infinity) return 0;
  return x <= 0 ? 1 : orLimit(() => cephes.igamc(df / 2, x / 2), x < df ? 1 : 0);
}

/** Returns the degrees of freedom, or throws when they are not above zero. */
export function requireDf(df: number): number {
  if (df > 0) return df;
  throw new StatsError('out-of-range', `Degrees of freedom must be above zero, found ${df}.`);
}

/** Returns a tail probability, or throws when it does not lie between 0 and 1. */
export function requireProbability(p: number): number {
  if (p > 0 && p < 1) return p;
  throw new StatsError('out-of-range', `A tail probability must lie between 0 and 1, found ${p}.`);
}
