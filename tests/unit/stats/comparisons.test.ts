import fc from 'fast-check';
import { describe as suite, expect, it } from 'vitest';
import {
  benjaminiHochberg,
  brownForsythe,
  describe,
  holm,
  oneSampleT,
  oneWayAnova,
  tost,
  tukeyKramer,
  welch
} from '../../../src/lib/server/stats/index';
import { studentTwoSided } from '../../../src/lib/server/stats/distributions';
import {
  studentizedRangeQuantile,
  studentizedRangeUpper
} from '../../../src/lib/server/stats/studentized-range';
import { near, replicates } from './arbitrary';

suite('welch', () => {
  it('turns round with its groups', () => {
    fc.assert(
      fc.property(replicates(), replicates(), (a, b) => {
        const one = welch(a, b);
        const two = welch(b, a);
        return near(one.difference, -two.difference, 300) && near(one.p, two.p) && near(one.df, two.df);
      })
    );
  });

  it('rejects at 5 % exactly when the 95 % interval leaves zero out', () => {
    fc.assert(
      fc.property(replicates(), replicates(), (a, b) => {
        const { p, ci } = welch(a, b);
        fc.pre(p !== null && Math.abs(p - 0.05) > 1e-9);
        return p! < 0.05 === (ci!.lower > 0 || ci!.upper < 0);
      })
    );
  });

  it('has no t, p or df without scatter, and an interval that is the difference', () => {
    expect(welch([90, 90], [80, 80, 80])).toEqual({
      difference: 10,
      se: 0,
      df: null,
      t: null,
      p: null,
      ci: { lower: 10, upper: 10, level: 0.95 }
    });
  });
});

suite('oneSampleT', () => {
  it('is the interval of describe, moved by the value', () => {
    const values = [78, 85, 91];
    const { ci, difference } = oneSampleT(values, 100);
    const d = describe(values);
    expect(difference).toBeCloseTo(d.mean - 100, 12);
    expect(ci!.upper).toBeCloseTo(d.ci!.upper - 100, 12);
  });

  it('has no t or p without scatter', () => {
    expect(oneSampleT([90, 90, 90], 100)).toMatchObject({ difference: -10, se: 0, t: null, p: null });
  });
});

suite('tost', () => {
  it('finds equivalence exactly when the 1 - 2 alpha interval lies within the margin', () => {
    fc.assert(
      fc.property(replicates(), replicates(), fc.integer({ min: 1, max: 100 }), (a, b, margin) => {
        const { ci, p, equivalent } = tost(a, b, margin);
        fc.pre(p === null || Math.abs(p - 0.05) > 1e-9);
        return equivalent === (ci!.lower > -margin && ci!.upper < margin);
      })
    );
  });

  it('decides by the difference alone without scatter', () => {
    expect(tost([90, 90], [88, 88], 5)).toMatchObject({
      p: null,
      pLower: null,
      pUpper: null,
      equivalent: true
    });
    expect(tost([90, 90], [85, 85], 5).equivalent).toBe(false);
  });

  it('refuses a margin of zero and an alpha of a half', () => {
    expect(() => tost([1, 2], [1, 2], 0)).toThrow(/margin must be above zero/);
    expect(() => tost([1, 2], [1, 2], 1, 0.5)).toThrow(/between 0 and 1/);
  });
});

suite('holm and benjaminiHochberg', () => {
  const p = fc.array(fc.option(fc.double({ min: 0, max: 1, noNaN: true })), { minLength: 1, maxLength: 20 });

  it('never make a p smaller, never pass 1, keep order and nulls', () => {
    fc.assert(
      fc.property(p, (list) =>
        [holm, benjaminiHochberg].every((adjust) =>
          adjust(list).every((value, i) => {
            const own = list[i]!;
            if (own === null || value === null) return own === value;
            return (
              value >= own &&
              value <= 1 &&
              list.every((q, j) => q === null || q < own || adjust(list)[j]! >= value)
            );
          })
        )
      )
    );
  });

  it('keep Holm at or above Benjamini and Hochberg', () => {
    fc.assert(
      fc.property(p, (list) => {
        const strict = holm(list);
        return benjaminiHochberg(list).every((value, i) => value === null || value <= strict[i]! + 1e-15);
      })
    );
  });

  it('do not count nulls', () => {
    expect(holm([0.01, null, 0.02])).toEqual([0.02, null, 0.02]);
    expect(benjaminiHochberg([0.01, null, 0.02])).toEqual([0.02, null, 0.02]);
    expect(holm([null, null])).toEqual([null, null]);
  });

  it('refuse what is no probability', () => {
    expect(() => holm([0.2, 1.2])).toThrow(/p-value 2 must lie between 0 and 1/);
    expect(() => benjaminiHochberg([NaN])).toThrow(/p-value 1/);
  });
});

suite('oneWayAnova', () => {
  it('splits the total sum of squares', () => {
    fc.assert(
      fc.property(fc.array(replicates(), { minLength: 2, maxLength: 6 }), (groups) => {
        const { between, within } = oneWayAnova(groups);
        const all = groups.flat();
        const total = describe(all).sd! ** 2 * (all.length - 1);
        return near(between.ss + within.ss, total, 1) && between.df + within.df === all.length - 1;
      })
    );
  });

  it('equals the square of the pooled t at two groups of equal size', () => {
    const a = [80, 85, 91];
    const b = [70, 77, 72];
    const { f } = oneWayAnova([a, b]);
    expect(f).toBeCloseTo(welch(a, b).t! ** 2, 10);
  });

  it('has no F when nothing varies within groups', () => {
    expect(
      oneWayAnova([
        [1, 1],
        [2, 2]
      ])
    ).toMatchObject({ f: null, p: null, within: { ss: 0, df: 2, ms: 0 } });
  });

  it('refuses single values in every group', () => {
    expect(() => oneWayAnova([[1], [2]])).toThrow(/one value in each/);
  });
});

suite('brownForsythe', () => {
  it('does not see where groups lie, only how they scatter', () => {
    const groups = [
      [80, 85, 91],
      [70, 77, 72]
    ];
    const moved = groups.map((group, i) => group.map((value) => value + 100 * i));
    expect(brownForsythe(moved).f).toBeCloseTo(brownForsythe(groups).f!, 10);
  });

  it('has no F when all deviations are equal', () => {
    expect(
      brownForsythe([
        [1, 3],
        [2, 4]
      ])
    ).toEqual({ f: null, df1: 1, df2: 2, p: null });
  });
});

suite('tukeyKramer', () => {
  it('gives each pair once, a before b, and a p below 5 % exactly when the interval leaves zero out', () => {
    const groups = [
      [80, 85, 91],
      [70, 77, 72, 71],
      [95, 97]
    ];
    const pairs = tukeyKramer(groups);
    expect(pairs.map(({ a, b }) => [a, b])).toEqual([
      [0, 1],
      [0, 2],
      [1, 2]
    ]);
    for (const { p, ci } of pairs) expect(p! < 0.05).toBe(ci.lower > 0 || ci.upper < 0);
  });

  it('is the pooled t test at two groups', () => {
    const [pair] = tukeyKramer([
      [80, 85, 91],
      [70, 77, 72]
    ]);
    expect(pair!.p).toBeCloseTo(studentTwoSided(pair!.q! / Math.SQRT2, 4), 10);
  });

  it('has no q or p when nothing varies within groups', () => {
    expect(
      tukeyKramer([
        [1, 1],
        [3, 3]
      ])[0]
    ).toEqual({
      a: 0,
      b: 1,
      difference: -2,
      ci: { lower: -2, upper: -2, level: 0.95 },
      q: null,
      p: null
    });
  });
});

suite('the studentized range', () => {
  it('at k = 2 is Student t, to 1e-10, at any degrees of freedom', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.01, max: 60, noNaN: true }),
        fc.double({ min: 1, max: 500, noNaN: true }),
        (q, df) => Math.abs(studentizedRangeUpper(q, 2, df) - studentTwoSided(q / Math.SQRT2, df)) < 1e-10
      ),
      { numRuns: 60 }
    );
  });

  it('inverts its own tail', () => {
    for (const [upper, k, df] of [
      [0.05, 3, 4],
      [0.001, 8, 11],
      [0.5, 5, 2],
      [0.9, 3, 30]
    ] as const) {
      expect(studentizedRangeUpper(studentizedRangeQuantile(upper, k, df), k, df)).toBeCloseTo(upper, 11);
    }
  });
});
