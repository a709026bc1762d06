import { relativePercentDifference, StatsError } from '../../stats';
import type { Preparation } from './preparations';

/** How far two preparations that were declared duplicates lie apart. */
export interface Duplicates {
  readonly first: Preparation;
  readonly second: Preparation;
  /** ng/L where both have a sample volume. */
  readonly unit: 'ng/L' | 'ng';
  readonly values: readonly [number | null, number | null];
  /** Percent of their mean; null: see `refusal`. */
  readonly rpd: number | null;
  readonly refusal: string | null;
}

/** RPD = 200 |a - b|/(a + b) of what two preparations hold, on concentrations where both have a volume; nothing is subtracted. */
export function duplicates(first: Preparation, second: Preparation): Duplicates {
  const sizes = [first, second].map(({ portion }) => portion.replicate.sampleVolumeMl);
  const sized = sizes.every((size) => size !== null);
  const valueOf = ({ found, portion }: Preparation, size: number | null | undefined): number | null =>
    portion.exclusion !== null || found.state !== 'amount'
      ? null
      : sized
        ? (1000 * found.ng) / (size ?? 1)
        : found.ng;
  const a = valueOf(first, sizes[0]);
  const b = valueOf(second, sizes[1]);
  const base = { first, second, unit: sized ? ('ng/L' as const) : ('ng' as const), values: [a, b] as const };
  if (a === null || b === null) return { ...base, rpd: null, refusal: why(first) ?? why(second) };
  try {
    return { ...base, rpd: relativePercentDifference(a, b), refusal: null };
  } catch (error) {
    if (error instanceof StatsError) return { ...base, rpd: null, refusal: error.message };
    throw error;
  }
}

function why({ portion, found }: Preparation): string | null {
  const { label } = portion.replicate;
  if (portion.exclusion) return `${label} is set aside (${portion.exclusion.cause})`;
  if (found.state === 'not detected') return `${label}: not detected`;
  return found.state === 'incomplete' ? `${label}: ${found.reason}` : null;
}
