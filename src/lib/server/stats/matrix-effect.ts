import { fractionOfOne } from './guards';
import { takeApart, varianceTerms, type NetMean } from './net-mean';
import { noEstimate, type Estimate } from './types';
import { logEstimate } from './variance-terms';

export type MatrixEffectInput = {
  /** A: standards in solvent. */
  readonly neat: readonly number[];
  /** B: extracts spiked after extraction. */
  readonly postSpiked: readonly number[];
  /** C: extracts of portions spiked before extraction. */
  readonly preSpiked: readonly number[];
  /** U: extracts of unspiked portions. */
  readonly native?: readonly number[] | undefined;
};

export type MatrixEffect = {
  readonly matrixEffect: Estimate;
  readonly recovery: Estimate;
  readonly processEfficiency: Estimate;
};

/**
 * Matrix effect 100 (B - U)/A, recovery 100 (C - U)/(B - U) and process efficiency 100 (C - U)/A from responses in one unit, in
 * percent, 100 = none.
 *
 * Intervals are symmetric on the log scale. The native mean U enters numerator and denominator of the recovery as one and the
 * same, so its error counts with its net coefficient. `se` is in percent (estimate times the standard error of the logarithm),
 * ready to be used as the uncertainty of a sample's matrix effect. A mean that is not above zero leaves an Estimate of nulls;
 * a single response, one without se.
 *
 * @throws StatsError when a list is empty or a response is not finite.
 * Source: Matuszewski, Constanzer and Chavez-Eng, Anal. Chem. 75 (2003) 3019 (from memory); there without U.
 */
export function matrixEffect(responses: MatrixEffectInput, level = 0.95): MatrixEffect {
  fractionOfOne(level, 'Level');
  const neat = takeApart({ values: responses.neat }, 'Neat standards');
  const post = takeApart({ values: responses.postSpiked }, 'Extracts spiked after extraction');
  const pre = takeApart({ values: responses.preSpiked }, 'Extracts spiked before extraction');
  const native = responses.native && takeApart({ values: responses.native }, 'Unspiked extracts');
  return {
    matrixEffect: ratio(net(post, native), net(neat, undefined), level),
    recovery: ratio(net(pre, native), net(post, native), level),
    processEfficiency: ratio(net(pre, native), net(neat, undefined), level)
  };
}

type NetResponse = {
  readonly mean: number;
  readonly parts: readonly { readonly weight: number; readonly of: NetMean }[];
};

function net(gross: NetMean, native: NetMean | undefined): NetResponse {
  const own = { weight: 1, of: gross };
  if (!native) return { mean: gross.mean, parts: [own] };
  return { mean: gross.mean - native.mean, parts: [own, { weight: -1, of: native }] };
}

function ratio(above: NetResponse, below: NetResponse, level: number): Estimate {
  if (!(above.mean > 0 && below.mean > 0)) return noEstimate;
  const parts = [
    ...above.parts.map(({ weight, of }) => ({ weight: weight / above.mean, of })),
    ...below.parts.map(({ weight, of }) => ({ weight: -weight / below.mean, of }))
  ];
  const figure = logEstimate((100 * above.mean) / below.mean, varianceTerms(parts), level);
  return { ...figure, se: figure.se === null ? null : figure.se * figure.estimate! };
}
