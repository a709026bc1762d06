import { notNegative, oneOf, positive } from './guards';
import { capacities, holdUpPerMass, sorbentKinds, type SorbentKind } from './sorbents';
import type { Origin } from './evidence';

/**
 * Hold-up volume of a bed: V_M = mass × 1.2 µL/mg (C18 silica, from memory, verify).
 * @param bedMassMg mass of sorbent in mg
 * @param microlitresPerMg another hold-up per mass, where the sorbent's sheet gives one
 * @returns mL
 * @throws ChemistryError when a value is not above zero
 */
export function bedVolumeMl(bedMassMg: number, microlitresPerMg = holdUpPerMass.low): number {
  return (positive(bedMassMg, 'The bed mass') * positive(microlitresPerMg, 'The hold-up per mass')) / 1000;
}

/**
 * How many times a volume fills the bed. Washing and eluting take at least two (from memory, verify).
 * @returns bed volumes, without unit
 * @throws ChemistryError for a negative volume or a bed mass that is not above zero
 */
export function bedVolumes(volumeMl: number, bedMassMg: number, microlitresPerMg?: number): number {
  return notNegative(volumeMl, 'The volume') / bedVolumeMl(bedMassMg, microlitresPerMg);
}

export interface BedCapacity extends Origin {
  readonly unit: 'mg' | 'meq';
  readonly low: number;
  readonly high: number;
}

/**
 * What a bed can hold: 1 to 5 % of its mass on C18 silica, 10 to 15 % on a polymer (mg), 0.5 to 1 meq per g of an ion exchanger
 * (meq). All from memory, verify.
 * @throws ChemistryError for an unknown kind of sorbent or a bed mass that is not above zero
 */
export function bedCapacity(kind: SorbentKind, bedMassMg: number): BedCapacity {
  oneOf(kind, sorbentKinds, 'The sorbent');
  const { low, high, source, standing } = capacities[kind];
  const exchanges = kind === 'ion-exchange';
  // Percent of mg on the one hand, meq/g times g on the other.
  const scale = positive(bedMassMg, 'The bed mass') / (exchanges ? 1000 : 100);
  return { unit: exchanges ? 'meq' : 'mg', low: low * scale, high: high * scale, source, standing };
}

export interface BedLoad {
  readonly capacity: BedCapacity;
  /** Loaded amount as a share of the larger and of the smaller capacity. */
  readonly share: { readonly low: number; readonly high: number };
  readonly reading: 'below' | 'near' | 'above';
}

/**
 * The loaded amount against what the bed can hold. The matrix counts: dissolved organic matter on a reversed phase, salts on an
 * ion exchanger, and usually far more of them than of the analytes.
 * @param loaded everything the bed has to hold, in mg; in meq for an ion exchanger
 * @returns `below` the smaller capacity, `near` between both, `above` the larger
 * @throws ChemistryError as {@link bedCapacity}, and for a negative load
 */
export function bedLoad(kind: SorbentKind, bedMassMg: number, loaded: number): BedLoad {
  const capacity = bedCapacity(kind, bedMassMg);
  notNegative(loaded, 'The loaded amount');
  const reading = loaded > capacity.high ? 'above' : loaded > capacity.low ? 'near' : 'below';
  return { capacity, share: { low: loaded / capacity.high, high: loaded / capacity.low }, reading };
}
