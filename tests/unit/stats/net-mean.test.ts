import fc from 'fast-check';
import { describe as suite, expect, it } from 'vitest';
import { describe, netMean, StatsError, welch } from '../../../src/lib/server/stats/index';
import { near, replicates } from './arbitrary';

suite('netMean', () => {
  it('is the mean with its t interval when there is no native', () => {
    fc.assert(
      fc.property(replicates(), (values) => {
        const d = describe(values);
        const net = netMean({ values });
        return (
          net.estimate === d.mean &&
          near(net.se, d.se, 0) &&
          net.df === d.n - 1 &&
          near(net.ci!.lower, d.ci!.lower)
        );
      })
    );
  });

  it('equals the Welch comparison with the native values when they are given as one list', () => {
    fc.assert(
      fc.property(replicates(), replicates(), (values, native) => {
        const net = netMean({ values, native });
        const test = welch(values, native);
        return (
          near(net.estimate, test.difference, 300) &&
          near(net.se, test.se, 1) &&
          near(net.df, test.df, 0, 1e-6)
        );
      })
    );
  });

  it('takes from each value the native mean of its own batch', () => {
    // Net 80, 90 | 100, 90 around native means 100 and 50; s_net^2 = 200/3; s_u^2 pooled = (2 + 8)/2 = 5.
    const sample = {
      values: [180, 190, 150, 140],
      native: [99, 101, 48, 52],
      batches: ['a', 'a', 'b', 'b'],
      nativeBatches: ['a', 'a', 'b', 'b']
    };
    const net = netMean(sample);
    const terms = [200 / 3 / 4, 5 * (0.25 / 2 + 0.25 / 2)];
    expect(net.estimate).toBeCloseTo(90, 12);
    expect(net.se).toBeCloseTo(Math.sqrt(terms[0]! + terms[1]!), 12);
    expect(net.df).toBeCloseTo((terms[0]! + terms[1]!) ** 2 / (terms[0]! ** 2 / 3 + terms[1]! ** 2 / 2), 10);
  });

  it('takes the SD of native values over all of them when no batch has two', () => {
    const net = netMean({
      values: [180, 190, 150, 140],
      native: [100, 60],
      batches: ['a', 'a', 'b', 'b'],
      nativeBatches: ['a', 'b']
    });
    const own = describe([80, 90, 90, 80]).sd! ** 2 / 4;
    expect(net.se).toBeCloseTo(Math.sqrt(own + 800 * (0.25 + 0.25)), 12);
  });

  it('takes the mean of all native values for a batch that has none', () => {
    const net = netMean({
      values: [180, 180],
      native: [100, 102],
      batches: ['a', 'c'],
      nativeBatches: ['a', 'b']
    });
    // Net values 80 and 79; the native coefficients are 1/2 + 1/4 and 1/4.
    expect(net.estimate).toBeCloseTo(79.5, 12);
    expect(net.se).toBeCloseTo(Math.sqrt(0.5 / 2 + 2 * (0.75 ** 2 + 0.25 ** 2)), 12);
  });

  it('gives an estimate without error for one value or one native value', () => {
    for (const sample of [
      { values: [80] },
      { values: [80, 82], native: [3] },
      { values: [80], native: [3, 4] }
    ]) {
      expect(netMean(sample)).toMatchObject({ se: null, df: null, ci: null });
      expect(netMean(sample).estimate).not.toBeNull();
    }
  });

  it('refuses an empty native list, and batches of another length', () => {
    expect(() => netMean({ values: [80, 82], native: [] })).toThrow(StatsError);
    expect(() =>
      netMean({ values: [80, 82], native: [1, 2], batches: ['a'], nativeBatches: ['a', 'a'] })
    ).toThrow(/batches of the spiked values: 1 given, 2 expected/);
  });

  it('divides by the matrix effect and carries its uncertainty', () => {
    const values = [60, 62, 64];
    const exact = netMean({ values, matrixEffect: { key: 'm', estimate: 80, se: 0, df: 5 } });
    const uncertain = netMean({ values, matrixEffect: { key: 'm', estimate: 80, se: 4, df: 5 } });
    expect(exact.estimate).toBeCloseTo(77.5, 12);
    expect(exact.se).toBeCloseTo((2 / Math.sqrt(3)) * 1.25, 12);
    expect(uncertain.se).toBeCloseTo(Math.hypot(exact.se!, (77.5 * 4) / 80), 12);
  });

  it('leaves native and spiked in step: the same shift of both changes nothing', () => {
    fc.assert(
      fc.property(
        replicates(),
        replicates(),
        fc.integer({ min: -100, max: 100 }),
        (values, native, shift) => {
          const a = netMean({ values, native });
          const b = netMean({ values: values.map((v) => v + shift), native: native.map((v) => v + shift) });
          return near(a.estimate, b.estimate, 500) && near(a.se, b.se, 500);
        }
      )
    );
  });
});
