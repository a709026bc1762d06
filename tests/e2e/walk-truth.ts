/*
 * What is true of the invented samples of the walk: the ng of each analyte in each fraction, from which areas are made,
 * and the figures that follow from them by arithmetic that anybody can repeat with a pencil.
 *
 * Spiked: 100 ng of each target, 80 ng of the surrogate. Percent of the spike are therefore ng for the targets.
 */

export const analytes = ['Atrazine', 'Carbamazepine', 'Atrazine-d5'] as const;
export type Analyte = (typeof analytes)[number];
export const standard = 'Carbamazepine-d10';
/** Of the internal standard, in every vial and every level. */
export const standardNgPerMl = 50;
export const levelsNgPerMl = [0.25, 1, 5, 20, 60, 120] as const;

/**
 * The detector. Atrazine is read externally: area = 500 + 1000 x. The others are read against the standard: area = slope · x/50 · area of
 * the standard, slopes 2 and 1.5, x in ng/mL.
 */
export function areaOf(analyte: Analyte, ngPerMl: number, standardArea: number): number {
  if (analyte === 'Atrazine') return 500 + 1000 * ngPerMl;
  return (analyte === 'Carbamazepine' ? 2 : 1.5) * (ngPerMl / standardNgPerMl) * standardArea;
}

/** No two vials get the same amount of signal from the standard. */
export const standardArea = (vial: number): number => 40_000 + 500 * (vial % 7);

type Amounts = Readonly<Record<Analyte, number>>;
export const amounts = (atrazine: number, carbamazepine: number, surrogate: number): Amounts => ({
  Atrazine: atrazine,
  Carbamazepine: carbamazepine,
  'Atrazine-d5': surrogate
});

/** The extraction: two elutions that end in the extract, and the aqueous layer, which was only measured. */
export const extractFractions = ['Elution', 'Second elution', 'Aqueous layer'] as const;
export const extractVolumeMl = 0.5;
export const extractDilution = 2;

const native = [amounts(5, 10, 72), amounts(1, 1, 2), amounts(1, 2, 4)] as const;
/** ng in each fraction, in the order of `extractFractions`; native amounts are in the spiked portions too. */
export const extraction: Readonly<Record<string, readonly Amounts[]>> = {
  S1: [amounts(95, 86, 72), amounts(3, 5, 2), amounts(3, 11, 4)],
  S2: [amounts(96, 88, 72), amounts(3, 5, 2), amounts(3, 9, 4)],
  S3: [amounts(97, 90, 72), amounts(3, 5, 2), amounts(3, 7, 4)],
  S4: [amounts(98, 92, 72), amounts(3, 5, 2), amounts(3, 5, 4)],
  // The bed ran dry: half of everything went by.
  S5: [amounts(50, 46, 36), amounts(3, 5, 2), amounts(3, 5, 4)],
  U1: native,
  U2: native
};

/** One fraction, 1 mL, undiluted: ng of the three portions spiked before drying and before concentration. */
export const drying: readonly Amounts[] = [amounts(95, 89, 76), amounts(96, 90, 76), amounts(97, 91, 76)];
export const concentration: readonly Amounts[] = [
  amounts(97, 95, 78),
  amounts(98, 96, 78),
  amounts(99, 97, 78)
];
/** Three solvent standards of the same amounts. */
export const instrument: readonly Amounts[] = [
  amounts(99, 99, 80),
  amounts(100, 100, 80),
  amounts(101, 101, 80)
];

/**
 * Carbamazepine. Net of the native 10, 1 and 2 ng the two elutions hold 76 + 4, 78 + 4, 80 + 4, 82 + 4 and 36 + 4 %:
 * 80, 82, 84, 86 and 40.
 */
export const byHand = {
  /** 372 / 5 = 74.4; deviations 5.6, 7.6, 9.6, 11.6, -34.4: sum of squares 1499.2, / 4 = 374.8, root 19.36; 19.36 / 74.4 = 26.0 %. */
  all: { n: '5', mean: '74.4', rsd: '26.0' },
  /** 332 / 4 = 83; deviations -3, -1, 1, 3: 20 / 3 = 6.667, root 2.582; 2.582 / 83 = 3.1 %; t(0.975; 3) = 3.182 (printed tables): 3.182 · 2.582 / 2 = 4.1. */
  withoutS5: { n: '4', mean: '83.0', rsd: '3.1', halfWidth: '4.1' },
  /** The aqueous layer, net of 2: 9, 7, 5, 3; mean 6. In all 89, four times over. */
  aqueous: '6.0',
  total: '89.0',
  /** What is in the elutions passed drying and concentration, which let 90 % through: 83 / 0.9 - 83 = 9.2 lost; 100 - 89 - 9.2 = 1.8 open. */
  downstream: '9.2',
  open: '1.8',
  /**
   * Of 100 in the sample: 83 / 90 = 0.9222 pass the extraction, so that it takes 7.8; 83 / 96 = 0.8646 are left after drying, which takes
   * 92.22 - 86.46 = 5.8; concentration takes 86.46 - 83 = 3.5.
   */
  extractionTakes: '7.8',
  dryingTakes: '5.8',
  concentrationTakes: '3.5',
  /** Surrogate: (72 + 2) / 80 = 92.5 % in each portion that counts. */
  surrogate: '92.5'
} as const;
