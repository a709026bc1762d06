import type { CriterionRule } from '../../domain/criteria';
import { describe } from '../stats';
import type { ExperimentAmounts } from './experiment-amounts';
import { asZero, portionOf, wholeExtract, type Portion } from './portions';
import { absoluteRefusal } from './practice';
import type { PanelEntry } from './types';

/** A surrogate in one portion. */
export interface SurrogatePortion {
  readonly portion: Portion;
  /** Percent of the amount added, summed over the method fractions; null: see `reason`. */
  readonly percent: number | null;
  /** Percent with everything not detected at its limit; equals `percent` where all was found. */
  readonly high: number | null;
  readonly reason: string | null;
  /** Against the rule for surrogates; null where there is none or no figure, or where it hangs on what was not detected (`reason`). */
  readonly holds: boolean | null;
}

export interface SurrogateFigures {
  readonly entry: PanelEntry;
  readonly portions: readonly SurrogatePortion[];
  readonly description: ReturnType<typeof describe> | null;
  /** Why there is no figure at all. */
  readonly refusal: string | null;
}

/**
 * Surrogates: 100 m/m_added in every portion that received them, spiked or not, summed over the fractions that count for the method,
 * nothing subtracted. Portions set aside are listed and left out of the description.
 */
export function surrogateFigures(
  amounts: ExperimentAmounts,
  entry: PanelEntry,
  rule: Pick<CriterionRule, 'low' | 'high'> | null
): SurrogateFigures {
  const { experiment, panel } = amounts;
  const refusal = absoluteRefusal(experiment, entry, panel);
  const portions = experiment.replicates
    .map((replicate) => portionOf(amounts, entry.id, replicate))
    .filter((portion) => portion.spikeNg !== null);
  if (refusal) return { entry, portions: [], description: null, refusal };

  const read = portions.map((portion) => surrogatePortion(portion, rule));
  const counted = read.filter((item) => item.portion.exclusion === null && item.percent !== null);
  return {
    entry,
    portions: read,
    description: counted.length > 0 ? describe(counted.map((item) => item.percent ?? 0)) : null,
    refusal: null
  };
}

function surrogatePortion(
  portion: Portion,
  rule: Pick<CriterionRule, 'low' | 'high'> | null
): SurrogatePortion {
  const method = portion.places.filter(
    (place) => place.fraction.countsAs === 'method' || place.fraction === wholeExtract
  );
  const lacking = method.find((place) => place.ng === null);
  if (method.length === 0 || portion.spikeNg === null || lacking) {
    const reason = lacking?.exclusion
      ? `${lacking.fraction.name} is set aside (${lacking.exclusion.cause})`
      : lacking && 'reason' in lacking.found.amount
        ? `${lacking.fraction.name}: ${lacking.found.amount.reason}`
        : 'no fraction counts for the method';
    return { portion, percent: null, high: null, reason, holds: null };
  }
  let low = 0;
  let high = 0;
  for (const { ng } of method) {
    if (ng === null) continue;
    low += asZero(ng);
    high += typeof ng === 'number' ? ng : ng.below;
  }
  const percent = (100 * low) / portion.spikeNg;
  const atLimit = (100 * high) / portion.spikeNg;
  const { low: least, high: most } = rule ?? { low: null, high: null };
  const within = (value: number): boolean =>
    (least === null || value >= least) && (most === null || value <= most);
  if (rule && within(percent) !== within(atLimit)) {
    const reason = `not detected counts between zero and its limit, ${figure(percent)} to ${figure(atLimit)} %`;
    return { portion, percent, high: atLimit, reason, holds: null };
  }
  return { portion, percent, high: atLimit, reason: null, holds: rule ? within(percent) : null };
}

function figure(value: number): string {
  return String(Number(value.toPrecision(3)));
}
