import { describe, expect, it } from 'vitest';
import { controlDescription, controlLayout } from '../../../src/lib/charts/control-layout';
import type { ControlChartPoint, ControlChartView } from '../../../src/lib/views/validation';

const point = (key: string, value: number, own: Partial<ControlChartPoint> = {}): ControlChartPoint => ({
  key,
  label: key,
  place: 'experiment 1, 9 Nov 2026',
  day: '2026-11-09',
  value,
  counted: true,
  says: '',
  outside: null,
  href: null,
  ...own
});

const chart = (
  points: readonly ControlChartPoint[],
  own: Partial<ControlChartView> = {}
): ControlChartView => ({
  key: 'a',
  panelEntryId: 'a',
  name: 'Placein-d5',
  unit: '% of the amount added',
  points,
  limits: { centre: 90, warning: [80, 100], action: [75, 105] },
  rule: { low: 70, high: 130 },
  n: points.length,
  sentences: [],
  missing: [],
  ...own
});

const heights = (path: string): number[] =>
  [...path.matchAll(/M\S+ ([\d.]+)/g)].map((found) => Number(found[1]));

describe('a control chart', () => {
  it('puts points side by side in their order, the higher value higher up', () => {
    const layout = controlLayout(chart([point('A', 85), point('B', 95)]));
    expect(layout.line).toMatch(/^M25 [\d.]+L75 [\d.]+$/);
    const [a = 0, b = 0] = heights(layout.within);
    expect(b).toBeLessThan(a);
  });

  it('draws mean, 2 s, 3 s and the rule each where its value lies', () => {
    const layout = controlLayout(chart([point('A', 90)]));
    const at = (path: string) => heights(path);
    const [centre = 0] = at(layout.centreLine);
    const [low2 = 0, high2 = 0] = at(layout.warningLines);
    const [low3 = 0, high3 = 0] = at(layout.actionLines);
    const [ruleLow = 0, ruleHigh = 0] = at(layout.ruleLines);
    expect([ruleHigh, high3, high2, centre, low2, low3, ruleLow]).toEqual(
      [ruleHigh, high3, high2, centre, low2, low3, ruleLow].toSorted((a, b) => a - b)
    );
    // 105 to 90 is three times 95 to 90 and so on: one scale for all.
    expect((centre - high3) / (centre - high2)).toBeCloseTo(1.5, 2);
  });

  it('leaves what is set aside out of the line and draws it hollow', () => {
    const layout = controlLayout(chart([point('A', 85), point('B', 40, { counted: false }), point('C', 95)]));
    expect(layout.line.match(/[ML]/g)).toHaveLength(2);
    expect(heights(layout.setAside)).toHaveLength(1);
    expect(heights(layout.within)).toHaveLength(2);
  });

  it('marks each point outside by itself, its name on the side where there is room', () => {
    const points = Array.from({ length: 10 }, (_, index) => point(`P${index}`, 90));
    const layout = controlLayout(
      chart([
        point('first', 60, { outside: 'rule', says: 'outside the rule' }),
        ...points,
        point('last', 108, { outside: 'action', says: 'beyond 3 s' })
      ])
    );
    expect(layout.outside.map(({ point: { label }, side }) => [label, side])).toEqual([
      ['first', 'right'],
      ['last', 'left']
    ]);
    expect(layout.outside.every(({ y }) => y >= 0 && y <= 100)).toBe(true);
  });

  it('parts the days along the foot, without gaps', () => {
    const layout = controlLayout(
      chart([
        point('A', 90),
        point('B', 91),
        point('C', 92, { day: '2026-11-10' }),
        point('D', 92, { day: null })
      ])
    );
    expect(layout.days).toEqual([
      { day: '2026-11-09', from: 0, to: 50 },
      { day: '2026-11-10', from: 50, to: 75 },
      { day: null, from: 75, to: 100 }
    ]);
  });

  it('does not flatten its points for a rule that is much wider', () => {
    const narrow = { centre: 100, warning: [98, 102], action: [97, 103] } as const;
    const layout = controlLayout(
      chart([point('A', 99), point('B', 101)], { limits: narrow, rule: { low: 50, high: 150 } })
    );
    expect(layout.ruleBeyond).toBe(true);
    expect(layout.ruleLines).toBe('');
    // The whole plot lies within the rule.
    expect(layout.rulePath).toBe('M0 0H100V100H0Z');
  });

  it('stands with one point, without limits and without a rule', () => {
    const layout = controlLayout(chart([point('A', 90)], { limits: null, rule: { low: null, high: null } }));
    expect(layout.line).toBe('M50 50');
    expect(layout.rulePath).toBe('');
    expect(layout.centreLine).toBe('');
  });

  it('names every point outside in its description', () => {
    const text = controlDescription(
      chart([point('A', 90), point('B', 60, { outside: 'rule', says: 'outside the rule' })])
    );
    expect(text).toContain('B (experiment 1, 9 Nov 2026), outside the rule');
  });
});
