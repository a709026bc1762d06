/** Count, mean, sample standard deviation and extremes. `sd` and `variance` are null for a single value. */
export type Moments = {
  readonly n: number;
  readonly mean: number;
  readonly variance: number | null;
  readonly sd: number | null;
  readonly min: number;
  readonly max: number;
};

/** Below this the squares of deviations have lost digits to the smallest double. */
const smallestSum = 1e-270;

/**
 * Mean and SD in two passes: the second sums deviations from the first mean, corrects the mean by their rest, and
 * takes the square of that rest off the sum of squares (Chan, Golub and LeVeque, Am. Stat. 37 (1983) 242).
 *
 * `values` may be any array of finite numbers; `start`, `count` and `stride` pick a series out of a column. The
 * caller has checked that there is at least one value and that all are finite.
 */
export function moments(
  values: ArrayLike<number>,
  start = 0,
  count: number = values.length,
  stride = 1
): Moments {
  const end = start + count * stride;
  let sum = 0;
  let min = Infinity;
  let max = -Infinity;
  for (let i = start; i < end; i += stride) {
    const value = values[i] as number;
    sum += value;
    if (value < min) min = value;
    if (value > max) max = value;
  }
  // Equal values have no spread, whatever the rounding of their sum.
  if (min === max) {
    const none = count > 1 ? 0 : null;
    return { n: count, mean: min, variance: none, sd: none, min, max };
  }
  const first = sum / count;
  let rest = 0;
  let squares = 0;
  for (let i = start; i < end; i += stride) {
    const deviation = (values[i] as number) - first;
    rest += deviation;
    squares += deviation * deviation;
  }
  if (squares < smallestSum) return spreadOut(values, start, end, stride, count, first, min, max);
  const variance = Math.max(0, squares - (rest * rest) / count) / (count - 1);
  return { n: count, mean: first + rest / count, variance, sd: Math.sqrt(variance), min, max };
}

/** Moments of values so close together that squares of their deviations vanish: in units of their range. */
function spreadOut(
  values: ArrayLike<number>,
  start: number,
  end: number,
  stride: number,
  n: number,
  first: number,
  min: number,
  max: number
): Moments {
  const range = max - min;
  let rest = 0;
  let squares = 0;
  for (let i = start; i < end; i += stride) {
    const deviation = ((values[i] as number) - first) / range;
    rest += deviation;
    squares += deviation * deviation;
  }
  const sd = range * Math.sqrt(Math.max(0, squares - (rest * rest) / n) / (n - 1));
  return { n, mean: first + (range * rest) / n, variance: sd * sd, sd, min, max };
}
