const minus = '\u2212';

/** Groups thousands by a narrow no-break space, from five digits before the point on. */
function grouped(text: string): string {
  const [whole = '', decimals] = text.split('.');
  const spaced = whole.length > 4 ? whole.replace(/\B(?=(\d{3})+$)/g, '\u202F') : whole;
  return decimals === undefined ? spaced : `${spaced}.${decimals}`;
}

/**
 * A figure for the screen: at most `digits` significant digits and at most as many decimals as that leaves
 * (49.3, 104, 0.0312), a real minus sign, no exponent between 0.0001 and a billion.
 * @throws RangeError for a value that is not finite: a figure that does not exist is null before it gets here
 */
export function figureText(value: number, digits = 3): string {
  if (!Number.isFinite(value)) throw new RangeError('A figure must be a finite number.');
  if (value === 0) return '0';
  const size = Math.abs(value);
  const rounded = Number(size.toPrecision(digits));
  const sign = value < 0 ? minus : '';
  if (rounded < 1e-4 || rounded >= 1e9) return sign + size.toExponential(digits - 1).replace('-', minus);
  const exponent = Math.floor(Math.log10(rounded));
  return sign + grouped(rounded.toFixed(Math.max(0, digits - 1 - exponent)));
}

/** How many decimals, `least` or more and at most six, keep a rounded figure on its own side of every limit. */
export function decimalsBeside(value: number, limits: readonly number[], least: number): number {
  const crosses = (decimals: number): boolean =>
    limits.some((limit) => Math.sign(Number(value.toFixed(decimals)) - limit) !== Math.sign(value - limit));
  let decimals = least;
  while (decimals < 6 && crosses(decimals)) decimals += 1;
  // What six decimals do not part from its limit lies on it.
  return crosses(decimals) ? least : decimals;
}

/**
 * A percentage or a difference in points, with one decimal below 100 and none from there on, so that a column of
 * them reads alike. A figure on the wrong side of a limit never rounds onto it: 69.97 against 70 is written 69.97.
 */
export function percentText(value: number, limits: readonly number[] = []): string {
  if (!Number.isFinite(value)) throw new RangeError('A percentage must be a finite number.');
  const size = Math.abs(value);
  const start = Number(size.toFixed(1)) >= 100 ? 0 : 1;
  const text = size.toFixed(decimalsBeside(value, limits, start));
  return (value < 0 && Number(text) !== 0 ? minus : '') + grouped(text);
}
