import { meanOverChi } from './chi-mixture';
import { normalCdf } from './distributions';

/**
 * Nodes of the trapezoidal rule over a standard normal variable. Below -8.5 its density is under 1e-16; above, the larger of the
 * values that lie r apart is about r/2, and ranges beyond 17.2 have no chance.
 */
const spacing = 0.125;
const nodes = Array.from({ length: 181 }, (_, i) => -8.5 + i * spacing);
const cumulative = nodes.map((z) => normalCdf(z));
const density = nodes.map((z) => Math.exp((-z * z) / 2) / Math.sqrt(2 * Math.PI));

/** Density of the largest of k standard normal values at each node, times the spacing. */
function largestOf(k: number): number[] {
  return nodes.map((_, i) => k * spacing * density[i]! * cumulative[i]! ** (k - 1));
}

/**
 * P(range of k standard normal values > r): the mean over the largest value z of the chance that not all others lie above z - r,
 * 1 - (1 - Phi(z - r)/Phi(z))^(k - 1). Only positive parts are added, so that small chances keep their digits.
 */
function rangeUpper(r: number, k: number, largest: readonly number[]): number {
  if (r > 17.2) return 0;
  let sum = 0;
  for (let i = 0; i < nodes.length; i += 1) {
    const below = Math.min(1, normalCdf(nodes[i]! - r) / cumulative[i]!);
    sum -= largest[i]! * Math.expm1((k - 1) * Math.log1p(-below));
  }
  return sum;
}

/**
 * P(Q > q) for the studentized range of k means, with `df` degrees of freedom of their common SD: the chance that the range of k
 * normal values passes r = q s, averaged over s = sqrt(chi-square/df). Absolute error below 1e-13, and relative error below 1e-11
 * down to chances of 1e-12, for 2 to 100 means; at k = 2 it equals P(|T| > q/sqrt(2)).
 */
export function studentizedRangeUpper(q: number, k: number, df: number): number {
  if (q <= 0) return 1;
  const largest = largestOf(k);
  // The more values, the narrower their range is about its mean, and the finer the steps have to be.
  const step = 0.3 / (2 + Math.log(k));
  return Math.min(
    1,
    meanOverChi(df, (s) => rangeUpper(q * s, k, largest), step)
  );
}

/** q with P(Q > q) = `upper`: false position in logarithms, where the tail is nearly straight, inside a bracket. */
export function studentizedRangeQuantile(upper: number, k: number, df: number): number {
  // A level within rounding of zero asks for no width at all.
  if (upper >= 1) return 0;
  const target = Math.log(upper);
  const excess = (logQ: number) =>
    Math.log(Math.max(studentizedRangeUpper(Math.exp(logQ), k, df), Number.MIN_VALUE)) - target;
  let low = Math.log(4);
  let high = low;
  let atLow = excess(low);
  let atHigh = atLow;
  while (atHigh > 0) {
    [low, atLow] = [high, atHigh];
    high += Math.LN2;
    atHigh = excess(high);
  }
  while (atLow <= 0) {
    [high, atHigh] = [low, atLow];
    low -= Math.LN2;
    atLow = excess(low);
  }
  // Illinois' form: the value of an end that stays twice running is halved, so that both ends close in.
  let stayed = 0;
  for (let i = 0; i < 200 && high - low > 1e-14; i += 1) {
    let next = (low * atHigh - high * atLow) / (atHigh - atLow);
    if (!(next > low && next < high)) next = (low + high) / 2;
    const at = excess(next);
    if (Math.abs(at) < 1e-13) return Math.exp(next);
    const side = Math.sign(at);
    if (side > 0) {
      [low, atLow] = [next, at];
      if (stayed === side) atHigh /= 2;
    } else {
      [high, atHigh] = [next, at];
      if (stayed === side) atLow /= 2;
    }
    stayed = side;
  }
  return Math.exp((low + high) / 2);
}
