import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  bedCapacity,
  bedLoad,
  bedVolumeMl,
  bedVolumes,
  breakthroughLoss,
  breakthroughVolumeRatio,
  estimateBreakthrough,
  retentionVolumeMl
} from '../../../src/lib/server/chemistry/index';
import { plates } from './arbitrary';

const ratio = fc.double({ min: 0.001, max: 20, noNaN: true });
const neutral = { acids: [], bases: [] };

describe('the plate model', () => {
  test('loses nothing of nothing, and in the end nearly all', () => {
    expect(breakthroughLoss(10, 0)).toBe(0);
    // Long after breakthrough only the first V_R is held: 1 − 1/ratio.
    expect(breakthroughLoss(10, 1e6)).toBeCloseTo(1 - 1e-6, 9);
    expect(breakthroughLoss(10_000, 4)).toBeCloseTo(0.75, 6);
  });

  test('loses more of a larger load', () => {
    fc.assert(
      fc.property(plates, ratio, fc.double({ min: 1.001, max: 3, noNaN: true }), (n, at, factor) => {
        expect(breakthroughLoss(n, at * factor)).toBeGreaterThanOrEqual(breakthroughLoss(n, at) - 1e-14);
      })
    );
  });

  test('takes a larger volume for a larger loss and for more plates, as long as a loss is small', () => {
    const few = fc.double({ min: 1, max: 100, noNaN: true });
    const loss = fc.double({ min: 0.001, max: 0.1, noNaN: true });
    const factor = fc.double({ min: 1.01, max: 1.5, noNaN: true });
    fc.assert(
      fc.property(few, loss, factor, (n, b, more) => {
        const volume = breakthroughVolumeRatio(n, b);
        expect(breakthroughVolumeRatio(n, b * more)).toBeGreaterThan(volume);
        expect(breakthroughVolumeRatio(n * more, b)).toBeGreaterThan(volume);
      })
    );
  });

  test('gives back the loss at the volume that it names', () => {
    fc.assert(
      fc.property(plates, fc.double({ min: 1e-6, max: 0.99, noNaN: true }), (n, b) => {
        const back = breakthroughLoss(n, breakthroughVolumeRatio(n, b));
        expect(Math.abs(back - b)).toBeLessThan(1e-10);
      })
    );
  });

  test('takes V_R/(1 − loss) at the most, what a bed without dispersion would', () => {
    fc.assert(
      fc.property(plates, fc.double({ min: 0.001, max: 0.9, noNaN: true }), (n, b) => {
        expect(breakthroughVolumeRatio(n, b)).toBeLessThanOrEqual((1 + 1e-12) / (1 - b));
      })
    );
  });

  test('answers where the gamma function underflows', () => {
    expect(breakthroughLoss(500, 0.001)).toBe(0);
    expect(breakthroughLoss(10_000, 1e-6)).toBe(0);
  });
});

describe('the bed', () => {
  test('holds 0.6 mL on 500 mg, so that 3 mL are five bed volumes', () => {
    expect(bedVolumeMl(500)).toBeCloseTo(0.6, 12);
    expect(bedVolumes(3, 500)).toBeCloseTo(5, 12);
    expect(bedVolumes(3, 500, 2.4)).toBeCloseTo(2.5, 12);
  });

  test('retains V_M (1 + k): 1001 bed volumes at k = 1000', () => {
    expect(retentionVolumeMl(0.6, 1000)).toBeCloseTo(600.6, 9);
    expect(retentionVolumeMl(0.6, 0)).toBe(0.6);
  });

  test('takes up 5 to 25 mg on 500 mg of C18, and 0.25 to 0.5 meq on as much exchanger', () => {
    expect(bedCapacity('c18', 500)).toMatchObject({ unit: 'mg', low: 5, high: 25, standing: 'memory' });
    expect(bedCapacity('polymer', 200)).toMatchObject({ unit: 'mg', low: 20, high: 30 });
    expect(bedCapacity('ion-exchange', 500)).toMatchObject({ unit: 'meq', low: 0.25, high: 0.5 });
  });

  test('says on which side of its capacity a load is', () => {
    expect([4, 5, 5.1, 25, 26].map((mg) => bedLoad('c18', 500, mg).reading)).toEqual([
      'below',
      'below',
      'near',
      'near',
      'above'
    ]);
    expect(bedLoad('c18', 500, 10).share).toEqual({ low: 0.4, high: 2 });
  });
});

describe('the estimate', () => {
  const given = { logKow: 3, groups: neutral, ph: 7, phase: 'c18', bedMassMg: 500 } as const;

  test('follows from log Kow, the bed and the plates', () => {
    const estimate = estimateBreakthrough({ ...given, plates: 10, sampleVolumeMl: 1000 });
    expect(estimate.retentionMl.middle).toBeCloseTo(0.6 * 1001, 9);
    expect(estimate.breakthroughMl.middle).toBeCloseTo(600.6 * breakthroughVolumeRatio(10, 0.05), 9);
    expect(estimate.lossOfSample!.middle).toBeCloseTo(breakthroughLoss(10, 1000 / 600.6), 12);
    expect(estimate.neutralFraction).toBe(1);
  });

  test('keeps its ends in order, for the volumes and for the loss', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -4, max: 8, noNaN: true }),
        fc.constantFrom('c18' as const, 'polymer' as const),
        fc.double({ min: 1, max: 5000, noNaN: true }),
        (logKow, phase, sampleVolumeMl) => {
          const estimate = estimateBreakthrough({ ...given, logKow, phase, sampleVolumeMl });
          for (const { low, middle, high } of [
            estimate.retentionMl,
            estimate.breakthroughMl,
            estimate.lossOfSample!
          ]) {
            expect(low).toBeLessThanOrEqual(middle);
            expect(middle).toBeLessThanOrEqual(high);
          }
        }
      )
    );
  });

  test('holds the charged share for nothing, and says so', () => {
    const charged = estimateBreakthrough({ ...given, groups: { acids: [4], bases: [] } });
    expect(charged.retentionMl.middle).toBeCloseTo(0.6 * (1 + 1000 / 1001), 9);
    expect(charged.cautions.map(({ evidence }) => evidence)).toContain('Neutral share below 0.1 %.');
    const ammonium = estimateBreakthrough({ ...given, groups: { ...neutral, permanentCharge: 1 } });
    expect(ammonium.retentionMl.high).toBe(0.6);
  });

  test('always carries the source that calls log Kow a poor model', () => {
    const { cautions, lossOfSample } = estimateBreakthrough(given);
    expect(lossOfSample).toBeNull();
    expect(cautions[0]).toMatchObject({
      standing: 'seen',
      source: expect.stringContaining('Poole') as string
    });
    expect(cautions).toHaveLength(2);
  });
});
