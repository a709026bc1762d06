/** Weights below exp of this, relative to the largest, are left out: what tails of 1e-12 rest on is still well above. */
const faintest = -50;

/**
 * Mean of g(s) over s = sqrt(chi-square/df): what turns a statement about known variance into one about an estimated one.
 *
 * The density of log s falls off faster than exponentially on one side and like s^df on the other, so that the plain
 * trapezoidal rule in log s converges geometrically (Trefethen and Weideman, SIAM Rev. 56 (2014) 385). The weights are
 * divided by their own sum, which spares the gamma function. `step` bounds the spacing from above for functions g that change
 * fast in log s. Infinite degrees of freedom mean that s is exactly 1.
 */
export function meanOverChi(df: number, g: (s: number) => number, step: number): number {
  if (df === Infinity) return g(1);
  const spacing = Math.min(step, 0.35 / Math.sqrt(2 * df));
  let weights = 0;
  let sum = 0;
  for (const direction of [1, -1]) {
    for (let i = direction === 1 ? 0 : 1; ; i += 1) {
      const u = direction * i * spacing;
      // log of the density relative to its peak at u = 0, without cancellation near it.
      const log = df * (u - Math.expm1(2 * u) / 2);
      if (log < faintest) break;
      const weight = Math.exp(log);
      weights += weight;
      sum += weight * g(Math.exp(u));
    }
  }
  return sum / weights;
}
