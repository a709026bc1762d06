import { meanOverChi } from './chi-mixture';
import { chiSquareCdf, normalCdf } from './distributions';

/** Noncentralities above this are treated as exact: the normal part is then a step against the spread of s. */
const largestNoncentrality = 5000;

/**
 * P(T > t) for the noncentral t distribution, T = (Z + noncentrality)/s with s = sqrt(chi-square/df): the mean over s of
 * P(Z > t s - noncentrality). A sum of positive parts, so that small chances keep their digits; absolute error below 1e-10.
 */
export function noncentralUpper(t: number, df: number, noncentrality: number): number {
  if (Math.abs(noncentrality) > largestNoncentrality) {
    const ratio = noncentrality / t;
    const certain = ratio > 0 ? chiSquareCdf(df * ratio * ratio, df) : 1;
    return noncentrality > 0 ? certain : 1 - certain;
  }
  return meanOverChi(df, (s) => normalCdf(noncentrality - t * s), 0.5 / (Math.abs(noncentrality) + 5));
}
