import type { CriterionRule } from '../../domain/criteria';
import { percentText } from '../../domain/figure-text';
import type { CalibrationModelName } from '../../domain/vocabulary';
import { coefficientTests, runsOneWay, solveCalibration, StatsError } from '../stats';
import { calibrate, fitChoiceOf, type Calibration } from './calibration';
import { checkCalibration, levelCount, worstLevel, type CalibrationCheck } from './calibration-check';
import { fitKinds, withChoices, type ProposedFit } from './calibration-proposal';
import type { CalibrationSet, PanelEntry } from './types';

type Usable = Extract<Calibration, { usable: true }>;

/** One way to draw the line of an analyte, with what its figures say for and against it. */
export interface Candidate {
  readonly fit: ProposedFit;
  /** Null: it cannot be drawn, and `refusal` says why. */
  readonly line: Usable | null;
  readonly refusal: string | null;
  /** Levels of different concentration that are used. */
  readonly levels: number | null;
  readonly levelsNeeded: number;
  readonly checks: readonly CalibrationCheck[];
  /** The level read back worst, and the lowest one; percent, without sign; Infinity: not read back at all. */
  readonly worst: { readonly label: string; readonly error: number } | null;
  readonly lowestError: number | null;
  /** What no response at all reads as, and how much that is of the lowest level, percent. Null: no solution. */
  readonly zero: { readonly x: number; readonly percent: number } | null;
  /** The curve rises or falls throughout the range; null for a line that cannot turn. */
  readonly oneWay: boolean | null;
  readonly speaksFor: readonly string[];
  readonly speaksAgainst: readonly string[];
}

/** Levels that 8000D asks of each kind of line (11.4 to 11.7 there). */
export const levelsNeeded: Readonly<Record<CalibrationModelName, number>> = {
  'average response factor': 5,
  linear: 5,
  quadratic: 6
};

/** From here on, percent of the lowest level, what an empty signal reads as is spoken of. Common practice, no source. */
const emptyReading = 50;
const significance = 0.05;

/**
 * Every sensible line through the levels of one analyte, with the same levels left out, each held against the same rules. None is
 * forced through zero, and zero is no point of any. The order is fixed; nothing is crowned: what speaks for and against each is told.
 */
export function calibrationCandidates(
  set: CalibrationSet,
  entry: PanelEntry,
  nameOf: (entryId: string) => string,
  rules: readonly CriterionRule[],
  levelsLeftOut: readonly string[] = fitChoiceOf(set, entry.id).levelsLeftOut
): readonly Candidate[] {
  const own: CalibrationSet = {
    ...set,
    reported: set.reported.filter(({ entryId }) => entryId === entry.id)
  };
  const drawn = fitKinds.map((kind) => {
    const fit = { ...kind, levelsLeftOut };
    return { fit, made: calibrate(withChoices(own, new Map([[entry.id, fit]])), entry, nameOf) };
  });
  const lines = drawn.flatMap(({ made }) => (made.usable ? [made] : []));
  return drawn.map(({ fit, made }): Candidate => {
    const needed = levelsNeeded[fit.model];
    if (!made.usable) {
      return {
        fit,
        line: null,
        refusal: made.reason,
        levels: null,
        levelsNeeded: needed,
        checks: [],
        worst: null,
        lowestError: null,
        zero: null,
        oneWay: null,
        speaksFor: [],
        speaksAgainst: [made.reason]
      };
    }
    const checks = checkCalibration(made, rules);
    return {
      fit,
      line: made,
      refusal: null,
      levels: levelCount(made),
      levelsNeeded: needed,
      checks,
      worst: worstLevel(made),
      lowestError: lowestErrorOf(made),
      zero: emptyReadingOf(made),
      oneWay: fit.model === 'quadratic' ? runsOneWay(made.fit) : null,
      speaksFor: forIt(made, lines),
      speaksAgainst: againstIt(made, checks, lines)
    };
  });
}

function lowestErrorOf(line: Usable): number | null {
  return worstLevel(line, (x) => x === line.fit.range[0])?.error ?? null;
}

/** What a response of zero reads as on the line. */
export function emptyReadingOf({ fit }: Usable): Candidate['zero'] {
  if (fit.range[0] <= 0) return null;
  try {
    const { x } = solveCalibration(fit, 0);
    return x === null ? null : { x, percent: (100 * x) / fit.range[0] };
  } catch (error) {
    if (error instanceof StatsError) return null;
    throw error;
  }
}

function forIt(line: Usable, lines: readonly Usable[]): string[] {
  const said: string[] = [];
  const { rse, model, weighting } = line.fit;
  const others = lines.flatMap(({ fit }) => (fit.rse === null || fit === line.fit ? [] : [fit.rse]));
  if (rse !== null && others.length > 0 && others.every((other) => rse < other)) {
    said.push(`Its RSE is the smallest, ${percentText(rse)} %.`);
  }
  const plain = lines.find(({ fit }) => fit.model === model && fit.weighting === 'none');
  const own = lowestErrorOf(line);
  const unweighted = plain ? lowestErrorOf(plain) : null;
  if (model !== 'average response factor' && weighting !== 'none' && own !== null && unweighted !== null) {
    if (own < unweighted / 2) {
      said.push(`The lowest level reads ${off(own)} off, without weights ${off(unweighted)}.`);
    }
  }
  if (model === 'average response factor') {
    const { p } = lineThroughZero(lines);
    if (p !== null && p >= significance) {
      said.push(
        `A straight line of the same weighting cannot be told from one through zero (p ${pText(p)}).`
      );
    }
  }
  if (model === 'quadratic') {
    const p = coefficientTests(line.fit)[2] ?? null;
    if (p !== null && p < significance) said.push(`The bend stands out (p ${pText(p)}).`);
  }
  return said;
}

function againstIt(line: Usable, checks: readonly CalibrationCheck[], lines: readonly Usable[]): string[] {
  const said = checks
    .filter(({ holds }) => !holds)
    .map(({ rule, detail }) => `${capital(detail)}${limitOf(rule)}.`);
  const { model, df } = line.fit;
  const levels = levelCount(line);
  const needed = levelsNeeded[model];
  const ruled = checks.some(
    ({ rule }) => rule.type === 'minimum levels' || rule.type === 'minimum levels of a curve'
  );
  if (levels < needed && !ruled)
    said.push(`It rests on ${levels} levels; 8000D asks for ${needed} at least.`);
  if (df <= 2) {
    said.push(
      `Only ${df} degree${df === 1 ? '' : 's'} of freedom ${df === 1 ? 'is' : 'are'} left: it passes near every point because it has to.`
    );
  }
  if (model === 'quadratic') {
    const p = coefficientTests(line.fit)[2] ?? null;
    if (p !== null && p >= significance) said.push(`The bend cannot be told from none (p ${pText(p)}).`);
  }
  if (model === 'average response factor') {
    const { p } = lineThroughZero(lines);
    if (p !== null && p < significance) {
      said.push(
        `A straight line of the same weighting does not pass through zero (p ${pText(p)}); this one has to.`
      );
    }
  }
  const zero = emptyReadingOf(line);
  if (zero && Math.abs(zero.percent) >= emptyReading) {
    said.push(
      `No response at all reads ${percentText(Math.abs(zero.percent))} % of the lowest level, ${zero.x < 0 ? 'below' : 'above'} zero.`
    );
  }
  return said;
}

/** The p of the intercept of the line weighted 1/x², which an average response factor is the special case of. */
function lineThroughZero(lines: readonly Usable[]): { readonly p: number | null } {
  const line = lines.find(({ fit }) => fit.model === 'linear' && fit.weighting === '1/x2');
  return { p: line ? (coefficientTests(line.fit)[0] ?? null) : null };
}

function limitOf({ low, high, unit }: CriterionRule): string {
  const percent = unit === '%' ? ' %' : '';
  if (high !== null) return ` (at most ${high}${percent})`;
  return low === null ? '' : ` (at least ${low}${percent})`;
}

const off = (error: number): string => (Number.isFinite(error) ? `${percentText(error)} %` : 'endlessly');
const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);
const pText = (p: number): string => (p < 0.001 ? '< 0.001' : '= ' + String(Number(p.toPrecision(2))));
