import { StatsError } from './errors';
import { fractionOfOne } from './guards';
import { takeApart, varianceTerms, type NetMean } from './net-mean';
import { noEstimate, type Estimate, type Sample } from './types';
import { logEstimate } from './variance-terms';

/** A mean and what it is: experiment and analyte, say. The same key always carries the same figures. */
export type KeyedSample = { readonly key: string } & Sample;

export type ForecastStep = {
  readonly to: KeyedSample;
  /** The stage before it; null stands for exactly 100. */
  readonly from: KeyedSample | null;
};

/**
 * Recovery in percent that a procedure put together from measured steps should have: 100 times the product of the step
 * recoveries to/from.
 *
 * log R is a sum of logs of means. A mean that appears in several steps is one and the same measurement: it cancels or adds
 * by its net exponent first, only then are the variances (se/mean)^2 added; df by Welch and Satterthwaite. Matrix effects
 * with one key are treated likewise. `se` is that of the logarithm, the interval exp(log R -+ t se).
 *
 * @throws StatsError for no step, for one key with different figures, for samples as {@link netMean} refuses. A mean that
 * is not above zero and does not cancel leaves an Estimate of nulls.
 */
export function forecastRecovery(steps: readonly ForecastStep[], level = 0.95): Estimate {
  fractionOfOne(level, 'Level');
  if (steps.length === 0) throw new StatsError('empty-group', 'No step is given to forecast from.');
  const means = new Map<string, { sample: KeyedSample; of: NetMean; exponent: number }>();
  let hundreds = 1;
  for (const { to, from } of steps) {
    count(to, 1);
    hundreds -= 1;
    if (from === null) continue;
    count(from, -1);
    hundreds += 1;
  }

  const kept = [...means.values()].filter((mean) => mean.exponent !== 0);
  if (kept.some((mean) => !(mean.of.mean > 0))) return noEstimate;
  // Steps from exactly 100 leave one power of 100 each; the result itself is in percent.
  let log = hundreds * Math.log(100);
  for (const { of, exponent } of kept) log += exponent * Math.log(of.mean);
  const estimate = Math.exp(log);
  if (!(estimate > 0 && Number.isFinite(estimate))) {
    throw new StatsError(
      'out-of-range',
      'The product of the step recoveries is beyond what can be computed.'
    );
  }
  const parts = kept.map(({ of, exponent }) => ({ weight: exponent / of.mean, of }));
  return logEstimate(estimate, varianceTerms(parts), level);

  function count(sample: KeyedSample, exponent: number): void {
    const known = means.get(sample.key);
    if (!known) {
      means.set(sample.key, { sample, of: takeApart(sample, `Mean "${sample.key}"`), exponent });
      return;
    }
    if (!sameFigures(known.sample, sample)) {
      throw new StatsError('mismatch', `The mean "${sample.key}" is given twice with different figures.`);
    }
    known.exponent += exponent;
  }
}

function sameFigures(a: Sample, b: Sample): boolean {
  const first = a.matrixEffect;
  const second = b.matrixEffect;
  return (
    sameList(a.values, b.values) &&
    sameList(a.native, b.native) &&
    sameList(a.batches, b.batches) &&
    sameList(a.nativeBatches, b.nativeBatches) &&
    first?.key === second?.key &&
    first?.estimate === second?.estimate &&
    first?.se === second?.se &&
    first?.df === second?.df
  );
}

function sameList<T>(a: readonly T[] | undefined, b: readonly T[] | undefined): boolean {
  if (a === undefined || b === undefined) return a === b;
  return a.length === b.length && a.every((value, i) => value === b[i]);
}
