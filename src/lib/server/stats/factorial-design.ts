import { StatsError } from './errors';
import { finite } from './guards';

export type Observation = {
  /** Level of every factor. */
  readonly levels: Readonly<Record<string, string>>;
  readonly response: number;
  readonly block?: string | undefined;
};

export type FactorialDesign = {
  readonly factors: string[];
  /** Levels of each factor in order of appearance. */
  readonly levels: ReadonlyMap<string, string[]>;
  readonly blocks: string[];
};

/**
 * Reads factors, levels and blocks off the observations.
 *
 * @throws StatsError for fewer than two observations, no factor, an observation that lacks a factor or has another, blocks
 * given for some only, a response that is not finite.
 */
export function readDesign(observations: readonly Observation[]): FactorialDesign {
  if (observations.length === 0) throw new StatsError('empty-group', 'No observation is given.');
  if (observations.length < 2) {
    throw new StatsError('too-few-values', 'Observations: 1 given, at least 2 needed.');
  }
  const factors = Object.keys(observations[0]!.levels);
  if (factors.length === 0) throw new StatsError('empty-group', 'No factor is given.');
  const levels = new Map<string, string[]>(factors.map((factor) => [factor, []]));
  const blocks: string[] = [];
  const blocked = observations[0]!.block !== undefined;
  observations.forEach((observation, i) => {
    const place = `Observation ${i + 1}`;
    finite(observation.response, `${place}, response`);
    for (const factor of factors) {
      const level = Object.hasOwn(observation.levels, factor) ? observation.levels[factor] : undefined;
      if (level === undefined) throw new StatsError('mismatch', `${place} has no level of "${factor}".`);
      const known = levels.get(factor)!;
      if (!known.includes(level)) known.push(level);
    }
    const stranger = Object.keys(observation.levels).find((factor) => !levels.has(factor));
    if (stranger !== undefined) {
      throw new StatsError('mismatch', `${place} has a factor "${stranger}" that the first does not have.`);
    }
    if ((observation.block !== undefined) !== blocked) {
      throw new StatsError(
        'mismatch',
        `${place}: blocks are given for some observations and not for others.`
      );
    }
    if (observation.block !== undefined && !blocks.includes(observation.block))
      blocks.push(observation.block);
  });
  return { factors, levels, blocks };
}

/** All sets of factors up to an order: main effects first, then pairs, in the order of the factors. */
export function termsUpTo(factors: readonly string[], maxOrder: number): string[][] {
  const terms: string[][] = [];
  let current: number[][] = factors.map((_, i) => [i]);
  for (let order = 1; order <= Math.min(maxOrder, factors.length); order += 1) {
    terms.push(...current.map((term) => term.map((i) => factors[i]!)));
    current = current.flatMap((term) => {
      const last = term[term.length - 1]!;
      return factors.slice(last + 1).map((_, offset) => [...term, last + 1 + offset]);
    });
  }
  return terms;
}

/** Columns of a categorical variable that sum to zero over its levels: one per level but the last, -1 for the last. */
function contrasts(values: readonly string[], levels: readonly string[]): Float64Array[] {
  const last = levels[levels.length - 1];
  return levels
    .slice(0, -1)
    .map((level) => Float64Array.from(values, (value) => (value === level ? 1 : value === last ? -1 : 0)));
}

/** Columns of the blocks. */
export function blockColumns(observations: readonly Observation[], design: FactorialDesign): Float64Array[] {
  return contrasts(
    observations.map((observation) => observation.block ?? ''),
    design.blocks
  );
}

/** Columns of a term: all products of one contrast of each of its factors. */
export function termColumns(
  term: readonly string[],
  observations: readonly Observation[],
  design: FactorialDesign
): Float64Array[] {
  return term
    .map((factor) =>
      contrasts(
        observations.map((observation) => observation.levels[factor]!),
        design.levels.get(factor)!
      )
    )
    .reduce((products, own) =>
      products.flatMap((product) => own.map((column) => product.map((value, i) => value * column[i]!)))
    );
}
