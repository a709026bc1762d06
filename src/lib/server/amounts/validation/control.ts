import type { CriterionRule } from '../../../domain/criteria';
import { controlLimits, type ControlLimits } from '../../stats';

/** Points wanted before limits of one's own are used. EPA Method 625.1, 8.3.4 and 8.4.5. */
export const ownLimitsFrom = 20;

/** One portion (or vial) on a control chart. */
export interface ControlPoint {
  readonly key: string;
  readonly label: string;
  readonly experiment: number;
  /** ISO day; null: not recorded. */
  readonly day: string | null;
  /** null: no figure; see `reason`. */
  readonly value: number | null;
  /** false: set aside, drawn but not counted. */
  readonly counted: boolean;
  readonly reason: string | null;
}

/** Where a point lies, the farthest of what it passes. */
export type Outside = 'rule' | 'action' | 'warning';

export interface Control {
  readonly points: readonly (ControlPoint & { readonly outside: readonly Outside[] })[];
  readonly n: number;
  readonly sd: number | null;
  /** Over the counted points; null: fewer than two. */
  readonly limits: ControlLimits | null;
  /** True once there are enough points to use limits of one's own. */
  readonly enough: boolean;
}

/**
 * Points in the order given against their own mean -+ 2 s (warning) and 3 s (action), and against a rule where there is one. A point
 * that is set aside is shown and counts for nothing.
 */
export function control(
  points: readonly ControlPoint[],
  rule: Pick<CriterionRule, 'low' | 'high'> | null
): Control {
  const values = points.flatMap((point) => (point.counted && point.value !== null ? [point.value] : []));
  const limits = values.length < 2 ? null : controlLimits(values);
  const beyond = (value: number, low: number | null, high: number | null): boolean =>
    (low !== null && value < low) || (high !== null && value > high);
  return {
    points: points.map((point) => {
      const { value } = point;
      if (value === null || !point.counted) return { ...point, outside: [] };
      const outside: Outside[] = [];
      if (rule && beyond(value, rule.low, rule.high)) outside.push('rule');
      if (limits && beyond(value, limits.action.lower, limits.action.upper)) outside.push('action');
      else if (limits && beyond(value, limits.warning.lower, limits.warning.upper)) outside.push('warning');
      return { ...point, outside };
    }),
    n: values.length,
    sd: limits && (limits.action.upper - limits.centre) / 3,
    limits,
    enough: values.length >= ownLimitsFrom
  };
}
