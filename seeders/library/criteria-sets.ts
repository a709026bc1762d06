import type { CriterionRule, WrittenRule, WrittenRuleType } from '../../src/lib/domain/criteria';

/** A named set of acceptance rules, each with the document it was taken from. */
export interface LibraryCriteriaSet {
  readonly name: string;
  readonly rules: readonly WrittenRule[];
}

const documents = {
  m3535a: { citation: 'EPA SW-846 Method 3535A, revision 1', year: 2007 },
  m8000d: { citation: 'EPA SW-846 Method 8000D, revision 5', year: 2018 },
  m8270e: { citation: 'EPA SW-846 Method 8270E, revision 6', year: 2018 },
  m625: { citation: 'EPA Method 625.1 (40 CFR 136, Appendix A)', year: 2016 },
  m539: { citation: 'EPA Method 539', year: 2010 },
  m525: { citation: 'EPA Method 525.3', year: 2012 },
  residues: { citation: 'SANTE/11312/2021, version 2', year: 2021 }
} as const;

type Limits = Pick<CriterionRule, 'low' | 'high'>;

const units: Readonly<Partial<Record<WrittenRuleType, CriterionRule['unit']>>> = {
  'minimum preparations': 'count',
  'minimum levels': 'count',
  'minimum levels of a curve': 'count',
  'determination coefficient': '1',
  'time between checks': 'h'
};

function rule(
  type: WrittenRuleType,
  limits: Limits,
  document: keyof typeof documents,
  section: string | null,
  note: string | null = null,
  standing: 'seen' | 'memory' = 'seen'
): WrittenRule {
  const { citation, year } = documents[document];
  return {
    type,
    ...limits,
    unit: units[type] ?? '%',
    citation: section === null ? citation : `${citation}, ${section}`,
    year,
    standing,
    note
  };
}

const between = (low: number, high: number): Limits => ({ low, high });
const atMost = (high: number): Limits => ({ low: null, high });
const atLeast = (low: number): Limits => ({ low, high: null });
const fromMemory = 'From memory: verify in the document before use.';

const ownRule = (type: WrittenRuleType, limits: Limits, note: string | null = null): WrittenRule => ({
  type,
  ...limits,
  unit: units[type] ?? '%',
  citation: "the lab's own",
  year: null,
  standing: 'own',
  note
});

const example3535 = rule(
  'mean recovery',
  between(70, 130),
  'm3535a',
  '1.2',
  'Given there as an example of adequate performance, beside levels that meet project-specific criteria. To be shown in the real matrices; reagent water alone does not suffice.'
);

/** The documents hold single control samples to these limits; what a mean is held to is then the lab's own choice. */
const meanHeldLikeSingles = (limits: Limits): WrittenRule =>
  ownRule(
    'mean recovery',
    limits,
    'The document holds single samples to these limits. Holding the mean to the same ones is a choice of the lab.'
  );

/** The calibration rules of 8000D, which other methods of its series refer to. */
const calibration8000: readonly WrittenRule[] = [
  rule('response factor deviation', atMost(20), 'm8000d', '11.4 to 11.7'),
  rule(
    'relative standard error',
    atMost(20),
    'm8000d',
    '11.4 to 11.7',
    'The limit for the RSD, where a method sets no other.'
  ),
  rule('determination coefficient', atLeast(0.99), 'm8000d', '11.4 to 11.7', 'For a fitted line or curve.'),
  rule(
    'minimum levels',
    atLeast(5),
    'm8000d',
    '11.4 to 11.7',
    'Of an average response factor or a straight line.'
  ),
  rule('minimum levels of a curve', atLeast(6), 'm8000d', '11.4 to 11.7', 'Of a curve of second order.'),
  rule('calibration error', atMost(30), 'm8000d', '11.5.4.1', 'Of every level, back-calculated.'),
  rule(
    'calibration error at the lowest level',
    atMost(50),
    'm8000d',
    '11.5.4.1',
    'May be accepted at the lowest level.'
  )
];

/** The rules of 8270E for what is run in a sequence beside the levels and the extracts. */
const sequence8270: readonly WrittenRule[] = [
  rule('second-source check', between(70, 130), 'm8270e', '11.3 to 11.5'),
  rule(
    'continuing check',
    between(80, 120),
    'm8270e',
    '11.3 to 11.5',
    'Within 20 %: the difference of a response factor from its mean, or the drift of a concentration.'
  ),
  rule('time between checks', atMost(12), 'm8270e', '11.3 to 11.5'),
  rule(
    'analytes failing a check',
    atMost(20),
    'm8270e',
    '11.3 to 11.5',
    'Beyond that, action is due before samples are run. 8000D has 10 %, and a new calibration.'
  ),
  rule(
    'internal standard area',
    between(50, 200),
    'm8270e',
    '11.3 to 11.5',
    'Of the middle level or the mean of the calibration. In samples the latest continuing check may stand in its place.'
  )
];

/** What the demo lab judges by: a published example for the mean, its own rules where that is silent. */
export const workingCriteria: LibraryCriteriaSet = {
  name: 'Working criteria for extraction studies',
  rules: [
    example3535,
    ownRule('relative standard deviation', atMost(20)),
    ownRule('minimum preparations', atLeast(5)),
    rule(
      'surrogate recovery',
      between(60, 140),
      'm625',
      '8.4.5',
      'Interim limits there, for surrogates that have none of their own; at least 80 % of the surrogates must meet them.'
    ),
    ...calibration8000,
    ...sequence8270,
    ownRule('instrument blank', atMost(50), 'Half of the lowest level: common practice, no source.')
  ]
};

/** What the library of a new lab begins with. */
export const libraryCriteriaSets: readonly LibraryCriteriaSet[] = [
  workingCriteria,
  { name: 'Example of EPA 3535A', rules: [example3535] },
  {
    name: 'Interim limits of EPA 8000D',
    rules: [
      meanHeldLikeSingles(between(70, 130)),
      rule(
        'individual recovery',
        between(70, 130),
        'm8000d',
        '9.4',
        'Interim limits of laboratory control samples, until the lab has limits of its own.'
      ),
      ...calibration8000,
      rule(
        'continuing check',
        between(80, 120),
        'm8000d',
        '11.4 to 11.7',
        'Within 20 %, as difference or drift.'
      ),
      rule('analytes failing a check', atMost(10), 'm8000d', '11.4 to 11.7', 'Beyond that, calibrate anew.')
    ]
  },
  {
    name: 'Interim limits of EPA 625.1',
    rules: [
      meanHeldLikeSingles(between(60, 140)),
      rule(
        'individual recovery',
        between(60, 140),
        'm625',
        '8.4.5',
        'Interim, for analytes that have no limit.'
      ),
      rule(
        'surrogate recovery',
        between(60, 140),
        'm625',
        '8.4.5',
        'At least 80 % of the surrogates must meet it.'
      ),
      rule('minimum preparations', atLeast(4), 'm625', '8.2', 'Four control samples in reagent water.'),
      rule('response factor deviation', atMost(35), 'm625', null, 'Stated there as below 35 %.'),
      rule(
        'relative standard error',
        atMost(35),
        'm625',
        null,
        'Stated there as below 35 %, in place of the RSD.'
      ),
      rule(
        'determination coefficient',
        atLeast(0.92),
        'm625',
        null,
        'Of a weighted line; stated as above 0.920.'
      ),
      rule('internal standard area', between(50, 200), 'm625', null)
    ]
  },
  {
    name: 'Initial demonstration of EPA 539',
    rules: [
      rule('mean recovery', between(70, 130), 'm539', 'Table 11', 'Within 30 % of the fortified amount.'),
      rule('relative standard deviation', atMost(20), 'm539', 'Table 11'),
      rule(
        'minimum preparations',
        atLeast(4),
        'm539',
        'Table 11',
        'Four to seven fortified blanks, mid-range.'
      ),
      rule('surrogate recovery', between(70, 130), 'm539', 'Table 12'),
      rule(
        'duplicate difference',
        atMost(30),
        'm539',
        'Table 12',
        '50 % at or below twice the reporting level.'
      ),
      rule('second-source check', between(70, 130), 'm539', 'Table 12', 'The quality control sample.'),
      rule('continuing check', between(70, 130), 'm539', 'Table 12'),
      rule('continuing check at the lowest level', between(50, 150), 'm539', 'Table 12'),
      rule('internal standard area', between(50, 150), 'm539', 'Table 12', 'Of the mean of the calibration.')
    ]
  },
  {
    name: 'Initial demonstration of EPA 525.3 (from memory)',
    rules: [
      rule('mean recovery', between(70, 130), 'm525', null, fromMemory, 'memory'),
      rule('relative standard deviation', atMost(20), 'm525', null, fromMemory, 'memory'),
      rule('surrogate recovery', between(70, 130), 'm525', null, fromMemory, 'memory'),
      rule('internal standard area', between(50, 150), 'm525', null, fromMemory, 'memory'),
      rule(
        'internal standard area against the latest check',
        between(70, 130),
        'm525',
        null,
        fromMemory,
        'memory'
      )
    ]
  },
  {
    name: 'Pesticide residues, SANTE/11312/2021 (from memory)',
    rules: [
      rule('mean recovery', between(70, 120), 'residues', null, fromMemory, 'memory'),
      rule('relative standard deviation', atMost(20), 'residues', null, fromMemory, 'memory'),
      rule('minimum preparations', atLeast(5), 'residues', null, fromMemory, 'memory'),
      rule('individual recovery', between(60, 140), 'residues', null, fromMemory, 'memory')
    ]
  }
];
