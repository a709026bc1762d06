import type { CriterionRule } from '../../domain/criteria';
import { runsOneWay } from '../stats';
import type { Calibration } from './calibration';

type Usable = Extract<Calibration, { usable: true }>;

/** What one analyte's line says against one rule for calibrations. */
export interface CalibrationCheck {
  readonly rule: CriterionRule;
  readonly holds: boolean;
  /** The figure that was held against it: an error or RSD in percent, r², or a number of levels; null: a yes or no. */
  readonly value: number | null;
  /** "L1 reads 24.3 % off". */
  readonly detail: string;
}

/**
 * A curve that turns within its range gives two concentrations for one response. That is no choice of a criteria set: every
 * curve is held to it.
 */
export const oneWayRule: CriterionRule = {
  type: 'monotone curve',
  low: null,
  high: null,
  unit: '1',
  citation: 'EPA SW-846 Method 8000D, revision 5, 11.4 to 11.7',
  year: 2018,
  standing: 'seen',
  note: 'The tangents of a curve keep one sign over the range.'
};

/** The rules of a criteria set that concern the line of a calibration, the one of every curve last. */
export function calibrationRules(rules: readonly CriterionRule[]): readonly CriterionRule[] {
  return [...rules.filter(({ type }) => checkers[type] !== undefined), oneWayRule];
}

/** How many levels of different concentration the points of a line stand for. */
export const levelCount = ({ points }: Usable): number => new Set(points.map(({ x }) => x)).size;

/**
 * Holds a line against the study's rules for calibrations: back-calculated levels (the lowest may have a rule of its own), relative
 * standard error, RSD of the response factors, coefficient of determination, number of levels, and one direction of a curve.
 * A rule that a kind of line has no figure for is left out.
 */
export function checkCalibration(calibration: Usable, rules: readonly CriterionRule[]): CalibrationCheck[] {
  return calibrationRules(rules).flatMap((rule) => {
    const check = checkers[rule.type]?.(calibration, rule, rules);
    return check ? [{ rule, ...check }] : [];
  });
}

/** The limit (percent) that a level's error is held to; null: no rule. */
export function errorLimitAt(rules: readonly CriterionRule[], isLowest: boolean): number | null {
  const limit = (type: CriterionRule['type']): number | null => {
    const rule = rules.find((item) => item.type === type);
    const end = rule?.high ?? rule?.low ?? null;
    return end === null ? null : Math.abs(end);
  };
  const every = limit('calibration error');
  return isLowest ? (limit('calibration error at the lowest level') ?? every) : every;
}

type Check = Omit<CalibrationCheck, 'rule'>;
type Checker = (of: Usable, rule: CriterionRule, rules: readonly CriterionRule[]) => Check | null;

const checkers: Readonly<Partial<Record<CriterionRule['type'], Checker>>> = {
  'calibration error': (of, rule, rules) => {
    const lowestHasOwn = rules.some(({ type }) => type === 'calibration error at the lowest level');
    return errorCheck(
      rule,
      worstLevel(of, (x) => !lowestHasOwn || x > of.fit.range[0])
    );
  },
  'calibration error at the lowest level': (of, rule) =>
    errorCheck(
      rule,
      worstLevel(of, (x) => x === of.fit.range[0])
    ),
  'response factor deviation': ({ fit }, { high }) =>
    fit.model !== 'average response factor' || fit.responseFactorRsd === null || high === null
      ? null
      : {
          holds: fit.responseFactorRsd <= high,
          value: fit.responseFactorRsd,
          detail: `response factors scatter by ${beside(fit.responseFactorRsd, high)} %`
        },
  'relative standard error': ({ fit }, { high }) =>
    fit.rse === null || high === null
      ? null
      : { holds: fit.rse <= high, value: fit.rse, detail: `RSE is ${beside(fit.rse, high)} %` },
  'determination coefficient': ({ fit }, { low }) =>
    fit.r2 === null || low === null
      ? null
      : { holds: fit.r2 >= low, value: fit.r2, detail: `r² is ${beside(fit.r2, low, 4)}` },
  'minimum levels': (of, { low }) => (of.fit.model === 'quadratic' ? null : levelsCheck(of, low)),
  'minimum levels of a curve': (of, { low }) => (of.fit.model === 'quadratic' ? levelsCheck(of, low) : null),
  'monotone curve': ({ fit }) => {
    if (fit.model !== 'quadratic') return null;
    const holds = runsOneWay(fit);
    return {
      holds,
      value: null,
      detail: holds
        ? 'the curve runs one way over the range'
        : 'the curve turns within the range, so that one response stands for two concentrations'
    };
  }
};

function levelsCheck(of: Usable, low: number | null): Check | null {
  if (low === null) return null;
  const levels = levelCount(of);
  return { holds: levels >= low, value: levels, detail: `${levels} levels` };
}

interface LevelError {
  readonly label: string;
  /** Percent, without its sign. */
  readonly error: number;
}

/** The level that is read back worst among those wanted; null: none has an error. A level without a solution is worst of all. */
export function worstLevel(of: Usable, wanted: (x: number) => boolean = () => true): LevelError | null {
  let worst: LevelError | null = null;
  of.fit.points.forEach((point, index) => {
    if (!wanted(point.x) || point.x === 0) return;
    const error = point.errorPercent === null ? Infinity : Math.abs(point.errorPercent);
    if (!worst || error > worst.error) worst = { error, label: of.points[index]?.level.label ?? '' };
  });
  return worst;
}

function errorCheck(rule: CriterionRule, worst: LevelError | null): Check | null {
  const end = rule.high ?? rule.low;
  if (!worst || end === null) return null;
  const limit = Math.abs(end);
  return Number.isFinite(worst.error)
    ? {
        holds: worst.error <= limit,
        value: worst.error,
        detail: `${worst.label} reads ${beside(worst.error, limit)} % off`
      }
    : {
        holds: false,
        value: null,
        detail: `${worst.label} is not read back: the curve never takes its response`
      };
}

/** At least `digits` significant digits, and as many as keep the figure on its own side of the limit. */
function beside(value: number, limit: number, digits = 3): string {
  for (let count = digits; count < 12; count += 1) {
    const shown = Number(value.toPrecision(count));
    if (Math.sign(shown - limit) === Math.sign(value - limit)) return String(shown);
  }
  return String(Number(value.toPrecision(digits)));
}
