import { ChemistryError } from './errors';
import { lastWhere } from './find-edge';
import { share, within } from './guards';
import { lowerGamma } from './incomplete-gamma';

const plateCount = (plates: number) => within(plates, 'The number of plates', 1, 10_000);

/**
 * Mean share of the sample that has left a bed of N plates once a volume V has been loaded at constant concentration.
 *
 * Plates as tanks in series: what leaves at V is P(N, x) of what enters, x = N V/V_R, and the mean over the load is
 * b = P(N, x) − (N/x) P(N + 1, x), with P the regularised lower incomplete gamma function. Own derivation from the tanks-in-series
 * model (textbook).
 * @param plates N, 1 to 10 000, whole or not
 * @param volumeRatio V/V_R, loaded volume over retention volume, 0 or above
 * @returns share from 0 to 1
 * @throws ChemistryError for a value that is not finite or out of these bounds
 */
export function breakthroughLoss(plates: number, volumeRatio: number): number {
  plateCount(plates);
  const x = plates * within(volumeRatio, 'The ratio of loaded volume to retention volume', 0, 1e12);
  if (x === 0) return 0;
  const lost = lowerGamma(plates, x) - (plates / x) * lowerGamma(plates + 1, x);
  return Math.min(1, Math.max(0, lost));
}

/**
 * V/V_R at which a chosen mean share of the sample has been lost: {@link breakthroughLoss} solved for the volume.
 * @param loss share lost, 1e-9 to 0.999 (0.05 for 5 %)
 * @returns loaded volume over retention volume, without unit
 * @throws ChemistryError for plates or a loss out of bounds
 */
export function breakthroughVolumeRatio(plates: number, loss = 0.05): number {
  plateCount(plates);
  within(share(loss, 'The share lost'), 'The share lost', 1e-9, 0.999);
  const holds = (ratio: number) => breakthroughLoss(plates, ratio) <= loss;
  let high = 1;
  while (holds(high)) high *= 2;
  return lastWhere(holds, 0, high);
}

/**
 * V_B/V_R for a loss of 5 %: (a0 + a1/N + a2/N²)^(−1/2), a0 = 0.9025, a1 = 5.360, a2 = 4.603.
 *
 * P. Lövkvist and J. Å. Jönsson, Anal. Chem. 59 (1987) 818; coefficients from memory, verify. Those of other losses are not
 * given here.
 * @throws ChemistryError for plates out of bounds
 */
export function lovkvistJonssonRatio(plates: number): number {
  plateCount(plates);
  return (0.9025 + 5.36 / plates + 4.603 / plates ** 2) ** -0.5;
}

/**
 * V_B/V_R = 1 − 2/√N: the volume at which about 2.3 % of the inlet concentration leaves the bed, two standard deviations before
 * the retention volume. Werkhoven-Goewie et al. (1981), from memory, verify.
 * @throws ChemistryError for four plates or fewer, where nothing would be left
 */
export function werkhovenGoewieRatio(plates: number): number {
  if (plateCount(plates) <= 4) {
    throw new ChemistryError(
      'out-of-range',
      `1 − 2/√N leaves no volume at four plates or fewer, found ${plates}. Use the plate model.`
    );
  }
  return 1 - 2 / Math.sqrt(plates);
}
