import { describe, expect, it } from 'vitest';
import { placeScale, placesText, sequenceSize, traceLayout } from '../../../src/lib/charts/sequence-layout';
import type { TraceView } from '../../../src/lib/views/sequences';

const trace = (
  name: string,
  percents: readonly (number | null)[],
  failing: readonly number[] = []
): TraceView => ({
  id: name,
  name,
  points: percents.map((percent, index) => ({
    place: index + 1,
    percent,
    fails: failing.includes(index + 1)
  }))
});
const layoutOf = (
  traces: readonly TraceView[],
  limits: readonly [number | null, number | null],
  logarithmic = false
) => traceLayout(traces, { scale: placeScale(10), limits, logarithmic });

describe('the places of a run', () => {
  it('stand evenly, the first and last half a step from the ends', () => {
    const scale = placeScale(39);
    expect(scale.at(2) - scale.at(1)).toBe(scale.step);
    expect(scale.at(1)).toBe(sequenceSize.left + scale.step / 2);
    expect(scale.width - sequenceSize.right - scale.at(39)).toBe(scale.step / 2);
  });

  it('fill the room while letters can be read, then grow beyond it', () => {
    expect(placeScale(39).width).toBeLessThanOrEqual(1040);
    expect(placeScale(300).step).toBe(15);
    expect(placeScale(300).width).toBeGreaterThan(4000);
    expect(placeScale(0).width).toBeGreaterThan(0);
  });
});

describe('a trace', () => {
  it('keeps the band, 100 and every reading inside the picture, higher values higher up', () => {
    const layout = layoutOf([trace('a', [100, 132, 60])], [80, 120]);
    const ys = layout.lines[0]?.marks.map(({ y }) => y) ?? [];
    expect(ys[1]).toBeLessThan(ys[0] ?? 0);
    expect(ys[2]).toBeGreaterThan(ys[0] ?? 0);
    for (const y of [...ys, layout.band?.top ?? -1, layout.band?.bottom ?? -1]) {
      expect(y).toBeGreaterThanOrEqual(sequenceSize.top);
      expect(y).toBeLessThanOrEqual(sequenceSize.trace - sequenceSize.bottom);
    }
    expect(layout.ticks.map(({ value }) => value)).toEqual([60, 80, 100, 120]);
  });

  it('of areas has half and twice equally far from 100', () => {
    const [half, whole, twice] =
      layoutOf([trace('a', [50, 100, 200])], [50, 200], true).lines[0]?.marks ?? [];
    expect((half?.y ?? 0) - (whole?.y ?? 0)).toBeCloseTo((whole?.y ?? 0) - (twice?.y ?? 0), 1);
  });

  it('is broken where there is no reading, and draws none there', () => {
    const [line] = layoutOf([trace('a', [100, null, 90])], [80, 120]).lines;
    expect(line?.path.match(/M/g)).toHaveLength(2);
    expect(line?.marks.map(({ place }) => place)).toEqual([1, 3]);
  });

  it('names what fails once, at its worst, and leaves out a name that would lie on another', () => {
    const labels = (traces: readonly TraceView[]) =>
      layoutOf(traces, [80, 120]).labels.map(({ text }) => text);
    expect(labels([trace('Diuron', [125, 140, 126], [1, 2, 3])])).toEqual(['Diuron']);
    expect(labels([trace('Diuron', [131], [1]), trace('Atrazine', [131.2], [1])])).toEqual(['Diuron']);
    expect(labels([trace('Diuron', [110])])).toEqual([]);
  });

  it('without a rule has no band, and one open end runs to the edge', () => {
    expect(layoutOf([trace('a', [100])], [null, null]).band).toBeNull();
    expect(layoutOf([trace('a', [100, 90])], [80, null]).band?.top).toBe(sequenceSize.top);
  });

  it('stands an area of 0 and a picture of nothing', () => {
    expect(
      layoutOf([trace('a', [0, 100])], [50, 200], true).lines[0]?.marks.every(({ y }) => Number.isFinite(y))
    ).toBe(true);
    expect(layoutOf([], [null, null]).ticks.map(({ y }) => Number.isFinite(y))).toEqual([true]);
  });
});

describe('places in words', () => {
  it.each([
    [[3], '3'],
    [[4, 5], '4, 5'],
    [[9, 4, 5, 6, 7, 8, 12], '4 to 9 and 12'],
    [[1, 2, 3, 7, 10, 11, 12], '1 to 3, 7 and 10 to 12']
  ])('%j', (places, text) => expect(placesText(places)).toBe(text));
});
