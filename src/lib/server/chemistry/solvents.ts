import { fromMemory, seen, type Origin, type SourcedRange } from './evidence';
import { oneOf, positive } from './guards';

export interface SourcedValue extends Origin {
  readonly value: number;
}

/** A mixture that boils as one. */
export interface Azeotrope extends Origin {
  readonly boilingPointC: number;
  /** Mass share in percent of the partner (of water, where water is the partner). */
  readonly percent: number;
}

/** What is known of a solvent. null where no value is at hand, never a guess. */
export interface Solvent {
  readonly key: string;
  readonly name: string;
  /** At 101 kPa. */
  readonly boilingPointC: SourcedValue;
  /** Snyder's P'. */
  readonly polarity: SourcedValue | null;
  /** Percent by mass at 20 to 25 °C; null where it mixes with water, or is not known. */
  readonly waterInSolvent: SourcedRange | null;
  readonly solventInWater: SourcedRange | null;
  readonly mixesWithWater: boolean;
  readonly mixingOrigin: Origin;
  /** `none` where it is known that there is none. */
  readonly waterAzeotrope: Azeotrope | 'none' | null;
}

const handbook = seen('CRC Handbook, as held by the chemicals data package 1.5.2');
const memory = fromMemory();
const boils = (value: number): SourcedValue => ({ value, ...handbook });
const polar = (value: number): SourcedValue => ({ value, ...memory });
const percent = (low: number, high = low): SourcedRange => ({ low, high, ...memory });
const azeotrope = (boilingPointC: number, share: number, detail = ''): Azeotrope => ({
  boilingPointC,
  percent: share,
  ...fromMemory(detail)
});

type Given = Omit<Solvent, 'mixesWithWater' | 'mixingOrigin'>;
const mixing = (solvent: Given): Solvent => ({ ...solvent, mixesWithWater: true, mixingOrigin: memory });
const parting = (solvent: Given): Solvent => ({ ...solvent, mixesWithWater: false, mixingOrigin: memory });

/** The solvents of extraction, by boiling point. */
export const solvents: readonly Solvent[] = [
  parting({
    key: 'diethyl-ether',
    name: 'Diethyl ether',
    boilingPointC: boils(34.4),
    polarity: polar(2.8),
    waterInSolvent: percent(1.3),
    solventInWater: null,
    waterAzeotrope: null
  }),
  parting({
    key: 'dichloromethane',
    name: 'Dichloromethane',
    boilingPointC: boils(39.8),
    polarity: polar(3.1),
    waterInSolvent: percent(0.2),
    solventInWater: percent(1.3, 1.6),
    waterAzeotrope: azeotrope(38.1, 1.5)
  }),
  parting({
    key: 'mtbe',
    name: 'tert-Butyl methyl ether',
    boilingPointC: boils(55.1),
    polarity: polar(2.5),
    waterInSolvent: percent(1.4),
    solventInWater: percent(4.5),
    waterAzeotrope: azeotrope(52.6, 3.5)
  }),
  mixing({
    key: 'acetone',
    name: 'Acetone',
    boilingPointC: boils(56.1),
    polarity: polar(5.1),
    waterInSolvent: null,
    solventInWater: null,
    waterAzeotrope: 'none'
  }),
  parting({
    key: 'chloroform',
    name: 'Chloroform',
    boilingPointC: boils(61.2),
    polarity: polar(4.1),
    waterInSolvent: null,
    solventInWater: null,
    waterAzeotrope: null
  }),
  mixing({
    key: 'methanol',
    name: 'Methanol',
    boilingPointC: boils(64.5),
    polarity: polar(5.1),
    waterInSolvent: null,
    solventInWater: null,
    waterAzeotrope: 'none'
  }),
  mixing({
    key: 'tetrahydrofuran',
    name: 'Tetrahydrofuran',
    boilingPointC: boils(66.0),
    polarity: polar(4.0),
    waterInSolvent: null,
    solventInWater: null,
    waterAzeotrope: null
  }),
  parting({
    key: 'hexane',
    name: 'Hexane',
    boilingPointC: boils(68.7),
    polarity: polar(0.1),
    waterInSolvent: percent(0.01),
    solventInWater: null,
    waterAzeotrope: azeotrope(61.6, 5.6)
  }),
  parting({
    key: 'ethyl-acetate',
    name: 'Ethyl acetate',
    boilingPointC: boils(77.1),
    polarity: polar(4.4),
    waterInSolvent: percent(3.0, 3.3),
    solventInWater: percent(8),
    waterAzeotrope: azeotrope(70.4, 8)
  }),
  parting({
    key: 'cyclohexane',
    name: 'Cyclohexane',
    boilingPointC: boils(80.7),
    polarity: null,
    waterInSolvent: null,
    solventInWater: null,
    waterAzeotrope: null
  }),
  mixing({
    key: 'acetonitrile',
    name: 'Acetonitrile',
    boilingPointC: boils(81.6),
    polarity: polar(5.8),
    waterInSolvent: null,
    solventInWater: null,
    waterAzeotrope: azeotrope(76.5, 16)
  }),
  mixing({
    key: 'isopropanol',
    name: '2-Propanol',
    boilingPointC: boils(82.2),
    polarity: polar(3.9),
    waterInSolvent: null,
    solventInWater: null,
    waterAzeotrope: null
  }),
  parting({
    key: 'isooctane',
    name: 'Isooctane (2,2,4-trimethylpentane)',
    boilingPointC: boils(99.2),
    polarity: null,
    waterInSolvent: null,
    solventInWater: null,
    waterAzeotrope: null
  }),
  parting({
    key: 'toluene',
    name: 'Toluene',
    boilingPointC: boils(110.6),
    polarity: polar(2.4),
    waterInSolvent: percent(0.03),
    solventInWater: null,
    waterAzeotrope: azeotrope(84.5, 20, '84 to 85 °C')
  })
];

/** Snyder's P' of water, for comparison with the solvents. */
export const waterPolarity: SourcedValue = polar(10.2);

/** Two solvents that boil as one mixture: what is left on the way from one to the other. */
export interface SolventPair extends Azeotrope {
  /** `percent` is the share of the first. */
  readonly first: string;
  readonly second: string;
}

export const solventPairs: readonly SolventPair[] = [
  { first: 'methanol', second: 'dichloromethane', ...azeotrope(37.8, 7) },
  { first: 'methanol', second: 'ethyl-acetate', ...azeotrope(62, 44) },
  { first: 'methanol', second: 'hexane', ...azeotrope(50, 28) },
  { first: 'acetone', second: 'hexane', ...azeotrope(49.8, 59) },
  { first: 'methanol', second: 'acetone', ...azeotrope(55.5, 12) }
];

/**
 * A solvent by its key or its name (any case).
 * @throws ChemistryError `unknown-name` with the names there are
 */
export function solvent(keyOrName: string): Solvent {
  const wanted = String(keyOrName).trim().toLowerCase();
  const found = solvents.find(({ key, name }) => key === wanted || name.toLowerCase() === wanted);
  return (
    found ??
    solvents.find(
      ({ name }) =>
        name ===
        oneOf(
          keyOrName,
          solvents.map((each) => each.name),
          'The solvent'
        )
    )!
  );
}

/**
 * Water that sodium sulfate can bind: as the decahydrate 10 × 18.015/142.04 = 1.27 g per g (theory), below 32.4 °C only; in practice
 * less. From memory, verify.
 * @param sodiumSulfateG grams of the anhydrous salt
 * @returns grams of water at the most
 * @throws ChemistryError for a mass that is not above zero
 */
export function boundWaterG(sodiumSulfateG: number): number {
  return positive(sodiumSulfateG, 'The mass of sodium sulfate') * ((10 * 18.015) / 142.04);
}
