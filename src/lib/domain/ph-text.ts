/*
 * Edges of a range of pH with one decimal, rounded into the range, so that what is read off keeps what it promises. The slack
 * keeps a value that is only rounding noise away from a decimal on it.
 */

/** The upper edge of a range: 2.914 becomes 2.9. */
export const phUpTo = (ph: number): number => Math.floor(ph * 10 + 1e-9) / 10;

/** The lower edge of a range: 11.446 becomes 11.5. */
export const phFrom = (ph: number): number => Math.ceil(ph * 10 - 1e-9) / 10;
