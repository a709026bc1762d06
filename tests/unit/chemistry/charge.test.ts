import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  chargeShares,
  chargeStates,
  fractionNeutral,
  ionisedAcid,
  ionisedBase,
  meanCharge
} from '../../../src/lib/server/chemistry/index';
import { groups, ph } from './arbitrary';

// Henderson and Hasselbalch, pH = pKa + log([A-]/[HA]): half ionised at the pKa, 10 : 1 one unit away.
test('an acid and a base are half ionised at their pKa, and 10 to 1 a unit away', () => {
  expect(ionisedAcid(4.2, 4.2)).toBe(0.5);
  expect(ionisedAcid(4.2, 5.2)).toBeCloseTo(10 / 11, 12);
  expect(ionisedBase(9.2, 9.2)).toBe(0.5);
  expect(ionisedBase(9.2, 10.2)).toBeCloseTo(1 / 11, 12);
});

test('a substance without groups is neutral, one with a permanent charge never is', () => {
  expect(fractionNeutral({ acids: [], bases: [] }, 7)).toBe(1);
  expect(chargeStates({ acids: [], bases: [] }, 7)).toEqual([{ netCharge: 0, fraction: 1 }]);
  const ammonium = { acids: [], bases: [], permanentCharge: 1 };
  expect(fractionNeutral(ammonium, 7)).toBe(0);
  expect(chargeShares(ammonium, 7)).toEqual({ neutral: 0, cation: 1, anion: 0, zwitterion: 0 });
  expect(meanCharge(ammonium, 7)).toBe(1);
});

test('an inner salt of a permanent charge and an acid is a zwitterion, not neutral', () => {
  const betaine = { acids: [1.8], bases: [], permanentCharge: 1 };
  const shares = chargeShares(betaine, 7);
  expect(shares.neutral).toBe(0);
  expect(shares.zwitterion).toBeCloseTo(1 / (1 + 10 ** -5.2), 12);
  expect(chargeStates(betaine, 7).map(({ netCharge }) => netCharge)).toEqual([1, 0]);
});

test('an amino acid is a zwitterion between its groups, a cation below and an anion above', () => {
  const amino = { acids: [2.3], bases: [9.7] };
  expect(chargeShares(amino, 6).zwitterion).toBeGreaterThan(0.999);
  expect(chargeShares(amino, 0).cation).toBeGreaterThan(0.99);
  expect(chargeShares(amino, 12).anion).toBeGreaterThan(0.99);
});

test('the share stays a number where every group is far from neutral', () => {
  const many = { acids: Array<number>(64).fill(-20), bases: Array<number>(64).fill(50) };
  expect(fractionNeutral(many, 7)).toBe(0);
  expect(chargeShares(many, 7).zwitterion).toBeCloseTo(1, 12);
});

describe('for any groups at any pH', () => {
  test('the states and the shares sum to 1, and the mean of the states is the mean charge', () => {
    fc.assert(
      fc.property(groups, ph, fc.integer({ min: -2, max: 2 }), (given, at, permanentCharge) => {
        const substance = { ...given, permanentCharge };
        const states = chargeStates(substance, at);
        const total = states.reduce((sum, { fraction }) => sum + fraction, 0);
        const mean = states.reduce((sum, { netCharge, fraction }) => sum + netCharge * fraction, 0);
        const shares = chargeShares(substance, at);
        expect(total).toBeCloseTo(1, 12);
        expect(mean).toBeCloseTo(meanCharge(substance, at), 10);
        expect(shares.neutral + shares.cation + shares.anion + shares.zwitterion).toBeCloseTo(1, 12);
        expect(Math.abs(shares.neutral - fractionNeutral(substance, at))).toBeLessThan(1e-12);
      })
    );
  });

  test('the mean charge falls with pH, and so does the share that is net positive', () => {
    fc.assert(
      fc.property(groups, ph, fc.double({ min: 0.01, max: 5, noNaN: true }), (given, at, more) => {
        const above = Math.min(16, at + more);
        expect(meanCharge(given, above)).toBeLessThanOrEqual(meanCharge(given, at) + 1e-12);
        expect(chargeShares(given, above).cation).toBeLessThanOrEqual(chargeShares(given, at).cation + 1e-12);
        expect(chargeShares(given, above).anion).toBeGreaterThanOrEqual(
          chargeShares(given, at).anion - 1e-12
        );
      })
    );
  });

  test('the order of the groups does not matter', () => {
    fc.assert(
      fc.property(groups, ph, ({ acids, bases }, at) => {
        const turned = { acids: [...acids].reverse(), bases: [...bases].reverse() };
        expect(fractionNeutral(turned, at)).toBeCloseTo(fractionNeutral({ acids, bases }, at), 12);
      })
    );
  });

  test('acids and bases mirror each other about pH 7', () => {
    fc.assert(
      fc.property(groups, ph, ({ acids, bases }, at) => {
        const mirrored = { acids: bases.map((v) => 14 - v), bases: acids.map((v) => 14 - v) };
        expect(fractionNeutral(mirrored, 14 - at)).toBeCloseTo(fractionNeutral({ acids, bases }, at), 10);
      })
    );
  });
});
