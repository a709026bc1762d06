import { assess, type Assessment, type Criteria } from './assess';
import { balanceTables, type BalanceTables } from './balance-tables';
import { StatsError } from './errors';
import { found, missing, notDetected, requireFractionNames, type FractionTable } from './fraction-values';
import { finite, finiteValues, fractionOfOne, sameLength } from './guards';
import type { CountsAs, MassBalance } from './mass-balance';
import { moments } from './moments';
import { stageLosses, type StageLoss } from './stage-losses';
import type { Sample } from './types';

/** States of a cell in {@link PortionColumns}. */
export const cellState = Object.freeze({ missing, found, notDetected });

/**
 * Portions of one experiment for all analytes, column by column. The cell of an analyte, a portion and a fraction is at
 * (analyte * portions + portion) * fractions + fraction. `values` are in percent of the spike; a not-detected cell holds
 * its limit, a missing one anything finite.
 */
export type PortionColumns = {
  readonly portions: number;
  readonly values: Float64Array;
  readonly state: Uint8Array;
  /** Batch of each portion. */
  readonly batches?: readonly string[] | undefined;
};

export type ExperimentColumns = {
  readonly stage: string;
  readonly kind?: 'signal' | 'loss' | undefined;
  readonly fractions: readonly { readonly name: string; readonly countsAs: CountsAs }[];
  readonly spiked: PortionColumns;
  readonly native?: PortionColumns | undefined;
};

export type AnalyteFigures = {
  /** One entry per experiment, in the order given. */
  readonly balances: MassBalance[];
  /** Verdict on each method total; null where there is none, or no criteria are given. */
  readonly verdicts: (Assessment | null)[];
  /** Null when some experiment has no method total: its stage could not be told from the next. */
  readonly losses: StageLoss[] | null;
};

/**
 * The figures of a whole study in one pass over its columns: mass balance and verdict of every analyte in every experiment, and
 * the walk-back over the experiments, which are given back to front. Every figure is, to the last digit, what massBalance,
 * assess and stageLosses give for the same replicates one by one: the same functions run on views of the columns.
 *
 * @throws StatsError for no experiment or analyte, columns of another size, a value that is not finite, a negative limit, an
 * unknown state.
 */
export function studyFigures(
  experiments: readonly ExperimentColumns[],
  options: {
    readonly analytes: number;
    readonly criteria?: Criteria | undefined;
    readonly level?: number | undefined;
  }
): AnalyteFigures[] {
  const { analytes, criteria, level = 0.95 } = options;
  fractionOfOne(level, 'Level');
  if (experiments.length === 0) throw new StatsError('empty-group', 'No experiment is given.');
  if (!(Number.isInteger(finite(analytes, 'Number of analytes')) && analytes > 0)) {
    throw new StatsError('empty-group', `Number of analytes must be at least 1, found ${analytes}.`);
  }
  for (const experiment of experiments) checkExperiment(experiment, analytes);

  return Array.from({ length: analytes }, (_, analyte) => {
    const samples: (Sample | null)[] = [];
    const balances = experiments.map((experiment) => {
      const { figures, methodSample } = balanceTables(viewOf(experiment, analyte, level));
      samples.push(methodSample);
      return figures;
    });
    return {
      balances,
      verdicts: balances.map(({ method }) => (method && criteria ? assess(method, criteria) : null)),
      losses: samples.every((sample) => sample !== null)
        ? stageLosses(
            experiments.map(({ stage, kind }, i) => ({
              stage,
              kind,
              values: samples[i]!.values,
              native: samples[i]!.native,
              batches: samples[i]!.batches,
              nativeBatches: samples[i]!.nativeBatches
            })),
            level
          )
        : null
    };
  });
}

/**
 * Mean and SD of consecutive groups of `size` values, to the last digit as describe gives them. Unit that of the values.
 *
 * @throws StatsError when the column is empty or not a whole number of groups, a group has fewer than two values, or a value is
 * not finite.
 */
export function columnMoments(values: Float64Array, size: number): { mean: Float64Array; sd: Float64Array } {
  finiteValues(values, 'Column');
  if (finite(size, 'Size of the groups') < 2) {
    throw new StatsError('too-few-values', `Groups of ${size} values given, at least 2 needed.`);
  }
  if (!(Number.isInteger(size) && values.length % size === 0)) {
    throw new StatsError(
      'mismatch',
      `A column of ${values.length} values does not divide into groups of ${size}.`
    );
  }
  const groups = values.length / size;
  const mean = new Float64Array(groups);
  const sd = new Float64Array(groups);
  for (let group = 0; group < groups; group += 1) {
    const figures = moments(values, group * size, size);
    mean[group] = figures.mean;
    sd[group] = figures.sd!;
  }
  return { mean, sd };
}

function viewOf(experiment: ExperimentColumns, analyte: number, level: number): BalanceTables {
  const { fractions, spiked, native } = experiment;
  return {
    spiked: tableOf(spiked, fractions.length, analyte),
    unspiked: native ? tableOf(native, fractions.length, analyte) : null,
    fractions,
    batches: spiked.batches,
    nativeBatches: native?.batches,
    level
  };
}

function tableOf(
  { portions, values, state }: PortionColumns,
  columns: number,
  analyte: number
): FractionTable {
  return { rows: portions, columns, start: analyte * portions * columns, state, values };
}

function checkExperiment(experiment: ExperimentColumns, analytes: number): void {
  const { stage, fractions, spiked, native } = experiment;
  requireFractionNames(fractions.map((fraction) => fraction.name));
  checkPortions(spiked, `Stage "${stage}", spiked portions`, analytes, fractions.length);
  if (native) checkPortions(native, `Stage "${stage}", native portions`, analytes, fractions.length);
}

function checkPortions(columns: PortionColumns, what: string, analytes: number, fractions: number): void {
  const { portions, values, state, batches } = columns;
  if (!(Number.isInteger(portions) && portions > 0)) {
    throw new StatsError('empty-group', `${what}: no portion is given.`);
  }
  const cells = analytes * portions * fractions;
  sameLength(values.length, cells, `${what}, values`);
  sameLength(state.length, cells, `${what}, states`);
  if (batches) sameLength(batches.length, portions, `${what}, batches`);
  finiteValues(values, what);
  for (let cell = 0; cell < cells; cell += 1) {
    const is = state[cell]!;
    if (is > notDetected)
      throw new StatsError('out-of-range', `${what}, cell ${cell + 1}: unknown state ${is}.`);
    if (is === notDetected && values[cell]! < 0) {
      throw new StatsError(
        'out-of-range',
        `${what}, cell ${cell + 1}: the limit is below zero: ${values[cell]}.`
      );
    }
  }
}
