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
    }
  | { readonly available: false; readonly entry: PanelEntry; readonly reason: string };

/**
 * Relative recovery of an analyte read against an extraction internal standard, with a single method fraction:
 * 100 (q m_added - n)/m_spike per replicate, n the mean of q m_added in the portions that are subtracted.
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

  const spike = portions.reduce((sum, portion) => sum + (portion.spikeNg ?? 0), 0) / portions.length;
  const values = portions.map((portion) => (100 * (ngIn(portion) ?? 0)) / (portion.spikeNg ?? 1));
  const native = nativeValues(amounts, entry, ngIn, portions, spike);
  if (native?.length === 0) return no(`Nothing that could be subtracted from ${entry.name} counts.`);
  const subtracted = native ? native.reduce((sum, value) => sum + value, 0) / native.length : 0;
  const net = values.map((value) => value - subtracted);
  return {
    available: true,
    entry,
    standardName: panel.get(entry.internalStandardId ?? '')?.name ?? 'its standard',
    portions: portions.map((portion, index) => ({ portion, percent: net[index]! })),
    description: describe(net),
    estimate: netMean({ values, ...(native ? { native } : {}) }),
    subtractedPercent: native ? subtracted : null
  };
}

/** What is subtracted, in percent of the spike; a native amount is scaled to the mean size of the spiked portions. */
function nativeValues(
  amounts: ExperimentAmounts,
  entry: PanelEntry,
  ngIn: (portion: Portion) => number | null,
  spiked: readonly Portion[],
  spike: number
): number[] | null {
  const { experiment } = amounts;
  if (entry.role !== 'target' || experiment.subtract === 'none') return null;
  const kind = experiment.subtract === 'native' ? 'unspiked' : 'method blank';
  const taken = experiment.replicates
    .filter((replicate) => replicate.kind === kind)
    .map((replicate) => portionOf(amounts, entry.id, replicate))
    .filter((portion) => portion.exclusion === null && ngIn(portion) !== null);
  const sizes = kind === 'unspiked' ? sampleSizes(spiked, taken) : null;
  const size = sizes ? spiked.reduce((sum, portion) => sum + sizes(portion), 0) / spiked.length : 1;
  return taken.map((portion) => (100 * (ngIn(portion) ?? 0) * (sizes ? size / sizes(portion) : 1)) / spike);
}
