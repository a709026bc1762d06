import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  chargeShares,
  fractionNeutral,
  mostNeutral,
  phWindows,
  type ChargeCondition,
  type ChargeGroups
} from '../../../src/lib/server/chemistry/index';
import { groups, ph, share } from './arbitrary';

const range = { low: 0, high: 14 };
const whole = { low: 0, high: 14, lowIsEdge: false, highIsEdge: false };

/** The share of a condition, by the functions that the windows are not searched with. */
const shareOf = (given: ChargeGroups, condition: ChargeCondition, at: number): number => {
  const shares = chargeShares(given, at);
  return condition === 'charged' ? shares.cation + shares.anion + shares.zwitterion : shares[condition];
};

test('an acid is neutral below and charged above, an edge of the range is no edge of the window', () => {
  const acid = { acids: [5], bases: [] };
  const [neutral] = phWindows(acid, 'neutral', 0.5);
  expect(neutral).toEqual({
    low: 0,
    high: expect.closeTo(5, 12) as number,
    lowIsEdge: false,
    highIsEdge: true
  });
  expect(phWindows(acid, 'anion', 0.5)).toEqual([
    { low: expect.closeTo(5, 12) as number, high: 14, lowIsEdge: true, highIsEdge: false }
  ]);
  expect(phWindows(acid, 'cation', 0.5)).toEqual([]);
});

test('an ampholyte has one neutral window and two charged ones', () => {
  const ampholyte = { acids: [9], bases: [3] };
  expect(phWindows(ampholyte, 'neutral')).toHaveLength(1);
  expect(phWindows(ampholyte, 'charged').map(({ lowIsEdge, highIsEdge }) => [lowIsEdge, highIsEdge])).toEqual(
    [
      [false, true],
      [true, false]
    ]
  );
});

test('a zwitterion is charged everywhere and neutral nowhere', () => {
  const zwitterion = { acids: [3.68], bases: [10.7] };
  expect(phWindows(zwitterion, 'neutral', 0.01)).toEqual([]);
  expect(phWindows(zwitterion, 'charged')).toEqual([whole]);
});

test('without groups everything is neutral, with a permanent charge nothing', () => {
  expect(phWindows({ acids: [], bases: [] }, 'neutral')).toEqual([whole]);
  expect(phWindows({ acids: [], bases: [] }, 'charged')).toEqual([]);
  const ammonium = { acids: [], bases: [], permanentCharge: 1 };
  expect(phWindows(ammonium, 'neutral')).toEqual([]);
  expect(phWindows(ammonium, 'charged')).toEqual([whole]);
  expect(phWindows(ammonium, 'cation')).toEqual([whole]);
  expect(mostNeutral(ammonium, range).share).toBe(0);
});

test('the most neutral pH of an ampholyte lies halfway between its groups', () => {
  const { ph: at, share: most } = mostNeutral({ acids: [5.7], bases: [1.7] }, range);
  expect(at).toBeCloseTo(3.7, 10);
  expect(most).toBeCloseTo(1 / 1.01 ** 2, 12);
  expect(mostNeutral({ acids: [4], bases: [] }, { low: 2, high: 9 }).ph).toBe(2);
  expect(mostNeutral({ acids: [], bases: [9] }, { low: 2, high: 9 }).ph).toBe(9);
});

describe.each(['neutral', 'charged', 'cation', 'anion'] as const)('the windows of %s', (condition) => {
  test('have at their edges the share that was asked for, to rounding', () => {
    fc.assert(
      fc.property(groups, share, (given, asked) => {
        for (const window of phWindows(given, condition, asked)) {
          if (window.lowIsEdge) expect(shareOf(given, condition, window.low)).toBeCloseTo(asked, 9);
          if (window.highIsEdge) expect(shareOf(given, condition, window.high)).toBeCloseTo(asked, 9);
          expect(window.low).toBeLessThanOrEqual(window.high);
        }
      })
    );
  });

  test('hold every pH with the share, and none without', () => {
    fc.assert(
      fc.property(groups, share, ph, (given, asked, at) => {
        const found = shareOf(given, condition, at);
        // At the edge itself the two ways to add up may part by rounding.
        fc.pre(Math.abs(found - asked) > 1e-9);
        const isIn = phWindows(given, condition, asked).some(({ low, high }) => at >= low && at <= high);
        expect(isIn).toBe(found > asked);
      })
    );
  });
});

test('no pH of the range is more neutral than the one that is named', () => {
  fc.assert(
    fc.property(groups, ph, (given, at) => {
      expect(fractionNeutral(given, at)).toBeLessThanOrEqual(mostNeutral(given, range).share * (1 + 1e-9));
    })
  );
});
