import type { Observation } from '../../../src/lib/server/stats/index';

/** Data sets that come with R (package datasets), transcribed; the tests compare against R's own analysis of them. */

/** InsectSprays: counts of insects under sprays A to F. */
export const insectSprays: readonly (readonly number[])[] = [
  [10, 7, 20, 14, 14, 12, 10, 23, 17, 20, 14, 13],
  [11, 17, 21, 11, 16, 14, 17, 17, 19, 21, 7, 13],
  [0, 1, 7, 2, 3, 1, 2, 1, 3, 0, 1, 4],
  [3, 5, 12, 6, 4, 3, 5, 5, 5, 5, 2, 4],
  [3, 5, 3, 5, 3, 6, 1, 1, 3, 2, 6, 4],
  [11, 9, 15, 22, 15, 16, 13, 10, 26, 26, 24, 13]
];

/** PlantGrowth: dried weights, control and two treatments. */
export const plantGrowth: readonly (readonly number[])[] = [
  [4.17, 5.58, 5.18, 6.11, 4.5, 4.61, 5.17, 4.53, 5.33, 5.14],
  [4.81, 4.17, 4.41, 3.59, 5.87, 3.83, 6.03, 4.89, 4.32, 4.69],
  [6.31, 5.12, 5.54, 5.5, 5.37, 5.29, 4.92, 6.15, 5.8, 5.26]
];

/** sleep: extra hours of sleep under two drugs. */
export const sleep: readonly (readonly number[])[] = [
  [0.7, -1.6, -0.2, -1.2, -0.1, 3.4, 3.7, 0.8, 0, 2],
  [1.9, 0.8, 1.1, 0.1, -0.1, 4.4, 5.5, 1.6, 4.6, 3.4]
];

/** ToothGrowth: length by supplement (VC, OJ) and dose (0.5, 1, 2), ten each. */
const toothLengths = [
  4.2, 11.5, 7.3, 5.8, 6.4, 10, 11.2, 11.2, 5.2, 7, 16.5, 16.5, 15.2, 17.3, 22.5, 17.3, 13.6, 14.5, 18.8,
  15.5, 23.6, 18.5, 33.9, 25.5, 26.4, 32.5, 26.7, 21.5, 23.3, 29.5, 15.2, 21.5, 17.6, 9.7, 14.5, 10, 8.2, 9.4,
  16.5, 9.7, 19.7, 23.3, 23.6, 26.4, 20, 25.2, 25.8, 21.2, 14.5, 27.3, 25.5, 26.4, 22.4, 24.5, 24.8, 30.9,
  26.4, 27.3, 29.4, 23
];

export const toothGrowth: readonly Observation[] = toothLengths.map((response, i) => ({
  levels: { supp: i < 30 ? 'VC' : 'OJ', dose: ['0.5', '1', '2'][Math.floor(i / 10) % 3]! },
  response
}));

/** warpbreaks: breaks by wool (A, B) and tension (L, M, H), nine each. */
const breaks = [
  26, 30, 54, 25, 70, 52, 51, 26, 67, 18, 21, 29, 17, 12, 18, 35, 30, 36, 36, 21, 24, 18, 10, 43, 28, 15, 26,
  27, 14, 29, 19, 29, 31, 41, 20, 44, 42, 26, 19, 16, 39, 28, 21, 39, 29, 20, 21, 24, 17, 13, 15, 15, 16, 28
];

export const warpbreaks: readonly Observation[] = breaks.map((response, i) => ({
  levels: { wool: i < 27 ? 'A' : 'B', tension: ['L', 'M', 'H'][Math.floor(i / 9) % 3]! },
  response
}));

/** npk: yield of peas, a 2^3 factorial in six blocks of four with N:P:K confounded (Venables and Ripley). */
const npkPlots: readonly (readonly [
  block: number,
  nitrogen: number,
  phosphate: number,
  potash: number,
  harvest: number
])[] = [
  [1, 0, 1, 1, 49.5],
  [1, 1, 1, 0, 62.8],
  [1, 0, 0, 0, 46.8],
  [1, 1, 0, 1, 57],
  [2, 1, 0, 0, 59.8],
  [2, 1, 1, 1, 58.5],
  [2, 0, 0, 1, 55.5],
  [2, 0, 1, 0, 56],
  [3, 0, 1, 0, 62.8],
  [3, 1, 1, 1, 55.8],
  [3, 1, 0, 0, 69.5],
  [3, 0, 0, 1, 55],
  [4, 1, 0, 0, 62],
  [4, 1, 1, 1, 48.8],
  [4, 0, 0, 1, 45.5],
  [4, 0, 1, 0, 44.2],
  [5, 1, 1, 0, 52],
  [5, 0, 0, 0, 51.5],
  [5, 1, 0, 1, 49.8],
  [5, 0, 1, 1, 48.8],
  [6, 1, 0, 1, 57.2],
  [6, 1, 1, 0, 59],
  [6, 0, 1, 1, 53.2],
  [6, 0, 0, 0, 56]
];

export const npk: readonly Observation[] = npkPlots.map(([block, n, p, k, response]) => ({
  levels: { N: String(n), P: String(p), K: String(k) },
  response,
  block: String(block)
}));
