import { describe, expect, it } from 'vitest';
import type { CriterionRule } from '../../../src/lib/domain/criteria';
import { calibrate } from '../../../src/lib/server/amounts/calibration';
import { calibrationCandidates } from '../../../src/lib/server/amounts/calibration-candidates';
import { checkCalibration } from '../../../src/lib/server/amounts/calibration-check';
import { fitKinds, isSameFit, withChoices } from '../../../src/lib/server/amounts/calibration-proposal';
import type { CalibrationSet, LevelReported, PanelEntry } from '../../../src/lib/server/amounts/types';

const entry: PanelEntry = { id: 'one', name: 'One', role: 'target', internalStandardId: null };
const nameOf = (id: string): string => (id === 'one' ? 'One' : id);

function reported(levelId: string, value: number, index: number): LevelReported {
  return {
    id: String(index),
    importId: 'import',
    injectionId: 'injection',
    entryId: 'one',
    levelId,
    basis: 'area',
    state: 'value',
    value,
    internalArea: null,
    internalEntryId: null,
    limit: null,
    rawText: String(value),
    sheet: 1,
    row: index + 2,
    column: 3,
    injection: 1,
    dilution: 1
  };
}

const setOf = (x: readonly number[], y: readonly number[]): CalibrationSet => ({
  id: 'set',
  name: 'March standards',
  defaultModel: 'linear',
  defaultWeighting: 'none',
  levels: x.map((concentration, index) => ({
    id: `L${index + 1}`,
    number: index + 1,
    label: `L${index + 1}`,
    concentrations: new Map([['one', concentration]])
  })),
  choices: new Map(),
  reported: y.map((value, index) => reported(`L${index + 1}`, value, index))
});

const rule = (type: CriterionRule['type'], limits: { low?: number; high?: number }): CriterionRule => ({
  type,
  low: limits.low ?? null,
  high: limits.high ?? null,
  unit: '%',
  citation: "the lab's own",
  year: null,
  standing: 'own',
  note: null
});
const rules = [
  rule('calibration error', { high: 30 }),
  rule('calibration error at the lowest level', { high: 50 }),
  rule('relative standard error', { high: 20 }),
  rule('response factor deviation', { high: 20 }),
  rule('determination coefficient', { low: 0.99 }),
  rule('minimum levels', { low: 5 }),
  rule('minimum levels of a curve', { low: 6 })
];
const of = (set: CalibrationSet, model: string, weighting: string, leftOut: readonly string[] = []) =>
  calibrationCandidates(set, entry, nameOf, rules, leftOut).find(
    ({ fit }) => fit.model === model && fit.weighting === weighting
  )!;

describe('candidate lines', () => {
  // y = 10 x exactly.
  const straight = setOf([1, 2, 5, 10, 20, 50], [10, 20, 50, 100, 200, 500]);

  it('are the seven that make sense, in a fixed order, none crowned', () => {
    const all = calibrationCandidates(straight, entry, nameOf, rules);
    expect(all.map(({ fit }) => `${fit.model} ${fit.weighting}`)).toEqual(
      fitKinds.map(({ model, weighting }) => `${model} ${weighting}`)
    );
    expect(all).toHaveLength(7);
    expect(all.every(({ checks }) => checks.every(({ holds }) => holds))).toBe(true);
  });

  it('have levels of which none is zero and none is forced', () => {
    const zero = setOf([0, 1, 2, 5, 10, 20], [0.4, 10, 20, 50, 100, 200]);
    // A level at zero has no weight and no response factor: those lines cannot be drawn, and say why.
    expect(of(zero, 'average response factor', 'none').refusal).toContain('zero');
    expect(of(zero, 'linear', '1/x').refusal).toContain('zero');
    expect(of(zero, 'linear', 'none').line?.fit.coefficients[0]).not.toBe(0);
  });

  it('are told how many levels they need: six for a curve, five for a line', () => {
    const five = of(straight, 'quadratic', 'none', ['L6']);
    expect([five.levels, five.levelsNeeded]).toEqual([5, 6]);
    expect(five.speaksAgainst.join(' ')).toContain('5 levels (at least 6');
    expect(five.speaksAgainst.join(' ')).toContain('2 degrees of freedom are left');
    expect(of(straight, 'linear', 'none', ['L6']).speaksAgainst.join(' ')).not.toContain('levels');
    expect(of(straight, 'quadratic', 'none', ['L4', 'L5', 'L6']).refusal).toContain('at least 4 needed');
  });

  it('say where a curve turns within its range', () => {
    // By hand: y = 10 x - x^2 rises up to x = 5 and falls from there.
    const turning = setOf([1, 2, 3, 4, 6, 7], [9, 16, 21, 24, 24, 21]);
    const curve = of(turning, 'quadratic', 'none');
    expect(curve.oneWay).toBe(false);
    expect(curve.speaksAgainst.join(' ')).toContain('turns within the range');
    expect(curve.checks.find(({ rule: { type } }) => type === 'monotone curve')?.holds).toBe(false);
    expect(of(straight, 'quadratic', 'none').oneWay).toBe(true);
    expect(of(straight, 'linear', 'none').oneWay).toBeNull();
  });

  it('say what no response reads as, against the lowest level', () => {
    // y = 6 + 10 x: no response reads -0.6, which is 60 % of the lowest level, 1.
    const lifted = setOf([1, 2, 5, 10, 20, 50], [16, 26, 56, 106, 206, 506]);
    const line = of(lifted, 'linear', 'none');
    expect(line.zero?.x).toBeCloseTo(-0.6, 10);
    expect(line.zero?.percent).toBeCloseTo(-60, 8);
    expect(line.speaksAgainst.join(' ')).toContain('60.0 % of the lowest level, below zero');
    expect(of(lifted, 'average response factor', 'none').speaksAgainst.join(' ')).toContain(
      'does not pass through zero'
    );
  });

  it('leave a level out on both sides of the comparison, and the set as it is', () => {
    const shorter = calibrationCandidates(straight, entry, nameOf, rules, ['L1']);
    expect(shorter.every(({ line }) => line?.fit.range[0] === 2)).toBe(true);
    expect(straight.choices.size).toBe(0);
  });
});

describe('a line against its rules', () => {
  // y = 0.06 + 0.98 x by hand (see relative-standard-error.test.ts): RSE 5.349 %, levels 6.122, -6.122, 0, 3.061, -1.224 % off.
  const set = setOf([1, 2, 3, 4, 5], [1.1, 1.9, 3.0, 4.1, 4.9]);
  const line = calibrate(set, entry, nameOf);
  const check = (...list: readonly CriterionRule[]) => {
    if (!line.usable) throw new Error(line.reason);
    return checkCalibration(line, list);
  };

  it('holds the RSE, and gives it more digits rather than round it onto its limit', () => {
    expect(check(rule('relative standard error', { high: 5.4 }))[0]).toMatchObject({
      holds: true,
      detail: 'RSE is 5.35 %'
    });
    expect(check(rule('relative standard error', { high: 5.35 }))[0]).toMatchObject({
      holds: true,
      detail: 'RSE is 5.349 %'
    });
  });

  it('holds the lowest level to its own rule, the others to theirs', () => {
    const [every, lowest] = check(
      rule('calibration error', { high: 6 }),
      rule('calibration error at the lowest level', { high: 7 })
    );
    expect(every).toMatchObject({ holds: false, detail: 'L2 reads 6.12 % off' });
    expect(lowest).toMatchObject({ holds: true, detail: 'L1 reads 6.12 % off' });
  });

  it('counts levels, not injections', () => {
    const twice = { ...set, reported: [...set.reported, reported('L1', 1.12, 9)] };
    const found = calibrate(twice, entry, nameOf);
    if (!found.usable) throw new Error(found.reason);
    expect(found.points).toHaveLength(6);
    expect(checkCalibration(found, [rule('minimum levels', { low: 6 })])[0]).toMatchObject({
      holds: false,
      value: 5
    });
  });

  it('asks no line for the deviation of response factors, and no response factor for r²', () => {
    expect(check(rule('response factor deviation', { high: 20 }))).toEqual([]);
    const average = calibrate(
      withChoices(
        set,
        new Map([
          ['one', { model: 'average response factor', weighting: 'none', levelsLeftOut: [] } as const]
        ])
      ),
      entry,
      nameOf
    );
    if (!average.usable) throw new Error(average.reason);
    expect(checkCalibration(average, rules).map(({ rule: { type } }) => type)).not.toContain(
      'determination coefficient'
    );
  });
});

describe('two choices', () => {
  it('are the same where they draw the same line', () => {
    const fit = { model: 'linear', weighting: '1/x', levelsLeftOut: ['b', 'a'] } as const;
    expect(isSameFit(fit, { ...fit, levelsLeftOut: ['a', 'b'] })).toBe(true);
    expect(isSameFit(fit, { ...fit, weighting: 'none' })).toBe(false);
    expect(isSameFit(fit, { ...fit, levelsLeftOut: [] })).toBe(false);
    const average = { ...fit, model: 'average response factor' } as const;
    expect(isSameFit(average, { ...average, weighting: 'none' })).toBe(true);
  });
});
