import { nameKey } from '../../../domain/name-key';
import type { ReplicateKind } from '../../../domain/vocabulary';
import type { ExperimentAmounts } from '../experiment-amounts';
import { asZero, portionOf, type Portion, type PortionPlace } from '../portions';

/** An experiment as the validation reads it: its amounts, and when each of its preparations was made. */
export interface Setting {
  readonly amounts: ExperimentAmounts;
  /** ISO day by the id of a preparation; null: not recorded. */
  readonly dayOf: (replicateId: string) => string | null;
}

/** What the fractions of the method hold of one analyte, ng. */
export type FoundSum =
  /** `ng` counts what was not detected as zero, `highNg` at its limit. */
  | {
      readonly state: 'amount';
      readonly ng: number;
      readonly highNg: number;
      readonly notDetectedIn: readonly string[];
    }
  | { readonly state: 'not detected'; readonly belowNg: number }
  /** `partNg`: what the fractions that are known hold; null: none is known. */
  | { readonly state: 'incomplete'; readonly reason: string; readonly partNg: number | null };

/** One analyte in one preparation, with what a validation asks of it: batch, day, amount received and found. */
export interface Preparation {
  readonly setting: Setting;
  readonly portion: Portion;
  /** Preparations of one experiment without a batch of their own are one batch. */
  readonly batch: { readonly key: string; readonly label: string };
  readonly day: string | null;
  readonly found: FoundSum;
}

/** Preparations of some kinds over several experiments, set aside ones included, in the order of the experiments. */
export function preparationsOf(
  settings: readonly Setting[],
  entryId: string,
  kinds: readonly ReplicateKind[]
): Preparation[] {
  return settings.flatMap((setting) =>
    setting.amounts.experiment.replicates
      .filter(({ kind }) => kinds.includes(kind))
      .map((replicate) => preparationOf(setting, portionOf(setting.amounts, entryId, replicate)))
  );
}

export function preparationOf(setting: Setting, portion: Portion): Preparation {
  return {
    setting,
    portion,
    batch: batchOf(setting, portion),
    day: setting.dayOf(portion.replicate.id),
    found: foundSum(portion)
  };
}

function batchOf({ amounts }: Setting, { replicate }: Portion): Preparation['batch'] {
  const { experiment } = amounts;
  const label = replicate.batch?.trim() ?? '';
  return label === ''
    ? { key: experiment.id, label: `experiment ${experiment.number}` }
    : { key: `${experiment.id} ${nameKey(label)}`, label: `${label} (experiment ${experiment.number})` };
}

/** The sum over the fractions that count for the method. */
export function foundSum(portion: Portion): FoundSum {
  const method = methodPlaces(portion);
  if (method.length === 0)
    return { state: 'incomplete', reason: 'no fraction counts for the method', partNg: null };
  const lacking = method.filter((place) => place.ng === null);
  const known = method.flatMap((place) => (place.ng === null ? [] : [place.ng]));
  if (lacking.length > 0) {
    const part = known.reduce<number>((sum, value) => sum + asZero(value), 0);
    return {
      state: 'incomplete',
      reason: lacking.map(whyLacking).join('; '),
      partNg: known.length === 0 ? null : part
    };
  }
  const high = known.reduce<number>(
    (sum, value) => sum + (typeof value === 'number' ? value : value.below),
    0
  );
  if (known.every((value) => typeof value !== 'number')) return { state: 'not detected', belowNg: high };
  return {
    state: 'amount',
    ng: known.reduce<number>((sum, value) => sum + asZero(value), 0),
    highNg: high,
    notDetectedIn: method.filter((place) => typeof place.ng !== 'number').map(({ fraction }) => fraction.name)
  };
}

export function methodPlaces(portion: Portion): readonly PortionPlace[] {
  return portion.places.filter(({ fraction }) => fraction.countsAs === 'method');
}

function whyLacking(place: PortionPlace): string {
  const { amount } = place.found;
  const why = place.exclusion
    ? `set aside (${place.exclusion.cause})`
    : 'reason' in amount
      ? amount.reason
      : 'no usable figure';
  return `${place.fraction.name}: ${why}`;
}

/** True for a preparation that counts: not set aside, complete in the fractions of the method. */
export function isCounted({ portion, found }: Preparation): boolean {
  return portion.exclusion === null && found.state !== 'incomplete';
}

/** How many preparations, batches and days some figure rests on. */
export interface Coverage {
  readonly n: number;
  /** Labels, in order. */
  readonly batches: readonly string[];
  /** ISO days, ascending. */
  readonly days: readonly string[];
  readonly withoutDay: number;
}

export function coverageOf(preparations: readonly Preparation[]): Coverage {
  const batches = new Map(preparations.map(({ batch }) => [batch.key, batch.label] as const));
  const days = new Set(preparations.flatMap(({ day }) => (day === null ? [] : [day])));
  return {
    n: preparations.length,
    batches: [...batches.values()],
    days: [...days].sort(),
    withoutDay: preparations.filter(({ day }) => day === null).length
  };
}

/** The one amount that all of them received, ng; null where they differ or one received none. */
export function commonSpike(preparations: readonly Preparation[]): number | null {
  return common(preparations.map(({ portion }) => portion.spikeNg));
}

/** The one sample volume of all of them, mL; null where they differ or one has none. */
export function commonVolume(preparations: readonly Preparation[]): number | null {
  return common(preparations.map(({ portion }) => portion.replicate.sampleVolumeMl));
}

function common(values: readonly (number | null)[]): number | null {
  const [first] = values;
  if (first === undefined || first === null) return null;
  return values.every((value) => value !== null && Math.abs(value - first) <= 1e-9 * first) ? first : null;
}
