import { describe, expect, it } from 'vitest';
import { namedPoints, remainingSentence, stripSentence } from '../../../src/lib/charts/stage-ladder-text';
import { sourceSlice, streamSlices } from '../../../src/lib/charts/stream-layout';
import { sharedScale, strip, stripLayout } from '../../../src/lib/charts/strip-layout';
import type { StagePoint, StageReach } from '../../../src/lib/views/stage-ladder';
import type { Verdict } from '../../../src/lib/views/verdict';

const point = (name: string, value: number, verdict: Verdict | null = null): StagePoint => ({
  panelEntryId: name,
  name,
  value,
  verdict,
  href: `?figure=${name}`
});

describe('sharedScale', () => {
  it('holds the least range and every point', () => {
    const scale = sharedScale([[point('a', -3)], [point('b', 37)]], [0, 20]);
    expect(scale.low).toBeLessThanOrEqual(-3);
    expect(scale.high).toBeGreaterThanOrEqual(37);
    expect(sharedScale([[]], [0, 20])).toMatchObject({ low: 0, high: 20 });
  });
});

describe('stripLayout', () => {
  const scale = { low: 0, high: 40, ticks: [0, 20, 40] };
  const crowd = [point('Atrazine', 1), point('Diuron', 1.2), point('Metformin', 37), point('NDMA', 36)];

  it('keeps names in a lane of their own above every mark', () => {
    const layout = stripLayout(crowd, scale, 320, [{ point: crowd[2] as StagePoint, text: 'Metformin 37' }]);
    expect(layout.labels).toHaveLength(1);
    for (const mark of layout.marks) expect(mark.y - strip.radius).toBeGreaterThanOrEqual(strip.lane);
  });

  it.each([
    [37, 'Metformin 37.0', 'end'],
    [0.5, 'Metformin 0.5', 'start'],
    [20, 'Metformin 20.0', 'middle']
  ])('keeps the name of a mark at %d inside the strip', (value, text, anchor) => {
    const metformin = point('Metformin', value);
    const [label] = stripLayout([metformin], scale, 200, [{ point: metformin, text }]).labels;
    expect(label?.anchor).toBe(anchor);
  });

  it('leaves out a name that would lie on a more important one', () => {
    const named = [
      { point: crowd[2] as StagePoint, text: 'Metformin 37.0' },
      { point: crowd[3] as StagePoint, text: 'NDMA 36.0' },
      { point: crowd[0] as StagePoint, text: 'Atrazine 1.0' }
    ];
    expect(stripLayout(crowd, scale, 320, named).labels.map(({ text }) => text)).toEqual([
      'Metformin 37.0',
      'Atrazine 1.0'
    ]);
  });

  it('draws dots inside or unjudged as circles and gives the others a shape of their own', () => {
    const layout = stripLayout(
      [point('a', 5, 'inside'), point('b', 10), point('c', 20, 'outside'), point('d', 30, 'watch')],
      scale,
      400
    );
    expect(layout.insidePath.match(/M/g)).toHaveLength(1);
    expect(layout.plainPath.match(/M/g)).toHaveLength(1);
    expect(layout.shaped.map(({ verdict }) => verdict)).toEqual(['outside', 'watch']);
  });
});

describe('streamSlices', () => {
  /** Left and right bank at the lower end of a slice, as written in its path. */
  const lowerEnd = (water: string): [number, number] => {
    const [, left, right] = /([\d.-]+) 100L([\d.-]+) 100/.exec(water) ?? [];
    return [Number(left), Number(right)];
  };
  const upperEnd = (water: string): [number, number] => {
    const [, left] = /^M([\d.-]+) 0/.exec(water) ?? [];
    const [, right] = /([\d.-]+) 0Z$/.exec(water) ?? [];
    return [Number(left), Number(right)];
  };

  it('carries the amount that is left in its width', () => {
    const [first, second] = streamSlices([80, 40]).map(({ water }) => lowerEnd(water));
    const width = ([left, right]: [number, number] = [0, 0]): number => right - left;
    expect(width(first) / width(second)).toBeCloseTo(2, 2);
    expect(width(first) / 0.8).toBeCloseTo(54, 1);
  });

  it('meets the slice above without a step', () => {
    const slices = streamSlices([92, 91, null, 40]);
    slices.slice(1).forEach((slice, index) => {
      expect(upperEnd(slice.water)).toEqual(lowerEnd(slices[index]?.water ?? ''));
    });
    expect(upperEnd(slices[0]?.water ?? '')).toEqual(lowerEnd(sourceSlice().water));
  });

  it('says where the amount is a guess', () => {
    expect(streamSlices([92, null, 80]).map(({ guessed }) => guessed)).toEqual([false, true, false]);
  });

  it.each([-5, 0, 400])('draws a stream for an amount of %d', (amount) => {
    const [left, right] = lowerEnd(streamSlices([amount])[0]?.water ?? '');
    expect(right).toBeGreaterThan(left);
    expect(left).toBeGreaterThanOrEqual(0);
    expect(right).toBeLessThanOrEqual(100);
  });
});

describe('the words of the ladder', () => {
  it('names what is outside on the whole method, the furthest first', () => {
    const points = [point('a', 63, 'outside'), point('b', 96, 'inside'), point('c', 49.3, 'outside')];
    expect(namedPoints(points, 'whole', [70, 130]).map(({ text }) => text)).toEqual(['c 49.3', 'a 63.0']);
  });

  it('names the worst loss, and the largest bias of either sign', () => {
    expect(namedPoints([point('a', -9), point('b', 4)], 'loss').map(({ text }) => text)).toEqual(['b 4.0']);
    expect(namedPoints([point('a', -9), point('b', 4)], 'signal').map(({ text }) => text)).toEqual([
      'a −9.0'
    ]);
  });

  it('puts a strip into a sentence', () => {
    expect(stripSentence('Drying takes', [point('a', 1), point('b', 12), point('c', 3)], 'points')).toBe(
      'Drying takes: 3 analytes, median 3.0 points, from 1.0 (a) to 12.0 (b).'
    );
    expect(stripSentence('Drying takes', [], 'points')).toBe('Drying takes: no figures yet.');
  });

  it('says when what is left is not known', () => {
    const reach = { name: 'Drying', remaining: null } as StageReach;
    expect(remainingSentence(reach)).toContain('not known');
    expect(remainingSentence({ ...reach, remaining: 91.2 })).toBe('Median 91.2 of 100 left below drying.');
  });
});
