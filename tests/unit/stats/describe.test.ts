import fc from 'fast-check';
import { sampleStandardDeviation } from 'simple-statistics';
import { describe as suite, expect, it } from 'vitest';
import { describe } from '../../../src/lib/server/stats/index';
import { near, replicates, shuffled } from './arbitrary';

suite('describe', () => {
  it('gives count, mean, SD, RSD, standard error and extremes of a worked example', () => {
    const d = describe([80, 90, 100]);
    expect(d).toMatchObject({ n: 3, mean: 90, sd: 10, min: 80, max: 100 });
    expect(d.rsd).toBeCloseTo(100 / 9, 12);
    expect(d.se).toBeCloseTo(10 / Math.sqrt(3), 12);
  });

  it('has no SD, error or interval for a single value', () => {
    const none = { sd: null, rsd: null, se: null, ci: null, sdCi: null, rsdCi: null };
    expect(describe([83])).toEqual({ n: 1, mean: 83, min: 83, max: 83, ...none });
  });

  it('has no RSD for a mean that is zero or below', () => {
    for (const values of [
      [-1, 1],
      [-5, -4]
    ]) {
      const d = describe(values);
      expect(d.rsd).toBeNull();
      expect(d.rsdCi).toBeNull();
      expect(d.ci).not.toBeNull();
    }
  });

  it('has no RSD interval where the upper bound is not finite', () => {
    expect(describe([1, 100, 2]).rsd).toBeGreaterThan(100);
    expect(describe([1, 100, 2]).rsdCi).toBeNull();
  });

  it('shrinks every interval to the point when all values are equal, whatever the rounding of their sum', () => {
    const d = describe([0.1, 0.1, 0.1]);
    expect(d).toMatchObject({ mean: 0.1, sd: 0, rsd: 0, se: 0 });
    expect(d.ci).toEqual({ lower: 0.1, upper: 0.1, level: 0.95 });
    expect(d.sdCi).toEqual({ lower: 0, upper: 0, level: 0.95 });
    expect(d.rsdCi).toEqual({ lower: 0, upper: 0, level: 0.95 });
  });

  it('keeps the spread of values whose squared deviations are smaller than any double', () => {
    const d = describe([1e-200, 3e-200]);
    expect(d.sd! / 1e-200).toBeCloseTo(Math.SQRT2, 12);
    expect(d.rsd).toBeCloseTo(100 / Math.SQRT2, 10);
  });

  it('does not change its input', () => {
    const values = Object.freeze([3, 1, 2]);
    describe(values);
    expect(values).toEqual([3, 1, 2]);
  });

  it('agrees with simple-statistics on the SD', () => {
    fc.assert(
      fc.property(replicates(), (values) =>
        near(describe(values).sd, sampleStandardDeviation(values), 1, 1e-12)
      )
    );
  });

  it('does not depend on the order of the values', () => {
    fc.assert(
      fc.property(shuffled(replicates()), ([values, other]) => {
        const a = describe(values);
        const b = describe(other);
        return near(a.mean, b.mean) && near(a.sd, b.sd) && near(a.ci!.lower, b.ci!.lower, 1e3);
      })
    );
  });

  it('moves with a shift: mean and its interval follow, the SD stays', () => {
    fc.assert(
      fc.property(replicates(), fc.double({ min: -1e3, max: 1e3, noNaN: true }), (values, shift) => {
        const a = describe(values);
        const b = describe(values.map((value) => value + shift));
        return (
          near(b.mean, a.mean + shift, 1e3) &&
          near(b.sd, a.sd, 1e3) &&
          near(b.sdCi!.upper, a.sdCi!.upper, 1e5)
        );
      })
    );
  });

  it('scales: everything in the unit of the values follows, RSD and its interval stay', () => {
    fc.assert(
      fc.property(replicates(), fc.double({ min: 1e-3, max: 1e3, noNaN: true }), (values, factor) => {
        const a = describe(values);
        const b = describe(values.map((value) => value * factor));
        const sameBounds = a.rsdCi === null || b.rsdCi === null || near(b.rsdCi.lower, a.rsdCi.lower, 1e-6);
        return (
          near(b.mean, a.mean * factor) && near(b.sd, a.sd! * factor) && near(b.rsd, a.rsd, 1) && sameBounds
        );
      })
    );
  });

  it('nests intervals: a higher level contains a lower one, all contain the estimate', () => {
    fc.assert(
      fc.property(replicates(), (values) => {
        const narrow = describe(values, 0.8);
        const wide = describe(values, 0.99);
        return (
          wide.ci!.lower <= narrow.ci!.lower &&
          narrow.ci!.lower <= narrow.mean &&
          narrow.mean <= narrow.ci!.upper &&
          narrow.ci!.upper <= wide.ci!.upper &&
          wide.sdCi!.lower <= narrow.sdCi!.lower &&
          narrow.sdCi!.upper <= wide.sdCi!.upper
        );
      })
    );
  });
});
