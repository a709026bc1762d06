import { noncentralUpper } from '../../src/lib/server/stats/noncentral-t';
import { studentizedRangeUpper } from '../../src/lib/server/stats/studentized-range';

/** The tails that quadrature.R computes, formed by this module, under the same names. */
export function tailsAgainstQuadrature(): Map<string, number> {
  const tails = new Map<string, number>();
  const range = (q: number, k: number, df: number, name: string): void => {
    tails.set(`studentized range q ${q} k ${k} df ${name}`, studentizedRangeUpper(q, k, df));
  };
  for (const k of [2, 3, 10, 100]) {
    for (const df of [1, 2, 3, 5, 8, 20, 1e4]) {
      for (const q of [1, 3, 5, 8, 15, 60]) range(q, k, df, String(df));
    }
    for (const q of [1, 3, 5, 8]) range(q, k, Infinity, 'Inf');
  }
  for (const df of [1, 2, 3, 4, 8, 30, 1000]) {
    for (const delta of [-3, 0.5, 2, 6, 30]) {
      for (const t of [-4, 0.5, 2, 5, 12, 40]) {
        tails.set(`noncentral t ${t} df ${df} delta ${delta}`, noncentralUpper(t, df, delta));
      }
    }
  }
  return tails;
}
