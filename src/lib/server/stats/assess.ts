import { meanInterval, rsdUpperBound } from './describe';
import { StatsError } from './errors';
import { finite, notNegative, positive } from './guards';
import type { Description, Interval } from './types';

export type Criteria = {
  /** Lowest and highest acceptable mean recovery, percent; both still inside. */
  readonly low: number;
  readonly high: number;
  /** Highest acceptable RSD in percent, still inside; null when there is no such criterion. */
  readonly rsdMax: number | null;
  /** Fewest replicates on which a verdict may rest. */
  readonly nMin: number;
};

export type Verdict = 'inside' | 'watch' | 'outside' | 'too few';

export type Assessment = { readonly verdict: Verdict; readonly reasons: string[] };

/** A description of net values; `df` where the interval of the mean rests on other than n - 1. */
export type Assessable = Description & { readonly df?: number | null };

const verdictLevel = 0.95;
const rsdLevel = 0.8;
/** Nobody prepares more; a count beyond it is a mistake. */
const mostReplicates = 1_000_000;

/**
 * Holds a description of net recoveries against acceptance criteria.
 *
 * - `too few`: n < nMin.
 * - `outside`: the mean or the RSD breaks a criterion. A mean or RSD exactly on its limit is inside.
 * - `watch`: nothing is broken, but the 95 % interval of the mean reaches past a limit or does not exist, or the
 *   one-sided 80 % upper bound of the RSD (Vangel's form) passes `rsdMax` or does not exist.
 * - `inside`: the rest. `reasons` names every point with its figures; it is empty when inside.
 *
 * @throws StatsError when a criterion is not finite, low is above high, or nMin is below 1.
 * Source: the watch zone is a convention of this program; the bound of the RSD is Vangel's (Am. Stat. 50 (1996) 21).
 */
export function assess(d: Assessable, criteria: Criteria): Assessment {
  checkCriteria(criteria);
  checkDescription(d);
  const { low, high, rsdMax, nMin } = criteria;
  if (d.n < nMin) return { verdict: 'too few', reasons: [`n ${d.n} < ${nMin}`] };

  const broken: string[] = [];
  if (exceeds(low, d.mean)) broken.push(compare('mean', d.mean, '<', low));
  if (exceeds(d.mean, high)) broken.push(compare('mean', d.mean, '>', high));
  if (rsdMax !== null && d.rsd !== null && exceeds(d.rsd, rsdMax)) {
    broken.push(compare('RSD', d.rsd, '>', rsdMax));
  }
  if (broken.length > 0) return { verdict: 'outside', reasons: broken };

  const doubtful = [...doubtsAboutMean(d, low, high), ...doubtsAboutRsd(d, rsdMax)];
  return { verdict: doubtful.length > 0 ? 'watch' : 'inside', reasons: doubtful };
}

function doubtsAboutMean(d: Assessable, low: number, high: number): string[] {
  const ci = verdictInterval(d);
  if (ci === null) return ['the mean has no 95 % interval'];
  const doubts: string[] = [];
  if (exceeds(low, ci.lower)) doubts.push(compare('lower 95 % bound of the mean', ci.lower, '<', low));
  if (exceeds(ci.upper, high)) doubts.push(compare('upper 95 % bound of the mean', ci.upper, '>', high));
  return doubts;
}

function doubtsAboutRsd(d: Assessable, rsdMax: number | null): string[] {
  if (rsdMax === null) return [];
  if (d.rsd === null) return ['the RSD does not exist'];
  const bound = rsdUpperBound(d.rsd, d.n, rsdLevel);
  if (bound === null) return ['the RSD has no finite 80 % upper bound'];
  return exceeds(bound, rsdMax) ? [compare('80 % upper bound of the RSD', bound, '>', rsdMax)] : [];
}

/** The interval of the mean at 95 %, whatever level the description was asked for. */
function verdictInterval(d: Assessable): Interval | null {
  if (d.ci === null || d.ci.level === verdictLevel) return d.ci;
  return meanInterval(d.mean, d.se, d.df === undefined ? d.n - 1 : d.df, verdictLevel);
}

/** a > b by more than the rounding of a figure that should sit exactly on its limit. */
function exceeds(a: number, b: number): boolean {
  return a - b > 1e-12 * Math.max(Math.abs(a), Math.abs(b));
}

/** "RSD 24 > 20": three significant digits, or as many as it takes for the two to look different. */
function compare(name: string, figure: number, sign: '<' | '>', limit: number): string {
  let digits = 3;
  while (digits < 15 && Number(figure.toPrecision(digits)) === limit) digits += 1;
  return `${name} ${Number(figure.toPrecision(digits))} ${sign} ${limit}`;
}

function checkDescription({ n, mean, rsd, se, ci }: Assessable): void {
  if (!Number.isInteger(positive(n, 'Number of replicates to assess')) || n > mostReplicates) {
    throw new StatsError(
      'out-of-range',
      `Number of replicates to assess must be a whole number up to ${mostReplicates}, found ${n}.`
    );
  }
  finite(mean, 'Mean to assess');
  if (rsd !== null) finite(rsd, 'RSD to assess');
  if (se !== null) finite(se, 'Standard error to assess');
  if (ci !== null) {
    finite(ci.lower, 'Lower bound of the mean to assess');
    finite(ci.upper, 'Upper bound of the mean to assess');
  }
}

function checkCriteria({ low, high, rsdMax, nMin }: Criteria): void {
  finite(low, 'Lowest acceptable mean');
  finite(high, 'Highest acceptable mean');
  if (low > high) {
    throw new StatsError('out-of-range', `Lowest acceptable mean ${low} is above the highest, ${high}.`);
  }
  if (rsdMax !== null) notNegative(rsdMax, 'Highest acceptable RSD');
  if (finite(nMin, 'Fewest replicates') < 1) {
    throw new StatsError('out-of-range', `Fewest replicates must be at least 1, found ${nMin}.`);
  }
}
