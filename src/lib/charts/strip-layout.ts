import { scaleLinear } from 'd3-scale';
import type { StagePoint } from '$lib/views/stage-ladder';
import type { Verdict } from '$lib/views/verdict';
import { beeswarm } from './beeswarm';

/** Pixels. The lane above the dots belongs to the labels, so that a name can never lie on a mark. */
export const strip = { height: 76, lane: 20, radius: 4.25 } as const;
const middle = strip.lane + (strip.height - strip.lane) / 2;
const reach = (strip.height - strip.lane) / 2 - strip.radius - 1;

export interface StripScale {
  readonly low: number;
  readonly high: number;
  readonly ticks: readonly number[];
}

export interface StripMark {
  readonly point: StagePoint;
  /** 0 to 100 across, pixels down. */
  readonly x: number;
  readonly y: number;
}

export interface StripLabel {
  readonly text: string;
  readonly point: StagePoint;
  /** Where the text begins, is centred or ends, 0 to 100. */
  readonly x: number;
  readonly anchor: 'start' | 'middle' | 'end';
  /** From the text down to its mark. */
  readonly leader: string;
}

export interface StripLayout {
  readonly ticks: readonly { readonly value: number; readonly at: number }[];
  readonly marks: readonly StripMark[];
  /** Dots without a verdict, and those inside, as strokes of no length with round ends: circles on any stretch. */
  readonly plainPath: string;
  readonly insidePath: string;
  /** Marks that need a shape of their own. */
  readonly shaped: readonly (StripMark & { readonly verdict: Verdict })[];
  readonly labels: readonly StripLabel[];
  readonly at: (value: number) => number;
}

/** One scale for strips that are read against each other: from zero (or the lowest value) to the highest. */
export function sharedScale(
  strips: readonly (readonly StagePoint[])[],
  least: readonly [low: number, high: number],
  ticks = 5
): StripScale {
  const values = strips.flat().map(({ value }) => value);
  const scale = scaleLinear([Math.min(least[0], ...values), Math.max(least[1], ...values)], [0, 1]).nice(
    ticks
  );
  const [low = 0, high = 1] = scale.domain();
  return { low, high, ticks: scale.ticks(ticks) };
}

const round = (value: number): number => Math.round(value * 100) / 100;

/**
 * A strip of dots on one scale, for a plot 0 to 100 wide and `strip.height` pixels high, with the named points labelled
 * in the lane above.
 *
 * @param width of the strip on the screen in pixels; dots and labels are kept apart for it
 * @param named points to label, the most important first; a label that would touch another is left out
 */
export function stripLayout(
  points: readonly StagePoint[],
  scale: StripScale,
  width: number,
  named: readonly { readonly point: StagePoint; readonly text: string }[] = []
): StripLayout {
  const pixels = scaleLinear([scale.low, scale.high], [strip.radius + 2, width - strip.radius - 2]);
  const at = (value: number): number => round((pixels(value) / width) * 100);
  const marks = beeswarm(points, (point) => pixels(point.value), strip.radius, reach).map(
    ({ item, x, y }): StripMark => ({ point: item, x: round((x / width) * 100), y: round(middle + y) })
  );
  const dots = (belongs: (verdict: Verdict | null) => boolean): string =>
    marks
      .filter(({ point }) => belongs(point.verdict))
      .map(({ x, y }) => `M${x} ${y}h0`)
      .join('');
  return {
    ticks: scale.ticks.map((value) => ({ value, at: at(value) })),
    marks,
    plainPath: dots((verdict) => verdict === null),
    insidePath: dots((verdict) => verdict === 'inside'),
    shaped: marks.flatMap((mark) => {
      const { verdict } = mark.point;
      return verdict === null || verdict === 'inside' ? [] : [{ ...mark, verdict }];
    }),
    labels: placeLabels(marks, named, width),
    at
  };
}

/** Widest likely advance of a letter at the label's size. */
const letter = 6.9;

function placeLabels(
  marks: readonly StripMark[],
  named: readonly { readonly point: StagePoint; readonly text: string }[],
  width: number
): StripLabel[] {
  const taken: { from: number; to: number }[] = [];
  return named.flatMap(({ point, text }): StripLabel[] => {
    const mark = marks.find((candidate) => candidate.point.panelEntryId === point.panelEntryId);
    if (!mark) return [];
    const size = text.length * letter;
    const x = (mark.x / 100) * width;
    const anchor = x + size / 2 > width ? 'end' : x - size / 2 < 0 ? 'start' : 'middle';
    const from = anchor === 'start' ? x : anchor === 'middle' ? x - size / 2 : x - size;
    const box = { from: from - 6, to: from + size + 6 };
    if (taken.some((other) => box.from < other.to && other.from < box.to)) return [];
    taken.push(box);
    const end = round(mark.y - strip.radius - 1.5);
    const start = strip.lane - 2;
    return [{ text, point, x: mark.x, anchor, leader: end > start ? `M${mark.x} ${start}V${end}` : '' }];
  });
}
