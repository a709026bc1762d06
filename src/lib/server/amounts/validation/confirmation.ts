import { describe, quantitationConfirmation } from '../../stats';
import {
  commonSpike,
  commonVolume,
  coverageOf,
  isCounted,
  type Coverage,
  type Preparation
} from './preparations';

/** How many preparations the published procedure takes. EPA Method 539, Table 11. */
export const confirmationPreparations = 7;

/** A proposed quantitation limit, confirmed or not. Percent of what was spiked. */
export interface Confirmation {
  readonly preparations: readonly Preparation[];
  readonly counted: readonly Preparation[];
  readonly coverage: Coverage;
  readonly spikeNg: number | null;
  /** The level in ng/L of sample; null where volumes differ or are not recorded. */
  readonly spikeNgPerL: number | null;
  readonly figures: {
    readonly mean: number;
    readonly rsd: number | null;
    readonly halfRange: number;
    readonly lower: number;
    readonly upper: number;
    readonly holds: boolean;
  } | null;
  /** Why there is no figure. */
  readonly refusal: string | null;
  /** True where a preparation at the limit was not detected, so that it cannot be the limit. */
  readonly missed: boolean;
}

/**
 * Preparations spiked at a proposed quantitation limit, as found (nothing subtracted), in percent of the spike: the interval in
 * which a further result would fall, to lie within 50 to 150 %.
 */
export function confirmation(preparations: readonly Preparation[]): Confirmation {
  const received = preparations.filter(({ portion }) => portion.spikeNg !== null);
  const counted = received.filter(isCounted);
  const spikeNg = commonSpike(counted);
  const volume = commonVolume(counted);
  const base = {
    preparations: received,
    counted,
    coverage: coverageOf(counted),
    spikeNg,
    spikeNgPerL: spikeNg !== null && volume !== null ? (1000 * spikeNg) / volume : null,
    missed: false
  };
  const no = (refusal: string, missed = false): Confirmation => ({ ...base, figures: null, refusal, missed });
  if (counted.length < 2) {
    return no(
      `${counted.length} preparation${counted.length === 1 ? '' : 's'} with a figure, at least two are needed`
    );
  }
  if (spikeNg === null)
    return no('the preparations were spiked at different amounts: a limit is confirmed at one');
  const missed = counted.filter(({ found }) => found.state === 'not detected');
  if (missed.length > 0) {
    const labels = missed.map(({ portion }) => portion.replicate.label).join(', ');
    return no(`not detected in ${labels}: what is not always found there cannot be quantified there`, true);
  }
  const percents = counted.map(({ found }) => (100 * (found.state === 'amount' ? found.ng : 0)) / spikeNg);
  const { mean, rsd } = describe(percents);
  return {
    ...base,
    figures: { mean, rsd, ...quantitationConfirmation({ values: percents, fortified: 100 }) },
    refusal: null
  };
}
