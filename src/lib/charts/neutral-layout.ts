/** Neutral share of an analyte over pH: `values[i]` (0 to 1) belongs to pH `from + i * step`. */
export interface NeutralCurve {
  readonly from: number;
  readonly step: number;
  readonly values: readonly number[];
}

export interface PhRange {
  readonly low: number;
  readonly high: number;
}

/** The strip's own units: ten to a pH unit, so that coordinates stay short, and a hundred from none to all. */
export const strip = { leastPh: 0, mostPh: 14, width: 140, height: 100 } as const;

/** Labels of the shared axis. */
export const phTicks: readonly number[] = [0, 2, 4, 6, 8, 10, 12, 14];

const clamp = (value: number, least: number, most: number): number => Math.min(most, Math.max(least, value));
const unit = (ph: number): number =>
  Math.round((clamp(ph, strip.leastPh, strip.mostPh) - strip.leastPh) * 100) / 10;

/** Where a pH lies across a strip, 0 to 100; what is beyond the axis lies on its end. */
export const phPlace = (ph: number): number => Math.round((unit(ph) / strip.width) * 10_000) / 100;

interface Point {
  readonly x: number;
  readonly y: number;
}

/** Drops what lies on the straight line between its neighbours, within half of a hundredth of the height. */
function simplified(points: readonly Point[]): readonly Point[] {
  const kept: Point[] = [];
  let anchor = 0;
  for (const [index, point] of points.entries()) {
    const next = points[index + 1];
    const start = points[anchor];
    if (index === 0 || next === undefined || start === undefined) {
      kept.push(point);
      continue;
    }
    const isOnLine = points.slice(anchor + 1, index + 1).every(({ x, y }) => {
      const expected = start.y + ((next.y - start.y) * (x - start.x)) / (next.x - start.x);
      return Math.abs(expected - y) <= 0.5;
    });
    if (!isOnLine) {
      kept.push(point);
      anchor = index;
    }
  }
  return kept;
}

export interface NeutralStrip {
  /** The share as a line, and what lies below it. */
  readonly line: string;
  readonly area: string;
}

/** One analyte's strip: the neutral share over pH, none at the bottom and all of it at the top. */
export function neutralStrip({ from, step, values }: NeutralCurve): NeutralStrip {
  const points = simplified(
    values.map((value, index) => ({
      x: unit(from + index * step),
      y: Math.round((1 - clamp(value, 0, 1)) * strip.height)
    }))
  );
  const [first] = points;
  const last = points.at(-1);
  if (first === undefined || last === undefined) return { line: '', area: '' };
  const line = points.map(({ x, y }, index) => `${index === 0 ? 'M' : 'L'}${x} ${y}`).join('');
  return { line, area: `${line}V${strip.height}H${first.x}Z` };
}

/** Ranges of pH as strokes along the foot of a strip. A range that is but a point is drawn as wide as a tenth of a unit. */
export function rangeBars(ranges: readonly PhRange[], y: number): string {
  return ranges
    .map(({ low, high }) => ({ from: unit(low), to: unit(high) }))
    .filter(({ from, to }) => to >= from)
    .map(({ from, to }) => {
      const start = Math.min(from, strip.width - 1);
      return `M${start} ${y}H${Math.max(to, start + 1)}`;
    })
    .join('');
}

/** Upright lines through a strip. */
export const uprights = (phs: readonly number[]): string =>
  phs.map((ph) => `M${unit(ph)} 0V${strip.height}`).join('');

export interface PlannedLabel {
  readonly ph: number;
  readonly text: string;
  /** 0 to 100 across. */
  readonly at: number;
  /** 0 is nearest to the strips. */
  readonly lane: number;
}

/** Likely advance of a letter, and what a label keeps free at its sides, on a strip as narrow as a phone's (pixels). */
const letter = 6.6;
const narrowest = 300;

/** Labels above the shared axis, each in the lowest lane where it touches no other, even on a narrow screen. */
export function plannedLabels(
  marks: readonly { readonly ph: number; readonly text: string }[]
): readonly PlannedLabel[] {
  const lanes: { from: number; to: number }[][] = [];
  return [...marks]
    .sort((a, b) => a.ph - b.ph)
    .map(({ ph, text }) => {
      const at = phPlace(ph);
      const half = (text.length * letter) / 2 + 4;
      const middle = clamp((at / 100) * narrowest, half, narrowest - half);
      const box = { from: middle - half, to: middle + half };
      const found = lanes.findIndex((taken) =>
        taken.every(({ from, to }) => box.to <= from || to <= box.from)
      );
      const lane = found === -1 ? lanes.length : found;
      (lanes[lane] ??= []).push(box);
      return { ph, text, at, lane };
    });
}
