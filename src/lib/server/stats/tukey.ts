import { oneWayAnova } from './anova';
import { fractionOfOne } from './guards';
import { moments } from './moments';
import { studentizedRangeQuantile, studentizedRangeUpper } from './studentized-range';
import type { Interval } from './types';

export type PairwiseDifference = {
  /** Indices (from 0) of the two groups, a < b. */
  readonly a: number;
  readonly b: number;
  /** mean(a) - mean(b) */
  readonly difference: number;
  readonly ci: Interval;
  /** Studentized range statistic; null when nothing varies within the groups. */
  readonly q: number | null;
  readonly p: number | null;
};

/**
 * All pairwise differences of group means with simultaneous intervals: q = |difference|/sqrt(MS_within/2 (1/n_a + 1/n_b)), held
 * against the studentized range of k groups with the within degrees of freedom; exact for equal sizes, slightly cautious
 * otherwise (Kramer). One entry per pair, a < b.
 *
 * @throws StatsError as {@link oneWayAnova} does, or when the level is not between 0 and 1.
 * Source: J. W. Tukey (1953); C. Y. Kramer, Biometrics 12 (1956) 307.
 */
export function tukeyKramer(groups: readonly (readonly number[])[], level = 0.95): PairwiseDifference[] {
  fractionOfOne(level, 'Level');
  const { within } = oneWayAnova(groups);
  const origin = groups[0]![0]!;
  const described = groups.map((group) => moments(group.map((value) => value - origin)));
  const k = groups.length;
  const critical = within.ms > 0 ? studentizedRangeQuantile(1 - level, k, within.df) : 0;
  const pairs: PairwiseDifference[] = [];
  for (let a = 0; a < k; a += 1) {
    for (let b = a + 1; b < k; b += 1) {
      const first = described[a]!;
      const second = described[b]!;
      const difference = first.mean - second.mean;
      const se = Math.sqrt((within.ms / 2) * (1 / first.n + 1 / second.n));
      const ci = { lower: difference - critical * se, upper: difference + critical * se, level };
      const q = se > 0 ? Math.abs(difference) / se : null;
      pairs.push({ a, b, difference, ci, q, p: q === null ? null : studentizedRangeUpper(q, k, within.df) });
    }
  }
  return pairs;
}
