import { StatsError } from './errors';
import { fractionOfOne } from './guards';
import { holm } from './multiplicity';
import { ownEstimate, takeApart, varianceTerms, type NetMean } from './net-mean';
import { studentTwoSided } from './distributions';
import { noEstimate, type Estimate, type Sample } from './types';
import {
  linearEstimate,
  logEstimate,
  totalVariance,
  welchSatterthwaite,
  type VarianceTerm
} from './variance-terms';

export type StageSample = { readonly stage: string; readonly kind?: 'signal' | 'loss' | undefined } & Sample;

export type StageLoss = {
  readonly stage: string;
  /** Net recovery when spiked at this stage, percent. */
  readonly recovered: Estimate;
  /** What the stage passes on, a ratio; `se` is that of its logarithm. */
  readonly stepRecovery: Estimate;
  /** Points of the spike that the procedure loses at this stage. */
  readonly lost: Estimate | null;
  /** Points that curing this stage alone would bring. */
  readonly regain: number | null;
  readonly p: number | null;
  readonly pAdjusted: number | null;
};

/**
 * Attributes loss to stages from experiments spiked at each of them, given back to front. R_k is the net mean when spiked at
 * stage k, R_0 the signal reference: a first stage of kind `signal`, or exactly 100.
 *
 * - stepRecovery y_k = R_k/R_(k-1), interval on the log scale.
 * - lost_k = 100 (R_K/R_k)(1 - R_k/R_(k-1)), K the stage farthest upstream: of 100 in the sample, what this stage loses in
 *   the procedure. The losses add up to 100 (1 - R_K/R_0). Interval by the delta method in the logs of the means. A plain
 *   difference of neighbouring recoveries would weigh a late loss by what no longer reaches it, and name the wrong stage.
 * - regain_k = 100 (R_K/R_0)(1/y_k - 1).
 * - p: two-sided, R_(k-1) against R_k over all their sources of variance (Welch; one sample against exactly 100), adjusted by
 *   Holm over the loss stages.
 *
 * Sources shared by several means (one matrix effect) count once. A mean that is not above zero leaves the ratios that need it
 * without figures; its p, which needs no ratio, stays. The signal row has a recovery only.
 *
 * @throws StatsError for no stage, a stage named twice, a signal stage that is not first, or samples as {@link netMean} refuses.
 */
export function stageLosses(stages: readonly StageSample[], level = 0.95): StageLoss[] {
  fractionOfOne(level, 'Level');
  checkStages(stages);
  const means = stages.map((stage) => takeApart(stage, `Stage "${stage.stage}"`));
  const hasSignal = stages[0]!.kind === 'signal';
  const reference = hasSignal ? means[0]! : null;
  const upstream = means[means.length - 1]!;

  const rows = stages.map((stage, index): Omit<StageLoss, 'pAdjusted'> => {
    const own = means[index]!;
    const recovered = ownEstimate(own, level);
    if (stage.kind === 'signal') {
      return { stage: stage.stage, recovered, stepRecovery: noEstimate, lost: null, regain: null, p: null };
    }
    const before = index === 0 ? null : means[index - 1]!;
    return {
      stage: stage.stage,
      recovered,
      stepRecovery: stepRecoveryOf(own, before, level),
      lost: lostAt(own, before, upstream, level),
      regain: regainOf(own, before, upstream, reference),
      p: differenceP(own, before)
    };
  });
  const adjusted = holm(rows.map((row) => row.p));
  return rows.map(({ stage, recovered, stepRecovery, lost, regain, p }, index) => ({
    stage,
    recovered,
    stepRecovery,
    lost,
    regain,
    p,
    pAdjusted: adjusted[index]!
  }));
}

/** y = own/before on the log scale; `before` null means exactly 100. */
function stepRecoveryOf(own: NetMean, before: NetMean | null, level: number): Estimate {
  if (!allPositive(own, before)) return noEstimate;
  const parts = [{ weight: 1 / own.mean, of: own }];
  if (before) parts.push({ weight: -1 / before.mean, of: before });
  return logEstimate(own.mean / meanOf(before), varianceTerms(parts), level);
}

function lostAt(own: NetMean, before: NetMean | null, upstream: NetMean, level: number): Estimate {
  if (!allPositive(own, before, upstream)) return noEstimate;
  // lost = 100 (passedOwn - passedBefore): shares of what enters that reach the stage, and that leave it.
  const enters = (100 * upstream.mean) / own.mean;
  const leaves = (100 * upstream.mean) / meanOf(before);
  const parts = [
    { weight: (enters - leaves) / upstream.mean, of: upstream },
    { weight: -enters / own.mean, of: own }
  ];
  if (before) parts.push({ weight: leaves / before.mean, of: before });
  return linearEstimate(enters - leaves, varianceTerms(parts), level);
}

function regainOf(
  own: NetMean,
  before: NetMean | null,
  upstream: NetMean,
  reference: NetMean | null
): number | null {
  if (!allPositive(own, before, upstream, reference)) return null;
  const points = ((100 * upstream.mean) / meanOf(reference)) * (meanOf(before) / own.mean - 1);
  return Number.isFinite(points) ? points : null;
}

function differenceP(own: NetMean, before: NetMean | null): number | null {
  const parts = [{ weight: -1, of: own }];
  if (before) parts.push({ weight: 1, of: before });
  return twoSidedP(meanOf(before) - own.mean, varianceTerms(parts));
}

function twoSidedP(difference: number, terms: readonly VarianceTerm[] | null): number | null {
  if (terms === null) return null;
  const se = Math.sqrt(totalVariance(terms));
  const df = welchSatterthwaite(terms);
  return se > 0 && Number.isFinite(se) && df !== null ? studentTwoSided(difference / se, df) : null;
}

function meanOf(mean: NetMean | null): number {
  return mean === null ? 100 : mean.mean;
}

function allPositive(...means: readonly (NetMean | null)[]): boolean {
  return means.every((mean) => meanOf(mean) > 0);
}

function checkStages(stages: readonly StageSample[]): void {
  if (stages.length === 0) throw new StatsError('empty-group', 'No stage is given.');
  stages.forEach(({ stage, kind }, index) => {
    if (stages.findIndex((other) => other.stage === stage) !== index) {
      throw new StatsError('mismatch', `The stage "${stage}" is given twice.`);
    }
    if (kind === 'signal' && index > 0) {
      throw new StatsError(
        'mismatch',
        `The signal stage "${stage}" is number ${index + 1}; it has to come first.`
      );
    }
  });
}
