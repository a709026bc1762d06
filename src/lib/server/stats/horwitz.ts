import { StatsError } from './errors';
import { notNegative, positive } from './guards';

/** Where Thompson's form changes: below the first it is constant, above the second a square root. */
const low = 1.2e-7;
const high = 0.138;

/**
 * Horwitz' between-laboratory RSD in percent at a mass fraction C (1 = pure): 2 C^-0.1505.
 *
 * @throws StatsError unless the mass fraction is above 0 and at most 1.
 * Source: W. Horwitz, Anal. Chem. 54 (1982) 67A; exponent from sigma = 0.02 C^0.8495.
 */
export function horwitzRsd(massFraction: number): number {
  return 2 * requireMassFraction(massFraction) ** -0.1505;
}

/**
 * Thompson's form of it, in percent: 22 below C = 1.2e-7, 2 C^-0.1505 up to 0.138, C^-0.5 above.
 *
 * @throws StatsError unless the mass fraction is above 0 and at most 1.
 * Source: M. Thompson, Analyst 125 (2000) 385 (from memory).
 */
export function thompsonRsd(massFraction: number): number {
  const c = requireMassFraction(massFraction);
  if (c < low) return 22;
  return c <= high ? horwitzRsd(c) : c ** -0.5;
}

/**
 * HorRat: an RSD in percent divided by Horwitz' at that mass fraction.
 *
 * @throws StatsError for an RSD below zero or a mass fraction outside 0 to 1.
 */
export function horrat(rsd: number, massFraction: number): number {
  return notNegative(rsd, 'RSD') / horwitzRsd(massFraction);
}

function requireMassFraction(c: number): number {
  if (positive(c, 'Mass fraction') > 1) {
    throw new StatsError('out-of-range', `Mass fraction must be at most 1, found ${c}.`);
  }
  return c;
}
