import type { LibraryAnalyte } from '../library/sourced';
import { createRandom } from './random';
import type { ReportedInjection, ReportedSubstance } from './workbooks';

/*
 * A study for trying things at size: 150 invented substances in 60 injections. Nothing in it means anything; it only has
 * the shape of real data.
 */

export const largeSpikeNg = 100;
export const largeStandardNg = 50;
export const largeStandardNgPerMl = 50;
export const largeLevelsNgPerMl: readonly number[] = [1, 2, 5, 10, 25, 50, 100, 250];
export const largeFractions = [
  'First elution',
  'Second elution',
  'Carbon cartridge',
  'Load effluent'
] as const;
export const largePortions = { spiked: 8, unspiked: 3, 'method blank': 2 } as const;
const prefixes = { spiked: 'S', unspiked: 'N', 'method blank': 'B' } as const;

const numbered = (word: string, from: number, count: number): readonly string[] =>
  Array.from({ length: count }, (_, index) => `${word} ${String(from + index).padStart(3, '0')}`);

export const largeTargets: readonly string[] = numbered('Compound', 1, 150);
export const largeStandards: readonly string[] = numbered('Marker', 1, 2);

/** Every other compound is read against the one marker, the rest against the other. */
export const largeSubstances: readonly ReportedSubstance[] = largeTargets.map((name, index) => ({
  name,
  internalStandard: largeStandards[index % largeStandards.length] ?? null
}));

/** The invented substances as library entries: a name, and that it is invented. */
export const largeLibrary: readonly LibraryAnalyte[] = [...largeTargets, ...largeStandards].map((name) => ({
  name,
  synonyms: [],
  cas: null,
  smiles: null,
  formula: null,
  molarMass: null,
  class: 'invented',
  note: 'Invented, for trying the program at size.'
}));

export const largeLabel = (kind: keyof typeof prefixes, number: number): string =>
  `L-${prefixes[kind]}${number}`;
export const largeLevelLabel = (level: number): string => `CAL L-${level + 1}`;

interface Invented {
  readonly response: number;
  readonly nativeNg: number;
  /** Share of what is in the sample that ends in each of `largeFractions`. */
  readonly shares: readonly number[];
}

function invent(name: string, seed: number): Invented {
  const chance = createRandom(seed, name);
  const held = chance.uniform() ** 0.15;
  const first = held * (0.4 + 0.6 * chance.uniform());
  const second = (held - first) * chance.uniform();
  const carbon = (1 - held) * 0.9 * chance.uniform();
  return {
    response: 1000 + 7000 * chance.uniform(),
    nativeNg: Math.max(0, 30 * chance.uniform() - 15),
    shares: [first, second, carbon, 1 - held - carbon]
  };
}

/** The 60 injections: eight calibration levels, then every fraction of every portion. */
export function largeInjections(seed: number): readonly ReportedInjection[] {
  const invented = new Map(largeTargets.map((name) => [name, invent(name, seed)]));
  const markers = new Map(largeStandards.map((name) => [name, 3000]));

  function vial(
    sample: string,
    fraction: string | null,
    volumeMl: number | null,
    concentrationOf: (substance: Invented, scatter: number) => number,
    standardNgPerMl: number,
    scatterSd: number
  ): ReportedInjection {
    const chance = createRandom(seed, `${sample} ${fraction}`);
    const injected = chance.factor(0.01);
    return {
      sample,
      fraction,
      injection: 1,
      finalVolumeMl: volumeMl,
      dilution: 1,
      aliquotShare: 1,
      areas: new Map(
        [...invented].map(([name, substance]) => {
          const concentration = concentrationOf(substance, chance.factor(scatterSd));
          const least = (largeLevelsNgPerMl[0] ?? 0) * (standardNgPerMl / largeStandardNgPerMl);
          const area = Math.round(concentration * substance.response * injected);
          return [name, concentration < least ? null : area];
        })
      ),
      standardAreas: new Map(
        [...markers].map(([name, response]) => [name, Math.round(response * standardNgPerMl * injected)])
      )
    };
  }

  const levels = largeLevelsNgPerMl.map((concentration, level) =>
    vial(
      largeLevelLabel(level),
      null,
      null,
      (_, scatter) => concentration * scatter,
      largeStandardNgPerMl,
      0.01
    )
  );
  const extracts = Object.entries(largePortions).flatMap(([kind, count]) =>
    Array.from({ length: count }, (_, index) => {
      const label = largeLabel(kind as keyof typeof prefixes, index + 1);
      const chance = createRandom(seed, label);
      const whole = chance.factor(0.025);
      return largeFractions.map((fraction, position) => {
        const volumeMl = Number((1 + chance.normal(0.02)).toFixed(2));
        const amount = ({ nativeNg, shares }: Invented, scatter: number): number => {
          const inside = kind === 'method blank' ? 0 : nativeNg + (kind === 'spiked' ? largeSpikeNg : 0);
          return (inside * (shares[position] ?? 0) * whole * scatter) / volumeMl;
        };
        return vial(label, fraction, volumeMl, amount, largeStandardNg / volumeMl, 0.04);
      });
    }).flat()
  );
  return [...levels, ...extracts];
}
