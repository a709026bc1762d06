import fc from 'fast-check';
import { describe as suite, expect, it } from 'vitest';
import { replicatesForRsd } from '../../../src/lib/server/stats/index';
import {
  chiSquareCdf,
  chiSquareUpper,
  fisherUpper,
  studentCentral,
  studentTwoSided,
  studentUpper
} from '../../../src/lib/server/stats/distributions';
import {
  chiSquareQuantile,
  chiSquareUpperQuantile,
  fisherQuantile,
  studentQuantile
} from '../../../src/lib/server/stats/quantiles';

const df = fc.double({ min: 0.5, max: 5000, noNaN: true });
const tail = fc.double({ min: -60, max: -0.31, noNaN: true }).map((log) => 10 ** log);
const sameTail = (a: number, b: number) => Math.abs(a / b - 1) < 1e-9;

suite('quantiles', () => {
  it('give back the tail they were asked for, down to 1e-60', () => {
    fc.assert(
      fc.property(tail, df, df, (p, a, b) => {
        const t = studentQuantile(p, a);
        return (
          (t > 1e140 || sameTail(studentUpper(t, a), p)) &&
          sameTail(chiSquareUpper(chiSquareUpperQuantile(p, a), a), p) &&
          sameTail(fisherUpper(fisherQuantile(p, a, b), a, b), p)
        );
      })
    );
  });

  it('give back lower tails of chi-square', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-9, max: 0.99, noNaN: true }), df, (p, v) =>
        sameTail(chiSquareCdf(chiSquareQuantile(p, v), v), p)
      )
    );
  });

  it('are right in the far tail of t, where the library inverse is not', () => {
    // R 4.2.2: qt(1e-9, 100, lower.tail = FALSE)
    expect(studentQuantile(1e-9, 100)).toBeCloseTo(6.598939821, 8);
  });

  it('are symmetric for t, and zero in the middle', () => {
    expect(studentQuantile(0.5, 7)).toBe(0);
    expect(studentQuantile(0.975, 7)).toBeCloseTo(-studentQuantile(0.025, 7), 12);
    expect(studentQuantile(0.4999999, 7)).toBeGreaterThan(0);
  });

  it('fall smoothly into the normal limit', () => {
    expect(studentQuantile(0.025, 1e5 + 1) / studentQuantile(0.025, 1e5 - 1)).toBeCloseTo(1, 9);
    expect(studentTwoSided(3, 1e5 + 1) / studentTwoSided(3, 1e5 - 1)).toBeCloseTo(1, 8);
    expect(studentQuantile(0.025, 1e12)).toBeCloseTo(1.959963984540054, 11);
  });
});

suite('tails far out', () => {
  it('reach one and zero on the right side', () => {
    for (const v of [1, 5, 300]) {
      expect([chiSquareCdf(1e6, v), chiSquareUpper(1e6, v)]).toEqual([1, 0]);
      expect(chiSquareUpper(1e-300, v)).toBeCloseTo(1, 12);
      expect(chiSquareCdf(1e-300, v)).toBeLessThan(1e-140);
      expect([chiSquareCdf(Infinity, v), chiSquareUpper(Infinity, v)]).toEqual([1, 0]);
    }
    expect(fisherUpper(1e-300, 40, 4000)).toBeCloseTo(1, 12);
    expect(fisherUpper(1e200, 40, 4000)).toBe(0);
    expect(studentTwoSided(1e200, 3000)).toBe(0);
  });

  it('add up to one', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 50, noNaN: true }), df, (t, v) => {
        return Math.abs(studentTwoSided(t, v) + studentCentral(t, v) - 1) < 1e-10;
      })
    );
  });

  it('let a tiny RSD be shown with two replicates', () => {
    expect(replicatesForRsd({ rsd: 0.01, limit: 20 })).toBe(2);
  });
});
