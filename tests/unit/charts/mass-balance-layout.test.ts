import { describe, expect, it } from 'vitest';
import { massBalanceLayout, segmentAt } from '../../../src/lib/charts/mass-balance-layout';
import { balanceRow, balanceView } from './fixtures';

/** Percent of the spike at a place of the plot. */
const value = (layout: { readonly max: number }, at: number): number => (at / 100) * layout.max;

describe('massBalanceLayout', () => {
  it('stacks what counts for the method first, then what was found elsewhere, then lost and open', () => {
    const layout = massBalanceLayout(
      balanceView(
        balanceRow(
          'Metformin',
          { first: 20, carbon: 30, aqueous: 11 },
          { downstream: 12, open: 27, openSignificant: true }
        )
      )
    );
    const segments = layout.bars[0]?.segments ?? [];
    expect(segments.map(({ kind, fractionKey }) => [kind, fractionKey])).toEqual([
      ['method', 'first'],
      ['method', 'carbon'],
      ['balance', 'aqueous'],
      ['downstream', null],
      ['open', null]
    ]);
    const ends = segments.map(({ to }) => value(layout, to));
    [20, 50, 61, 73, 100].forEach((end, index) => expect(ends[index]).toBeCloseTo(end, 1));
    segments.slice(1).forEach((segment, index) => expect(segment.from).toBe(segments[index]?.to));
  });

  it('leaves an open part that cannot be told from zero undrawn', () => {
    const layout = massBalanceLayout(balanceView(balanceRow('Atrazine', { first: 93 }, { open: 4 })));
    expect(layout.openPath).toBe('');
    expect(layout.bars[0]?.end).toBeCloseTo((93 / layout.max) * 100, 2);
  });

  it('gives a fraction whose net mean is below zero no width, and shifts nothing by it', () => {
    const layout = massBalanceLayout(balanceView(balanceRow('Caffeine', { first: -2, carbon: 80 })));
    expect(layout.bars[0]?.segments).toHaveLength(1);
    expect(layout.bars[0]?.segments[0]).toMatchObject({ fractionKey: 'carbon', from: 0 });
  });

  it('runs a total above 100 past the line and widens the plot for it', () => {
    const layout = massBalanceLayout(balanceView(balanceRow('Ibuprofen', { first: 128, aqueous: 10 })));
    expect(layout.max).toBeGreaterThanOrEqual(138);
    expect(value(layout, layout.bars[0]?.end ?? 0)).toBeCloseTo(138, 1);
    expect(layout.bars[0]?.cut).toBeNull();
  });

  it('cuts a wild row and says how far it went, so that the others stay readable', () => {
    const layout = massBalanceLayout(
      balanceView(balanceRow('Wild', { first: 912 }), balanceRow('Tame', { first: 90 }))
    );
    expect(layout.max).toBe(200);
    expect(layout.bars[0]).toMatchObject({ end: 100, cut: '912 %' });
    expect(layout.bars[1]?.cut).toBeNull();
  });

  it('sets the whisker on the method part alone', () => {
    const layout = massBalanceLayout(balanceView(balanceRow('NDMA', { first: 6, carbon: 43, aqueous: 20 })));
    const whisker = layout.bars[0]?.whisker;
    expect(value(layout, whisker?.from ?? 0)).toBeCloseTo(45, 1);
    expect(value(layout, whisker?.to ?? 0)).toBeCloseTo(53, 1);
  });

  it.each([
    ['no method recovery', null],
    ['no interval', { mean: 80, n: 1, halfWidth: null, sd: null, rsd: null, interval: null }]
  ])('draws no whisker for a row with %s', (_, method) => {
    const layout = massBalanceLayout(balanceView(balanceRow('Phenol', { first: 80 }, { method })));
    expect(layout.bars[0]?.whisker).toBeNull();
    expect(layout.whiskerPath).toBe('');
  });

  it('draws one path per fraction, in the order of the legend', () => {
    const layout = massBalanceLayout(
      balanceView(balanceRow('A', { first: 50, carbon: 20 }), balanceRow('B', { first: 60 }))
    );
    expect(layout.fractionPaths.map(({ key }) => key)).toEqual(['first', 'aqueous', 'carbon']);
    expect(layout.fractionPaths[0]?.path.match(/M/g)).toHaveLength(2);
    expect(layout.fractionPaths[2]?.path.match(/M/g)).toHaveLength(1);
    expect(layout.fractionPaths[1]?.path).toBe('');
  });

  it('marks the limits that lie on the plot and no other', () => {
    const near = massBalanceLayout(balanceView(balanceRow('A', { first: 90 })));
    expect(near.limits.map((limit) => limit.value)).toEqual([70]);
    expect(value(near, near.limits[0]?.at ?? 0)).toBeCloseTo(70, 1);
    expect(near.limitPath.match(/M/g)).toHaveLength(1);
    const far = massBalanceLayout(balanceView(balanceRow('A', { first: 150 })));
    expect(far.limits.map((limit) => limit.value)).toEqual([70, 130]);
    expect(far.limitPath.match(/M/g)).toHaveLength(2);
  });

  it.each([
    ['no band where nothing is asked of a mean recovery', null, '', 0],
    ['a band that is open above from its limit to the edge', { low: 70, high: null }, 'H100V', 1],
    ['a band that is open below from zero on', { low: null, high: 80 }, 'M0 0H', 1]
  ])('draws %s', (_, criteria, path, limits) => {
    const layout = massBalanceLayout({ ...balanceView(balanceRow('A', { first: 90 })), criteria });
    expect(layout.bandPath === '').toBe(criteria === null);
    expect(layout.bandPath).toContain(path);
    expect(layout.limits).toHaveLength(limits);
  });

  it('keeps lines beside the bars where text stands between them', () => {
    const rows = [balanceRow('A', { first: 90 }), balanceRow('B', { first: 80 })];
    const layout = massBalanceLayout(balanceView(...rows), [0.5, 0.9], 'bars');
    expect(layout.hundredPath.match(/M/g)).toHaveLength(2);
    expect(layout.bars.map(({ top, bottom }) => [top, bottom])).toEqual([
      [25, 45],
      [75, 95]
    ]);
  });

  it('lays out no rows without failing', () => {
    expect(massBalanceLayout(balanceView()).bars).toEqual([]);
  });
});

describe('segmentAt', () => {
  const layout = massBalanceLayout(
    balanceView(balanceRow('A', { first: 50, carbon: 20 }), balanceRow('B', { first: 60 }))
  );
  const across = (percent: number): number => (percent / layout.max) * 100;

  it.each([
    [across(10), 25, 'A', 'first'],
    [across(60), 25, 'A', 'carbon'],
    [across(90), 25, 'A', null],
    [across(10), 75, 'B', 'first'],
    [across(10), 51, 'B', null]
  ])('finds at %d, %d row %s and segment %s', (x, y, row, key) => {
    const hit = segmentAt(layout, x, y);
    expect(hit?.bar.row.name).toBe(row);
    expect(hit?.segment?.fractionKey ?? null).toBe(key);
  });

  it.each([
    [50, -1],
    [50, 101]
  ])('finds nothing off the plot at %d, %d', (x, y) => {
    expect(segmentAt(layout, x, y)).toBeNull();
  });
});
