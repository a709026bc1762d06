import type { CriterionRule } from '../../src/lib/domain/criteria';

/** A named set of acceptance rules, each with the document it was taken from. */
export interface LibraryCriteriaSet {
  readonly name: string;
  readonly rules: readonly CriterionRule[];
}

const documents = {
  m3535a: { citation: 'EPA SW-846 Method 3535A, revision 1', year: 2007 },
  m8000d: { citation: 'EPA SW-846 Method 8000D, revision 5', year: 2018 },
  m625: { citation: 'EPA Method 625.1 (40 CFR 136, Appendix A)', year: 2016 },
  m539: { citation: 'EPA Method 539', year: 2010 },
  m525: { citation: 'EPA Method 525.3', year: 2012 },
  residues: { citation: 'SANTE/11312/2021, version 2', year: 2021 }
} as const;

type Limits = Pick<CriterionRule, 'low' | 'high'>;

function rule(
  type: CriterionRule['type'],
  limits: Limits,
  document: keyof typeof documents,
  section: string | null,
  note: string | null = null,
  standing: 'seen' | 'memory' = 'seen'
): CriterionRule {
  const { citation, year } = documents[document];
  const unit = type === 'minimum preparations' ? 'count' : type === 'determination coefficient' ? '1' : '%';
  return {
    type,
    ...limits,
    unit,
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

const ownRule = (type: CriterionRule['type'], limits: Limits, note: string | null = null): CriterionRule => ({
  type,
  ...limits,
  unit: type === 'minimum preparations' ? 'count' : '%',
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
const meanHeldLikeSingles = (limits: Limits): CriterionRule =>
  ownRule(
    'mean recovery',
    limits,
    'The document holds single samples to these limits. Holding the mean to the same ones is a choice of the lab.'
  );

/** The calibration rules of 8000D, which other methods of its series refer to. */
const calibration8000: readonly CriterionRule[] = [
  rule('response factor deviation', atMost(20), 'm8000d', '11.4 to 11.7'),
  rule('determination coefficient', atLeast(0.99), 'm8000d', '11.4 to 11.7', 'For a fitted line or curve.'),
  rule('calibration error', atMost(30), 'm8000d', '11.5.4.1', 'Of every level, back-calculated.'),
  rule(
    'calibration error at the lowest level',
    atMost(50),
    'm8000d',
    '11.5.4.1',
    'May be accepted at the lowest level.'
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
    ...calibration8000
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
      ...calibration8000
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
        'determination coefficient',
        atLeast(0.92),
        'm625',
        null,
        'Of a weighted line; stated as above 0.920.'
      )
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
      )
    ]
  },
  {
    name: 'Initial demonstration of EPA 525.3 (from memory)',
    rules: [
      rule('mean recovery', between(70, 130), 'm525', null, fromMemory, 'memory'),
      rule('relative standard deviation', atMost(20), 'm525', null, fromMemory, 'memory'),
      rule('surrogate recovery', between(70, 130), 'm525', null, fromMemory, 'memory')
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
