/** A two-sided interval at a confidence level between 0 and 1. */
export type Interval = { readonly lower: number; readonly upper: number; readonly level: number };

/**
 * A figure with its uncertainty. `null` marks what does not exist: the standard error of a single value, the
 * degrees of freedom of an exact figure, the logarithm of a mean that is not positive.
 */
export type Estimate = {
  readonly estimate: number | null;
  readonly se: number | null;
  readonly df: number | null;
  readonly ci: Interval | null;
};

/** What a set of replicate values says. `rsd` and `rsdCi` are in percent of the mean. */
export type Description = {
  readonly n: number;
  readonly mean: number;
  readonly sd: number | null;
  readonly rsd: number | null;
  readonly se: number | null;
  readonly min: number;
  readonly max: number;
  readonly ci: Interval | null;
  readonly sdCi: Interval | null;
  readonly rsdCi: Interval | null;
};

/** A matrix effect in percent (100 = none), with its standard error in percent too. */
export type MatrixEffectFactor = {
  readonly key: string;
  readonly estimate: number;
  readonly se: number;
  readonly df: number;
};

/** Recoveries of spiked portions and, where there are some, of unspiked ones, both in percent of the spike. */
export type Sample = {
  readonly values: readonly number[];
  readonly native?: readonly number[] | undefined;
  readonly batches?: readonly string[] | undefined;
  readonly nativeBatches?: readonly string[] | undefined;
  /** Values become 100 R/ME. Samples with the same key share one and the same factor, error included. */
  readonly matrixEffect?: MatrixEffectFactor | undefined;
};

/** A measured value in percent of the spike; `null` is missing, `below` not detected with its limit. */
export type Value = number | null | { readonly below: number };

/** An Estimate of which nothing exists. */
export const noEstimate: Estimate = Object.freeze({ estimate: null, se: null, df: null, ci: null });
