import { openLoss, type Estimate, type Value } from '../stats';
import { atEnd, hasNotDetected } from './method-figures';
import { asZero } from './portions';
import type { RecoveryInput } from './recovery-input';

export type OpenPart =
  | {
      readonly available: true;
      readonly found: Estimate;
      readonly downstream: Estimate;
      readonly open: Estimate;
      /** The open part differs from zero, whatever not-detected stands for: only then is it one. */
      readonly significant: boolean;
      /** The matrix effect (percent, 100 = none) that `downstream` holds as well; null: none was divided out. */
      readonly matrixEffect: number | null;
    }
  | { readonly available: false; readonly reason: string };

/** The matrix effect of one fraction, as it enters the step recoveries of the stage. */
export interface FractionEffect {
  readonly fractionId: string;
  /** Percent, 100 = none. */
  readonly estimate: number;
  readonly se: number;
  readonly df: number;
}

/** Not the key of a stage: these begin with a letter. */
const masking = ' matrix effect';

/**
 * Of 100 spiked: what the fractions hold, what was lost between their collection and the instrument, and what is open.
 *
 * @param stepRecoveries by stage key, as far as they are known
 * @param reference signal reference (percent); null: exactly 100
 * @param stageName what a stage key is called, for the reason
 * @param effect where the step recoveries are free of a matrix effect, what the fraction's signal is still masked by; null: nothing
 */
export function openPart(
  input: RecoveryInput,
  stepRecoveries: Readonly<Record<string, Estimate>>,
  reference: Estimate | null,
  stageName: (key: string) => string,
  effect: FractionEffect | null = null
): OpenPart {
  const part = openPartOf(input, stepRecoveries, reference, stageName, effect);
  if (!part.available) return part;
  if (!hasNotDetected(input)) return { ...part, significant: excludesZero(part.open) !== 0 };
  const atLimits = openPartOf(
    { ...input, replicates: atEnd(input, 'high').replicates },
    stepRecoveries,
    reference,
    stageName,
    effect
  );
  const differs = excludesZero(part.open);
  return {
    ...part,
    significant: differs !== 0 && atLimits.available && Math.sign(atLimits.open.estimate ?? 0) === differs
  };
}

/** -1 or 1 when the interval lies on one side of zero; 0 when it does not, or does not exist. */
function excludesZero({ ci }: Estimate): number {
  if (ci === null) return 0;
  return ci.lower > 0 ? 1 : ci.upper < 0 ? -1 : 0;
}

function openPartOf(
  input: RecoveryInput,
  stepRecoveries: Readonly<Record<string, Estimate>>,
  reference: Estimate | null,
  stageName: (key: string) => string,
  effect: FractionEffect | null
): OpenPart {
  const passed = new Set(input.fractions.flatMap((fraction) => fraction.passedStages));
  const unknown = [...passed].filter((key) => (stepRecoveries[key]?.estimate ?? null) === null);
  if (unknown.length > 0) {
    return {
      available: false,
      reason:
        `What is lost on the way cannot be told from what is open: ${unknown.map(stageName).join(' and ')} ` +
        `${unknown.length > 1 ? 'have' : 'has'} no step recovery of ${input.entry.name}.`
    };
  }
  const complete = input.replicates.filter((record) => isComplete(record, input));
  if (complete.length === 0) {
    return { available: false, reason: `No portion of ${input.entry.name} is complete in every fraction.` };
  }
  const subtracted = input.subtracted;
  const native = subtracted?.native.filter((record) => isComplete(record, input)) ?? null;
  if (native?.length === 0) {
    return {
      available: false,
      reason: `Nothing that could be subtracted from ${input.entry.name} is complete in every fraction.`
    };
  }
  const result = openLoss({
    replicates: native ? pooledForm(input, native) : complete,
    fractions: input.fractions.map(({ id, passedStages }) => ({
      name: id,
      passed: effect?.fractionId === id ? [...passedStages, masking] : passedStages
    })),
    stepRecoveries: {
      ...Object.fromEntries([...passed].map((key) => [key, stepRecoveries[key]!])),
      ...(effect ? { [masking]: asStep(effect) } : {})
    },
    ...(reference ? { reference } : {}),
    ...(native ? { native } : {})
  });
  return { available: true, ...result, significant: false, matrixEffect: effect?.estimate ?? null };
}

/** A matrix effect as the ratio that it passes on; `se` that of the logarithm. */
function asStep({ estimate, se, df }: FractionEffect): Estimate {
  return { estimate: estimate / 100, se: se / estimate, df, ci: null };
}

/**
 * Replicates that lose the pooled native mean, written so that each ends up net of the mean of its own batch: the batch's
 * deviation from the pool is taken off beforehand.
 */
function pooledForm(
  input: RecoveryInput,
  native: readonly Readonly<Record<string, Value>>[]
): Readonly<Record<string, Value>>[] {
  const batches = input.subtracted?.nativeBatches;
  const allNative = input.subtracted?.native ?? [];
  return input.replicates.flatMap((record, index) => {
    if (!isComplete(record, input)) return [];
    const batch = input.batches?.[index];
    const own =
      batches && batch !== undefined
        ? native.filter((item) => batches[allNative.indexOf(item)] === batch)
        : [];
    if (own.length === 0) return [record];
    return [
      Object.fromEntries(
        input.fractions.map(({ id }) => {
          const deviation = meanOf(own, id) - meanOf(native, id);
          return [id, asZero(record[id] ?? 0) - deviation];
        })
      )
    ];
  });
}

function isComplete(record: Readonly<Record<string, Value>>, input: RecoveryInput): boolean {
  return input.fractions.every((fraction) => (record[fraction.id] ?? null) !== null);
}

function meanOf(records: readonly Readonly<Record<string, Value>>[], id: string): number {
  return records.reduce((sum, record) => sum + asZero(record[id] ?? 0), 0) / records.length;
}
