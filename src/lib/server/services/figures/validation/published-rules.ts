import type { RuleView } from '../../../../views/findings';

/** Rules of published procedures that a validation is held against or shown beside, each with its own citation. */
function published(
  what: string,
  limits: string,
  citation: string,
  standing: RuleView['standing'],
  note: string | null = null
): RuleView {
  return { what, limits, citation, standing, note };
}

const m539 = 'EPA Method 539 (2010)';
const mdl = '40 CFR 136, Appendix B, revision 2 (EPA 821-R-16-006, 2016)';

export const publishedRules = {
  demonstration: [
    published(
      'Initial demonstration',
      '4 to 7 preparations at mid range, RSD at most 20 %, mean within 30 % of the amount added',
      `${m539}, Table 11`,
      'seen'
    ),
    published(
      'Initial demonstration',
      '4 control samples in reagent water',
      'EPA Method 625.1 (2016), 8.2',
      'seen'
    )
  ],
  confirmation: published(
    'Quantitation limit',
    '7 preparations at the limit, mean ± half-range within 50 to 150 %',
    `${m539}, Table 11`,
    'seen',
    'The half-range is 3.963 s at seven preparations; at another number its general form is used.'
  ),
  detection: [
    published('Detection limit', 'the larger of MDLs and MDLb', mdl, 'seen'),
    published(
      'Preparations',
      'at least 7 spiked and 7 method blanks, in at least 3 batches on at least 3 dates, spiked at 2 to 10 times the estimated limit, every spiked result above zero',
      mdl,
      'memory',
      'Partly from a summary of the procedure: verify in the document before use.'
    )
  ],
  fromCalibration: published(
    'Limits of a calibration line',
    '3.3 and 10 times the SD of the response over the slope',
    'ICH Q2(R2) (2023)',
    'memory'
  ),
  blanks: published(
    'Method blank',
    'below a third of the reporting limit',
    `${m539}, Table 12`,
    'seen',
    'Held against the level spiked in the quantitation-limit part.'
  ),
  nativeAbove: published(
    'Native amount',
    'above the spike: watch; above four times the spike: not assessable',
    'common practice, no source',
    'own'
  ),
  ownLimits: [
    published(
      "Limits of the lab's own",
      'mean ± 3 s',
      'EPA SW-846 Method 8000D, revision 5 (2018), 9.6.2',
      'seen'
    ),
    published(
      "Limits of the lab's own",
      'from at least 20 results on',
      'EPA Method 625.1 (2016), 8.3.4 and 8.4.5',
      'seen'
    ),
    published('Warning', 'mean ± 2 s', 'common practice, no source', 'own')
  ],
  duplicates: published(
    'Difference of duplicates',
    'RPD = 200 |a − b|/(a + b), on concentrations',
    'EPA Method 625.1 (2016), 8.3; SW-846 Method 8000D, 9.6.3',
    'seen'
  ),
  matrix: published(
    'Matrix effect',
    'to be looked at beyond ± 20 %',
    'SANTE/11312/2021, version 2',
    'memory'
  ),
  horwitz: published(
    'Horwitz',
    'predicted RSD = 2 C^−0.1505 %, C the mass fraction',
    'W. Horwitz, Anal. Chem. 54 (1982) 67A',
    'memory',
    'It predicts what laboratories differ by, down to about 1 µg/kg.'
  )
} as const;
