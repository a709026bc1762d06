import { studentQuantile } from './quantiles';
import { StatsError } from './errors';
import { finite, finiteValues, notNegative, positive } from './guards';
import { moments } from './moments';

const fewestForDetection = 7;

export type MethodDetectionLimit = {
  readonly fromSpiked: number;
  /** Null when no blank is given or none gave a number. */
  readonly fromBlanks: number | null;
  readonly mdl: number;
  /** Which part of the procedure decided. */
  readonly rule: string;
};

/**
 * Method detection limit, in the unit of the results: the larger of
 *
 * - from spiked samples: t(n - 1, 0.99) s;
 * - from method blanks: all numeric, mean (below zero counts as zero) + t(n - 1, 0.99) s; some numeric (`null` is a blank
 *   without a result), the highest of them; none numeric, not applicable.
 *
 * At least 7 of each are needed; that they cover three batches is for the caller to see. No value is left out on statistical
 * grounds.
 *
 * @throws StatsError for fewer than 7 spiked results or blanks, or one that is not finite.
 * Source: 40 CFR 136 Appendix B, revision 2 (EPA 821-R-16-006).
 */
export function methodDetectionLimit(results: {
  readonly spiked: readonly number[];
  readonly blanks?: readonly (number | null)[] | undefined;
}): MethodDetectionLimit {
  finiteValues(results.spiked, 'Spiked results', fewestForDetection);
  const spiked = moments(results.spiked);
  const fromSpiked = studentQuantile(0.01, spiked.n - 1) * spiked.sd!;
  const { limit: fromBlanks, rule } = limitFromBlanks(results.blanks);
  if (fromBlanks === null || fromSpiked >= fromBlanks) {
    return { fromSpiked, fromBlanks, mdl: fromSpiked, rule: `t s of ${spiked.n} spiked samples; ${rule}` };
  }
  return {
    fromSpiked,
    fromBlanks,
    mdl: fromBlanks,
    rule: `${rule}; above t s of ${spiked.n} spiked samples`
  };
}

function limitFromBlanks(blanks: readonly (number | null)[] | undefined): {
  limit: number | null;
  rule: string;
} {
  if (blanks === undefined) return { limit: null, rule: 'no method blanks given' };
  if (blanks.length < fewestForDetection) {
    const code = blanks.length === 0 ? 'empty-group' : 'too-few-values';
    throw new StatsError(
      code,
      `Method blanks: ${blanks.length} given, at least ${fewestForDetection} needed.`
    );
  }
  const numeric = blanks.filter((blank, i): blank is number => {
    return blank !== null && Number.isFinite(finite(blank, `Method blank ${i + 1}`));
  });
  if (numeric.length === 0)
    return { limit: null, rule: `none of ${blanks.length} method blanks gave a number` };
  if (numeric.length < blanks.length) {
    const highest = Math.max(...numeric);
    return {
      limit: highest,
      rule: `highest of ${numeric.length} numeric among ${blanks.length} method blanks`
    };
  }
  const { n, mean, sd } = moments(numeric);
  return {
    limit: Math.max(0, mean) + studentQuantile(0.01, n - 1) * sd!,
    rule: `mean + t s of ${n} method blanks`
  };
}

export type QuantitationConfirmation = {
  /** In the unit of the results. */
  readonly halfRange: number;
  /** Bounds of the prediction interval, percent of the fortified amount. */
  readonly lower: number;
  readonly upper: number;
  /** Both within 50 to 150 %. */
  readonly holds: boolean;
};

/**
 * Confirms a quantitation limit from replicates fortified at it: halfRange = t(n - 1, 0.995) s sqrt(1 + 1/n), a 99 % prediction
 * interval for one further result (3.963 s at n = 7); bounds 100 (mean -+ halfRange)/fortified, to lie within 50 to 150 %.
 *
 * @throws StatsError for fewer than two results, one that is not finite, a fortified amount not above zero.
 * Source: EPA Method 539 (half range of prediction).
 */
export function quantitationConfirmation(results: {
  readonly values: readonly number[];
  readonly fortified: number;
}): QuantitationConfirmation {
  finiteValues(results.values, 'Results', 2);
  if (results.fortified === 0) {
    throw new StatsError('zero-spike', 'Fortified amount is zero: there is nothing to confirm.');
  }
  positive(results.fortified, 'Fortified amount');
  const { n, mean, sd } = moments(results.values);
  const halfRange = studentQuantile(0.005, n - 1) * sd! * Math.sqrt(1 + 1 / n);
  const lower = (100 * (mean - halfRange)) / results.fortified;
  const upper = (100 * (mean + halfRange)) / results.fortified;
  if (!Number.isFinite(lower) || !Number.isFinite(upper)) {
    throw new StatsError('out-of-range', `Fortified amount is too small: ${results.fortified}.`);
  }
  return { halfRange, lower, upper, holds: lower >= 50 && upper <= 150 };
}

/**
 * Detection and quantitation limits from a calibration: 3.3 sigma/slope and 10 sigma/slope, sigma the SD of the response (of blanks,
 * the residual SD or that of the intercept), slope in response per unit of the level.
 *
 * @throws StatsError for sigma below zero or a slope not above zero.
 * Source: ICH Q2(R2) (from memory).
 */
export function detectionLimits(response: { readonly sigma: number; readonly slope: number }): {
  readonly lod: number;
  readonly loq: number;
} {
  const sigma = notNegative(response.sigma, 'Sigma');
  const slope = positive(response.slope, 'Slope');
  const loq = (10 * sigma) / slope;
  if (!Number.isFinite(loq)) throw new StatsError('out-of-range', `Slope is too small: ${slope}.`);
  return { lod: (3.3 * sigma) / slope, loq };
}
