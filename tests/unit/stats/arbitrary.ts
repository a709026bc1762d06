import fc from 'fast-check';

/** A recovery in percent to one decimal, as a laboratory might find it. */
export const percent = fc.integer({ min: 5, max: 2500 }).map((tenths) => tenths / 10);

/** Replicate recoveries. */
export const replicates = (least = 2, most = 12) => fc.array(percent, { minLength: least, maxLength: most });

/** Any finite number, down to the absurd. */
export const anyFinite = fc.double({ min: -1e100, max: 1e100, noNaN: true, noDefaultInfinity: true });

/** A list and one of its permutations. */
export const shuffled = (values: fc.Arbitrary<number[]>) =>
  values.chain((list) =>
    fc.tuple(fc.constant(list), fc.shuffledSubarray(list, { minLength: list.length, maxLength: list.length }))
  );

/** Equal to rounding, measured against the size of what went in. */
export function near(a: number | null, b: number | null, scale = 1, relative = 1e-9): boolean {
  if (a === null || b === null) return a === b;
  return Math.abs(a - b) <= relative * Math.max(Math.abs(a), Math.abs(b), scale);
}
