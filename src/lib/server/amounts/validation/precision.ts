import { oneWayAnova, precisionComponents, StatsError, type PrecisionComponents } from '../../stats';
import type { NetRecovery } from './net-recoveries';

/** Batches that are wanted before a scatter between them is worth much. Common practice, no source. */
export const precisionBatches = 3;

export interface PrecisionGroup {
  readonly key: string;
  readonly label: string;
  readonly day: string | null;
  readonly recoveries: readonly NetRecovery[];
}

/** Scatter within and between batches, percent of the spike. */
export interface Precision {
  readonly groups: readonly PrecisionGroup[];
  readonly n: number;
  readonly components: PrecisionComponents | null;
  /** Degrees of freedom of the intermediate variance; null where it has none. */
  readonly df: number | null;
  readonly refusal: string | null;
}

/** Repeatability and intermediate precision of net recoveries over batches. */
export function precision(groups: readonly PrecisionGroup[]): Precision {
  const filled = groups.filter(({ recoveries }) => recoveries.length > 0);
  const values = filled.map(({ recoveries }) => recoveries.map(({ percent }) => percent));
  const n = values.reduce((sum, group) => sum + group.length, 0);
  const no = (refusal: string): Precision => ({ groups: filled, n, components: null, df: null, refusal });
  if (filled.length < 2) {
    return no(
      filled.length === 0
        ? 'no batch with a recovery'
        : 'one batch: nothing can be said of the scatter between batches'
    );
  }
  try {
    return {
      groups: filled,
      n,
      components: precisionComponents(values),
      df: intermediateDf(values),
      refusal: null
    };
  } catch (error) {
    if (error instanceof StatsError) return no(error.message);
    throw error;
  }
}

/**
 * Degrees of freedom of the intermediate variance s_I^2 = MSB/n0 + (1 - 1/n0) MSW by Satterthwaite, n0 = (N - sum n_i^2/N)/(k - 1):
 * s_I^4/[(MSB/n0)^2/(k - 1) + ((1 - 1/n0) MSW)^2/(N - k)]. Where the part between batches came out negative s_I^2 is MSW with its
 * own N - k; null where nothing varies. Satterthwaite, Biometrics Bull. 2 (1946) 110.
 */
export function intermediateDf(groups: readonly (readonly number[])[]): number | null {
  const { between, within } = oneWayAnova(groups);
  const total = groups.reduce((sum, group) => sum + group.length, 0);
  const squares = groups.reduce((sum, group) => sum + group.length ** 2, 0);
  const size = (total - squares / total) / (groups.length - 1);
  if (between.ms <= within.ms) return within.ms > 0 ? within.df : null;
  const ofBetween = between.ms / size;
  const ofWithin = (1 - 1 / size) * within.ms;
  return (ofBetween + ofWithin) ** 2 / (ofBetween ** 2 / between.df + ofWithin ** 2 / within.df);
}
