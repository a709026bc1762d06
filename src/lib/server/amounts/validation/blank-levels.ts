import { isCounted, type Preparation } from './preparations';

/** What the method blanks or the unspiked portions of one experiment hold of an analyte. */
export interface BlankLevel {
  readonly preparations: readonly Preparation[];
  readonly counted: readonly Preparation[];
  /** Counted ones that gave a number. */
  readonly foundIn: number;
  /** Mean over the counted ones, ng, not detected as zero; null: none counts. */
  readonly meanNg: number | null;
  /** The highest, ng, with what fractions of incomplete ones hold; null: nothing was found. */
  readonly highestNg: number | null;
  /** Mean in ng/L of sample; null where a volume is not recorded. */
  readonly meanNgPerL: number | null;
  /** Incomplete ones of which only a part is known, so that their sum is a lower bound, each with what it lacks. */
  readonly partial: readonly { readonly label: string; readonly partNg: number; readonly lacks: string }[];
}

/** Sums over the fractions that count for the method; incomplete preparations stay out of the mean and are named. */
export function blankLevel(preparations: readonly Preparation[]): BlankLevel {
  const counted = preparations.filter(isCounted);
  const amounts = counted.map(({ found }) => (found.state === 'amount' ? found.ng : 0));
  const partial = preparations.flatMap(({ portion, found }) =>
    portion.exclusion === null && found.state === 'incomplete' && found.partNg !== null
      ? [{ label: portion.replicate.label, partNg: found.partNg, lacks: found.reason }]
      : []
  );
  const sizes = counted.map(({ portion }) => portion.replicate.sampleVolumeMl);
  const sized = sizes.length > 0 && sizes.every((size) => size !== null);
  const found = [
    ...counted.flatMap((item) => (item.found.state === 'amount' ? [item.found.ng] : [])),
    ...partial.filter(({ partNg }) => partNg > 0).map(({ partNg }) => partNg)
  ];
  return {
    preparations,
    counted,
    foundIn: counted.filter((item) => item.found.state === 'amount').length,
    meanNg: mean(amounts),
    highestNg: found.length === 0 ? null : Math.max(...found),
    meanNgPerL: sized ? mean(amounts.map((ng, index) => (1000 * ng) / (sizes[index] ?? 1))) : null,
    partial
  };
}

function mean(values: readonly number[]): number | null {
  return values.length === 0 ? null : values.reduce((sum, value) => sum + value, 0) / values.length;
}
