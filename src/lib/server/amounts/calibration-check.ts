import type { CriterionRule } from '../../domain/criteria';
import type { Calibration } from './calibration';

/** What one analyte's line says against one rule for calibrations. */
export interface CalibrationCheck {
  readonly rule: CriterionRule;
  readonly holds: boolean;
  /** The figure that was held against it: an error or RSD in percent, or r2. */
  readonly value: number;
  /** "L1 reads 24.3 % off". */
  readonly detail: string;
}

/**
 * Holds a line against the study's rules for calibrations: back-calculated levels (the lowest may have a rule of its own), RSD of the
 * response factors, coefficient of determination. A rule that a kind of line has no figure for is left out.
 */
export function checkCalibration(
  calibration: Extract<Calibration, { usable: true }>,
  rules: readonly CriterionRule[]
): CalibrationCheck[] {
  const { fit, points } = calibration;
  const lowest = fit.range[0];
  const lowestRule = rules.some((rule) => rule.type === 'calibration error at the lowest level');
  const worstOf = (wanted: (x: number) => boolean): { error: number; label: string } | null => {
    let worst: { error: number; label: string } | null = null;
    fit.points.forEach((point, index) => {
      const error = point.errorPercent === null ? null : Math.abs(point.errorPercent);
      if (error === null || !wanted(point.x) || (worst && worst.error >= error)) return;
      worst = { error, label: points[index]?.level.label ?? '' };
    });
    return worst;
  };
  return rules.flatMap((rule): CalibrationCheck[] => {
    switch (rule.type) {
      case 'calibration error':
        return errorCheck(
          rule,
          worstOf((x) => !lowestRule || x > lowest)
        );
      case 'calibration error at the lowest level':
        return errorCheck(
          rule,
          worstOf((x) => x === lowest)
        );
      case 'response factor deviation':
        if (fit.model !== 'average response factor' || fit.responseFactorRsd === null || rule.high === null)
          return [];
        return [
          {
            rule,
            holds: fit.responseFactorRsd <= rule.high,
            value: fit.responseFactorRsd,
            detail: `response factors scatter by ${figure(fit.responseFactorRsd)} %`
          }
        ];
      case 'determination coefficient':
        if (fit.r2 === null || rule.low === null) return [];
        return [{ rule, holds: fit.r2 >= rule.low, value: fit.r2, detail: `r² is ${fit.r2.toFixed(4)}` }];
      default:
        return [];
    }
  });
}

function errorCheck(rule: CriterionRule, worst: { error: number; label: string } | null): CalibrationCheck[] {
  const limit = rule.high ?? rule.low;
  if (!worst || limit === null) return [];
  return [
    {
      rule,
      holds: worst.error <= Math.abs(limit),
      value: worst.error,
      detail: `${worst.label} reads ${figure(worst.error)} % off`
    }
  ];
}

function figure(value: number): string {
  return String(Number(value.toPrecision(3)));
}
