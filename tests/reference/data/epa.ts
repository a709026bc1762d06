/** Published data of the United States Environmental Protection Agency, transcribed; sources beside each. */

/** Draft SPE method for 6PPD-quinone, Research Summary (Nov 2023), Table 5-2: three studies of 7 replicates at 2.0 ng/L. */
export const quinoneStudies = [
  {
    values: [2.07, 2.0, 2.03, 2.34, 2.1, 2.32, 2.23],
    published: { mean: 2.16, sd: 0.137, mdl: 0.43 },
    fromTheData: { sd: 0.139625, mdl: 0.4388 }
  },
  {
    values: [2.34, 2.56, 2.07, 2.17, 2.13, 2.4, 2.03],
    published: { mean: 2.25, sd: 0.195, mdl: 0.614 },
    fromTheData: { sd: 0.194911, mdl: 0.6125 }
  },
  {
    values: [2.3, 2.05, 1.96, 2.27, 2.07, 2.32, 2.04],
    published: { mean: 2.16, sd: 0.15, mdl: 0.471 },
    fromTheData: { sd: 0.147293, mdl: 0.4629 }
  }
] as const;

/** Adsorbable organic fluorine, single-laboratory validation report (April 2022), Table 5-1, µg F/L. */
export const fluorine = {
  blanks: [0.61, 0.31, 1.44, 0.09, 0.06, 0.43, 0.25],
  spikedAt5: [4.45, 4.74, 5.31, 4.66, 4.69, 6.23, 3.72],
  spikedAt8: [7.85, 8.84, 7.28, 6.32, 7.18, 6.61, 6.97]
} as const;

/** Same report, Table 6-1: recoveries in percent of four spiked reagent waters. */
export const fluorineRecoveries = [
  { name: 'mixed', values: [73.4, 92.9, 71.7, 77.5], mean: 78.9, rsd: 12.2 },
  { name: 'PFHxS', values: [110.0, 94.1, 100.2, 94.2], mean: 99.6, rsd: 7.5 },
  { name: 'fipronil', values: [105.7, 104.5, 100.0, 99.6], mean: 102.5, rsd: 3.0 }
] as const;

/**
 * Same report, Appendix F: two sorbent beds in series, ng F on the top and bottom bed, blank beds, and the published recovery and
 * breakthrough in percent.
 */
export const twoBeds = [
  {
    id: 'PFHxS IPR-1',
    spike: 1547,
    beds: [1647.8, 114.6],
    blanks: [5.2, 55.7],
    breakthrough: 3.5,
    recovery: 110.0
  },
  {
    id: 'PFHxS IPR-3',
    spike: 1547,
    beds: [1515, 95.8],
    blanks: [5.2, 55.7],
    breakthrough: 2.6,
    recovery: 100.2
  },
  {
    id: 'PFHxS IPR-4',
    spike: 1547,
    beds: [1425.6, 92.2],
    blanks: [5.2, 55.7],
    breakthrough: 2.5,
    recovery: 94.2
  },
  {
    id: 'PFHxS IPR-2',
    spike: 1547,
    beds: [1423.6, 41.0],
    blanks: [9.0, 0],
    breakthrough: 2.8,
    recovery: 94.1
  },
  {
    id: '30PAR IPR-1',
    spike: 1530,
    beds: [1087.5, 45.2],
    blanks: [9.0, 0],
    breakthrough: 4.0,
    recovery: 73.4
  },
  {
    id: '30PAR IPR-2',
    spike: 1530,
    beds: [1098.2, 332.9],
    blanks: [9.0, 0],
    breakthrough: 23.4,
    recovery: 92.9
  }
] as const;

/** Method 525.2, Table 3, a few rows: spike, mean found, RSD, accuracy and detection limit of 8 replicates, µg/L and percent. */
export const method525 = [
  { name: 'acenaphthylene', spike: 0.5, mean: 0.45, rsd: 8.2, accuracy: 91, mdl: 0.11 },
  { name: 'alachlor', spike: 0.5, mean: 0.47, rsd: 12, accuracy: 93, mdl: 0.16 },
  { name: 'anthracene', spike: 0.5, mean: 0.53, rsd: 4.3, accuracy: 106, mdl: 0.068 },
  { name: 'atrazine', spike: 0.5, mean: 0.54, rsd: 4.8, accuracy: 109, mdl: 0.078 },
  { name: 'benz[a]anthracene', spike: 0.5, mean: 0.41, rsd: 16, accuracy: 82, mdl: 0.2 },
  { name: 'bromacil', spike: 0.5, mean: 0.54, rsd: 6.4, accuracy: 108, mdl: 0.1 },
  { name: 'chlorobenzilate', spike: 5, mean: 6.5, rsd: 6.9, accuracy: 130, mdl: 1.3 },
  { name: 'fluorene', spike: 0.5, mean: 0.46, rsd: 4.2, accuracy: 93, mdl: 0.059 }
] as const;
