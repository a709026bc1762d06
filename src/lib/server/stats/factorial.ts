import { meanInterval } from './describe';
import { fisherUpper } from './distributions';
import { StatsError } from './errors';
import { blockColumns, readDesign, termColumns, termsUpTo, type Observation } from './factorial-design';
import { finite } from './guards';
import { moments } from './moments';
import { OrthonormalBasis, squaredProjection } from './orthonormal-basis';
import type { Interval } from './types';

export type FactorialTerm = {
  readonly factors: string[];
  readonly ss: number;
  readonly df: number;
  /** Null only when the other terms leave this one no degree of freedom. */
  readonly ms: number | null;
  /** Null without residual degrees of freedom, or when nothing is left to compare with. */
  readonly f: number | null;
  readonly p: number | null;
};

export type CellMean = {
  readonly factors: string[];
  readonly levels: string[];
  readonly n: number;
  readonly mean: number;
  readonly ci: Interval | null;
};

export type FactorialAnova = {
  readonly terms: FactorialTerm[];
  readonly block: { readonly ss: number; readonly df: number; readonly ms: number } | null;
  /** Terms that cannot be told from the block or from terms before them. */
  readonly aliased: string[][];
  readonly residual: { readonly ss: number; readonly df: number; readonly ms: number | null };
  readonly r2: number | null;
  readonly means: CellMean[];
  readonly fitted: number[];
  readonly residuals: number[];
};

const level = 0.95;

/**
 * Analysis of variance of a factorial design, crossed or fractional, balanced or not, with an optional additive block.
 *
 * Sums of squares are of Type II: each term against the model with the block and every kept term that does not contain it. The
 * block comes first and its own line is sequential. Main effects are taken before interactions; a term that adds no rank to
 * what precedes it is aliased, dropped and listed. Degrees of freedom are ranks, from QR of centred contrasts. Without
 * residual degrees of freedom F and p do not exist. `means` are raw means of the cells of each kept term, with 95 % intervals
 * from the residual mean square. `r2` counts the block as explained.
 *
 * @throws StatsError for designs as described at readDesign, or a maximum order below 1.
 * Source: Type II as in J. Fox, Applied Regression Analysis (from memory).
 */
export function factorialAnova(
  observations: readonly Observation[],
  options: { readonly maxOrder?: number } = {}
): FactorialAnova {
  const design = readDesign(observations);
  const maxOrder = finite(options.maxOrder ?? design.factors.length, 'Maximum order');
  if (maxOrder < 1)
    throw new StatsError('out-of-range', `Maximum order must be at least 1, found ${maxOrder}.`);

  const responses = observations.map((observation) => observation.response);
  const n = responses.length;
  const centre = moments(responses).mean;
  const y = Float64Array.from(responses, (response) => response - centre);
  const constant = [new Float64Array(n).fill(1)];
  const blocks = blockColumns(observations, design);

  const whole = new OrthonormalBasis();
  whole.add(constant);
  const blockDirections = whole.add(blocks);
  const kept: { factors: string[]; columns: Float64Array[] }[] = [];
  const aliased: string[][] = [];
  for (const factors of termsUpTo(design.factors, maxOrder)) {
    const columns = termColumns(factors, observations, design);
    if (whole.add(columns).length > 0) kept.push({ factors, columns });
    else aliased.push(factors);
  }

  const rest = y.slice();
  whole.reduce(rest);
  whole.reduce(rest);
  const residual = residualLine(rest, n - whole.vectors.length, responses);

  const terms = kept.map(({ factors, columns }): FactorialTerm => {
    const base = new OrthonormalBasis();
    base.add(constant);
    base.add(blocks);
    for (const other of kept) {
      const contains = factors.every((factor) => other.factors.includes(factor));
      if (!contains) base.add(other.columns);
    }
    const directions = base.add(columns);
    return testTerm(factors, squaredProjection(directions, y), directions.length, residual);
  });

  const total = y.reduce((sum, value) => sum + value * value, 0);
  const blockSs = squaredProjection(blockDirections, y);
  const blockDf = blockDirections.length;
  return {
    terms,
    block: blockDf === 0 ? null : { ss: blockSs, df: blockDf, ms: blockSs / blockDf },
    aliased,
    residual,
    r2: total > 0 ? 1 - residual.ss / total : null,
    means: kept.flatMap(({ factors }) => cellMeans(factors, observations, residual)),
    fitted: responses.map((response, i) => response - rest[i]!),
    residuals: [...rest]
  };
}

type ResidualLine = FactorialAnova['residual'];

function residualLine(rest: Float64Array, df: number, responses: readonly number[]): ResidualLine {
  const squares = rest.reduce((sum, value) => sum + value * value, 0);
  // What rounding of the responses alone can leave is no residual.
  const largest = Math.max(...responses.map(Math.abs));
  const ss = df === 0 || squares <= responses.length * (8 * Number.EPSILON * largest) ** 2 ? 0 : squares;
  return { ss, df, ms: df > 0 ? ss / df : null };
}

function testTerm(factors: string[], ss: number, df: number, residual: ResidualLine): FactorialTerm {
  if (df === 0) return { factors, ss: 0, df, ms: null, f: null, p: null };
  const ms = ss / df;
  if (residual.ms === null || residual.ms === 0) return { factors, ss, df, ms, f: null, p: null };
  const f = ms / residual.ms;
  return { factors, ss, df, ms, f, p: fisherUpper(f, df, residual.df) };
}

function cellMeans(
  factors: string[],
  observations: readonly Observation[],
  residual: ResidualLine
): CellMean[] {
  const cells = new Map<string, { levels: string[]; responses: number[] }>();
  for (const { levels, response } of observations) {
    const own = factors.map((factor) => levels[factor]!);
    const key = JSON.stringify(own);
    const cell = cells.get(key);
    if (cell) cell.responses.push(response);
    else cells.set(key, { levels: own, responses: [response] });
  }
  return [...cells.values()].map(({ levels, responses }) => {
    const { n, mean } = moments(responses);
    const se = residual.ms === null ? null : Math.sqrt(residual.ms / n);
    return { factors, levels, n, mean, ci: meanInterval(mean, se, residual.df, level) };
  });
}
