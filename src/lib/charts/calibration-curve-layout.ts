import { line as lineOf, area as areaOf } from 'd3-shape';
import { scaleLinear, scaleLog } from 'd3-scale';
import type { CurvePointView } from '$lib/views/calibration';

export type CurveAxes = 'even' | 'logarithmic';

interface Place {
  readonly x: number;
  readonly y: number;
}

export interface CurveInput {
  readonly curve: readonly CurvePointView[];
  readonly points: readonly Place[];
  /** Levels that the line goes without. */
  readonly aside: readonly Place[];
  /** Where extracts were read, on the x axis. */
  readonly readings: readonly number[];
  readonly axes: CurveAxes;
}

export interface AxisTick {
  readonly value: number;
  /** 0 to 100, from the left or from the top. */
  readonly at: number;
}

/** All paths on a plot of 100 by 100, y counted from the top. */
export interface CurveLayout {
  readonly axes: CurveAxes;
  readonly xTicks: readonly AxisTick[];
  readonly yTicks: readonly AxisTick[];
  readonly grid: string;
  readonly curve: string;
  /** Where the curve lies. */
  readonly confidence: string;
  /** Where one more response would lie: its lower and its upper edge. */
  readonly prediction: readonly string[];
  /** Strokes of no length with round ends: circles on any stretch. */
  readonly dots: string;
  readonly asideDots: string;
  readonly rug: string;
}

const round = (value: number): number => Math.round(value * 100) / 100;

/** A logarithmic axis needs numbers above zero. */
export const canBeLogarithmic = ({ curve, points }: Pick<CurveInput, 'curve' | 'points'>): boolean =>
  curve.length > 0 && [...curve, ...points].every(({ x, y }) => x > 0 && y > 0);

/**
 * A calibration curve with its bands, its points, the levels it goes without, and where extracts were read on it. On logarithmic axes
 * an edge of a band that reaches zero is drawn at the bottom of the plot.
 */
export function curveLayout(input: CurveInput): CurveLayout {
  const { curve, points, aside, readings } = input;
  const axes: CurveAxes = input.axes === 'logarithmic' && canBeLogarithmic(input) ? 'logarithmic' : 'even';
  const places = [...points, ...aside];
  const xs = [...places, ...curve].map(({ x }) => x);
  const ys = [...places, ...curve].map(({ y }) => y);
  const positive = (values: readonly number[]): number[] => values.filter((value) => value > 0);
  const right = Math.max(...xs, 0);
  // A band that is wide against the curve itself would press everything else flat: the plot ends above it.
  const edges = curve.flatMap(({ confidence, prediction }) => [confidence[1], prediction?.[1] ?? 0]);
  const top = Math.min(Math.max(...ys, ...edges, 0), 1.5 * Math.max(...ys, 0));

  const x =
    axes === 'even'
      ? scaleLinear([0, right * 1.03 || 1], [0, 100])
      : scaleLog([Math.min(...positive(xs)) / 1.35, right * 1.2], [0, 100]);
  const low = axes === 'even' ? Math.min(0, ...ys) : Math.min(...positive(ys)) / 2;
  const y =
    axes === 'even' ? scaleLinear([low, top * 1.06 || 1], [100, 0]) : scaleLog([low, top * 1.5], [100, 0]);
  const down = (value: number): number => round(Math.max(0, y(Math.max(value, low))));
  const across = (value: number): number => round(x(value));

  const path = lineOf<CurvePointView>()
    .x((point) => across(point.x))
    .y((point) => down(point.y));
  const edge = (side: 0 | 1): string =>
    lineOf<CurvePointView>()
      .defined(({ prediction }) => prediction !== null)
      .x((point) => across(point.x))
      .y((point) => down(point.prediction?.[side] ?? 0))(curve) ?? '';
  const band = areaOf<CurvePointView>()
    .x((point) => across(point.x))
    .y0((point) => down(point.confidence[0]))
    .y1((point) => down(point.confidence[1]));
  const dot = (place: Place): string => `M${across(place.x)} ${down(place.y)}h0`;
  const xTicks = ticksOf(x, axes).map((value) => ({ value, at: across(value) }));
  const yTicks = ticksOf(y, axes).map((value) => ({ value, at: round(y(value)) }));
  const drawn = readings.filter((value) => axes === 'even' || value >= (x.domain()[0] ?? 0));
  return {
    axes,
    xTicks,
    yTicks,
    grid: [...xTicks.map(({ at }) => `M${at} 0V100`), ...yTicks.map(({ at }) => `M0 ${at}H100`)].join(''),
    curve: path(curve) ?? '',
    confidence: band(curve) ?? '',
    prediction: [edge(0), edge(1)].filter((text) => text !== ''),
    dots: points.map(dot).join(''),
    asideDots: aside.map(dot).join(''),
    rug: drawn.map((value) => `M${across(value)} 97V100`).join('')
  };
}

/** Round figures; of a logarithmic axis the powers of ten, with 2 and 5 where those would be few. */
function ticksOf(
  scale: { ticks: (count?: number) => number[]; domain: () => number[] },
  axes: CurveAxes
): number[] {
  if (axes === 'even') return scale.ticks(4);
  const [from = 1, to = 10] = scale.domain();
  const powers: number[] = [];
  for (let power = Math.floor(Math.log10(from)); power <= Math.log10(to); power += 1) powers.push(power);
  const figures = (steps: readonly number[]): number[] =>
    powers
      .flatMap((power) => steps.map((step) => Number(`${step}e${power}`)))
      .filter((value) => value >= from && value <= to);
  const tens = figures([1]);
  return tens.length >= 3 ? tens : figures([1, 2, 5]);
}
