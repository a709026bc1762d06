import fc from 'fast-check';
import { expect, test } from 'vitest';
import { logD } from '../../../src/lib/server/chemistry/index';
import { groups, ph } from './arbitrary';

test('log D is log Kow where nothing is ionised, and never above it', () => {
  expect(logD(2.5, { acids: [], bases: [] }, 7)).toMatchObject({
    logD: 2.5,
    neutralFraction: 1,
    caution: null
  });
  fc.assert(
    fc.property(groups, ph, (given, at) => {
      expect(logD(2.5, given, at).logD).toBeLessThanOrEqual(2.5);
    })
  );
});

test('the ion-pair floor is told and not applied', () => {
  const { logD: figure, ionPairFloor, caution } = logD(4, { acids: [4], bases: [] }, 9);
  expect(figure).toBeCloseTo(4 - Math.log10(1 + 1e5), 12);
  expect(ionPairFloor).toEqual({ low: 0, high: 1 });
  expect(caution).toMatchObject({ standing: 'memory' });
  expect(caution!.evidence).toContain('between 0 and 1');
  // Two units above its pKa an acid is two units down: no floor in sight.
  expect(logD(4, { acids: [4], bases: [] }, 6).caution).toBeNull();
});

test('a permanent charge leaves nothing to partition', () => {
  expect(logD(1, { acids: [], bases: [], permanentCharge: 1 }, 7)).toMatchObject({
    logD: null,
    neutralFraction: 0,
    caution: { standing: 'memory' }
  });
});

test('log D stays finite where the neutral share is below the smallest double', () => {
  const { logD: figure } = logD(0, { acids: Array<number>(20).fill(-20), bases: [] }, 14);
  expect(figure).toBeCloseTo(-20 * 34, 6);
});
