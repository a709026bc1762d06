import { ChemistryError } from './errors';
import { phOf, within } from './guards';

/**
 * The groups of a substance that gain or lose a proton.
 *
 * `acids` are the pKa values of groups that are neutral when protonated, `bases` the pKa values of the conjugate acids of groups
 * that are positive when protonated. `permanentCharge` is a charge that no pH takes away (+1 for a quaternary ammonium).
 */
export interface ChargeGroups {
  readonly acids: readonly number[];
  readonly bases: readonly number[];
  readonly permanentCharge?: number;
}

/** Shares of the molecules by net charge; they sum to 1. A zwitterion has no net charge and is charged all the same. */
export interface ChargeShares {
  readonly neutral: number;
  readonly cation: number;
  readonly anion: number;
  readonly zwitterion: number;
}

export interface ChargeState {
  readonly netCharge: number;
  readonly fraction: number;
}

/** More groups than any small molecule has; the work grows with the square of their number. */
const mostGroups = 64;

/** Returns the groups with their permanent charge, or throws when a value is impossible. */
export function checkedGroups({ acids, bases, permanentCharge = 0 }: ChargeGroups): Required<ChargeGroups> {
  for (const [values, what] of [
    [acids, 'acid pKa'],
    [bases, 'base pKa']
  ] as const) {
    if (values.length > mostGroups) {
      throw new ChemistryError(
        'too-many',
        `${values.length} values of ${what} are given, at most ${mostGroups} can be.`
      );
    }
    values.forEach((pka, index) => within(pka, `The ${what}, value ${index + 1},`, -20, 50));
  }
  within(permanentCharge, 'The permanent charge', -20, 20);
  if (!Number.isInteger(permanentCharge)) {
    throw new ChemistryError(
      'out-of-range',
      `The permanent charge must be a whole number, found ${permanentCharge}.`
    );
  }
  return { acids, bases, permanentCharge };
}

/**
 * Ionised share of an acid group: 1/(1 + 10^(pKa − pH)) (Henderson and Hasselbalch, textbook). No units.
 * @throws ChemistryError for a pKa or pH that is not finite or not possible
 */
export function ionisedAcid(pka: number, ph: number): number {
  return 1 / (1 + 10 ** (within(pka, 'The acid pKa', -20, 50) - phOf(ph)));
}

/**
 * Ionised share of a base group: 1/(1 + 10^(pH − pKa)), pKa that of the conjugate acid. No units.
 * @throws ChemistryError for a pKa or pH that is not finite or not possible
 */
export function ionisedBase(pka: number, ph: number): number {
  return 1 / (1 + 10 ** (phOf(ph) - within(pka, 'The base pKa', -20, 50)));
}

/** ln of the share in which no group is charged, for checked groups; finite at every pH. */
export function lnUncharged({ acids, bases }: ChargeGroups, ph: number): number {
  let sum = 0;
  for (const pka of acids) sum -= Math.log1p(10 ** (ph - pka));
  for (const pka of bases) sum -= Math.log1p(10 ** (pka - ph));
  return sum;
}

/**
 * Neutral share: f_n = Π 1/(1 + 10^(pH − pKa)) over acids × Π 1/(1 + 10^(pKa − pH)) over bases.
 *
 * Groups are taken to be independent, so a zwitterion counts as charged. The pKa values of a substance with several like groups
 * are measured one after the other; where two of them lie within a unit the product is a little low (by up to a quarter when
 * they are equal). With a permanent charge nothing is ever neutral and the share is 0. From memory, verify.
 * @returns share from 0 to 1, no unit
 * @throws ChemistryError for a value that is not finite or not possible, or more than 64 groups of a kind
 */
export function fractionNeutral(groups: ChargeGroups, ph: number): number {
  const checked = checkedGroups(groups);
  const uncharged = Math.exp(lnUncharged(checked, phOf(ph)));
  return checked.permanentCharge === 0 ? uncharged : 0;
}

/** Distribution of the number of ionised groups (index = number), given each group's ionised share. */
function ionisedCounts(shares: readonly number[]): readonly number[] {
  return shares.reduce<readonly number[]>(
    (counts, share) =>
      Array.from(
        { length: counts.length + 1 },
        (_, n) => (counts[n] ?? 0) * (1 - share) + (counts[n - 1] ?? 0) * share
      ),
    [1]
  );
}

function countsAt(groups: ChargeGroups, ph: number) {
  const { acids, bases, permanentCharge } = checkedGroups(groups);
  phOf(ph);
  return {
    anionic: ionisedCounts(acids.map((pka) => ionisedAcid(pka, ph))),
    cationic: ionisedCounts(bases.map((pka) => ionisedBase(pka, ph))),
    permanentCharge
  };
}

/**
 * Shares of the molecules by net charge, by convolution over independent groups.
 * @returns one state for each net charge that can occur, most positive first; the fractions sum to 1
 * @throws ChemistryError as {@link fractionNeutral}
 */
export function chargeStates(groups: ChargeGroups, ph: number): readonly ChargeState[] {
  const { anionic, cationic, permanentCharge } = countsAt(groups, ph);
  const most = cationic.length - 1;
  const least = anionic.length - 1;
  return Array.from({ length: most + least + 1 }, (_, index) => {
    const net = most - index;
    let fraction = 0;
    for (let plus = Math.max(0, net); plus <= most && plus - net <= least; plus += 1) {
      fraction += cationic[plus]! * anionic[plus - net]!;
    }
    return { netCharge: net + permanentCharge, fraction };
  });
}

/**
 * Mean net charge: permanent charge + Σ ionised share of the bases − Σ ionised share of the acids, in elementary charges.
 * @throws ChemistryError as {@link fractionNeutral}
 */
export function meanCharge(groups: ChargeGroups, ph: number): number {
  const checked = checkedGroups(groups);
  return checked.permanentCharge + chargeOfGroups(checked, phOf(ph));
}

/** Mean charge of the groups alone, for checked ones: falls with pH, and is the slope of ln f_n over ln 10. */
export function chargeOfGroups({ acids, bases }: ChargeGroups, ph: number): number {
  let charge = 0;
  for (const pka of bases) charge += 1 / (1 + 10 ** (ph - pka));
  for (const pka of acids) charge -= 1 / (1 + 10 ** (pka - ph));
  return charge;
}

/**
 * Shares that are neutral (no group charged), net positive, net negative, and without net charge though charged.
 * @returns four shares that sum to 1
 * @throws ChemistryError as {@link fractionNeutral}
 */
export function chargeShares(groups: ChargeGroups, ph: number): ChargeShares {
  const { anionic, cationic, permanentCharge } = countsAt(groups, ph);
  const shares = { neutral: 0, cation: 0, anion: 0, zwitterion: 0 };
  cationic.forEach((positive, plus) =>
    anionic.forEach((negative, minus) => {
      const net = permanentCharge + plus - minus;
      const uncharged = plus === 0 && minus === 0 && permanentCharge === 0;
      const kind = net > 0 ? 'cation' : net < 0 ? 'anion' : uncharged ? 'neutral' : 'zwitterion';
      shares[kind] += positive * negative;
    })
  );
  return shares;
}
