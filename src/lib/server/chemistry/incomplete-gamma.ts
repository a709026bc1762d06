import { createRequire } from 'node:module';

/** The CommonJS build is loaded because it is ready at once; the package's own types do not reach it. */
const cephes = createRequire(import.meta.url)('cephes') as {
  readonly igam: (shape: number, x: number) => number;
};

/**
 * Regularised lower incomplete gamma function P(shape, x) for shape > 0 and x >= 0, from the cephes library (S. L. Moshier,
 * Methods and Programs for Mathematical Functions, 1989), which throws where the result or its complement is smaller than
 * the smallest double.
 */
export function lowerGamma(shape: number, x: number): number {
  if (x <= 0) return 0;
  try {
    return cephes.igam(shape, x);
  } catch (error) {
    if (error instanceof Error && error.message.includes('underflow')) return x < shape ? 0 : 1;
    throw error;
  }
}
