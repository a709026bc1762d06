import fc from 'fast-check';
import { describe as suite, expect, it } from 'vitest';
import { factorialAnova, oneWayAnova, type Observation } from '../../../src/lib/server/stats/index';
import { near } from './arbitrary';

/** A full two-level design with responses in standard order. */
function twoLevel(factors: readonly string[], responses: readonly number[]): Observation[] {
  return responses.map((response, run) => ({
    levels: Object.fromEntries(factors.map((factor, i) => [factor, (run >> i) & 1 ? '+' : '-'])),
    response
  }));
}

suite('factorialAnova', () => {
  it('finds the sums of squares of a replicated 2 x 2 by hand', () => {
    // Effects: A +10, B -4, no interaction; replicates apart by 2.
    const cells = [80, 90, 76, 86];
    const observations = [-1, 1].flatMap((shift) =>
      twoLevel(
        ['A', 'B'],
        cells.map((cell) => cell + shift)
      )
    );
    const result = factorialAnova(observations);
    expect(result.terms.map((term) => [term.factors.join(':'), term.df])).toEqual([
      ['A', 1],
      ['B', 1],
      ['A:B', 1]
    ]);
    expect(result.terms.map((term) => term.ss)).toEqual([200, 32, 0].map((ss) => expect.closeTo(ss, 9)));
    expect(result.residual).toMatchObject({ df: 4, ss: expect.closeTo(8, 9) });
    expect(result.terms[0]!.f).toBeCloseTo(100, 8);
    expect(result.aliased).toEqual([]);
  });

  it('is one-way analysis of variance for a single factor', () => {
    const groups = [
      [80, 85, 91],
      [70, 77, 72, 71],
      [95, 97]
    ];
    const observations = groups.flatMap((group, i) =>
      group.map((response) => ({ levels: { bed: `b${i}` }, response }))
    );
    const [term] = factorialAnova(observations).terms;
    const anova = oneWayAnova(groups);
    expect(term!.ss).toBeCloseTo(anova.between.ss, 8);
    expect(term!.p).toBeCloseTo(anova.p!, 12);
  });

  it('lists the interaction that a block takes away', () => {
    // 2^3 in two blocks that differ in the sign of ABC.
    const design = twoLevel(['A', 'B', 'C'], [80, 84, 79, 90, 81, 83, 78, 92]).map((observation) => {
      const minus = Object.values(observation.levels).filter((level) => level === '-').length;
      return { ...observation, block: minus % 2 ? 'one' : 'two' };
    });
    const result = factorialAnova(design);
    expect(result.aliased).toEqual([['A', 'B', 'C']]);
    expect(result.block!.df).toBe(1);
    expect(result.residual).toMatchObject({ df: 0, ms: null });
    expect(result.terms.every((term) => term.f === null && term.p === null)).toBe(true);
    expect(result.means.every((mean) => mean.ci === null)).toBe(true);
  });

  it('keeps main effects of a half fraction and lists what they hide', () => {
    // C = AB: C stays, AB goes; likewise AC and BC.
    const half = twoLevel(['A', 'B'], [80, 90, 70, 75]).map((observation) => ({
      ...observation,
      levels: { ...observation.levels, C: observation.levels.A === observation.levels.B ? '+' : '-' }
    }));
    const result = factorialAnova(half);
    expect(result.terms.map((term) => term.factors.join(''))).toEqual(['A', 'B', 'C']);
    expect(result.aliased.map((term) => term.join(''))).toEqual(['AB', 'AC', 'BC', 'ABC']);
  });

  it('keeps the first of aliased interactions of the same order', () => {
    // 2^(4-1) with D = ABC: AB = CD, AC = BD, AD = BC.
    const design = twoLevel(['A', 'B', 'C'], [1, 5, 2, 7, 3, 4, 9, 6]).map((observation) => {
      const plus = Object.values(observation.levels).filter((level) => level === '+').length;
      return { ...observation, levels: { ...observation.levels, D: plus % 2 ? '+' : '-' } };
    });
    const result = factorialAnova(design, { maxOrder: 2 });
    expect(result.terms.map((term) => term.factors.join(''))).toEqual(['A', 'B', 'C', 'D', 'AB', 'AC', 'AD']);
    expect(result.aliased.map((term) => term.join(''))).toEqual(['BC', 'BD', 'CD']);
  });

  it('lists a factor with a single level', () => {
    const result = factorialAnova([
      { levels: { A: '-', B: 'x' }, response: 1 },
      { levels: { A: '-', B: 'x' }, response: 2 },
      { levels: { A: '+', B: 'x' }, response: 4 }
    ]);
    expect(result.aliased).toEqual([['B'], ['A', 'B']]);
  });

  it('gives no F against a residual that is rounding only', () => {
    const additive = [0.1, 0.3, 0.7, 0.9];
    const observations = [...twoLevel(['A', 'B'], additive), ...twoLevel(['A', 'B'], additive)];
    const result = factorialAnova(observations, { maxOrder: 1 });
    expect(result.residual.ss).toBe(0);
    expect(result.terms.every((term) => term.f === null)).toBe(true);
  });

  const responses = fc.array(
    fc.integer({ min: 0, max: 1500 }).map((tenths) => tenths / 10),
    {
      minLength: 16,
      maxLength: 16
    }
  );

  it('splits the total in a balanced design; fitted and residuals add up to the responses', () => {
    fc.assert(
      fc.property(responses, (list) => {
        const observations = [
          ...twoLevel(['A', 'B', 'C'], list.slice(0, 8)),
          ...twoLevel(['A', 'B', 'C'], list.slice(8))
        ];
        const result = factorialAnova(observations);
        const mean = list.reduce((sum, value) => sum + value, 0) / 16;
        const total = list.reduce((sum, value) => sum + (value - mean) ** 2, 0);
        const parts = result.terms.reduce((sum, term) => sum + term.ss, result.residual.ss);
        return (
          near(parts, total, 1) &&
          result.fitted.every((fitted, i) => near(fitted + result.residuals[i]!, list[i]!, 100))
        );
      })
    );
  });

  it('does not depend on the order of observations, nor on a shift of the responses', () => {
    fc.assert(
      fc.property(responses, fc.integer({ min: -1000, max: 1000 }), (list, shift) => {
        const uneven = [
          ...twoLevel(['A', 'B', 'C'], list.slice(0, 8)),
          ...twoLevel(['A', 'B', 'C'], list.slice(8, 13))
        ];
        const a = factorialAnova(uneven);
        const b = factorialAnova(uneven.map((o) => ({ ...o, response: o.response + shift })).reverse());
        return a.terms.every((term, i) => near(term.ss, b.terms[i]!.ss, 1e3) && term.df === b.terms[i]!.df);
      })
    );
  });

  it('refuses observations that do not belong to one design', () => {
    expect(() =>
      factorialAnova([
        { levels: { A: '-' }, response: 1 },
        { levels: { B: '-' }, response: 1 }
      ])
    ).toThrow(/Observation 2 has no level of "A"/);
    expect(() =>
      factorialAnova([
        { levels: { A: '-' }, response: 1 },
        { levels: { A: '+', B: '-' }, response: 1 }
      ])
    ).toThrow(/Observation 2 has a factor "B"/);
    expect(() =>
      factorialAnova([
        { levels: { A: '-' }, response: 1, block: 'x' },
        { levels: { A: '+' }, response: 1 }
      ])
    ).toThrow(/blocks are given for some/);
    expect(() => factorialAnova([])).toThrow(/No observation/);
  });
});
