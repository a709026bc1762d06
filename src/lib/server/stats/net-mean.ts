import { StatsError } from './errors';
import { finiteValues, fractionOfOne, notNegative, positive, sameLength } from './guards';
import { moments, type Moments } from './moments';
import type { Estimate, MatrixEffectFactor, Sample } from './types';
import { linearEstimate, type VarianceTerm } from './variance-terms';

/** A source of error of a net mean: d(mean)/d(source), the source's variance and its degrees of freedom. */
export type Component = VarianceTerm & {
  readonly gradient: number;
  readonly shared: MatrixEffectFactor | null;
};

/** A net mean taken apart, so that figures made of several means can count each source of error once. */
export type NetMean = {
  /** Moments of the net values, matrix effect applied. */
  readonly net: Moments;
  readonly mean: number;
  /** Null when a variance is unknown: a single value, or a single native value. */
  readonly components: readonly Component[] | null;
};

/**
 * Mean of spiked values less the mean of native values, in percent of the spike, with its uncertainty.
 *
 * - No native: se^2 = s^2/n, df = n - 1.
 * - Native, one list: se^2 = s_f^2/n + s_u^2/n_u.
 * - Native by batch: each value loses the native mean of its own batch; se^2 = s_net^2/n + s_u^2 sum over batches of
 *   (n_b/n)^2/n_ub, s_u pooled within batches (over all native values when no batch has two). A value whose batch has
 *   no native value loses the mean of all of them.
 * - With a matrix effect ME the values become 100 R/ME and its relative variance joins.
 * - df by Welch and Satterthwaite over these terms. One native value leaves se, df and ci null.
 *
 * @throws StatsError for empty `values`, an empty `native`, non-finite values, batch lists of another length.
 */
export function netMean(sample: Sample, level = 0.95): Estimate {
  fractionOfOne(level, 'Level');
  return ownEstimate(takeApart(sample), level);
}

/** A net mean by itself, with its interval. A single source of error is its own variance term: its gradient is 1. */
export function ownEstimate(of: NetMean, level: number): Estimate {
  const terms = of.components?.length === 1 ? of.components : varianceTerms([{ weight: 1, of }]);
  return linearEstimate(of.mean, terms, level);
}

/** Takes a sample apart into net mean and sources of error. Throws as {@link netMean} does. */
export function takeApart(sample: Sample, what = 'Sample'): NetMean {
  const { values, native, matrixEffect } = sample;
  finiteValues(values, `${what}, spiked values`);
  if (matrixEffect) {
    positive(matrixEffect.estimate, `${what}, matrix effect`);
    notNegative(matrixEffect.se, `${what}, standard error of the matrix effect`);
    positive(matrixEffect.df, `${what}, degrees of freedom of the matrix effect`);
  }
  const factor = matrixEffect ? 100 / matrixEffect.estimate : 1;
  const subtracted = native === undefined ? null : subtraction(sample, native, what);
  const netValues =
    subtracted === null && factor === 1
      ? values
      : values.map((value, i) => (value - (subtracted ? subtracted.perValue(i) : 0)) * factor);
  const net = moments(netValues);
  if (!Number.isFinite(net.mean) || net.variance === Infinity) {
    throw new StatsError('out-of-range', `${what}: the net values are beyond what can be computed.`);
  }

  if (net.variance === null || (subtracted && subtracted.variance === null)) {
    return { net, mean: net.mean, components: null };
  }
  const components: Component[] = [
    // The values' own scatter is taken after scaling, so its gradient is 1.
    { gradient: 1, variance: net.variance / net.n, df: net.n - 1, shared: null }
  ];
  if (subtracted && subtracted.variance !== null) {
    components.push({
      gradient: factor,
      variance: subtracted.variance * subtracted.weight,
      df: subtracted.df,
      shared: null
    });
  }
  if (matrixEffect) {
    components.push({
      gradient: -net.mean / matrixEffect.estimate,
      variance: matrixEffect.se * matrixEffect.se,
      df: matrixEffect.df,
      shared: matrixEffect
    });
  }
  return { net, mean: net.mean, components };
}

/**
 * Variance terms of a figure F that depends on several means, `weight` = dF/d(mean). One mean given twice counts once
 * with its net weight, and so does a matrix effect that several means share. Null when a needed variance is unknown.
 *
 * @throws StatsError when one matrix-effect key comes with different figures.
 */
export function varianceTerms(
  parts: readonly { readonly weight: number; readonly of: NetMean }[]
): VarianceTerm[] | null {
  // Almost every figure rests on one mean without a shared factor.
  if (parts.length === 1 && !parts[0]!.of.components?.some((component) => component.shared !== null)) {
    const { weight, of } = parts[0]!;
    if (weight === 0) return [];
    return (
      of.components &&
      of.components.map(({ gradient, variance, df }) => ({
        variance: (weight * gradient) ** 2 * variance,
        df
      }))
    );
  }
  const weights = new Map<NetMean, number>();
  for (const { weight, of } of parts) weights.set(of, (weights.get(of) ?? 0) + weight);

  const terms: VarianceTerm[] = [];
  const shared = new Map<string, { factor: MatrixEffectFactor; gradient: number }>();
  for (const [mean, weight] of weights) {
    if (weight === 0) continue;
    if (mean.components === null) return null;
    for (const component of mean.components) {
      const gradient = weight * component.gradient;
      if (component.shared === null) {
        terms.push({ variance: gradient * gradient * component.variance, df: component.df });
        continue;
      }
      const known = shared.get(component.shared.key);
      if (known && !sameFactor(known.factor, component.shared)) {
        throw new StatsError(
          'mismatch',
          `The matrix effect "${component.shared.key}" is given twice with different figures.`
        );
      }
      shared.set(component.shared.key, {
        factor: component.shared,
        gradient: (known?.gradient ?? 0) + gradient
      });
    }
  }
  for (const { factor, gradient } of shared.values()) {
    terms.push({ variance: (gradient * factor.se) ** 2, df: factor.df });
  }
  return terms;
}

function sameFactor(a: MatrixEffectFactor, b: MatrixEffectFactor): boolean {
  return a.estimate === b.estimate && a.se === b.se && a.df === b.df;
}

type Subtraction = {
  readonly perValue: (index: number) => number;
  /** Variance of one native value, null when it cannot be known. */
  readonly variance: number | null;
  readonly df: number;
  /** Sum of squared coefficients of the native values in the net mean. */
  readonly weight: number;
};

function subtraction(sample: Sample, native: readonly number[], what: string): Subtraction {
  finiteValues(native, `${what}, native values`);
  const { values, batches, nativeBatches } = sample;
  if (batches) sameLength(batches.length, values.length, `${what}, batches of the spiked values`);
  if (nativeBatches) {
    sameLength(nativeBatches.length, native.length, `${what}, batches of the native values`);
  }
  const all = moments(native);
  if (!batches || !nativeBatches) {
    return {
      perValue: () => all.mean,
      variance: all.variance,
      df: native.length - 1,
      weight: 1 / native.length
    };
  }

  const byBatch = new Map<string, { values: number[]; spiked: number; moments: Moments }>();
  nativeBatches.forEach((batch, i) => {
    const entry = byBatch.get(batch);
    if (entry) entry.values.push(native[i]!);
    else byBatch.set(batch, { values: [native[i]!], spiked: 0, moments: all });
  });
  for (const entry of byBatch.values()) entry.moments = moments(entry.values);
  let homeless = 0;
  for (const batch of batches) {
    const entry = byBatch.get(batch);
    if (entry) entry.spiked += 1;
    else homeless += 1;
  }

  const everyNative = homeless / (values.length * native.length);
  let weight = 0;
  let squares = 0;
  let df = 0;
  for (const entry of byBatch.values()) {
    const count = entry.values.length;
    const coefficient = entry.spiked / (values.length * count) + everyNative;
    weight += count * coefficient * coefficient;
    squares += (entry.moments.variance ?? 0) * (count - 1);
    df += count - 1;
  }
  return {
    perValue: (index) => (byBatch.get(batches[index]!)?.moments ?? all).mean,
    variance: df > 0 ? squares / df : all.variance,
    df: df > 0 ? df : native.length - 1,
    weight
  };
}
