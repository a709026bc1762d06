import fc from 'fast-check';
import { describe as suite, expect, it } from 'vitest';
import * as stats from '../../../src/lib/server/stats/index';
import { near, replicates, shuffled } from './arbitrary';

suite('power and replicates', () => {
  it('has the power of alpha at no difference, two-sided and one-sided', () => {
    for (const n of [2, 5, 30]) {
      expect(stats.powerTwoSample({ difference: 0, sd: 1, n, alpha: 0.03 })).toBeCloseTo(0.03, 10);
      expect(stats.powerTwoSample({ difference: 0, sd: 1, n, sides: 1 })).toBeCloseTo(0.05, 10);
    }
  });

  it('grows with the replicates and with the difference, whichever way it points', () => {
    fc.assert(
      fc.property(fc.integer({ min: 2, max: 30 }), fc.integer({ min: 1, max: 40 }), (n, tenths) => {
        const power = (size: number, count: number) =>
          stats.powerTwoSample({ difference: size, sd: 1, n: count });
        const base = power(tenths / 10, n);
        return (
          power(tenths / 10, n + 1) >= base - 1e-12 &&
          power(tenths / 10 + 0.1, n) >= base - 1e-12 &&
          near(power(-tenths / 10, n), base)
        );
      }),
      { numRuns: 40 }
    );
  });

  it('finds the smallest number that reaches the power', () => {
    for (const [difference, sd, power] of [
      [10, 8, 0.8],
      [30, 8, 0.95],
      [3, 10, 0.8]
    ] as const) {
      const n = stats.replicatesForDifference({ difference, sd, power });
      expect(stats.powerTwoSample({ difference, sd, n })).toBeGreaterThanOrEqual(power);
      if (n > 2) expect(stats.powerTwoSample({ difference, sd, n: n - 1 })).toBeLessThan(power);
    }
  });

  it('says when no number would do', () => {
    expect(() => stats.replicatesForDifference({ difference: 0, sd: 1 })).toThrow(/no number of replicates/);
    expect(() => stats.replicatesForDifference({ difference: 1e-9, sd: 1 })).toThrow(/More than 1000000/);
    expect(() => stats.replicatesForRsd({ rsd: 20, limit: 20 })).toThrow(/not below the limit 20/);
    expect(() => stats.replicatesForRsd({ rsd: 25, limit: 20 })).toThrow(/not below the limit 20/);
  });

  it('asks for the half width that the interval of exactly that SD has', () => {
    const n = stats.replicatesForHalfWidth({ sd: 10, halfWidth: 7 });
    const halfWidth = (count: number) => {
      const d = stats.describe(Array.from({ length: count }, (_, i) => i));
      return ((d.ci!.upper - d.mean) / d.sd!) * 10;
    };
    expect(halfWidth(n)).toBeLessThanOrEqual(7);
    expect(halfWidth(n - 1)).toBeGreaterThan(7);
  });
});

suite('grubbs', () => {
  it('points at the value farthest out, at its place', () => {
    expect(stats.grubbs([80, 81, 20, 79, 82, 80])).toMatchObject({ index: 2, outlier: true, note: null });
    expect(stats.grubbs([80, 81, 20, 79, 82, 80], { side: 'high' })).toMatchObject({
      index: 4,
      outlier: false
    });
  });

  it('has p below alpha exactly when it calls an outlier', () => {
    fc.assert(
      fc.property(
        replicates(4, 10),
        fc.constantFrom('both' as const, 'low' as const, 'high' as const),
        (values, side) => {
          const { p, outlier } = stats.grubbs(values, { side });
          return p === null || Math.abs(p - 0.05) < 1e-9 || p < 0.05 === outlier;
        }
      )
    );
  });

  it('follows its value through any order', () => {
    fc.assert(
      fc.property(shuffled(replicates(4, 10)), ([values, other]) => {
        const a = stats.grubbs(values);
        const b = stats.grubbs(other);
        return near(a.statistic, b.statistic, 1);
      })
    );
  });

  it('has no statistic for equal values, and says how little three values tell', () => {
    expect(stats.grubbs([5, 5, 5, 5])).toMatchObject({
      statistic: null,
      p: null,
      index: null,
      outlier: false
    });
    expect(stats.grubbs([5, 5, 9]).note).toMatch(/three values/);
  });
});

suite('cochran', () => {
  it('points at the group that scatters most', () => {
    const groups = [
      [80, 81],
      [79, 80],
      [60, 100],
      [82, 81],
      [80, 80.5]
    ];
    expect(stats.cochran(groups)).toMatchObject({ index: 2, outlier: true, note: null });
  });

  it('uses the mean size of unequal groups and says so', () => {
    expect(
      stats.cochran([
        [1, 2],
        [1, 2, 3, 4]
      ]).note
    ).toMatch(/mean size 3/);
  });

  it('has no statistic when no group scatters', () => {
    expect(
      stats.cochran([
        [1, 1],
        [2, 2]
      ])
    ).toMatchObject({ statistic: null, index: null, outlier: false });
  });
});

suite('methodDetectionLimit', () => {
  const spiked = [4.45, 4.74, 5.31, 4.66, 4.69, 6.23, 3.72];
  const blanks = [0.61, 0.31, 1.44, 0.09, 0.06, 0.43, 0.25];

  it('takes the larger of the two', () => {
    const high = stats.methodDetectionLimit({ spiked, blanks: blanks.map((blank) => blank + 10) });
    expect(high.mdl).toBe(high.fromBlanks);
    const low = stats.methodDetectionLimit({ spiked, blanks });
    expect(low.mdl).toBe(low.fromSpiked);
  });

  it('counts a blank mean below zero as zero', () => {
    const shifted = (by: number) =>
      stats.methodDetectionLimit({ spiked, blanks: blanks.map((blank) => blank + by) }).fromBlanks!;
    expect(shifted(-5)).toBeCloseTo(shifted(-50), 10);
    expect(shifted(0)).toBeGreaterThan(shifted(-5));
  });

  it('takes the highest blank when only some gave a number, and none when none did', () => {
    const some = stats.methodDetectionLimit({ spiked, blanks: [null, 0.2, null, 0.9, null, null, 0.1] });
    expect(some.fromBlanks).toBe(0.9);
    expect(some.rule).toMatch(/highest of 3 numeric among 7/);
    expect(stats.methodDetectionLimit({ spiked, blanks: Array(7).fill(null) }).fromBlanks).toBeNull();
    expect(stats.methodDetectionLimit({ spiked }).fromBlanks).toBeNull();
  });

  it('asks for seven of each', () => {
    expect(() => stats.methodDetectionLimit({ spiked: spiked.slice(1) })).toThrow(
      /Spiked results: 6 given, at least 7/
    );
    expect(() => stats.methodDetectionLimit({ spiked, blanks: blanks.slice(1) })).toThrow(
      /Method blanks: 6 given, at least 7/
    );
  });
});

suite('quantitationConfirmation', () => {
  it('holds exactly when both bounds lie within 50 to 150 %', () => {
    fc.assert(
      fc.property(replicates(7, 7), (values) => {
        const { lower, upper, holds, halfRange } = stats.quantitationConfirmation({ values, fortified: 100 });
        const { mean } = stats.describe(values);
        return holds === (lower >= 50 && upper <= 150) && near(upper - mean, halfRange, 1e3);
      })
    );
  });

  it('refuses a fortified amount of zero', () => {
    expect(() => stats.quantitationConfirmation({ values: [1, 2], fortified: 0 })).toThrow(
      /Fortified amount is zero/
    );
  });
});

suite('precisionComponents', () => {
  it('adds repeatability and between-group variance', () => {
    fc.assert(
      fc.property(fc.array(replicates(2, 5), { minLength: 2, maxLength: 6 }), (groups) => {
        const c = stats.precisionComponents(groups);
        return near(c.intermediateSd, Math.hypot(c.repeatabilitySd, c.betweenSd), 1) && c.betweenSd >= 0;
      })
    );
  });

  it('counts a negative between-group variance as zero and says so', () => {
    const c = stats.precisionComponents([
      [80, 100],
      [81, 99]
    ]);
    expect(c.betweenSd).toBe(0);
    expect(c.intermediateSd).toBe(c.repeatabilitySd);
    expect(c.note).toMatch(/negative/);
    expect(
      stats.precisionComponents([
        [80, 81],
        [99, 100]
      ]).note
    ).toBeNull();
  });

  it('has no RSD for a mean that is not above zero', () => {
    expect(
      stats.precisionComponents([
        [-1, 1],
        [-2, 2]
      ])
    ).toMatchObject({ repeatabilityRsd: null, intermediateRsd: null });
  });
});

suite('matrixEffect', () => {
  const neat = [100, 102, 98];
  const postSpiked = [82, 80, 84];
  const preSpiked = [61, 63, 65];

  it('multiplies: process efficiency is matrix effect times recovery', () => {
    const result = stats.matrixEffect({ neat, postSpiked, preSpiked, native: [4, 5, 3] });
    const product = (result.matrixEffect.estimate! * result.recovery.estimate!) / 100;
    expect(result.processEfficiency.estimate).toBeCloseTo(product, 10);
  });

  it('is 100 % without a matrix effect', () => {
    expect(stats.matrixEffect({ neat, postSpiked: neat, preSpiked: neat }).matrixEffect.estimate).toBe(100);
  });

  it('gives an se in percent that a sample can carry on', () => {
    const { estimate, se, df, ci } = stats.matrixEffect({ neat, postSpiked, preSpiked }).matrixEffect;
    const relative = Math.hypot(
      ...[neat, postSpiked].map((list) => stats.describe(list).se! / stats.describe(list).mean)
    );
    expect(se! / estimate!).toBeCloseTo(relative, 12);
    expect(ci!.lower * ci!.upper).toBeCloseTo(estimate! ** 2, 8);
    const net = stats.netMean({
      values: preSpiked,
      matrixEffect: { key: 'm', estimate: estimate!, se: se!, df: df! }
    });
    expect(net.estimate).toBeCloseTo((100 * 63) / estimate!, 10);
  });

  it('counts the native mean once in the recovery: what it adds above it takes away below', () => {
    const native = [20, 40];
    const same = stats.matrixEffect({ neat, postSpiked: preSpiked, preSpiked, native }).recovery;
    const without = stats.matrixEffect({
      neat,
      postSpiked: preSpiked.map((v) => v - 30),
      preSpiked: preSpiked.map((v) => v - 30)
    }).recovery;
    // Equal means above and below: the net coefficient of the native mean is zero.
    expect(same.se).toBeCloseTo(without.se!, 10);
  });

  it('does not exist where nothing is left after the native response', () => {
    expect(
      stats.matrixEffect({ neat, postSpiked: [1, 2], preSpiked, native: [5] }).matrixEffect.estimate
    ).toBeNull();
  });
});

suite('small figures', () => {
  it('recovers what was found over what was added, native taken off', () => {
    expect(stats.recovery({ found: 180, spiked: 200 })).toBe(90);
    expect(stats.recovery({ found: 280, spiked: 200, native: 100 })).toBe(90);
    expect(stats.recovery({ found: 0, spiked: 200, native: 10 })).toBe(-5);
  });

  it('has a relative percent difference without sign, the same either way round', () => {
    expect(stats.relativePercentDifference(90, 110)).toBe(20);
    expect(stats.relativePercentDifference(110, 90)).toBe(20);
    expect(() => stats.relativePercentDifference(0, 0)).toThrow(/must be above zero/);
  });

  it('puts warning at two and action at three SD', () => {
    const limits = stats.controlLimits([90, 100, 110]);
    expect(limits).toMatchObject({
      centre: 100,
      warning: { lower: 80, upper: 120 },
      action: { lower: 70, upper: 130 }
    });
  });

  it('divides by the slope for limits of detection', () => {
    expect(stats.detectionLimits({ sigma: 2, slope: 4 })).toEqual({ lod: expect.closeTo(1.65, 12), loq: 5 });
  });

  it('joins the three parts of the Thompson curve at their ends', () => {
    expect(stats.thompsonRsd(1.2e-7)).toBeCloseTo(22, 0);
    expect(stats.thompsonRsd(0.138)).toBeCloseTo(0.138 ** -0.5, 1);
    expect(() => stats.horwitzRsd(1.5)).toThrow(/at most 1/);
    expect(() => stats.thompsonRsd(0)).toThrow(/above zero/);
  });
});
