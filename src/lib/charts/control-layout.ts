import { scaleLinear } from 'd3-scale';
import type { ControlChartPoint, ControlChartView } from '$lib/views/validation';

/** A control chart on a plot of 100 by 100, top left (0, 0). */
export interface ControlLayout {
  /** `at` in percent from the top. */
  readonly ticks: readonly { readonly value: number; readonly at: number }[];
  readonly grid: string;
  /** Between the limits of the rule; empty where there is none. */
  readonly rulePath: string;
  /** True where the rule is so much wider than the points that drawing it would flatten them. */
  readonly ruleBeyond: boolean;
  readonly ruleLines: string;
  readonly centreLine: string;
  readonly warningLines: string;
  readonly actionLines: string;
  /** Joins the points that count. */
  readonly line: string;
  /** Dots as strokes of no length. */
  readonly within: string;
  readonly setAside: string;
  /** Points beyond a limit, which get a mark and their name. */
  readonly outside: readonly {
    readonly point: ControlChartPoint;
    readonly x: number;
    readonly y: number;
    /** Which side of the mark its name stands on. */
    readonly side: 'left' | 'right';
  }[];
  /** Days along the foot; `from` and `to` in percent of the width. */
  readonly days: readonly { readonly day: string | null; readonly from: number; readonly to: number }[];
  readonly dayLines: string;
  readonly limitLabels: readonly { readonly text: string; readonly at: number }[];
}

/** How many times wider than its points a chart may become for the sake of the rule. */
const widest = 4;

const round = (value: number): number => Math.round(value * 100) / 100;

/** Points stand side by side in the order they were measured, whatever time lay between them. */
export function controlLayout(view: ControlChartView): ControlLayout {
  const { points, limits, rule } = view;
  const own = [...points.map(({ value }) => value), ...(limits ? [limits.centre, ...limits.action] : [])];
  const ruled = [rule.low, rule.high].filter((value) => value !== null);
  const span = Math.max(...own) - Math.min(...own);
  const ruleBeyond =
    ruled.length > 0 && span > 0 && Math.max(...own, ...ruled) - Math.min(...own, ...ruled) > widest * span;
  const values = ruleBeyond ? own : [...own, ...ruled];
  const low = Math.min(...values);
  const high = Math.max(...values);
  const pad = high > low ? 0.04 * (high - low) : Math.max(1, Math.abs(high) * 0.1);
  const y = scaleLinear([low - pad, high + pad], [100, 0]);
  const at = (value: number): number => round(y(value));
  const x = (index: number): number => round((100 * (index + 0.5)) / Math.max(1, points.length));
  const across = (value: number | null | undefined): string =>
    value === null || value === undefined ? '' : `M0 ${at(value)}H100`;
  const dot = (keep: (point: ControlChartPoint) => boolean): string =>
    points.map((point, index) => (keep(point) ? `M${x(index)} ${at(point.value)}h0` : '')).join('');
  const days = daysOf(points);
  const within = (percent: number): number => Math.min(100, Math.max(0, percent));
  const ruleTop = rule.high === null ? 0 : within(at(rule.high));
  const ruleFoot = rule.low === null ? 100 : within(at(rule.low));
  return {
    ticks: y.ticks(4).map((value) => ({ value, at: at(value) })),
    grid: y
      .ticks(4)
      .map((value) => across(value))
      .join(''),
    rulePath: rule.low === null && rule.high === null ? '' : `M0 ${ruleTop}H100V${ruleFoot}H0Z`,
    ruleBeyond,
    ruleLines: [rule.low, rule.high]
      .filter((value) => value !== null && at(value) >= 0 && at(value) <= 100)
      .map(across)
      .join(''),
    centreLine: limits ? across(limits.centre) : '',
    warningLines: limits ? limits.warning.map(across).join('') : '',
    actionLines: limits ? limits.action.map(across).join('') : '',
    line: points
      .map((point, index) => ({ point, index }))
      .filter(({ point }) => point.counted)
      .map(({ point, index }, order) => `${order === 0 ? 'M' : 'L'}${x(index)} ${at(point.value)}`)
      .join(''),
    within: dot((point) => point.counted && point.outside === null),
    setAside: dot((point) => !point.counted),
    outside: points.flatMap((point, index) =>
      point.outside === null
        ? []
        : [
            {
              point,
              x: x(index),
              y: at(point.value),
              side: x(index) > 70 ? ('left' as const) : ('right' as const)
            }
          ]
    ),
    days: days.map(({ day, first, last }) => ({
      day,
      from: round((100 * first) / points.length),
      to: round((100 * (last + 1)) / points.length)
    })),
    dayLines: days
      .slice(1)
      .map(({ first }) => `M${round((100 * first) / points.length)} 0V100`)
      .join(''),
    limitLabels: limits
      ? [
          { text: 'mean', at: at(limits.centre) },
          { text: '3 s', at: at(limits.action[1]) },
          { text: '3 s', at: at(limits.action[0]) }
        ]
      : []
  };
}

function daysOf(
  points: readonly ControlChartPoint[]
): { readonly day: string | null; readonly first: number; readonly last: number }[] {
  const days: { day: string | null; first: number; last: number }[] = [];
  points.forEach(({ day }, index) => {
    const current = days.at(-1);
    if (current && current.day === day) current.last = index;
    else days.push({ day, first: index, last: index });
  });
  return days;
}

/** What a control chart shows, in a sentence or two. */
export function controlDescription(view: ControlChartView): string {
  const outside = view.points.filter((point) => point.outside !== null);
  const named = outside.map(({ label, place, says }) => `${label} (${place}), ${says}`).join('; ');
  return `${view.name}, ${view.points.length} points in the order they were measured, ${view.unit}. ${view.sentences.join(' ')} ${
    outside.length === 0 ? 'No point lies outside.' : `Outside: ${named}.`
  }`;
}
