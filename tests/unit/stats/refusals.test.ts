import fc from 'fast-check';
import { describe as suite, expect, it } from 'vitest';
import * as stats from '../../../src/lib/server/stats/index';
import type { StatsErrorCode } from '../../../src/lib/server/stats/index';
import { anyFinite } from './arbitrary';

type ListCall = {
  readonly name: string;
  readonly least: number;
  readonly call: (values: number[]) => unknown;
};

const sound = [80, 85, 91, 79, 88, 84, 90];
const options = { model: 'linear', weighting: 'none' } as const;
const oneFraction = [{ name: 'elution', countsAs: 'method' as const }];

/** Every public function that takes a list of values, with the fewest it accepts. */
const lists: readonly ListCall[] = [
  { name: 'describe', least: 1, call: (v) => stats.describe(v) },
  { name: 'netMean', least: 1, call: (values) => stats.netMean({ values }) },
  { name: 'netMean, native', least: 1, call: (native) => stats.netMean({ values: sound, native }) },
  {
    name: 'massBalance',
    least: 1,
    call: (v) => stats.massBalance({ replicates: v.map((elution) => ({ elution })), fractions: oneFraction })
  },
  {
    name: 'massBalance, native',
    least: 1,
    call: (v) =>
      stats.massBalance({
        replicates: [{ elution: 80 }],
        native: v.map((elution) => ({ elution })),
        fractions: oneFraction
      })
  },
  {
    name: 'openLoss',
    least: 1,
    call: (v) =>
      stats.openLoss({
        replicates: v.map((elution) => ({ elution })),
        fractions: [{ name: 'elution', passed: [] }],
        stepRecoveries: {}
      })
  },
  { name: 'stageLosses', least: 1, call: (values) => stats.stageLosses([{ stage: 'drying', values }]) },
  {
    name: 'forecastRecovery',
    least: 1,
    call: (values) => stats.forecastRecovery([{ to: { key: 'a', values }, from: null }])
  },
  { name: 'welch, first', least: 2, call: (v) => stats.welch(v, sound) },
  { name: 'welch, second', least: 2, call: (v) => stats.welch(sound, v) },
  { name: 'oneSampleT', least: 2, call: (v) => stats.oneSampleT(v, 100) },
  { name: 'tost', least: 2, call: (v) => stats.tost(v, sound, 10) },
  { name: 'oneWayAnova', least: 1, call: (v) => stats.oneWayAnova([v, sound]) },
  { name: 'tukeyKramer', least: 1, call: (v) => stats.tukeyKramer([v, sound]) },
  { name: 'brownForsythe', least: 2, call: (v) => stats.brownForsythe([v, sound]) },
  { name: 'grubbs', least: 3, call: (v) => stats.grubbs(v) },
  { name: 'cochran', least: 2, call: (v) => stats.cochran([v, sound]) },
  { name: 'precisionComponents', least: 1, call: (v) => stats.precisionComponents([v, sound]) },
  { name: 'controlLimits', least: 2, call: (v) => stats.controlLimits(v) },
  { name: 'methodDetectionLimit', least: 7, call: (spiked) => stats.methodDetectionLimit({ spiked }) },
  {
    name: 'methodDetectionLimit, blanks',
    least: 7,
    call: (blanks) => stats.methodDetectionLimit({ spiked: sound, blanks })
  },
  {
    name: 'quantitationConfirmation',
    least: 2,
    call: (values) => stats.quantitationConfirmation({ values, fortified: 85 })
  },
  {
    name: 'matrixEffect, neat',
    least: 1,
    call: (neat) => stats.matrixEffect({ neat, postSpiked: sound, preSpiked: sound })
  },
  {
    name: 'matrixEffect, native',
    least: 1,
    call: (native) => stats.matrixEffect({ neat: sound, postSpiked: sound, preSpiked: sound, native })
  },
  {
    name: 'fitCalibration',
    least: 3,
    call: (v) =>
      stats.fitCalibration(
        v.map((y, i) => ({ x: i + 1, y })),
        options
      )
  },
  {
    name: 'factorialAnova',
    least: 2,
    call: (v) => stats.factorialAnova(v.map((response, i) => ({ levels: { A: String(i % 2) }, response })))
  }
];

type NumberCall = { readonly name: string; readonly call: (value: number) => unknown };

/** Every single number a public function takes. */
const numbers: readonly NumberCall[] = [
  { name: 'describe, level', call: (v) => stats.describe(sound, v) },
  { name: 'recovery, found', call: (found) => stats.recovery({ found, spiked: 1 }) },
  { name: 'recovery, spiked', call: (spiked) => stats.recovery({ found: 1, spiked }) },
  { name: 'recovery, native', call: (native) => stats.recovery({ found: 1, spiked: 1, native }) },
  {
    name: 'assess, low',
    call: (low) => stats.assess(stats.describe(sound), { low, high: 1e9, rsdMax: null, nMin: 1 })
  },
  {
    name: 'assess, high',
    call: (high) => stats.assess(stats.describe(sound), { low: -1e9, high, rsdMax: null, nMin: 1 })
  },
  {
    name: 'assess, rsdMax',
    call: (rsdMax) => stats.assess(stats.describe(sound), { low: 0, high: 1, rsdMax, nMin: 1 })
  },
  {
    name: 'assess, nMin',
    call: (nMin) => stats.assess(stats.describe(sound), { low: 0, high: 1, rsdMax: 1, nMin })
  },
  {
    name: 'netMean, matrix effect',
    call: (estimate) => stats.netMean({ values: sound, matrixEffect: { key: 'm', estimate, se: 1, df: 1 } })
  },
  {
    name: 'massBalance, limit',
    call: (below) => stats.massBalance({ replicates: [{ elution: { below } }], fractions: oneFraction })
  },
  { name: 'oneSampleT, mu', call: (mu) => stats.oneSampleT(sound, mu) },
  { name: 'tost, margin', call: (margin) => stats.tost(sound, sound, margin) },
  { name: 'tost, alpha', call: (alpha) => stats.tost(sound, sound, 1, alpha) },
  { name: 'tukeyKramer, level', call: (level) => stats.tukeyKramer([sound, sound], level) },
  { name: 'holm', call: (p) => stats.holm([p]) },
  { name: 'benjaminiHochberg', call: (p) => stats.benjaminiHochberg([p]) },
  { name: 'grubbs, alpha', call: (alpha) => stats.grubbs(sound, { alpha }) },
  { name: 'cochran, alpha', call: (alpha) => stats.cochran([sound, sound], alpha) },
  {
    name: 'powerTwoSample, difference',
    call: (difference) => stats.powerTwoSample({ difference, sd: 1, n: 3 })
  },
  { name: 'powerTwoSample, sd', call: (sd) => stats.powerTwoSample({ difference: 1, sd, n: 3 }) },
  { name: 'powerTwoSample, n', call: (n) => stats.powerTwoSample({ difference: 1, sd: 1, n }) },
  {
    name: 'replicatesForDifference, power',
    call: (power) => stats.replicatesForDifference({ difference: 1, sd: 1, power })
  },
  { name: 'replicatesForHalfWidth, sd', call: (sd) => stats.replicatesForHalfWidth({ sd, halfWidth: 1 }) },
  {
    name: 'replicatesForHalfWidth, half width',
    call: (halfWidth) => stats.replicatesForHalfWidth({ sd: 1, halfWidth })
  },
  { name: 'replicatesForRsd, rsd', call: (rsd) => stats.replicatesForRsd({ rsd, limit: 20 }) },
  { name: 'replicatesForRsd, limit', call: (limit) => stats.replicatesForRsd({ rsd: 10, limit }) },
  {
    name: 'solveCalibration',
    call: (y) =>
      stats.solveCalibration(
        stats.fitCalibration(
          sound.map((v, i) => ({ x: i + 1, y: v })),
          options
        ),
        y
      )
  },
  {
    name: 'fitCalibration, level',
    call: (x) =>
      stats.fitCalibration(
        [1, 2, 3, x].map((v) => ({ x: v, y: v })),
        options
      )
  },
  {
    name: 'quantitationConfirmation, fortified',
    call: (fortified) => stats.quantitationConfirmation({ values: sound, fortified })
  },
  { name: 'detectionLimits, sigma', call: (sigma) => stats.detectionLimits({ sigma, slope: 1 }) },
  { name: 'detectionLimits, slope', call: (slope) => stats.detectionLimits({ sigma: 1, slope }) },
  { name: 'horwitzRsd', call: (c) => stats.horwitzRsd(c) },
  { name: 'thompsonRsd', call: (c) => stats.thompsonRsd(c) },
  { name: 'horrat', call: (rsd) => stats.horrat(rsd, 1e-6) },
  { name: 'relativePercentDifference', call: (a) => stats.relativePercentDifference(a, 1) },
  {
    name: 'factorialAnova, order',
    call: (maxOrder) =>
      stats.factorialAnova(
        [1, 2, 3].map((response) => ({ levels: { A: String(response) }, response })),
        { maxOrder }
      )
  }
];

function refusal(run: () => unknown): stats.StatsError {
  try {
    run();
  } catch (error) {
    expect(error).toBeInstanceOf(stats.StatsError);
    expect(error).toBeInstanceOf(RangeError);
    return error as stats.StatsError;
  }
  throw new Error('nothing was refused');
}

function expectRefusal(run: () => unknown, ...codes: StatsErrorCode[]): void {
  const error = refusal(run);
  expect(codes).toContain(error.code);
  // A sentence: it starts large, ends with a full stop and holds some words.
  expect(error.message).toMatch(/^\S.*\s.*\s.*\.$/);
}

suite('lists of values', () => {
  it.each(lists)('$name refuses NaN, infinity and what is no number, naming it', ({ call }) => {
    for (const bad of [NaN, Infinity, -Infinity, '3' as unknown as number, undefined as unknown as number]) {
      const values = [...sound];
      values[2] = bad;
      // A missing value is a statement in a mass balance, not a mistake.
      if (bad === undefined && /massBalance|openLoss/.test(call.toString())) continue;
      expectRefusal(() => call(values), 'non-finite-value');
    }
  });

  it.each(lists)('$name refuses an empty list', ({ call }) => {
    expectRefusal(() => call([]), 'empty-group');
  });

  it.each(lists.filter(({ least }) => least > 1))(
    '$name refuses one value fewer than it needs',
    ({ call, least }) => {
      expectRefusal(() => call(sound.slice(0, least - 1)), 'too-few-values');
    }
  );

  it.each(lists)('$name takes the fewest it needs', ({ call, least }) => {
    expect(() => call(sound.slice(0, least))).not.toThrow();
  });
});

suite('single numbers', () => {
  it.each(numbers)('$name refuses NaN and infinity', ({ call }) => {
    for (const bad of [NaN, Infinity, -Infinity]) expectRefusal(() => call(bad), 'non-finite-value');
  });

  it('refuse a spike of zero by its own code', () => {
    expectRefusal(() => stats.recovery({ found: 1, spiked: 0 }), 'zero-spike');
    expectRefusal(() => stats.quantitationConfirmation({ values: sound, fortified: 0 }), 'zero-spike');
  });

  it('refuse an undetermined curve by its own code', () => {
    expectRefusal(
      () =>
        stats.fitCalibration(
          [1, 1, 1].map((x) => ({ x, y: x })),
          options
        ),
      'singular-design'
    );
  });
});

suite('every output', () => {
  /** Throws at the first number that is not finite, anywhere inside. */
  function findNaN(value: unknown, path = 'result'): string | null {
    if (typeof value === 'number') return Number.isFinite(value) ? null : `${path} is ${value}`;
    if (value === null || typeof value !== 'object') return null;
    for (const [key, part] of Object.entries(value)) {
      const found = findNaN(part, `${path}.${key}`);
      if (found) return found;
    }
    return null;
  }

  const finiteOrRefused = (call: () => unknown): boolean => {
    let result: unknown;
    try {
      result = call();
    } catch (error) {
      if (error instanceof stats.StatsError) return true;
      throw error;
    }
    const found = findNaN(result);
    if (found) throw new Error(found);
    return true;
  };

  it.each(lists)('$name gives finite figures or a refusal for any finite values', ({ call }) => {
    const mixed = fc.oneof(
      anyFinite,
      fc.double({ min: -200, max: 200, noNaN: true }),
      fc.constantFrom(0, 1e100, -1e100, 5e-324)
    );
    fc.assert(
      fc.property(fc.array(mixed, { minLength: 1, maxLength: 9 }), (values) =>
        finiteOrRefused(() => call(values))
      ),
      { numRuns: 150 }
    );
  });

  it.each(numbers)('$name gives finite figures or a refusal for any finite number', ({ call }) => {
    const number = fc.oneof(
      anyFinite,
      fc.double({ min: 0, max: 1, noNaN: true }),
      fc.constantFrom(0, 1e100, 1e-100, 5e-324)
    );
    fc.assert(
      fc.property(number, (value) => finiteOrRefused(() => call(value))),
      { numRuns: 60 }
    );
  });
});
