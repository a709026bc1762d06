import { documents, fromMemory, type SourcedRange } from './evidence';

/** What a bed is made of, as far as the estimates tell kinds apart. */
export const sorbentKinds = ['c18', 'polymer', 'ion-exchange'] as const;
export type SorbentKind = (typeof sorbentKinds)[number];
/** Those that hold what is neutral. */
export const reversedPhases = ['c18', 'polymer'] as const;
export type ReversedPhase = (typeof reversedPhases)[number];

/** pH that a sorbent stands. A polymer's own sheet says more than this does. */
export const workingRanges: Readonly<Record<ReversedPhase, SourcedRange>> = {
  // 4.3: the silica hydrolyses below pH 2 and above pH 9.
  c18: { low: 2, high: 9, ...documents.solidPhase('4.3') },
  polymer: { low: 1, high: 13, ...fromMemory('the sheet of the sorbent decides') }
};

/** Hold-up volume per mass of bed, µL/mg. Known for C18 silica only and taken for polymers too. */
export const holdUpPerMass: SourcedRange = {
  low: 1.2,
  high: 1.2,
  ...fromMemory('C18 silica, 120 µL per 100 mg')
};

/** log k_w − log Kow: what water leaves on the bed, against what octanol would take. */
export const retentionOverKow: Readonly<Record<ReversedPhase, SourcedRange>> = {
  c18: { low: -0.5, high: 0.5, ...fromMemory('log k about log Kow ± 0.5 on C18') },
  polymer: { low: 0.5, high: 2, ...fromMemory('1 to 1.5 log units more than on C18') }
};

/** Plates of a cartridge; a disk has few. */
export const cartridgePlates: SourcedRange = { low: 5, high: 30, ...fromMemory('cartridges') };

/** Share of the bed mass that can be held, in percent; for ion exchange meq per g. */
export const capacities: Readonly<Record<SorbentKind, SourcedRange>> = {
  c18: { low: 1, high: 5, ...fromMemory('silica C18, percent of the bed mass') },
  polymer: { low: 10, high: 15, ...fromMemory('polymer, percent of the bed mass') },
  'ion-exchange': { low: 0.5, high: 1, ...fromMemory('meq per g of exchanger') }
};
