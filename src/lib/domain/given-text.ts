/**
 * A figure as it was given, with a real minus sign: 9.6 stays 9.6 and 151.16 stays 151.16. For what people entered; for what was
 * computed there is `figureText`.
 */
export function givenText(value: number): string {
  // Sums of given figures may carry digits that nobody gave.
  return String(Number(value.toPrecision(12))).replace('-', '\u2212');
}
