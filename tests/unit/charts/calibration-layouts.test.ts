import { describe, expect, it } from 'vitest';
import { canBeLogarithmic, curveLayout } from '../../../src/lib/charts/calibration-curve-layout';
import { residualLayout } from '../../../src/lib/charts/calibration-residual-layout';

describe('the strip of level errors', () => {
  it('has one scale for all levels, zero in its middle, and reaches past the widest limit', () => {
    const layout = residualLayout([
      { error: -10, limit: 50 },
      { error: 10, limit: 30 },
      { error: 0, limit: 30 }
    ]);
    expect(layout.reach).toBeGreaterThanOrEqual(57.5);
    expect(layout.rows.map(({ mark }) => mark?.beyond)).toEqual([0, 0, 0]);
    const [low, high, zero] = layout.rows.map(({ mark }) => mark?.at ?? NaN);
    expect(zero).toBe(50);
    expect((low ?? 0) + (high ?? 0)).toBeCloseTo(100, 6);
    expect(layout.ticks.map(({ value }) => value)).toContain(0);
    expect(layout.ticks.map(({ value }) => -value).sort((a, b) => a - b)).toEqual(
      layout.ticks.map(({ value }) => (value === 0 ? -0 : value))
    );
  });

  it('draws the limits of each level', () => {
    const [lowest, other, ruleless] = residualLayout([
      { error: 1, limit: 50 },
      { error: 1, limit: 30 },
      { error: 1, limit: null }
    ]).rows;
    const width = (band: readonly [number, number] | null | undefined) => (band ? band[1] - band[0] : null);
    expect(width(lowest?.band)! / width(other?.band)!).toBeCloseTo(50 / 30, 2);
    expect(ruleless?.band).toBeNull();
  });

  it('puts what lies far beyond at the edge and says so, and leaves the others their room', () => {
    const { reach, rows } = residualLayout([
      { error: 900, limit: 30 },
      { error: -2000, limit: 30 },
      { error: 15, limit: 30, proposed: 400 }
    ]);
    expect(reach).toBeLessThanOrEqual(80);
    expect(rows[0]?.mark).toEqual({ at: 96, beyond: 1 });
    expect(rows[1]?.mark).toEqual({ at: 4, beyond: -1 });
    expect(rows[2]?.mark?.at).toBeGreaterThan(55);
    expect(rows[2]?.proposed).toEqual({ at: 96, beyond: 1 });
  });

  it('marks nothing where nothing is read back', () => {
    expect(residualLayout([{ error: null, limit: 30 }]).rows[0]).toMatchObject({
      mark: null,
      proposed: null
    });
    expect(residualLayout([]).rows).toEqual([]);
  });
});

describe('the curve of a calibration', () => {
  const curve = [1, 10, 100].map((x) => ({
    x,
    y: 2 * x,
    confidence: [1.9 * x, 2.1 * x] as const,
    prediction: [x - 1, 3 * x + 1] as const
  }));
  const points = curve.map(({ x, y }) => ({ x, y }));
  const numbers = (path: string): number[] => (path.match(/-?\d+(\.\d+)?/g) ?? []).map(Number);

  it('keeps everything on the plot, points on the curve, on either kind of axes', () => {
    for (const axes of ['even', 'logarithmic'] as const) {
      const layout = curveLayout({ curve, points, aside: [{ x: 0.5, y: 1 }], readings: [5, 50], axes });
      expect(layout.axes).toBe(axes);
      for (const path of [layout.curve, layout.confidence, ...layout.prediction, layout.dots, layout.rug]) {
        expect(numbers(path).every((value) => value >= 0 && value <= 100)).toBe(true);
      }
      const [x, y] = numbers(layout.dots);
      expect(layout.curve.startsWith(`M${x},${y}`)).toBe(true);
      expect(layout.asideDots).not.toBe('');
    }
  });

  it('counts y from the top, so that a larger response stands higher', () => {
    const layout = curveLayout({ curve, points, aside: [], readings: [], axes: 'even' });
    const [, first = 0, , , , last = 0] = numbers(layout.curve.replace(/[ML]/g, ' '));
    expect(last).toBeLessThan(first);
    // By hand: x runs from 0 to 103, so 100 stands at 97.09; y from 0 to 1.06 times 300 (one and a half times
    // 200, where the band is cut off), so 200 at 37.11 from the top.
    expect(numbers(layout.dots).slice(6, 8)).toEqual([97.09, 37.11]);
  });

  it('spaces powers of ten evenly on logarithmic axes', () => {
    const { xTicks } = curveLayout({ curve, points, aside: [], readings: [], axes: 'logarithmic' });
    expect(xTicks.map(({ value }) => value)).toEqual([1, 10, 100]);
    const [a = 0, b = 0, c = 0] = xTicks.map(({ at }) => at);
    expect(b - a).toBeCloseTo(c - b, 1);
  });

  it('has no logarithmic axes where something is zero or below', () => {
    const zero = [{ x: 0, y: 0.1 }, ...points];
    expect(canBeLogarithmic({ curve, points: zero })).toBe(false);
    expect(curveLayout({ curve, points: zero, aside: [], readings: [], axes: 'logarithmic' }).axes).toBe(
      'even'
    );
  });
});
