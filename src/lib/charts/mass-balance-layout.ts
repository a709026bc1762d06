import { scaleBand, scaleLinear } from 'd3-scale';
import { percentText } from '$lib/domain/figure-text';
import { bandLimits } from '$lib/domain/recovery-band';
import type { MassBalanceRow, MassBalanceView } from '$lib/views/mass-balance';

/** Percent of the spike beyond which a bar is cut and says so: one wild row must not flatten the others. */
const furthest = 200;
/** The line at 100 always has some paper to its right. */
const nearest = 112;

export type SegmentKind = 'method' | 'balance' | 'downstream' | 'open';

export interface BarSegment {
  readonly kind: SegmentKind;
  /** Key of the fraction; null for what was lost downstream and what is open. */
  readonly fractionKey: string | null;
  readonly name: string;
  /** Points of the spike. */
  readonly value: number;
  /** Left and right edge, 0 to 100 across the plot. */
  readonly from: number;
  readonly to: number;
  readonly href: string;
}

export interface MassBalanceBar {
  readonly row: MassBalanceRow;
  /** Upper and lower edge of the bar, and the middle of its whisker, 0 to 100 down the plot. */
  readonly top: number;
  readonly bottom: number;
  readonly middle: number;
  readonly segments: readonly BarSegment[];
  readonly whisker: { readonly from: number; readonly to: number } | null;
  /** Right end of what is drawn. */
  readonly end: number;
  /** The bar ran past the right edge: its total, to be written there. */
  readonly cut: string | null;
}

export interface MassBalanceLayout {
  /** Percent of the spike at the right edge. */
  readonly max: number;
  readonly ticks: readonly { readonly value: number; readonly at: number }[];
  /** Null where the study asks nothing of a mean recovery. */
  readonly band: { readonly from: number; readonly to: number } | null;
  /** The limits that lie on the plot, with their place. */
  readonly limits: readonly { readonly value: number; readonly at: number }[];
  readonly bandPath: string;
  readonly limitPath: string;
  readonly hundredPath: string;
  readonly zeroPath: string;
  readonly bars: readonly MassBalanceBar[];
  /** One path per fraction, in the order of the fractions, 0 to 100 in both directions. */
  readonly fractionPaths: readonly { readonly key: string; readonly path: string }[];
  readonly downstreamPath: string;
  readonly openPath: string;
  readonly whiskerPath: string;
}

const round = (value: number): number => Math.round(value * 1000) / 1000;

/**
 * The stacked bars of a mass balance on a plot of 100 by 100, whatever its size on the screen. From the left: what
 * counts for the method, what was found elsewhere, what was lost downstream, what is open (only where it differs
 * from zero). A net mean below zero has no width; the table shows it.
 *
 * @param share where in its row the bar lies, 0 (top) to 1 (bottom)
 * @param guides band and lines run down the whole plot, or stay with the bars where text stands between them
 */
export function massBalanceLayout(
  view: MassBalanceView,
  share: readonly [top: number, bottom: number] = [0.17, 0.83],
  guides: 'whole' | 'bars' = 'whole'
): MassBalanceLayout {
  const max = rightEdge(view.rows);
  const x = scaleLinear([0, max], [0, 100]).clamp(true);
  const y = scaleBand(
    view.rows.map((row) => row.panelEntryId),
    [0, 100]
  );
  const bars = view.rows.map((row): MassBalanceBar => {
    const top = y(row.panelEntryId) ?? 0;
    const height = y.bandwidth();
    const { segments, end } = stack(row, view, (value) => round(x(value)));
    return {
      row,
      top: round(top + height * share[0]),
      bottom: round(top + height * share[1]),
      middle: round(top + (height * (share[0] + share[1])) / 2),
      segments,
      whisker: whiskerOf(row, (value) => round(x(value))),
      end: round(x(end)),
      cut: end > max ? `${percentText(end)} %` : null
    };
  });
  const { criteria } = view;
  const band = criteria && {
    from: round(x(criteria.low ?? 0)),
    to: criteria.high === null ? 100 : round(x(criteria.high))
  };
  const limits = bandLimits(criteria)
    .filter((value) => value <= max)
    .map((value) => ({ value, at: round(x(value)) }));
  const spans: readonly (readonly [number, number])[] =
    guides === 'whole' ? [[0, 100]] : bars.map(({ top, bottom }) => [top, bottom]);
  const lines = (at: number): string => spans.map(([from, to]) => `M${at} ${from}V${to}`).join('');
  const paths = boxes(bars);
  return {
    max,
    ticks: x.ticks(Math.min(10, Math.round(max / 20))).map((value) => ({ value, at: round(x(value)) })),
    band,
    limits,
    bandPath: band
      ? spans.map(([from, to]) => `M${band.from} ${from}H${band.to}V${to}H${band.from}Z`).join('')
      : '',
    limitPath: limits.map(({ at }) => lines(at)).join(''),
    hundredPath: lines(round(x(100))),
    zeroPath: lines(0),
    bars,
    fractionPaths: view.fractions.map(({ key }) => ({ key, path: paths.fractions.get(key) ?? '' })),
    downstreamPath: paths.downstream,
    openPath: paths.open,
    whiskerPath: bars.map(whiskerMarks).join('')
  };
}

function rightEdge(rows: readonly MassBalanceRow[]): number {
  const reach = rows.reduce((most, row) => {
    const found = row.segments.reduce((sum, { mean }) => sum + Math.max(mean, 0), 0);
    const upper = row.method ? row.method.mean + (row.method.halfWidth ?? 0) : 0;
    return Math.max(most, found + Math.max(row.downstream ?? 0, 0), upper);
  }, 0);
  return Math.min(furthest, Math.max(nearest, Math.ceil((reach + 4) / 10) * 10));
}

function stack(
  row: MassBalanceRow,
  view: MassBalanceView,
  x: (value: number) => number
): { segments: BarSegment[]; end: number } {
  const segments: BarSegment[] = [];
  let end = 0;
  let from = x(0);
  const add = (
    kind: SegmentKind,
    fractionKey: string | null,
    name: string,
    value: number,
    href: string
  ): void => {
    if (!(value > 0)) return;
    end += value;
    const to = x(end);
    segments.push({ kind, fractionKey, name, value, from, to, href });
    from = to;
  };
  for (const countsAs of ['method', 'balance'] as const) {
    for (const { key } of view.fractions.filter((fraction) => fraction.countsAs === countsAs)) {
      const found = row.segments.find((segment) => segment.fractionKey === key);
      if (found) add(countsAs, key, found.name, found.mean, found.href);
    }
  }
  if (row.downstream !== null) add('downstream', null, 'Lost downstream', row.downstream, row.href);
  if (row.open !== null && row.openSignificant) add('open', null, 'Open', row.open, row.href);
  return { segments, end };
}

function whiskerOf(row: MassBalanceRow, x: (value: number) => number): MassBalanceBar['whisker'] {
  if (!row.method || row.method.halfWidth === null) return null;
  const { mean, halfWidth } = row.method;
  return { from: x(mean - halfWidth), to: x(mean + halfWidth) };
}

interface Boxes {
  /** Of each fraction that has any width, by its key. */
  readonly fractions: ReadonlyMap<string, string>;
  readonly downstream: string;
  readonly open: string;
}

/** All boxes in one pass: writing a number as text is most of the work, and neighbours share their edges. */
function boxes(bars: readonly MassBalanceBar[]): Boxes {
  const fractions = new Map<string, string>();
  let downstream = '';
  let open = '';
  for (const bar of bars) {
    const [top, bottom] = [String(bar.top), String(bar.bottom)];
    let right = '0';
    for (const { kind, fractionKey, from, to } of bar.segments) {
      const left = right;
      if (to <= from) continue;
      right = String(to);
      const box = `M${left} ${top}H${right}V${bottom}H${left}Z`;
      if (kind === 'downstream') downstream += box;
      else if (kind === 'open') open += box;
      else if (fractionKey !== null) fractions.set(fractionKey, (fractions.get(fractionKey) ?? '') + box);
    }
  }
  return { fractions, downstream, open };
}

function whiskerMarks(bar: MassBalanceBar): string {
  if (!bar.whisker) return '';
  const { from, to } = bar.whisker;
  const cap = round((bar.bottom - bar.top) * 0.27);
  const [up, down] = [round(bar.middle - cap), round(bar.middle + cap)];
  return `M${from} ${up}V${down}M${from} ${bar.middle}H${to}M${to} ${up}V${down}`;
}

/**
 * The bar and the segment at a point of the plot, each coordinate 0 to 100. Off every segment the bar alone is
 * given, so that its row answers.
 */
export function segmentAt(
  layout: MassBalanceLayout,
  x: number,
  y: number
): { readonly bar: MassBalanceBar; readonly segment: BarSegment | null } | null {
  const bar = layout.bars[Math.floor((y / 100) * layout.bars.length)];
  if (!bar || y < 0) return null;
  const hit = y >= bar.top && y <= bar.bottom;
  const segment = hit ? bar.segments.find(({ from, to }) => x >= from && x < to) : undefined;
  return { bar, segment: segment ?? null };
}
