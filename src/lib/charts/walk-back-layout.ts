import { scaleLinear } from 'd3-scale';
import type { WalkBackView } from '$lib/views/walk-back';

export interface WalkBackPanel {
  readonly key: string;
  readonly name: string;
  /** All on a plot of 100 by 100: intervals, losses that stand out, and the rest. */
  readonly whiskers: string;
  readonly clear: string;
  readonly faint: string;
}

export interface WalkBackLayout {
  readonly ticks: readonly { readonly value: number; readonly at: number }[];
  /** Grid lines, and the line of no loss, down the whole panel or beside the dots only. */
  readonly grid: string;
  readonly zero: string;
  readonly panels: readonly WalkBackPanel[];
}

const round = (value: number): number => Math.round(value * 100) / 100;

/** True for a loss that its adjusted test tells from nothing at 5 %. */
export const standsOut = (pAdjusted: number | null): boolean => pAdjusted !== null && pAdjusted < 0.05;

/**
 * One panel per stage on one scale, so that what drying takes can be held against what extraction takes: a dot per
 * analyte with its interval. Dots are strokes of no length with round ends, which stay round on any stretch.
 *
 * @param middle where in its row a dot lies, 0 (top) to 1 (bottom)
 * @param guides lines run down the whole panel, or stay beside the dots where text stands between them
 */
export function walkBackLayout(
  view: WalkBackView,
  middle = 0.5,
  guides: 'whole' | 'rows' = 'whole'
): WalkBackLayout {
  const ends = view.rows.flatMap(({ losses }) =>
    losses.flatMap((loss) => (loss ? [loss.lost, loss.interval?.lower ?? 0, loss.interval?.upper ?? 0] : []))
  );
  const x = scaleLinear([Math.min(0, ...ends), Math.max(20, ...ends)], [3, 97]).nice(10);
  const y = (index: number): number => round(((index + middle) / view.rows.length) * 100);
  const beside = 16 / Math.max(1, view.rows.length);
  const line = (value: number): string =>
    guides === 'whole'
      ? `M${round(x(value))} 0V100`
      : view.rows
          .map((_, row) => `M${round(x(value))} ${round(y(row) - beside)}V${round(y(row) + beside)}`)
          .join('');
  return {
    ticks: x.ticks(4).map((value) => ({ value, at: round(x(value)) })),
    grid: x.ticks(4).map(line).join(''),
    zero: line(0),
    panels: view.stages.map(({ key, name }, column) => {
      const losses = view.rows.map(({ losses }) => losses[column] ?? null);
      const dots = (clear: boolean): string =>
        losses
          .map((loss, row) =>
            loss && standsOut(loss.pAdjusted) === clear ? `M${round(x(loss.lost))} ${y(row)}h0` : ''
          )
          .join('');
      const whiskers = losses
        .map((loss, row) =>
          loss?.interval ? `M${round(x(loss.interval.lower))} ${y(row)}H${round(x(loss.interval.upper))}` : ''
        )
        .join('');
      return { key, name, whiskers, clear: dots(true), faint: dots(false) };
    })
  };
}
