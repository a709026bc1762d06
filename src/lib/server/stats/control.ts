import { normalCdf } from './distributions';
import { StatsError } from './errors';
import { finite, finiteValues } from './guards';
import { moments } from './moments';
import type { Interval } from './types';

export type ControlLimits = {
  readonly centre: number;
  readonly warning: Interval;
  readonly action: Interval;
};

/**
 * Control limits from past values: centre = mean, warning mean -+ 2 s, action mean -+ 3 s, in the unit of the values. The `level` of
 * each is the share of normal values inside when mean and SD are known (0.954 and 0.997).
 *
 * @throws StatsError for fewer than two values or one that is not finite.
 * Source: mean -+ 3 s, EPA SW-846 Method 8000D, 9.6.2; 2 s for warning is common practice, no source.
 */
export function controlLimits(values: readonly number[]): ControlLimits {
  finiteValues(values, 'Values for control limits', 2);
  const { mean, sd } = moments(values);
  const around = (times: number): Interval => ({
    lower: mean - times * sd!,
    upper: mean + times * sd!,
    level: 1 - 2 * normalCdf(-times)
  });
  return { centre: mean, warning: around(2), action: around(3) };
}

/**
 * Relative percent difference of duplicates, 100 |a - b|/((a + b)/2), without sign.
 *
 * @throws StatsError when a value is not finite or their mean is not above zero.
 * Source: EPA Method 625.1 (40 CFR 136 App. A) 8.3, RPD = 200 |A1 - A2|/(A1 + A2).
 */
export function relativePercentDifference(a: number, b: number): number {
  finite(a, 'First of the duplicates');
  finite(b, 'Second of the duplicates');
  const rpd = (200 * Math.abs(a - b)) / (a + b);
  if (!(a + b > 0) || !Number.isFinite(rpd)) {
    throw new StatsError(
      'out-of-range',
      `The mean of the duplicates must be above zero, found ${a} and ${b}.`
    );
  }
  return rpd;
}
