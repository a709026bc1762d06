import fc from 'fast-check';
import { describe as suite, expect, it } from 'vitest';
import { massBalance, openLoss, type Estimate } from '../../../src/lib/server/stats/index';
import { near, percent } from './arbitrary';

const exact = (estimate: number): Estimate => ({ estimate, se: 0, df: null, ci: null });
const known = (estimate: number, se: number, df: number): Estimate => ({ estimate, se, df, ci: null });
const fractions = [
  { name: 'elution', passed: ['evaporation'] },
  { name: 'effluent', passed: [] }
];
const replicates = [
  { elution: 63, effluent: 12 },
  { elution: 66, effluent: 9 },
  { elution: 60, effluent: 15 }
];

suite('openLoss', () => {
  it('walks a fraction back through what it passed', () => {
    const { found, downstream, open } = openLoss({
      replicates,
      fractions,
      stepRecoveries: { evaporation: exact(0.9) }
    });
    // Elution 63 was 70 when collected; effluent counts as measured.
    expect(found.estimate).toBeCloseTo(75, 12);
    expect(downstream.estimate).toBeCloseTo(7, 12);
    expect(open.estimate).toBeCloseTo(18, 12);
  });

  it('is the unaccounted rest of the balance when nothing was passed', () => {
    const none = fractions.map(({ name }) => ({ name, passed: [] }));
    const { found, downstream, open } = openLoss({ replicates, fractions: none, stepRecoveries: {} });
    const balance = massBalance({
      replicates,
      fractions: fractions.map(({ name }) => ({ name, countsAs: 'balance' }))
    });
    expect(downstream).toMatchObject({ estimate: 0, se: 0 });
    expect(found.se).toBeCloseTo(balance.balance!.se!, 12);
    expect(open.estimate).toBeCloseTo(balance.unaccounted!.estimate!, 12);
    expect(open.se).toBeCloseTo(balance.unaccounted!.se!, 12);
    expect(open.df).toBe(2);
  });

  it('adds to 100 whatever the figures', () => {
    const record = fc.record({ elution: percent, effluent: percent });
    const ratio = fc.double({ min: 0.05, max: 1.5, noNaN: true });
    fc.assert(
      fc.property(fc.array(record, { minLength: 2, maxLength: 6 }), ratio, percent, (list, y, reference) => {
        const { found, downstream, open } = openLoss({
          replicates: list,
          fractions,
          stepRecoveries: { evaporation: known(y, 0.1, 4) },
          reference: known(reference, 1, 3)
        });
        return near(found.estimate! + downstream.estimate! + open.estimate!, 100, 1e5) && open.se! > 0;
      })
    );
  });

  it('grows more uncertain with the step recovery, and has no error when that has none', () => {
    const at = (evaporation: Estimate) =>
      openLoss({ replicates, fractions, stepRecoveries: { evaporation } });
    expect(at(known(0.9, 0.1, 5)).open.se).toBeCloseTo(Math.hypot(at(exact(0.9)).open.se!, 70 * 0.1), 10);
    expect(at({ estimate: 0.9, se: null, df: null, ci: null }).open).toMatchObject({
      se: null,
      df: null,
      ci: null
    });
    expect(at({ estimate: 0.9, se: null, df: null, ci: null }).found.se).not.toBeNull();
  });

  it('takes native portions off fraction by fraction', () => {
    const { found, open } = openLoss({
      replicates,
      fractions,
      native: [
        { elution: 9, effluent: 0 },
        { elution: 9, effluent: 0 }
      ],
      stepRecoveries: { evaporation: exact(0.9) }
    });
    expect(found.estimate).toBeCloseTo(66, 12);
    expect(open.estimate).toBeCloseTo(28, 12);
  });

  it('gives what was found alone when a step recovery does not exist', () => {
    const none: Estimate = { estimate: null, se: null, df: null, ci: null };
    const result = openLoss({ replicates, fractions, stepRecoveries: { evaporation: none } });
    expect(result.found.estimate).toBe(75);
    expect(result.open).toEqual(none);
    expect(result.downstream).toEqual(none);
  });

  it('gives nothing when no replicate is complete', () => {
    const result = openLoss({
      replicates: [{ elution: 63 }],
      fractions,
      stepRecoveries: { evaporation: exact(0.9) }
    });
    expect(result.found.estimate).toBeNull();
  });

  it('refuses a passed stage without a step recovery', () => {
    expect(() => openLoss({ replicates, fractions, stepRecoveries: {} })).toThrow(
      /"elution" passed "evaporation", which has no step recovery/
    );
  });
});
