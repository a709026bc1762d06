import fc from 'fast-check';
import { describe as suite, expect, it } from 'vitest';
import * as stats from '../../../src/lib/server/stats/index';
import type { StatsErrorCode } from '../../../src/lib/server/stats/index';
import { anyFinite } from './arbitrary';
import { lists, numbers, options, sound, takeNoList } from './public-calls';

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

suite('every public function', () => {
  const functions = Object.entries(stats)
    .filter(([, value]) => typeof value === 'function' && value !== stats.StatsError)
    .map(([name]) => name);
  const called = (calls: readonly { readonly name: string }[], name: string): boolean =>
    calls.some((call) => call.name === name || call.name.startsWith(`${name},`));

  it.each(functions)('%s has its refusals checked below', (name) => {
    expect(called(takeNoList.has(name) ? numbers : lists, name)).toBe(true);
  });

  it('is checked under a name that exists', () => {
    const names = [...lists, ...numbers].map((call) => call.name.replace(/,.*/, ''));
    expect(names.filter((name) => !functions.includes(name))).toEqual([]);
    expect([...takeNoList].filter((name) => !functions.includes(name) || called(lists, name))).toEqual([]);
  });
});

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

  it('refuse words that stand for nothing', () => {
    const word = 'cubic' as never;
    const points = sound.map((y, i) => ({ x: i + 1, y }));
    expectRefusal(() => stats.fitCalibration(points, { ...options, model: word }), 'out-of-range');
    expectRefusal(() => stats.fitCalibration(points, { ...options, weighting: word }), 'out-of-range');
    expectRefusal(() => stats.grubbs(sound, { side: word }), 'out-of-range');
    expectRefusal(() => stats.powerTwoSample({ difference: 1, sd: 1, n: 3, sides: word }), 'out-of-range');
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
      // Each interval of Tukey's takes a hundred thousand normal tails.
      { numRuns: call.toString().includes('tukey') ? 30 : 150 }
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
