import { StatsError } from './errors';
import { finite } from './guards';

/**
 * Recovery in percent, 100 (found - native)/spiked; the three amounts in one and the same unit.
 *
 * @throws StatsError when an amount is not finite, when nothing was spiked, or when the spike is negative.
 * Source: EPA Method 625.1 (40 CFR 136 App. A) 8.3, P = 100 (A - B)/T.
 */
export function recovery(amounts: {
  readonly found: number;
  readonly spiked: number;
  readonly native?: number;
}): number {
  const found = finite(amounts.found, 'Amount found');
  const spiked = finite(amounts.spiked, 'Amount spiked');
  const native = finite(amounts.native ?? 0, 'Native amount');
  if (spiked === 0) {
    throw new StatsError('zero-spike', 'Amount spiked is zero: a recovery needs an amount that was added.');
  }
  if (spiked < 0) {
    throw new StatsError('out-of-range', `Amount spiked must be above zero, found ${spiked}.`);
  }
  const percent = (100 * (found - native)) / spiked;
  if (!Number.isFinite(percent)) {
    throw new StatsError('out-of-range', `Amount spiked is too small for a recovery: ${spiked}.`);
  }
  return percent;
}
