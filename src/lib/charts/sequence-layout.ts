import type { TraceView } from '$lib/views/sequences';

/** Pixels. Every part of the picture of a run stands on one scale of places, so that they are read downwards. */
export const sequenceSize = { left: 46, right: 18, strip: 58, trace: 132, top: 10, bottom: 14 } as const;

export interface PlaceScale {
  readonly count: number;
  /** Pixels from one injection to the next. */
  readonly step: number;
  readonly width: number;
  readonly at: (place: number) => number;
}

/** Places 1 to `count`, as far apart as a screen allows and never closer than letters can be read; long runs scroll. */
export function placeScale(count: number, room = 1040): PlaceScale {
  const free = room - sequenceSize.left - sequenceSize.right;
  const step = Math.max(15, Math.min(34, Math.floor(free / Math.max(1, count))));
  return {
    count,
    step,
    width: sequenceSize.left + step * count + sequenceSize.right,
    at: (place) => sequenceSize.left + (place - 0.5) * step
  };
}

export interface TraceMark {
  readonly x: number;
  readonly y: number;
  readonly place: number;
  readonly percent: number;
  readonly fails: boolean;
}

export interface TraceLine {
  readonly id: string;
  readonly name: string;
  /** Through its readings, broken where there is none. */
  readonly path: string;
  readonly marks: readonly TraceMark[];
  readonly fails: boolean;
}

export interface TraceLabel {
  readonly text: string;
  readonly x: number;
  readonly y: number;
  readonly anchor: 'start' | 'end';
}

export interface TraceLayout {
  readonly ticks: readonly { readonly value: number; readonly y: number }[];
  /** Top and bottom of what is allowed; null where no rule says. */
  readonly band: { readonly top: number; readonly bottom: number } | null;
  readonly lines: readonly TraceLine[];
  /** Of the readings that fail, where they do not lie on one another. */
  readonly labels: readonly TraceLabel[];
}

interface Asked {
  readonly scale: PlaceScale;
  readonly limits: readonly [number | null, number | null];
  /** Half and twice are as far from 100 as each other: for areas, which are held to a window of ratios. */
  readonly logarithmic: boolean;
}

const round = (value: number): number => Math.round(value * 100) / 100;

/** Lines of percentages over the places of a run; the allowed band and 100 are always in the picture. */
export function traceLayout(
  traces: readonly TraceView[],
  { scale, limits, logarithmic }: Asked
): TraceLayout {
  const [low, high] = limits;
  const values = traces.flatMap(({ points }) =>
    points.map(({ percent }) => percent).filter((percent) => percent !== null)
  );
  const shown = [...values, 100, ...(low === null ? [] : [low]), ...(high === null ? [] : [high])];
  const [least, most] = [Math.min(...shown), Math.max(...shown)];
  const inner = sequenceSize.trace - sequenceSize.top - sequenceSize.bottom;
  const scaled = (value: number): number => (logarithmic ? Math.log(Math.max(value, floor)) : value);
  const floor = Math.max(1, least);
  const margin = 0.08 * (scaled(most) - scaled(least)) || (logarithmic ? 0.1 : 5);
  const [from, to] = [scaled(least) - margin, scaled(most) + margin];
  const y = (value: number): number =>
    round(sequenceSize.top + inner * (1 - (scaled(value) - from) / (to - from)));

  const lines = traces.map(({ id, name, points }): TraceLine => {
    const marks = points.flatMap(({ place, percent, fails }): TraceMark[] =>
      percent === null ? [] : [{ x: round(scale.at(place)), y: y(percent), place, percent, fails }]
    );
    let pen = 'M';
    const path = points
      .map(({ place, percent }) => {
        if (percent === null) {
          pen = 'M';
          return '';
        }
        const step = `${pen}${round(scale.at(place))} ${y(percent)}`;
        pen = 'L';
        return step;
      })
      .join('');
    return { id, name, path, marks, fails: marks.some((mark) => mark.fails) };
  });
  return {
    ticks: ticksOf(least, most, limits).map((value) => ({ value, y: y(value) })),
    band:
      low === null && high === null
        ? null
        : { top: high === null ? sequenceSize.top : y(high), bottom: low === null ? y(least) : y(low) },
    lines,
    labels: labelsOf(lines, scale)
  };
}

/** 100, the limits, and the ends where they lie well outside. */
function ticksOf(least: number, most: number, limits: readonly (number | null)[]): number[] {
  const wanted = [100, ...limits.filter((limit) => limit !== null)];
  const [lowest, highest] = [Math.min(...wanted), Math.max(...wanted)];
  if (least < 0.8 * lowest) wanted.push(Math.round(least));
  if (most > 1.2 * highest) wanted.push(Math.round(most));
  return [...new Set(wanted)].sort((a, b) => a - b);
}

const letter = 6.4;
const lineHeight = 13;

function labelsOf(lines: readonly TraceLine[], scale: PlaceScale): TraceLabel[] {
  const taken: { left: number; right: number; y: number }[] = [];
  return lines.flatMap(({ name, marks }): TraceLabel[] => {
    const worst = marks
      .filter(({ fails }) => fails)
      .reduce<TraceMark | null>(
        (most, mark) =>
          most === null || Math.abs(mark.percent - 100) > Math.abs(most.percent - 100) ? mark : most,
        null
      );
    if (!worst) return [];
    const size = name.length * letter;
    const anchor = worst.x + 8 + size > scale.width ? 'end' : 'start';
    const left = anchor === 'start' ? worst.x + 8 : worst.x - 8 - size;
    const box = { left, right: left + size, y: worst.y };
    const meets = taken.some(
      (other) =>
        Math.abs(other.y - box.y) < lineHeight && box.left < other.right + 6 && other.left < box.right + 6
    );
    if (meets) return [];
    taken.push(box);
    return [{ text: name, x: anchor === 'start' ? worst.x + 8 : worst.x - 8, y: worst.y, anchor }];
  });
}

/** "4 to 9, 12 and 14" */
export function placesText(places: readonly number[]): string {
  const sorted = [...places].sort((a, b) => a - b);
  const spans: string[] = [];
  let start = 0;
  sorted.forEach((place, index) => {
    if (sorted[index + 1] === place + 1) return;
    const first = sorted[start] ?? place;
    spans.push(
      first === place ? String(place) : place === first + 1 ? `${first}, ${place}` : `${first} to ${place}`
    );
    start = index + 1;
  });
  const last = spans.pop() ?? '';
  return spans.length === 0 ? last : `${spans.join(', ')} and ${last}`;
}
