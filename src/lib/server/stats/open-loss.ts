import { StatsError } from './errors';
import {
  lowValue,
  readFractions,
  requireFractionNames,
  splitComplete,
  type FractionRecord,
  type FractionTable
} from './fraction-values';
import { finite, fractionOfOne, notNegative, positive } from './guards';
import { ownEstimate, takeApart, varianceTerms, type NetMean } from './net-mean';
import { noEstimate, type Estimate } from './types';
import { linearEstimate, type VarianceTerm } from './variance-terms';

export type OpenLossInput = {
  readonly replicates: readonly FractionRecord[];
  /** `passed`: the stages a fraction went through after it had been collected. */
  readonly fractions: readonly { readonly name: string; readonly passed: readonly string[] }[];
  /** Step recovery of each stage as a ratio, `se` that of its logarithm. */
  readonly stepRecoveries: Readonly<Record<string, Estimate>>;
  /** Recovery of the instrument's signal in percent; exactly 100 when left out. */
  readonly reference?: Estimate | undefined;
  readonly native?: readonly FractionRecord[] | undefined;
  readonly level?: number | undefined;
};

export type OpenLoss = { readonly found: Estimate; readonly downstream: Estimate; readonly open: Estimate };

/**
 * Splits 100 % of the spike into what was found, what was lost on the way from collection to the instrument, and what is
 * still open, in points. A fraction measured as f, having passed stages with step recoveries y, held
 * f/(prod(y) R_0/100) when it was collected. Per complete replicate
 *
 *     found = sum f,  downstream = sum f (1/(prod(y) R_0/100) - 1),  open = 100 - found - downstream,
 *
 * so the three add up to 100. Their variances hold the scatter of the replicates, that of native portions, and those of the
 * step recoveries and the reference (delta method); df by Welch and Satterthwaite. Not-detected values count as zero.
 * A factor that does not exist leaves `downstream` and `open` without figures; no complete replicate leaves all three.
 *
 * @throws StatsError for no replicates or fractions, an empty native list, a passed stage without a step recovery.
 */
export function openLoss(input: OpenLossInput): OpenLoss {
  const { replicates, fractions, native, level = 0.95 } = input;
  fractionOfOne(level, 'Level');
  const names = fractions.map((fraction) => fraction.name);
  requireFractionNames(names);
  if (replicates.length === 0) throw new StatsError('empty-group', 'No replicate is given.');
  if (native?.length === 0) throw new StatsError('empty-group', 'Native portions: the list is empty.');

  const factors = readFactors(input);
  const columns = names.map((_, column) => column);
  const spiked = readFractions(replicates, names, 'Replicate');
  const unspiked = native ? readFractions(native, names, 'Native portion') : null;
  const rows = splitComplete(spiked, columns).complete;
  const nativeRows = unspiked ? splitComplete(unspiked, columns).complete : [];
  if (rows.length === 0 || (unspiked && nativeRows.length === 0)) {
    return { found: noEstimate, downstream: noEstimate, open: noEstimate };
  }

  /** Net mean of a weighted sum of fractions, weighted per replicate. */
  const weighted = (weights: readonly number[]): NetMean =>
    takeApart({
      values: weightedSums(spiked, rows, weights),
      native: unspiked ? weightedSums(unspiked, nativeRows, weights) : undefined
    });
  const ones = columns.map(() => 1);
  const found = ownEstimate(weighted(ones), level);

  const inflations = columns.map((column) => inflation(fractions[column]!.passed, factors));
  if (inflations.some((value) => value === null)) {
    return { found, downstream: noEstimate, open: noEstimate };
  }
  const whole = inflations as number[];
  const meanOf = columns.map((column) => weighted(ones.map((_, i) => (i === column ? 1 : 0))).mean);
  // d/d log y of the sum of f/(prod y R_0/100) is minus the part of it that passed the stage.
  const factorTerms = combine([...factors.values()], (factor) => {
    let sum = 0;
    for (const column of columns) {
      const times = timesPassed(factor, fractions[column]!.passed);
      sum += times * meanOf[column]! * whole[column]!;
    }
    return sum;
  });
  const lostOnTheWay = weighted(whole.map((value) => value - 1));
  const collected = weighted(whole);
  return {
    found,
    downstream: withFactors(lostOnTheWay.mean, lostOnTheWay),
    open: withFactors(100 - collected.mean, collected)
  };

  function withFactors(estimate: number, of: NetMean): Estimate {
    const own = varianceTerms([{ weight: 1, of }]);
    return linearEstimate(estimate, own && factorTerms && [...own, ...factorTerms], level);
  }
}

type Factor = {
  /** Stage name, or null for the signal reference, which every fraction passes. */
  readonly stage: string | null;
  readonly ratio: number | null;
  /** Variance of the logarithm; null when it is not known. */
  readonly log: VarianceTerm | null;
};

function readFactors(input: OpenLossInput): Map<string | null, Factor> {
  const factors = new Map<string | null, Factor>();
  for (const { name, passed } of input.fractions) {
    for (const stage of passed) {
      if (!Object.hasOwn(input.stepRecoveries, stage)) {
        throw new StatsError('mismatch', `Fraction "${name}" passed "${stage}", which has no step recovery.`);
      }
      if (!factors.has(stage)) {
        const { estimate, se, df } = input.stepRecoveries[stage]!;
        factors.set(stage, readFactor(stage, estimate, se, df));
      }
    }
  }
  if (input.reference) {
    const { estimate, se, df } = input.reference;
    // The reference is a recovery in percent whose se is in points; the step recoveries' se are relative already.
    const relativeSe = estimate !== null && estimate > 0 && se !== null ? se / estimate : null;
    factors.set(null, readFactor(null, estimate === null ? null : estimate / 100, relativeSe, df));
  }
  return factors;
}

function readFactor(
  stage: string | null,
  ratio: number | null,
  se: number | null,
  df: number | null
): Factor {
  const what = stage === null ? 'Signal reference' : `Step recovery of "${stage}"`;
  if (ratio === null || (stage === null && finite(ratio, what) <= 0))
    return { stage, ratio: null, log: null };
  positive(ratio, what);
  if (se === null) return { stage, ratio, log: null };
  notNegative(se, `${what}, standard error`);
  // An exact factor needs no degrees of freedom.
  if (se === 0) return { stage, ratio, log: { variance: 0, df: df ?? 1 } };
  return { stage, ratio, log: df === null ? null : { variance: se * se, df: positive(df, `${what}, df`) } };
}

function inflation(passed: readonly string[], factors: ReadonlyMap<string | null, Factor>): number | null {
  let product = 1;
  for (const stage of factors.has(null) ? [null, ...passed] : passed) {
    const ratio = factors.get(stage)!.ratio;
    if (ratio === null) return null;
    product *= ratio;
  }
  return 1 / product;
}

function timesPassed(factor: Factor, passed: readonly string[]): number {
  if (factor.stage === null) return 1;
  return passed.filter((stage) => stage === factor.stage).length;
}

function combine(factors: readonly Factor[], gradient: (factor: Factor) => number): VarianceTerm[] | null {
  const terms: VarianceTerm[] = [];
  for (const factor of factors) {
    if (factor.log === null) return null;
    terms.push({ variance: gradient(factor) ** 2 * factor.log.variance, df: factor.log.df });
  }
  return terms;
}

function weightedSums(table: FractionTable, rows: readonly number[], weights: readonly number[]): number[] {
  return rows.map((row) => {
    let sum = 0;
    weights.forEach((weight, column) => {
      sum += weight * lowValue(table, row, column);
    });
    return sum;
  });
}
