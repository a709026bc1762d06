import fc from 'fast-check';
import { describe as suite, expect, it } from 'vitest';
import { assess, describe, massBalance } from '../../../src/lib/server/stats/index';
import { replicates } from './arbitrary';

const criteria = { low: 70, high: 130, rsdMax: 20, nMin: 4 };
const verdict = (values: readonly number[], level = 0.95, more = {}) =>
  assess(describe(values, level), { ...criteria, ...more });

suite('assess', () => {
  it('is inside when mean, interval and RSD bound all keep to the criteria', () => {
    expect(verdict([92, 95, 90, 94, 93])).toEqual({ verdict: 'inside', reasons: [] });
  });

  it('is too few below the least number of replicates, whatever the figures', () => {
    expect(verdict([10, 200, 90])).toEqual({ verdict: 'too few', reasons: ['n 3 < 4'] });
  });

  it('is outside when mean or RSD breaks a criterion, and says by how much', () => {
    expect(verdict([60, 61, 62, 63])).toEqual({ verdict: 'outside', reasons: ['mean 61.5 < 70'] });
    expect(verdict([140, 141, 142, 143]).reasons).toEqual(['mean 142 > 130']);
    expect(verdict([60, 80, 100, 120]).verdict).toBe('outside');
    expect(verdict([60, 80, 100, 120]).reasons[0]).toMatch(/^RSD 28.7 > 20$/);
  });

  it('counts the limits themselves as inside', () => {
    // Mean 70 and RSD 20 exactly: SD 14 around 70 from values 70 -+ 14 sqrt(3)/2 and 70 twice.
    const d = describe([70, 70, 70, 70]);
    expect(assess(d, criteria).verdict).toBe('inside');
    const spread = 14 * Math.sqrt(1.5);
    const onLimit = assess(describe([70 + spread, 70 - spread, 70, 70]), { ...criteria, low: 0 });
    expect(onLimit.verdict).toBe('watch');
    expect(onLimit.reasons.join()).not.toMatch(/^RSD/);
  });

  it('is watch when the 95 % interval of the mean reaches past a limit', () => {
    const result = verdict([71, 80, 68, 75, 77]);
    expect(result.verdict).toBe('watch');
    expect(result.reasons).toEqual([expect.stringMatching(/^lower 95 % bound of the mean 68\.\d < 70$/)]);
  });

  it('uses 95 % for the mean whatever level the description has', () => {
    const values = [71, 80, 68, 75, 77];
    expect(verdict(values, 0.5)).toEqual(verdict(values, 0.95));
    expect(verdict(values, 0.999)).toEqual(verdict(values, 0.95));
  });

  it('is watch when the 80 % bound of the RSD passes its limit, or is not finite', () => {
    const result = verdict([75, 95, 110, 104, 90, 100], 0.95, { rsdMax: 14 });
    expect(result.verdict).toBe('watch');
    expect(result.reasons).toEqual([expect.stringMatching(/^80 % upper bound of the RSD \d+(\.\d)? > 14$/)]);
    const wild = assess(describe([1, 60, 2, 1, 3, 1]), { low: -100, high: 200, rsdMax: 500, nMin: 4 });
    expect(wild.verdict).toBe('watch');
  });

  it('is watch when the mean has no interval', () => {
    expect(assess(describe([90]), { ...criteria, nMin: 1, rsdMax: null })).toEqual({
      verdict: 'watch',
      reasons: ['the mean has no 95 % interval']
    });
  });

  it('skips the RSD when there is no criterion for it', () => {
    expect(verdict([60, 80, 100, 120, 90, 90, 90, 90, 100, 80], 0.95, { rsdMax: null }).verdict).toBe(
      'inside'
    );
  });

  it('rests on the degrees of freedom of a net total at any level', () => {
    const balance = (level: number) =>
      massBalance({
        replicates: [182, 195, 204, 188].map((elution) => ({ elution })),
        native: [98, 107, 119].map((elution) => ({ elution })),
        fractions: [{ name: 'elution', countsAs: 'method' }],
        level
      }).method!;
    const tight = { low: 65, high: 130, rsdMax: null, nMin: 4 };
    expect(assess(balance(0.95), tight)).toEqual(assess(balance(0.6), tight));
  });

  it('shows as many digits as it takes for a figure to differ from its limit', () => {
    const result = verdict([69.9999, 69.9999, 69.9999, 69.9999]);
    expect(result.reasons).toEqual(['mean 69.9999 < 70']);
  });

  it('never gets worse when the criteria widen', () => {
    const rank = { inside: 0, watch: 1, outside: 2, 'too few': 3 };
    fc.assert(
      fc.property(replicates(4, 8), fc.double({ min: 0, max: 50, noNaN: true }), (values, extra) => {
        const d = describe(values);
        const wider = { low: 70 - extra, high: 130 + extra, rsdMax: 20 + extra, nMin: 4 };
        return rank[assess(d, wider).verdict] <= rank[assess(d, criteria).verdict];
      })
    );
  });

  it('refuses limits the wrong way round', () => {
    expect(() => assess(describe([1, 2]), { low: 130, high: 70, rsdMax: 20, nMin: 4 })).toThrow(
      /130 is above the highest, 70/
    );
  });
});
