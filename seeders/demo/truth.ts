import { demoRecovered, type DemoAnalyte } from './panel';
import {
  cationShare,
  elutedFromPolymer,
  evaporationExponent,
  freedByAmmonia,
  heldByPolymer,
  hydrophilicShare,
  takenUp
} from './partition';

export const variantCodes = ['A', 'B', 'C', 'D'] as const;
export type VariantCode = (typeof variantCodes)[number];
export const dryingKinds = ['sulphate', 'cold parting'] as const;
export type DryingKind = (typeof dryingKinds)[number];

export const sampleVolumeMl = 500;
/** How the eluates of each variant are dried. */
export const dryingOf: Readonly<Record<VariantCode, DryingKind>> = {
  A: 'sulphate',
  B: 'sulphate',
  C: 'sulphate',
  D: 'cold parting'
};

/** The chances of one portion: shifts of its steps from their true values; all zero and one in the truth. */
export interface Shifts {
  /** Logits by which the retention on the first cartridge, or the uptake by the solvent, is off. */
  readonly retention: number;
  /** Logits by which the first elution is off. */
  readonly elution: number;
  /** How hard the solvent was blown off, 1 as described. */
  readonly evaporation: number;
}
export const noShifts: Shifts = { retention: 0, elution: 0, evaporation: 1 };

/** Where each part of an amount ends when a stage is passed; the parts and `lost` sum to 1. */
export interface Split {
  /** Share by the name of the fraction. */
  readonly collected: Readonly<Record<string, number>>;
  readonly lost: number;
}

const shifted = (share: number, logits: number): number =>
  share <= 0 || share >= 1 ? share : 1 / (1 + (1 / share - 1) * Math.exp(-logits));

/** What the extraction itself collects of a substance in the sample, before drying and concentration. */
export function extractionSplit(analyte: DemoAnalyte, variant: VariantCode, shifts = noShifts): Split {
  if (variant === 'A') {
    const up = shifted(takenUp(analyte, 2, 0.12, 2), shifts.retention);
    return {
      collected: { 'Dichloromethane extract': up * 0.98, 'Left in the water': 1 - up },
      lost: up * 0.02
    };
  }
  const ph = variant === 'B' ? 2 : 7;
  const cations = variant === 'B' ? 0 : 0.985 * cationShare(analyte, ph);
  const held = shifted(
    1 - (1 - cations) * (1 - heldByPolymer(analyte, ph, sampleVolumeMl)),
    shifts.retention
  );
  // Of what is held, the part bound as an ion waits for the second elution.
  const asIon = held * Math.min(1, cations / Math.max(held, 1e-12));
  const offPolymer = shifted(elutedFromPolymer(analyte), shifts.elution);
  const first = (held - asIon) * offPolymer + asIon * shifted(0.05, shifts.elution);
  const passed = 1 - held;
  if (variant === 'B') {
    return { collected: { Elution: first, 'Load effluent': passed }, lost: held - first };
  }
  const second = (held - first) * (asIon > 0.01 * held ? freedByAmmonia(analyte) : 0.2);
  if (variant === 'C') {
    return {
      collected: { 'First elution': first, 'Second elution': second, 'Load effluent': passed },
      lost: held - first - second
    };
  }
  const onCarbon = passed * analyte.carbonHeld;
  const offCarbon = onCarbon * 0.93;
  return {
    collected: {
      'First elution': first,
      'Second elution': second,
      'Carbon cartridge': offCarbon,
      'Load effluent': passed - onCarbon
    },
    lost: held - first - second + onCarbon - offCarbon
  };
}

/** What drying passes on of an eluate; cold parting leaves the rest in the water layer, sulphate keeps it. */
export function dryingSplit(analyte: DemoAnalyte, drying: DryingKind): Split {
  const share = hydrophilicShare(analyte);
  if (drying === 'cold parting') {
    const water = 0.15 * share;
    return { collected: { Extract: 1 - water, 'Aqueous layer': water }, lost: 0 };
  }
  const kept = 0.012 + 0.3 * share;
  return { collected: { Extract: 1 - kept, 'Drying-agent rinse': kept * 0.4 }, lost: kept * 0.6 };
}

/** What blowing off the solvent passes on. */
export function concentrationSplit(analyte: DemoAnalyte, shifts = noShifts): Split {
  const kept = 0.99 * Math.exp(-evaporationExponent(analyte) * shifts.evaporation);
  return { collected: { Extract: kept }, lost: 1 - kept };
}

/** What the matrix leaves of a signal in the extract of a variant; 1: all of it. */
export function signalLeft(analyte: DemoAnalyte, variant: VariantCode): number {
  return variant === 'B' ? analyte.masking : 1;
}

/** The fractions of an extraction that are dried and concentrated before they are measured. */
export const methodFractions: Readonly<Record<VariantCode, readonly string[]>> = {
  A: ['Dichloromethane extract'],
  B: ['Elution'],
  C: ['First elution', 'Second elution'],
  D: ['First elution', 'Second elution', 'Carbon cartridge']
};

/** Where an amount in the sample is found after the whole procedure, as shares of it. */
export function procedureSplit(analyte: DemoAnalyte, variant: VariantCode, shifts = noShifts): Split {
  const extraction = extractionSplit(analyte, variant, shifts);
  const dried = dryingSplit(analyte, dryingOf[variant]).collected;
  const concentrated = concentrationSplit(analyte, shifts).collected.Extract ?? 0;
  const collected: Record<string, number> = {};
  let parted = 0;
  for (const [fraction, share] of Object.entries(extraction.collected)) {
    const through = methodFractions[variant].includes(fraction);
    collected[fraction] = through ? share * (dried.Extract ?? 0) * concentrated : share;
    if (through) parted += share * (dried['Aqueous layer'] ?? 0);
  }
  if (variant === 'D') collected['Aqueous layer'] = parted;
  const found = Object.values(collected).reduce((sum, share) => sum + share, 0);
  return { collected, lost: 1 - found };
}

/** What is true of one substance by one variant: shares of 1, and ng in one portion. */
export interface Truth {
  readonly analyte: DemoAnalyte;
  readonly variant: VariantCode;
  /** What each step passes on. */
  readonly steps: Readonly<Record<'extraction' | 'drying' | 'concentration', number>>;
  /** Strength of the spiking solution over its label: every reported recovery carries it. */
  readonly signal: number;
  /** What the extract holds of the sample's: the product of the steps. */
  readonly method: number;
  readonly fractions: Readonly<Record<string, number>>;
  readonly lost: number;
  /** ng in the sample portion before anything is done to it. */
  readonly nativeNg: number;
}

/** The true figures behind the demo's data, for every target and surrogate by every variant. */
export function truth(): readonly Truth[] {
  return variantCodes.flatMap((variant) =>
    demoRecovered.map((analyte) => {
      const extraction = extractionSplit(analyte, variant).collected;
      const steps = {
        extraction: methodFractions[variant].reduce((sum, name) => sum + (extraction[name] ?? 0), 0),
        drying: dryingSplit(analyte, dryingOf[variant]).collected.Extract ?? 0,
        concentration: concentrationSplit(analyte).collected.Extract ?? 0
      };
      const { collected, lost } = procedureSplit(analyte, variant);
      return {
        analyte,
        variant,
        steps,
        signal: analyte.strength,
        method: steps.extraction * steps.drying * steps.concentration,
        fractions: collected,
        lost,
        nativeNg: (analyte.nativeNgPerL * sampleVolumeMl) / 1000
      };
    })
  );
}
