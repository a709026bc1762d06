import { scaleLinear } from 'd3-scale';

/** The error of one level, percent, and what it is held to. */
export interface ResidualRow {
  readonly error: number | null;
  /** Half of the band that is allowed; null: no rule. */
  readonly limit: number | null;
  /** The error on a line that is only proposed; undefined: none is. */
  readonly proposed?: number | null | undefined;
}

export interface ResidualMark {
  /** 0 to 100 across. */
  readonly at: number;
  /** On which side it lies beyond the strip; 0: on it. */
  readonly beyond: -1 | 0 | 1;
}

export interface ResidualLayout {
  /** The strip runs from -reach to +reach percent, zero in its middle. */
  readonly reach: number;
  readonly ticks: readonly { readonly value: number; readonly at: number }[];
  readonly rows: readonly {
    readonly mark: ResidualMark | null;
    readonly proposed: ResidualMark | null;
    /** Left and right end of the band that is allowed. */
    readonly band: readonly [number, number] | null;
  }[];
}

const round = (value: number): number => Math.round(value * 100) / 100;

/** A single level that is far off must not press the others together: the strip ends at this many times the widest limit. */
const furthest = 2;

/**
 * Errors of all levels on one scale with the limits of each, symmetric about zero. The strip reaches past the widest limit and the
 * largest error, but no further than twice the widest limit: what lies beyond stands at the edge and says so.
 */
export function residualLayout(rows: readonly ResidualRow[]): ResidualLayout {
  const limits = rows.flatMap(({ limit }) => (limit === null ? [] : [limit]));
  const errors = rows.flatMap(({ error, proposed }) =>
    [error, proposed].flatMap((value) => (value === null || value === undefined ? [] : [Math.abs(value)]))
  );
  const widest = Math.max(0, ...limits);
  const wanted = Math.max(5, widest * 1.15, ...errors.map((error) => error * 1.08));
  const scale = scaleLinear([0, widest > 0 ? Math.min(wanted, widest * furthest) : wanted], [50, 96]).nice(4);
  const reach = scale.domain()[1] ?? wanted;
  const at = (value: number): number =>
    round(value < 0 ? 100 - scale(Math.min(-value, reach)) : scale(Math.min(value, reach)));
  const mark = (value: number | null | undefined): ResidualMark | null =>
    value === null || value === undefined
      ? null
      : { at: at(value), beyond: Math.abs(value) > reach ? (value < 0 ? -1 : 1) : 0 };
  const positive = scale.ticks(2).filter((value) => value > 0);
  return {
    reach,
    ticks: [...positive.map((value) => -value).reverse(), 0, ...positive].map((value) => ({
      value,
      at: at(value)
    })),
    rows: rows.map(({ error, limit, proposed }) => ({
      mark: mark(error),
      proposed: mark(proposed),
      band: limit === null ? null : [at(-limit), at(limit)]
    }))
  };
}
