import { describe, expect, it } from 'vitest';
import {
  neutralStrip,
  phPlace,
  plannedLabels,
  rangeBars,
  uprights,
  type NeutralCurve
} from '../../../src/lib/charts/neutral-layout';

const curve = (share: (ph: number) => number, step = 0.25): NeutralCurve => ({
  from: 0,
  step,
  values: Array.from({ length: 14 / step + 1 }, (_, index) => share(index * step))
});
/** Henderson and Hasselbalch for one acid group. */
const acid = (pka: number) => (ph: number) => 1 / (1 + 10 ** (ph - pka));

/** The corners of a path of straight lines. */
const corners = (path: string): (readonly [number, number])[] =>
  [...path.matchAll(/[ML]([\d.]+) ([\d.]+)/g)].map((found) => [Number(found[1]), Number(found[2])] as const);
/** Where the drawn line stands at a pH. */
function drawnAt(path: string, ph: number): number {
  const points = corners(path);
  const x = ph * 10;
  const index = points.findIndex(([at]) => at >= x);
  const [x1, y1] = points[Math.max(0, index)] ?? [0, 0];
  const [x0, y0] = points[Math.max(0, index - 1)] ?? [0, 0];
  return x1 === x0 ? y1 : y0 + ((y1 - y0) * (x - x0)) / (x1 - x0);
}

describe('neutralStrip', () => {
  it('draws all of it at the top, none at the foot, and half of it at the pKa', () => {
    const { line } = neutralStrip(curve(acid(4.5)));
    expect(corners(line)[0]).toEqual([0, 0]);
    expect(corners(line).at(-1)).toEqual([140, 100]);
    expect(drawnAt(line, 4.5)).toBeCloseTo(50, 0);
  });

  it('stays within a hundredth of the curve at every pH, with a third of its points', () => {
    const share = acid(9.45);
    const { line } = neutralStrip(curve(share));
    for (let ph = 0; ph <= 14; ph += 0.25) {
      expect(Math.abs(drawnAt(line, ph) / 100 - (1 - share(ph)))).toBeLessThanOrEqual(0.0101);
    }
    expect(corners(line).length).toBeLessThan(57 / 3);
  });

  it('draws what never changes with two points, and closes the area below', () => {
    expect(neutralStrip(curve(() => 1))).toEqual({ line: 'M0 0L140 0', area: 'M0 0L140 0V100H0Z' });
    expect(neutralStrip(curve(() => 0)).line).toBe('M0 100L140 100');
  });

  it('draws nothing for a curve without values', () => {
    expect(neutralStrip({ from: 0, step: 0.25, values: [] })).toEqual({ line: '', area: '' });
  });

  it('keeps the lines of 150 analytes short', () => {
    const all = Array.from({ length: 150 }, (_, index) => neutralStrip(curve(acid(index / 11))));
    expect(all.reduce((sum, { line }) => sum + line.length, 0)).toBeLessThan(150 * 150);
  });
});

describe('rangeBars', () => {
  it('runs from where a range begins to where it ends, within the axis', () => {
    expect(
      rangeBars(
        [
          { low: -3, high: 2.5 },
          { low: 11.4, high: 20 }
        ],
        96
      )
    ).toBe('M0 96H25M114 96H140');
  });

  it('leaves a sliver in sight, and nothing of a range that is none', () => {
    expect(rangeBars([{ low: 7, high: 7 }], 96)).toBe('M70 96H71');
    expect(rangeBars([{ low: 14, high: 14 }], 96)).toBe('M139 96H140');
    expect(rangeBars([{ low: 8, high: 6 }], 96)).toBe('');
  });
});

it('places a pH across the strip, and keeps what is beyond it at the ends', () => {
  expect([0, 3.5, 7, 14, 16, -1].map(phPlace)).toEqual([0, 25, 50, 100, 100, 0]);
  expect(uprights([2, 7.35])).toBe('M20 0V100M73.5 0V100');
});

describe('plannedLabels', () => {
  it('keeps labels that stand apart in one lane', () => {
    const labels = plannedLabels([
      { ph: 7, text: 'C, D' },
      { ph: 2, text: 'A, B' }
    ]);
    expect(labels.map(({ text, at, lane }) => ({ text, at, lane }))).toEqual([
      { text: 'A, B', at: 14.29, lane: 0 },
      { text: 'C, D', at: 50, lane: 0 }
    ]);
  });

  it('lifts a label over one that it would touch, and comes down again behind it', () => {
    const labels = plannedLabels([
      { ph: 6.5, text: 'A, B, C' },
      { ph: 7, text: 'D' },
      { ph: 7.2, text: 'E, F' },
      { ph: 13, text: 'G' }
    ]);
    expect(labels.map(({ lane }) => lane)).toEqual([0, 1, 2, 0]);
  });

  it('counts labels at the ends where they are kept inside', () => {
    const labels = plannedLabels([
      { ph: 0, text: 'Alpha, Beta' },
      { ph: 2, text: 'C' }
    ]);
    expect(labels.map(({ lane }) => lane)).toEqual([0, 1]);
  });
});
