import { portions, type PlannedPortion } from './planned';
import { demoPanel, type DemoAnalyte } from './panel';
import type { Medium } from '../../src/lib/domain/stages';
import type { Subtraction } from '../../src/lib/domain/vocabulary';

export const lowLevelStudyCode = 'TARROW-2';

/** What the two-elution procedure brings back at all, and two that it does not bring back well. */
const targets = [
  'Atenolol',
  'Metoprolol',
  'Propranolol',
  'Trimethoprim',
  'Aniline',
  '4-Chloroaniline',
  '1H-Benzotriazole',
  'Caffeine',
  'Carbamazepine',
  'Atrazine',
  'Diuron',
  'Dimethoate',
  'Metolachlor',
  'Ibuprofen',
  'Diclofenac',
  'Phenol',
  '4-Nitrophenol',
  'Bisphenol A',
  'Naphthalene'
];

export const lowLevelPanel: readonly DemoAnalyte[] = demoPanel.filter(
  ({ name, role }) => role !== 'target' || targets.includes(name)
);
export const lowLevelRecovered: readonly DemoAnalyte[] = lowLevelPanel.filter(
  ({ role }) => role !== 'injection internal standard'
);

export const lowSampleVolumeMl = 500;
/** 10 ng/L, 200 ng/L, and what the surrogates and injection standards are added at. */
export const lowSpikeNg = 5;
export const midSpikeNg = 100;
export const lowSurrogateNg = 50;
export const lowStandardNg = 50;
export const lowStandardNgPerMl = 50;
export const lowLevelsNgPerMl: readonly number[] = [0.5, 1, 2, 5, 20, 50, 100, 200, 400];
export const lowLevelLabel = (level: number): string => `LOW ${level + 1}`;

/** ng that the laboratory adds to every portion, beside what the panel says. */
export const lowContaminationNg: Readonly<Record<string, number>> = { Caffeine: 0.75 };

export interface LowLevelExperiment {
  readonly key: string;
  readonly title: string;
  readonly medium: Medium;
  readonly matrix: string;
  readonly subtract: Subtraction;
  readonly performedOn: string;
  readonly spikeNg: number;
  readonly portions: readonly PlannedPortion[];
  /** Labels of portions whose surrogates were pipetted short, with what went in of them. */
  readonly shortSurrogates: Readonly<Record<string, number>>;
}

const water = { medium: 'reagent water', matrix: 'reagent water' } as const;

function lowBatch(
  key: string,
  performedOn: string,
  own: Partial<LowLevelExperiment> = {}
): LowLevelExperiment {
  return {
    ...water,
    key,
    title: `Low level in reagent water, batch ${key.slice(1)}`,
    subtract: 'method blank',
    performedOn,
    spikeNg: lowSpikeNg,
    portions: [...portions(key, 'spiked', 3), ...portions(key, 'method blank', 3)],
    shortSurrogates: {},
    ...own
  };
}

const spilled = 'Part of the extract was spilled when it was made up to volume.';

/** The work of the low-level study in the order it was done. */
export const lowLevelExperiments: readonly LowLevelExperiment[] = [
  {
    ...water,
    key: 'V',
    title: 'Initial demonstration in reagent water',
    subtract: 'none',
    performedOn: '2026-11-09',
    spikeNg: midSpikeNg,
    portions: [...portions('V', 'spiked', 6), ...portions('V', 'method blank', 2)],
    shortSurrogates: {}
  },
  lowBatch('W1', '2026-11-10'),
  lowBatch('W2', '2026-11-12', { shortSurrogates: { 'W2-B3': 0.62 } }),
  lowBatch('W3', '2026-11-16', {
    portions: [
      ...portions('W3', 'spiked', 3),
      ...portions('W3', 'method blank', 4).map((portion) =>
        portion.number === 2 ? { ...portion, mishap: { left: 0.72, cause: spilled } } : portion
      )
    ]
  }),
  {
    key: 'X',
    title: 'Matrix spikes in intake water',
    medium: 'sample matrix',
    matrix: 'river-intake water',
    subtract: 'native',
    performedOn: '2026-11-18',
    spikeNg: midSpikeNg,
    portions: [
      ...portions('X', 'spiked', 4),
      ...portions('X', 'unspiked', 3),
      ...portions('X', 'method blank', 2),
      ...portions('X', 'post-extraction spike', 3),
      ...portions('X', 'solvent standard', 3)
    ],
    shortSurrogates: {}
  }
];
