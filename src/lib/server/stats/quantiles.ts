import {
  chiSquareCdf,
  chiSquareUpper,
  fisherUpper,
  logGamma,
  nearlyNormal,
  normalQuantile,
  requireDf,
  requireProbability,
  studentCentral,
  studentTwoSided
} from './distributions';

/*
 * Quantiles by Newton's method on the tails. cephes' own inverses are not used: that of the incomplete beta function is
 * slow, and wrong in far tails (it puts t with P(T > t) = 1e-9 and 100 degrees of freedom at 1e5 instead of 6.6).
 */

/** t with P(T > t) = `upper`. */
export function studentQuantile(upper: number, df: number): number {
  return remembered(0, requireProbability(upper), requireDf(df), studentOf);
}

/** x with P(X <= x) = `lower` for chi-square. */
export function chiSquareQuantile(lower: number, df: number): number {
  return remembered(1, requireProbability(lower), requireDf(df), (p, v) =>
    chiSquareOf(p, v, chiSquareCdf, 'rising')
  );
}

/** x with P(X > x) = `upper` for chi-square; accurate where 1 - upper would round. */
export function chiSquareUpperQuantile(upper: number, df: number): number {
  return remembered(2, requireProbability(upper), requireDf(df), (p, v) =>
    chiSquareOf(p, v, chiSquareUpper, 'falling')
  );
}

/** f with P(F > f) = `upper`. */
export function fisherQuantile(upper: number, df1: number, df2: number): number {
  requireProbability(upper);
  const [a, b] = [requireDf(df1) / 2, requireDf(df2) / 2];
  const logBeta = logGamma(a) + logGamma(b) - logGamma(a + b);
  return solveTail({
    target: upper,
    tail: (f) => fisherUpper(f, df1, df2),
    logDensity: (f) =>
      a * Math.log(df1 / df2) + (a - 1) * Math.log(f) - (a + b) * Math.log1p((df1 * f) / df2) - logBeta,
    direction: 'falling',
    start: 1
  });
}

function studentOf(upper: number, df: number): number {
  if (df > nearlyNormal) {
    // Cornish and Fisher's expansion (Abramowitz and Stegun 26.7.5).
    const z = normalQuantile(upper);
    return z + (z ** 3 + z) / (4 * df) + (5 * z ** 5 + 16 * z ** 3 + 3 * z) / (96 * df * df);
  }
  if (upper === 0.5) return 0;
  if (upper > 0.5) return -studentOf(1 - upper, df);
  const logConstant = logGamma((df + 1) / 2) - logGamma(df / 2) - 0.5 * Math.log((df * Math.PI) / 4);
  const logDensity = (t: number) => logConstant - ((df + 1) / 2) * Math.log1p((t * t) / df);
  const both = 2 * upper;
  if (both < 0.5) {
    const tail = (t: number) => studentTwoSided(t, df);
    return solveTail({ target: both, tail, logDensity, direction: 'falling', start: studentStart(both, df) });
  }
  // Near the centre the tail is almost 1 and says little: ask for its complement.
  const central = 1 - both;
  const tail = (t: number) => studentCentral(t, df);
  return solveTail({
    target: central,
    tail,
    logDensity,
    direction: 'rising',
    start: central / Math.exp(logConstant)
  });
}

/** Hill's approximation to t with P(|T| > t) = `both` (algorithm 396, Commun. ACM 13 (1970) 619); a start, no more. */
function studentStart(both: number, df: number): number {
  if (df < 1) return 1;
  const a = 1 / (df - 0.5);
  const b = (48 / a) ** 2;
  let c = (((20700 * a) / b - 98) * a - 16) * a + 96.36;
  const d = ((94.5 / (b + c) - 3) / b + 1) * Math.sqrt((a * Math.PI) / 2) * df;
  let y = (d * both) ** (2 / df);
  if (y > 0.05 + a) {
    const x = -normalQuantile(both / 2);
    y = x * x;
    if (df < 5) c += 0.3 * (df - 4.5) * (x + 0.6);
    c = (((0.05 * d * x - 5) * x - 7) * x - 2) * x + b + c;
    y = (((((0.4 * y + 6.3) * y + 36) * y + 94.5) / c - y - 3) / b + 1) * x;
    y = Math.expm1(a * y * y);
  } else {
    const inner = 1 / (((df + 6) / (df * y) - 0.089 * d - 0.822) * (df + 2) * 3) + 0.5 / (df + 4);
    y = ((inner * y - 1) * (df + 1)) / (df + 2) + 1 / y;
  }
  return Math.sqrt(df * y);
}

function chiSquareOf(
  target: number,
  df: number,
  tail: (x: number, df: number) => number,
  direction: 'rising' | 'falling'
): number {
  const logConstant = -(df / 2) * Math.LN2 - logGamma(df / 2);
  const z = direction === 'rising' ? -normalQuantile(target) : normalQuantile(target);
  // Wilson and Hilferty's cube (PNAS 17 (1931) 684); where it fails, the leading power of the lower tail.
  const cube = df * (1 - 2 / (9 * df) + z * Math.sqrt(2 / (9 * df))) ** 3;
  const power = 2 * Math.exp((2 / df) * (Math.log(target) + logGamma(df / 2 + 1)));
  return solveTail({
    target,
    tail: (x) => tail(x, df),
    logDensity: (x) => (df / 2 - 1) * Math.log(x) - x / 2 + logConstant,
    direction,
    start: cube > 0.05 * df ? cube : power
  });
}

type TailProblem = {
  readonly target: number;
  readonly tail: (x: number) => number;
  readonly logDensity: (x: number) => number;
  readonly direction: 'rising' | 'falling';
  readonly start: number;
};

/**
 * x > 0 at which a tail takes its target: Newton's method for log tail against log x, where tails are nearly straight, held
 * inside the bracket that the steps build up.
 */
function solveTail({ target, tail, logDensity, direction, start }: TailProblem): number {
  const sign = direction === 'rising' ? 1 : -1;
  let logX = start > 0 && Number.isFinite(start) ? Math.log(start) : 0;
  let low = -740;
  let high = 700;
  for (let step = 0; step < 200; step += 1) {
    const x = Math.exp(logX);
    const at = tail(x);
    const excess = sign * Math.log(at / target);
    if (excess === 0) return x;
    if (excess > 0) high = Math.min(high, logX);
    else low = Math.max(low, logX);
    const move = -(excess * at) / Math.exp(logDensity(x) + logX);
    // Convergence is quadratic: after a step this small the next one is below rounding.
    if (Math.abs(move) < 1e-9) return Math.exp(logX + move);
    const next = logX + move;
    logX = next > low && next < high ? next : (low + high) / 2;
    if (high - low < 1e-15 * Math.max(1, Math.abs(low))) break;
  }
  return Math.exp(logX);
}

/**
 * A study asks for a handful of quantiles at whole degrees of freedom thousands of times; the figures are the same with or
 * without this. One table per kind and tail, indexed by df.
 */
const tables: readonly Map<number, Float64Array>[] = [new Map(), new Map(), new Map()];
const mostTails = 64;
const mostDf = 128;

function remembered(
  kind: 0 | 1 | 2,
  tail: number,
  df: number,
  compute: (tail: number, df: number) => number
): number {
  if (df >= mostDf || !Number.isInteger(df)) return compute(tail, df);
  const byTail = tables[kind]!;
  let table = byTail.get(tail);
  if (!table) {
    if (byTail.size >= mostTails) byTail.clear();
    byTail.set(tail, (table = new Float64Array(mostDf)));
  }
  // Zero marks what is not there yet; a quantile that is zero is only computed again.
  return table[df]! || (table[df] = compute(tail, df));
}
