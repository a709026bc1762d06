import { StatsError } from './errors';

type Probabilities = readonly (number | null)[];

/**
 * Holm's adjusted p-values: p_(i) times (m - i + 1), made monotone and capped at 1. They hold the chance of any false
 * claim below the level. Nulls pass through and are not counted in m; order is kept.
 *
 * @throws StatsError when the list is empty or a p-value is not between 0 and 1.
 * Source: S. Holm, Scand. J. Stat. 6 (1979) 65.
 */
export function holm(p: Probabilities): (number | null)[] {
  const order = ascending(p);
  const adjusted: (number | null)[] = p.map(() => null);
  let running = 0;
  order.forEach(({ value, index }, rank) => {
    running = Math.min(1, Math.max(running, (order.length - rank) * value));
    adjusted[index] = running;
  });
  return adjusted;
}

/**
 * Benjamini and Hochberg's adjusted p-values: p_(i) m/i, made monotone from the largest down. They hold the expected share
 * of false claims below the level. Nulls pass through and are not counted in m; order is kept.
 *
 * @throws StatsError when the list is empty or a p-value is not between 0 and 1.
 * Source: Y. Benjamini and Y. Hochberg, J. R. Stat. Soc. B 57 (1995) 289.
 */
export function benjaminiHochberg(p: Probabilities): (number | null)[] {
  const order = ascending(p);
  const adjusted: (number | null)[] = p.map(() => null);
  let running = 1;
  for (let rank = order.length; rank >= 1; rank -= 1) {
    const { value, index } = order[rank - 1]!;
    running = Math.min(running, value * (order.length / rank));
    adjusted[index] = running;
  }
  return adjusted;
}

function ascending(p: Probabilities): { value: number; index: number }[] {
  if (!(p?.length > 0))
    throw new StatsError('empty-group', 'p-values: no value is given, at least 1 needed.');
  const present: { value: number; index: number }[] = [];
  p.forEach((value, index) => {
    if (value === null) return;
    if (!(typeof value === 'number' && value >= 0 && value <= 1)) {
      const code = Number.isFinite(value) ? 'out-of-range' : 'non-finite-value';
      throw new StatsError(code, `p-value ${index + 1} must lie between 0 and 1, found ${String(value)}.`);
    }
    present.push({ value, index });
  });
  return present.sort((a, b) => a.value - b.value);
}
