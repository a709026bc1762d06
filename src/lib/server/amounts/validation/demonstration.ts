import type { RecoveryCriteria } from '../../../domain/criteria';
import type { Verdict } from '../../../domain/vocabulary';
import { assess, describe, netMean, type Description } from '../../stats';
import { methodFigures } from '../method-figures';
import type { RecoveryInput } from '../recovery-input';
import { joinedSample, netRecoveries, type NetRecovery } from './net-recoveries';

/** Mean and scatter of an initial demonstration, percent of the spike. */
export interface Demonstration {
  readonly recoveries: readonly NetRecovery[];
  /** null: no portion is complete. */
  readonly figures: (Description & { readonly df: number | null }) | null;
  readonly verdict: Verdict | null;
  readonly reasons: readonly string[];
}

/**
 * The initial demonstration of one analyte: mean, RSD and interval over its preparations, held against the criteria. One
 * experiment gives its method recovery as it stands elsewhere; several are described together, each net of what was subtracted
 * in it.
 */
export function demonstration(
  inputs: readonly RecoveryInput[],
  criteria: RecoveryCriteria | null
): Demonstration {
  const recoveries = inputs.flatMap(netRecoveries);
  const singles = inputs.map((input) => methodFigures(input, criteria));
  const [only] = singles;
  if (only && singles.length === 1) {
    const { method } = only.balance;
    const figures = method && { ...method, df: method.df };
    return { recoveries, figures, verdict: only.verdict, reasons: only.reasons };
  }
  const sample = joinedSample(inputs);
  if (!sample || recoveries.length === 0) {
    return {
      recoveries,
      figures: null,
      verdict: null,
      reasons: ['not every experiment has a portion complete in the fractions of the method']
    };
  }
  const mean = netMean(sample);
  const figures = {
    ...describe(recoveries.map(({ percent }) => percent)),
    se: mean.se,
    df: mean.df,
    ci: mean.ci
  };
  return { recoveries, figures, ...judged(figures, singles, criteria) };
}

function judged(
  figures: Description & { readonly df: number | null },
  singles: readonly ReturnType<typeof methodFigures>[],
  criteria: RecoveryCriteria | null
): Pick<Demonstration, 'verdict' | 'reasons'> {
  if (!criteria) return { verdict: null, reasons: ['the study has no criteria for mean recovery'] };
  const without = singles.find(({ verdict }) => verdict === null);
  if (without) return { verdict: null, reasons: without.reasons };
  const { verdict, reasons } = assess(figures, criteria);
  const doubtful = singles.some(
    ({ ends, input }) => ends !== null || (input.subtracted?.meanPercent ?? 0) > 100
  );
  return verdict === 'inside' && doubtful
    ? {
        verdict: 'watch',
        reasons: ['it hangs on what was not detected, or on a subtracted amount above the spike']
      }
    : { verdict, reasons };
}
