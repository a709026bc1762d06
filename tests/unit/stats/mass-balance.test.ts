import fc from 'fast-check';
import { describe as suite, expect, it } from 'vitest';
import { describe, massBalance, netMean, type Value } from '../../../src/lib/server/stats/index';
import { near, percent } from './arbitrary';

const fractions = [
  { name: 'elution', countsAs: 'method' },
  { name: 'second elution', countsAs: 'method' },
  { name: 'effluent', countsAs: 'balance' }
] as const;

const record = (elution: Value, second: Value, effluent: Value) => ({
  elution,
  'second elution': second,
  effluent
});
const full = [record(70, 5, 10), record(72, 6, 8), record(66, 9, 12), record(71, 4, 9)];

suite('massBalance', () => {
  it('sums per replicate first and describes the sums', () => {
    const balance = massBalance({ replicates: full, fractions });
    expect(balance.method).toMatchObject(describe([75, 78, 75, 75]));
    expect(balance.balance).toMatchObject(describe([85, 86, 87, 84]));
    expect(balance.fractions.map((fraction) => fraction.mean)).toEqual([69.75, 6, 9.75]);
    expect(balance.unaccounted!.estimate).toBeCloseTo(14.5, 12);
    expect(balance.incomplete).toEqual({ method: [], balance: [] });
  });

  it('keeps a replicate that lacks a balance fraction for the method figures only', () => {
    const balance = massBalance({ replicates: [...full, record(70, 5, null)], fractions });
    expect(balance.method!.n).toBe(5);
    expect(balance.balance!.n).toBe(4);
    expect(balance.fractions.every((fraction) => fraction.n === 4)).toBe(true);
    expect(balance.incomplete).toEqual({ method: [], balance: [4] });
  });

  it('treats an absent name like a missing value, never as zero', () => {
    const balance = massBalance({ replicates: [...full, { elution: 70, effluent: 5 }], fractions });
    expect(balance.incomplete).toEqual({ method: [4], balance: [4] });
    expect(balance.method!.n).toBe(4);
  });

  it('gives null totals and no fractions when no replicate is complete', () => {
    const balance = massBalance({ replicates: [record(70, null, 5)], fractions });
    expect(balance).toMatchObject({ method: null, balance: null, unaccounted: null, fractions: [] });
  });

  it('gives a method total alone when only the balance is incomplete', () => {
    const balance = massBalance({ replicates: [record(70, 5, null), record(71, 4, null)], fractions });
    expect(balance.method!.mean).toBe(75);
    expect(balance.balance).toBeNull();
  });

  it('has no method total when no fraction counts for the method', () => {
    const balance = massBalance({
      replicates: [{ wash: 3 }],
      fractions: [{ name: 'wash', countsAs: 'balance' }]
    });
    expect(balance.method).toBeNull();
    expect(balance.balance!.mean).toBe(3);
  });

  it('counts not-detected as zero, and at its limit in high', () => {
    const balance = massBalance({
      replicates: [record(70, 5, { below: 4 }), record(72, 6, 8), record(71, { below: 2 }, 6)],
      fractions
    });
    expect(balance.balance).toMatchObject({
      mean: (75 + 86 + 77) / 3,
      high: (79 + 86 + 79) / 3,
      notDetected: 2
    });
    expect(balance.method).toMatchObject({
      mean: (75 + 78 + 71) / 3,
      high: (75 + 78 + 73) / 3,
      notDetected: 1
    });
    expect(balance.fractions[2]).toMatchObject({ notDetected: 1, ci: null });
    expect(balance.fractions[0]).toMatchObject({ notDetected: 0 });
    expect(balance.fractions[0]!.ci).not.toBeNull();
  });

  it('calls a rest significant only when limits of not-detected values cannot explain it', () => {
    const replicate = (elution: number, below: number) => ({
      elution,
      'second elution': 0,
      effluent: { below }
    });
    const rest = (below: number) =>
      massBalance({ replicates: [80, 81, 79, 80].map((value) => replicate(value, below)), fractions })
        .unaccounted!;
    expect(rest(1).significant).toBe(true);
    expect(rest(20).significant).toBe(false);
    expect(rest(25).significant).toBe(false);
  });

  it('does not call a rest significant whose interval holds zero', () => {
    const replicates = [90, 110, 95, 104].map((elution) => record(elution, 0, 0));
    expect(massBalance({ replicates, fractions }).unaccounted!.significant).toBe(false);
  });

  it('is net of native portions in every figure, with their uncertainty', () => {
    const native = [record(20, 1, 2), record(24, 1, 2), record(22, 1, 2)];
    const balance = massBalance({ replicates: full, fractions, native });
    const totals = [75, 78, 75, 75];
    const expected = netMean({ values: totals, native: [21, 25, 23] });
    const method = balance.method!;
    expect(method.mean).toBeCloseTo(expected.estimate!, 12);
    expect(method.se).toBeCloseTo(expected.se!, 12);
    expect(method.df).toBeCloseTo(expected.df!, 12);
    expect(method.ci!.lower).toBeCloseTo(expected.ci!.lower, 10);
    expect(method.sd).toBeCloseTo(describe(totals).sd!, 12);
    expect(method.rsd).toBeCloseTo((100 * describe(totals).sd!) / method.mean, 10);
    expect([method.min, method.max]).toEqual([52, 55]);
    expect(method.high).toBe(method.mean);
  });

  it('leaves incomplete native portions out, and has no total when none is complete', () => {
    const native = [record(20, 1, null), record(24, 1, null)];
    const balance = massBalance({ replicates: full, fractions, native });
    expect(balance.method!.mean).toBeCloseTo(75.75 - 23, 12);
    expect(balance.balance).toBeNull();
    expect(balance.fractions).toEqual([]);
  });

  it('subtracts native by batch, following the replicates that are left', () => {
    const balance = massBalance({
      replicates: [record(180, 0, 0), record(null, 0, 0), record(150, 0, 0)],
      native: [record(100, 0, 0), record(60, 0, 0)],
      batches: ['a', 'a', 'b'],
      nativeBatches: ['a', 'b'],
      fractions
    });
    expect(balance.method).toMatchObject({ min: 80, max: 90, n: 2 });
  });

  it('has no shares when the balance is not above zero', () => {
    const balance = massBalance({
      replicates: [record(1, 1, 1)],
      native: [record(2, 2, 2)],
      fractions
    });
    expect(balance.fractions.map((fraction) => fraction.share)).toEqual([null, null, null]);
  });

  it('gives shares and fraction means that add up, for any complete replicates', () => {
    const replicate = fc.record({ elution: percent, 'second elution': percent, effluent: percent });
    fc.assert(
      fc.property(fc.array(replicate, { minLength: 1, maxLength: 8 }), (replicates) => {
        const balance = massBalance({ replicates, fractions });
        const sum = balance.fractions.reduce((total, fraction) => total + fraction.mean, 0);
        const shares = balance.fractions.reduce((total, fraction) => total + fraction.share!, 0);
        return (
          near(sum, balance.balance!.mean) &&
          near(shares, 1) &&
          near(balance.unaccounted!.estimate! + balance.balance!.mean, 100, 100)
        );
      })
    );
  });

  it('does not depend on the order of fractions or replicates', () => {
    const a = massBalance({ replicates: full, fractions });
    const b = massBalance({ replicates: full.toReversed(), fractions: fractions.toReversed() });
    expect(b.balance!.mean).toBeCloseTo(a.balance!.mean, 12);
    expect(b.balance!.sd).toBeCloseTo(a.balance!.sd!, 12);
    expect(b.fractions.at(-1)!.share).toBeCloseTo(a.fractions[0]!.share!, 12);
  });

  it('refuses fractions nobody declared or declared twice, naming the place', () => {
    const one = [{ name: 'elution', countsAs: 'method' as const }];
    expect(() =>
      massBalance({ replicates: [{ elution: 1 }, { elution: 1, wash: 2 }], fractions: one })
    ).toThrow(/Replicate 2 holds "wash"/);
    expect(() => massBalance({ replicates: [{ elution: 1 }], fractions: [...one, ...one] })).toThrow(
      /"elution" is given twice/
    );
  });

  it('refuses values that are no numbers, naming replicate and fraction', () => {
    expect(() => massBalance({ replicates: [record(70, 5, NaN)], fractions })).toThrow(
      /Replicate 1, fraction "effluent"/
    );
    expect(() => massBalance({ replicates: [record(70, 5, { below: -1 })], fractions })).toThrow(
      /limit of "effluent"/
    );
    expect(() => massBalance({ replicates: full, fractions, native: [] })).toThrow(/list is empty/);
    expect(() => massBalance({ replicates: [], fractions })).toThrow(/No replicate/);
  });
});
