import type { ReportedBasis } from '../../domain/vocabulary';

/** What is expected in a cell, for the sentences of problems. */
export const expectedWords: Readonly<Record<ReportedBasis, string>> = {
  area: 'a peak area',
  vial: 'a concentration in the vial (ng/mL)',
  ng: 'an amount (ng)',
  ng_per_l: 'a concentration in the sample (ng/L)'
};
