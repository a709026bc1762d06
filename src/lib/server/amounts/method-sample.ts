import type { Sample, Value } from '../stats';
import { atEnd, type End } from './method-figures';
import { asZero } from './portions';
import type { RecoveryInput } from './recovery-input';

/**
 * Method totals per portion complete in the method fractions, with the totals that are subtracted from them: what stage losses
 * and forecasts start from. null when no portion, or nothing to subtract, is complete.
 */
export function methodSample(input: RecoveryInput, end: End = 'zero'): Sample | null {
  const method = input.fractions
    .filter((fraction) => fraction.countsAs === 'method')
    .map((fraction) => fraction.id);
  if (method.length === 0) return null;
  const { replicates, native } = atEnd(input, end);
  const spiked = totals(replicates, method);
  const unspiked = native ? totals(native, method) : null;
  if (spiked.length === 0 || unspiked?.length === 0) return null;
  const nativeBatches = input.subtracted?.nativeBatches ?? null;
  return {
    values: spiked.map((item) => item.sum),
    ...(unspiked ? { native: unspiked.map((item) => item.sum) } : {}),
    ...(unspiked && input.batches && nativeBatches
      ? {
          batches: spiked.map((item) => input.batches?.[item.index] ?? ''),
          nativeBatches: unspiked.map((item) => nativeBatches[item.index] ?? '')
        }
      : {})
  };
}

function totals(
  records: readonly Readonly<Record<string, Value>>[],
  fractions: readonly string[]
): { readonly index: number; readonly sum: number }[] {
  return records.flatMap((record, index) => {
    let sum = 0;
    for (const id of fractions) {
      const value = record[id] ?? null;
      if (value === null) return [];
      sum += asZero(value);
    }
    return [{ index, sum }];
  });
}
