import { describe, netMean } from '../stats';
import type { ExperimentAmounts } from './experiment-amounts';
import { asZero, carriers, fractionsOf, portionOf, sampleSizes, type Portion } from './portions';
import { isCorrectedForLosses } from './practice';
import type { PanelEntry } from './types';

/** Recovery relative to a standard that was extracted along. Never held against the criteria of the method. */
export type RelativeFigures =
  | {
      readonly available: true;
      readonly entry: PanelEntry;
      readonly standardName: string;
      readonly portions: readonly { readonly portion: Portion; readonly percent: number }[];
      readonly description: ReturnType<typeof describe>;
      readonly estimate: ReturnType<typeof netMean>;
      /** Mean of what was subtracted, percent of the spike; null: nothing. */
      readonly subtractedPercent: number | null;
      /** How portions were matched with what they lose, in sentences. */
      readonly notes: readonly string[];
    }
  | { readonly available: false; readonly entry: PanelEntry; readonly reason: string };

/**
 * Relative recovery of an analyte read against an extraction internal standard, with a single method fraction:
 * 100 (q m_added - n)/m_spike per replicate, n the mean of q m_added in the portions that are subtracted: those of the same batch where
 * there are some, else all; a native amount scaled by sample volume (or mass) where every portion has one.
 */
export function relativeFigures(amounts: ExperimentAmounts, entry: PanelEntry): RelativeFigures | null {
  const { experiment, panel } = amounts;
  if (!isCorrectedForLosses(experiment, entry, panel)) return null;
  const no = (reason: string): RelativeFigures => ({ available: false, entry, reason });
  const method = fractionsOf(experiment).filter((fraction) => fraction.countsAs === 'method');
  const only = method[0];
  if (!only || method.length > 1) {
    return no(
      `${entry.name} is read against a standard extracted along with it, which each of the ${method.length} method fractions holds ` +
        'another part of: a relative recovery needs a single method fraction.'
    );
  }
  const ngIn = (portion: Portion): number | null => {
    const ng = portion.places.find((place) => place.fraction.id === only.id)?.ng ?? null;
    return ng === null ? null : asZero(ng);
  };
  const portions = carriers(experiment)
    .map((replicate) => portionOf(amounts, entry.id, replicate))
    .filter((portion) => portion.spikeNg !== null && portion.exclusion === null && ngIn(portion) !== null);
  if (portions.length === 0) return no(`No spiked portion of ${entry.name} has a usable figure.`);

  const taken = subtractedPortions(amounts, entry, ngIn);
  if (taken?.length === 0) return no(`Nothing that could be subtracted from ${entry.name} counts.`);
  const values = portions.map((portion) => (100 * (ngIn(portion) ?? 0)) / (portion.spikeNg ?? 1));
  const native = taken && nativeOf(experiment, taken, portions, ngIn);
  const net = values.map((value, index) => value - (native?.ofPortion[index] ?? 0));
  // A portion of its own size or spike loses its own amount: written so that the mean of its batch leaves exactly that.
  const estimate = netMean(
    native
      ? {
          values: net.map((value, index) => value + native.ofBatch[index]!),
          native: native.values,
          batches: portions.map(batchOf),
          nativeBatches: native.batches
        }
      : { values }
  );
  return {
    available: true,
    entry,
    standardName: panel.get(entry.internalStandardId ?? '')?.name ?? 'its standard',
    portions: portions.map((portion, index) => ({ portion, percent: net[index]! })),
    description: describe(net),
    estimate,
    subtractedPercent: native ? meanOf(native.values) : null,
    notes: [
      ...(native?.notes ?? []),
      ...([...portions, ...(taken ?? [])].some((portion) => isNotDetected(portion, only.id))
        ? ['not detected counts as zero here']
        : [])
    ]
  };
}

/** The portions that are subtracted from an entry; null: nothing is. */
function subtractedPortions(
  { experiment, ...amounts }: ExperimentAmounts,
  entry: PanelEntry,
  ngIn: (portion: Portion) => number | null
): Portion[] | null {
  if (entry.role !== 'target' || experiment.subtract === 'none') return null;
  const kind = experiment.subtract === 'native' ? 'unspiked' : 'method blank';
  return experiment.replicates
    .filter((replicate) => replicate.kind === kind)
    .map((replicate) => portionOf({ experiment, ...amounts }, entry.id, replicate))
    .filter((portion) => portion.exclusion === null && ngIn(portion) !== null);
}

interface Native {
  /** Percent of a mean spike, at the mean size of the spiked portions. */
  readonly values: readonly number[];
  readonly batches: readonly string[];
  /** By spiked portion: what it loses, in percent of its own spike, and what its batch holds on the scale of `values`. */
  readonly ofPortion: readonly number[];
  readonly ofBatch: readonly number[];
  readonly notes: readonly string[];
}

/** What each spiked portion loses: the mean of its own batch where there is one, else of all, by its own size where sizes are known. */
function nativeOf(
  experiment: Pick<ExperimentAmounts['experiment'], 'subtract'>,
  taken: readonly Portion[],
  spiked: readonly Portion[],
  ngIn: (portion: Portion) => number | null
): Native {
  const sizes = experiment.subtract === 'native' ? sampleSizes(spiked, taken) : null;
  const size = (portion: Portion): number => sizes?.(portion) ?? 1;
  const factors = spiked.map((portion) => (100 * size(portion)) / (portion.spikeNg ?? 1));
  const reference = meanOf(factors);
  const values = taken.map((portion) => ((ngIn(portion) ?? 0) / size(portion)) * reference);
  const batches = taken.map(batchOf);
  const ofBatch = spiked.map((portion) => {
    const own = values.filter((_, index) => batches[index] === batchOf(portion));
    return meanOf(own.length > 0 ? own : values);
  });
  const without = [...new Set(spiked.map(batchOf).filter((batch) => !batches.includes(batch)))];
  return {
    values,
    batches,
    ofPortion: ofBatch.map((percent, index) => (percent * factors[index]!) / reference),
    ofBatch,
    notes: without
      .filter((batch) => batch !== '')
      .map((batch) => `pooled for batch ${batch}, which has no portion of its own`)
  };
}

function isNotDetected(portion: Portion, fractionId: string): boolean {
  const ng = portion.places.find((place) => place.fraction.id === fractionId)?.ng ?? null;
  return ng !== null && typeof ng === 'object';
}

const batchOf = ({ replicate }: Portion): string => replicate.batch ?? '';

function meanOf(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}
