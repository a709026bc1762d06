import fc from 'fast-check';
import { describe as suite, expect, it } from 'vitest';
import { forecastRecovery, stageLosses } from '../../../src/lib/server/stats/index';
import { near, replicates } from './arbitrary';

const keyed = (key: string, values: readonly number[]) => ({ key, values });
const a = keyed('a', [80, 82, 84]);
const b = keyed('b', [60, 63, 66]);
const c = keyed('c', [40, 41, 44]);

suite('forecastRecovery', () => {
  it('gives back the measured recovery when the steps come from one chain: what lies between cancels', () => {
    const whole = forecastRecovery([
      { to: a, from: null },
      { to: b, from: a },
      { to: c, from: b }
    ]);
    const alone = forecastRecovery([{ to: c, from: null }]);
    expect(whole.estimate).toBeCloseTo(125 / 3, 10);
    expect(whole.se).toBeCloseTo(alone.se!, 14);
    expect(whole.df).toBe(2);
  });

  it('is the product of step recoveries of different experiments, their variances added', () => {
    const forecast = forecastRecovery([
      { to: b, from: a },
      { to: c, from: null }
    ]);
    expect(forecast.estimate).toBeCloseTo((63 / 82) * (125 / 3), 10);
    const ratio = forecastRecovery([{ to: b, from: a }]).se!;
    expect(forecast.se).toBeCloseTo(Math.hypot(ratio, forecastRecovery([{ to: c, from: null }]).se!), 14);
  });

  it('counts a mean used twice with its squared exponent', () => {
    const once = forecastRecovery([{ to: a, from: null }]);
    const twice = forecastRecovery([
      { to: a, from: null },
      { to: a, from: null }
    ]);
    expect(twice.estimate).toBeCloseTo(0.82 * 82, 10);
    expect(twice.se).toBeCloseTo(2 * once.se!, 14);
  });

  it('lets a shared matrix effect cancel between the means of a step', () => {
    const matrixEffect = { key: 'm', estimate: 70, se: 10, df: 4 };
    const corrected = forecastRecovery([{ to: { ...b, matrixEffect }, from: { ...a, matrixEffect } }]);
    const plain = forecastRecovery([{ to: b, from: a }]);
    expect(corrected.estimate).toBeCloseTo(plain.estimate!, 10);
    expect(corrected.se).toBeCloseTo(plain.se!, 12);
  });

  it('agrees with the step recoveries of stageLosses', () => {
    fc.assert(
      fc.property(replicates(2, 6), replicates(2, 6), (first, second) => {
        const [one, two] = stageLosses([
          { stage: 'x', values: first },
          { stage: 'y', values: second }
        ]);
        const forecast = forecastRecovery([
          { to: keyed('x', first), from: null },
          { to: keyed('y', second), from: keyed('x', first) }
        ]);
        return near(forecast.estimate, 100 * one!.stepRecovery.estimate! * two!.stepRecovery.estimate!);
      })
    );
  });

  it('does not exist for a mean that is not above zero, unless it cancels', () => {
    const zero = keyed('z', [-1, 1]);
    expect(forecastRecovery([{ to: zero, from: null }]).estimate).toBeNull();
    expect(
      forecastRecovery([
        { to: zero, from: null },
        { to: b, from: zero }
      ]).estimate
    ).toBeCloseTo(63, 10);
  });

  it('refuses one key with different figures, and no steps', () => {
    expect(() => forecastRecovery([{ to: a, from: keyed('a', [80, 82, 85]) }])).toThrow(/"a" is given twice/);
    expect(() => forecastRecovery([])).toThrow(/No step/);
  });
});
