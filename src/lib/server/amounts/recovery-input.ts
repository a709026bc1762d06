import type { Subtraction } from '../../domain/vocabulary';
import type { Value } from '../stats';
import type { ExperimentAmounts } from './experiment-amounts';
import { asZero, carriers, fractionsOf, portionOf, sampleSizes, scaled, type Portion } from './portions';
import { absoluteRefusal } from './practice';
import type { Fraction, PanelEntry, Replicate } from './types';

/** What was taken off the spiked portions of one analyte. */
export interface Subtracted {
  readonly kind: Exclude<Subtraction, 'none'>;
  /** Every portion of that kind, set aside ones included. */
  readonly portions: readonly Portion[];
  /** Those that count, by index into `native`. */
  readonly counted: readonly Portion[];
  readonly native: readonly Readonly<Record<string, Value>>[];
  readonly nativeBatches: readonly string[] | null;
  /** Mean over the counted portions, all fractions together, in percent of the spike; not-detected as zero. */
  readonly meanPercent: number;
  /** How the portions were matched and scaled, in sentences. */
  readonly notes: readonly string[];
}

/** One analyte of one experiment, ready for the statistics: everything in percent of the spike. */
export interface RecoveryInput {
  readonly ready: true;
  readonly entry: PanelEntry;
  readonly fractions: readonly Fraction[];
  /** Every portion that carries the recovery, set aside ones included. */
  readonly portions: readonly Portion[];
  /** Those that count, in the order of `replicates`. */
  readonly counted: readonly Portion[];
  /** Percent of the spike by fraction id, nothing subtracted yet. */
  readonly replicates: readonly Readonly<Record<string, Value>>[];
  readonly batches: readonly string[] | null;
  readonly subtracted: Subtracted | null;
  /** Mean of the spikes of the counted portions, ng: what 100 % stands for. */
  readonly spikeNg: number;
}

export interface RecoveryRefusal {
  readonly ready: false;
  readonly entry: PanelEntry;
  readonly reason: string;
  /** not spiked: the experiment is not about this analyte at all. */
  readonly kind: 'not spiked' | 'no recovery' | 'relative only' | 'nothing counted' | 'nothing to subtract';
  readonly portions: readonly Portion[];
}

/**
 * Gathers one analyte of one experiment for the statistics: what counts, in percent of the amount spiked, and beside it what is
 * to be subtracted in percent of the same spike, so that its scatter becomes part of the result.
 *
 * Targets lose what the experiment says (nothing, the native amount, the method blank); everything else loses nothing. A native
 * amount is scaled by sample volume (or mass) where every portion has one. Portions that received another spike, or are of another
 * volume, than their fellows keep their own net recovery: 100 (m - n)/spike with their own n and spike.
 */
export function recoveryInput(
  amounts: ExperimentAmounts,
  entry: PanelEntry
): RecoveryInput | RecoveryRefusal {
  const { experiment, panel } = amounts;
  const portions = carriers(experiment).map((replicate) => portionOf(amounts, entry.id, replicate));
  const refuse = (kind: RecoveryRefusal['kind'], reason: string): RecoveryRefusal => ({
    ready: false,
    entry,
    kind,
    reason,
    portions
  });

  if (entry.role === 'injection internal standard') {
    return refuse('no recovery', `${entry.name} is added after the extraction and has no recovery.`);
  }
  const spikedPortions = portions.filter((portion) => portion.spikeNg !== null);
  if (spikedPortions.length === 0) {
    return refuse('not spiked', `${entry.name} was not spiked in experiment ${experiment.number}.`);
  }
  const relative = absoluteRefusal(experiment, entry, panel);
  if (relative) return refuse('relative only', relative);

  const counted = spikedPortions.filter((portion) => portion.exclusion === null);
  if (counted.length === 0) {
    return refuse('nothing counted', `Every spiked portion of ${entry.name} is set aside.`);
  }
  const fractions = fractionsOf(experiment);
  const spikes = counted.map((portion) => portion.spikeNg ?? 0);
  const spikeNg = mean(spikes);
  const gross = counted.map((portion, index) => percentOf(portion, 100 / spikes[index]!));
  const plain = { ready: true as const, entry, fractions, portions, counted, spikeNg };

  const kind = entry.role === 'target' ? experiment.subtract : 'none';
  if (kind === 'none') return { ...plain, replicates: gross, batches: null, subtracted: null };

  const source: Replicate['kind'] = kind === 'native' ? 'unspiked' : 'method blank';
  const sources = experiment.replicates
    .filter((replicate) => replicate.kind === source)
    .map((replicate) => portionOf(amounts, entry.id, replicate));
  const usable = sources.filter(
    (portion) => portion.exclusion === null && portion.places.some((place) => place.ng !== null)
  );
  if (usable.length === 0) {
    const missing = kind === 'native' ? 'unspiked portion' : 'method blank';
    return refuse(
      'nothing to subtract',
      `Experiment ${experiment.number} subtracts the ${kind === 'native' ? 'native amount' : 'method blank'}, but no ${missing} with ` +
        `${entry.name} counts.`
    );
  }
  return subtracting({ ...plain, gross, spikes, kind, sources, usable });
}

interface SubtractionGiven {
  readonly ready: true;
  readonly entry: PanelEntry;
  readonly fractions: readonly Fraction[];
  readonly portions: readonly Portion[];
  readonly counted: readonly Portion[];
  readonly spikeNg: number;
  readonly gross: readonly Readonly<Record<string, Value>>[];
  readonly spikes: readonly number[];
  readonly kind: Subtracted['kind'];
  readonly sources: readonly Portion[];
  readonly usable: readonly Portion[];
}

function subtracting(given: SubtractionGiven): RecoveryInput {
  const { fractions, counted, spikes, kind, sources, gross } = given;
  const notes: string[] = [];
  const sizes = kind === 'native' ? sampleSizes(counted, given.usable) : null;
  if (kind === 'native' && sizes === null && someSized([...counted, ...given.usable])) {
    notes.push('not every portion has a sample volume, so the native amount is not scaled by it');
  }
  // What one unit of sample (or, unscaled, one portion) stands for in percent of the spike, portion by portion.
  const perUnit = counted.map((portion, index) => (100 * (sizes?.(portion) ?? 1)) / spikes[index]!);
  const reference = mean(perUnit);
  const alike = perUnit.every((factor) => Math.abs(factor - reference) <= 1e-12 * reference);

  // Portions of their own size or spike lose their own amount; that is exact only with natives complete in every fraction.
  const natives = alike ? given.usable : given.usable.filter(isComplete);
  const takenFrom = natives.length > 0 ? natives : given.usable;
  const dropped = given.usable.filter((portion) => !takenFrom.includes(portion));
  if (dropped.length > 0) {
    const labels = dropped.map(({ replicate }) => replicate.label).join(', ');
    notes.push(
      `${labels} lacks a fraction, so it is not subtracted where portions differ in volume or spike`
    );
  }
  const native = takenFrom.map((portion) => percentOf(portion, reference / (sizes?.(portion) ?? 1)));
  if (!alike)
    notes.push('portions of another volume or spike lose what their own volume and spike make of it');

  const batches = batchesOf(counted, takenFrom, fractions);
  notes.push(...batches.notes);
  const meanOfFraction = (fraction: Fraction, batch: string | undefined): number => {
    const values = native.map((record) => record[fraction.id] ?? null);
    const own = values.filter((value, index) => value !== null && batches.native?.[index] === batch);
    const taken = (batches.native && own.length > 0 ? own : values).filter((value) => value !== null);
    return taken.length === 0 ? 0 : mean(taken.map(asZero));
  };
  const replicates = alike
    ? gross
    : gross.map((record, index) =>
        adjusted(record, fractions, (fraction) => {
          return meanOfFraction(fraction, batches.spiked?.[index]) * (perUnit[index]! / reference - 1);
        })
      );
  const meanPercent = fractions.reduce((sum, fraction) => sum + overallMean(native, fraction), 0);
  return {
    ready: true,
    entry: given.entry,
    fractions,
    portions: given.portions,
    counted,
    spikeNg: given.spikeNg,
    replicates,
    batches: batches.spiked,
    subtracted: {
      kind,
      portions: sources,
      counted: takenFrom,
      native,
      nativeBatches: batches.native,
      meanPercent,
      notes
    }
  };
}

function percentOf(portion: Portion, factor: number): Record<string, Value> {
  return Object.fromEntries(portion.places.map((place) => [place.fraction.id, scaled(place.ng, factor)]));
}

function adjusted(
  record: Readonly<Record<string, Value>>,
  fractions: readonly Fraction[],
  correction: (fraction: Fraction) => number
): Record<string, Value> {
  return Object.fromEntries(
    fractions.map((fraction) => {
      const value = record[fraction.id] ?? null;
      return [fraction.id, typeof value === 'number' ? value - correction(fraction) : value];
    })
  );
}

function overallMean(native: readonly Readonly<Record<string, Value>>[], fraction: Fraction): number {
  const values = native.map((record) => record[fraction.id] ?? null).filter((value) => value !== null);
  return values.length === 0 ? 0 : mean(values.map(asZero));
}

function isComplete(portion: Portion): boolean {
  return portion.places.every((place) => place.ng !== null);
}

function isMethodComplete(portion: Portion): boolean {
  return portion.places.every((place) => place.ng !== null || place.fraction.countsAs !== 'method');
}

function someSized(portions: readonly Portion[]): boolean {
  return portions.some(
    ({ replicate }) => replicate.sampleVolumeMl !== null || replicate.sampleMassG !== null
  );
}

interface Batches {
  readonly spiked: readonly string[] | null;
  readonly native: readonly string[] | null;
  readonly notes: readonly string[];
}

/** Batch labels for matching each portion with its own batch, or nulls where pooling is all there is. */
function batchesOf(
  counted: readonly Portion[],
  natives: readonly Portion[],
  fractions: readonly Fraction[]
): Batches {
  const label = (portion: Portion, unlabelled: string): string => portion.replicate.batch ?? unlabelled;
  const spiked = counted.map((portion) => label(portion, ' spiked without a batch'));
  const native = natives.map((portion) => label(portion, ' unspiked without a batch'));
  const lacking = (holds: (portion: Portion) => boolean): string[] => {
    const known = new Set(native.filter((_, index) => holds(natives[index]!)));
    return [...new Set(spiked.filter((batch) => !known.has(batch)))];
  };
  // Totals are formed per portion, so a batch can be matched only where one of its portions is complete: for the method in the
  // method's fractions, for the balance in all.
  const without = lacking(isMethodComplete);
  if (without.length === new Set(spiked).size) {
    const labelled = counted.some((portion) => portion.replicate.batch !== null);
    return {
      spiked: null,
      native: null,
      notes: labelled ? ['pooled over all batches: none of the batches has a portion of its own'] : []
    };
  }
  const pooled = (batches: readonly string[], where: string): string =>
    `pooled ${where}for ${batches.map((batch) => `batch ${batch.trim()}`).join(', ')}, which has no portion of its own`;
  const inBalance = lacking(isComplete).filter((batch) => !without.includes(batch));
  const notes: string[] = [];
  if (without.length > 0) notes.push(pooled(without, ''));
  else if (new Set(native).size > 1) notes.push('each portion loses the mean of its own batch');
  if (inBalance.length > 0 && fractions.some(({ countsAs }) => countsAs === 'balance')) {
    notes.push(`${pooled(inBalance, 'in the balance ')} that is complete`);
  }
  return { spiked, native, notes };
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}
