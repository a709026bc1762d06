import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { beeswarm } from '../../../src/lib/charts/beeswarm';

describe('beeswarm', () => {
  it('leaves dots that do not touch on the middle line', () => {
    expect(beeswarm([0, 10, 20], (x) => x, 4, 20).map(({ y }) => y)).toEqual([0, 0, 0]);
  });

  it('sets equal values over each other, the first in the middle', () => {
    const ys = beeswarm([5, 5, 5], (x) => x, 4, 20).map(({ y }) => y);
    expect(ys[0]).toBe(0);
    expect(ys.map(Math.abs).sort()).toEqual([0, 8, 8]);
  });

  it('never hides a dot behind another while the strip has room', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 0, max: 300 }), { maxLength: 40 }), (values) => {
        const dots = beeswarm(values, (x) => x, 4, 1000);
        dots.forEach((a, i) =>
          dots
            .slice(i + 1)
            .forEach((b) => expect(Math.hypot(a.x - b.x, a.y - b.y)).toBeGreaterThanOrEqual(8 - 1e-3))
        );
      }),
      { numRuns: 60 }
    );
  });

  it('stays inside the strip, keeps every dot and its place along the line in a crowd', () => {
    const values = Array.from({ length: 200 }, (_, i) => i % 7);
    const dots = beeswarm(values, (x) => x, 4, 20);
    expect(dots).toHaveLength(200);
    for (const dot of dots) {
      expect(Math.abs(dot.y)).toBeLessThanOrEqual(20);
      expect(dot.x).toBe(dot.item);
    }
  });
});
