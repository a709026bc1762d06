import { meanOverChi } from './chi-mixture';
import { normalCdf } from './distributions';

/** Nodes of the trapezoidal rule over a standard normal variable; beyond 8.6 its density is below 1e-16. */
const spacing = 0.2;
const nodes = Array.from({ length: 87 }, (_, i) => (i - 43) * spacing);
const density = nodes.map((z) => Math.exp((-z * z) / 2) / Math.sqrt(2 * Math.PI));
const cumulative = nodes.map((z) => normalCdf(z));

/** P(range of k standard normal values > r). */
function rangeUpper(r: number, k: number): number {
  if (r > 17.2) return 0;
  let sum = 0;
  for (let i = 0; i < nodes.length; i += 1) {
    sum += density[i]! * (cumulative[i]! - normalCdf(nodes[i]! - r)) ** (k - 1);
  }
  return Math.max(0, 1 - k * spacing * sum);
}

/**
 * P(Q > q) for the studentized range of k means, with `df` degrees of freedom of their common SD: the chance that the range of k
 * normal values, k times the integral of phi(z) (Phi(z) - Phi(z - r))^(k - 1), passes r = q s, averaged over
 * s = sqrt(chi-square/df). Absolute error below 1e-10; at k = 2 it equals P(|T| > q/sqrt(2)).
 */
export function studentizedRangeUpper(q: number, k: number, df: number): number {
  if (q <= 0) return 1;
  return Math.min(
    1,
    meanOverChi(df, (s) => rangeUpper(q * s, k), 0.1)
  );
}

/** q with P(Q > q) = `upper`: the secant method in logarithms, held inside a bracket. */
export function studentizedRangeQuantile(upper: number, k: number, df: number): number {
  const target = Math.log(upper);
  const excess = (logQ: number) =>
    Math.log(Math.max(studentizedRangeUpper(Math.exp(logQ), k, df), Number.MIN_VALUE)) - target;
  let low = Math.log(1e-6);
  let high = Math.log(4);
  while (excess(high) > 0) {
    low = high;
    high += Math.LN2;
  }
  let atLow = excess(low);
  let atHigh = excess(high);
  // Illinois' form of false position: the value of an end that stays is halved.
  for (let i = 0; i < 200 && high - low > 1e-14; i += 1) {
    let next = (low * atHigh - high * atLow) / (atHigh - atLow);
    if (!(next > low && next < high)) next = (low + high) / 2;
    const at = excess(next);
    if (Math.abs(at) < 1e-13) return Math.exp(next);
    if (at > 0) {
      low = next;
      atLow = at;
      atHigh /= 2;
    } else {
      high = next;
      atHigh = at;
      atLow /= 2;
    }
  }
  return Math.exp((low + high) / 2);
}
