import {
  fraction,
  portions,
  tenth,
  type PlannedExperiment,
  type PlannedFraction,
  type PlannedPortion
} from './planned';
import {
  concentrationSplit,
  dryingSplit,
  methodFractions,
  procedureSplit,
  sampleVolumeMl,
  variantCodes,
  type DryingKind,
  type VariantCode
} from './truth';
import type { FractionKind } from '../../src/lib/domain/vocabulary';

export const spikeNg = 200;
export const surrogateNg = 100;

const inSolvent = {
  medium: 'solvent',
  matrix: null,
  subtract: 'none',
  sampleVolumeMl: null,
  calibration: 0,
  standardsIn: 'vial',
  masked: false,
  injections: 1
} as const;

function dryingExperiment(
  key: string,
  title: string,
  drying: DryingKind,
  own: Pick<PlannedExperiment, 'performedOn' | 'layout' | 'serves'> & { readonly beside: PlannedFraction }
): PlannedExperiment {
  const { beside, ...rest } = own;
  return {
    ...inSolvent,
    ...rest,
    key,
    title,
    stage: 'drying',
    fractions: [fraction('Extract', 'elution', 'method', ['concentration']), beside],
    portions: [...portions(key, 'spiked', 6), ...portions(key, 'method blank', 2)],
    split: (analyte, shifts) => {
      const dried = dryingSplit(analyte, drying).collected;
      const kept = concentrationSplit(analyte, shifts).collected.Extract ?? 0;
      const collected = Object.fromEntries(
        Object.entries(dried).map(([name, share]) => [name, name === 'Aqueous layer' ? share : share * kept])
      );
      return { collected, lost: 1 - Object.values(collected).reduce((sum, share) => sum + share, 0) };
    },
    scatter: { portion: 0.018, substance: 0.022 }
  };
}

function extractionExperiment(
  variant: VariantCode,
  title: string,
  performedOn: string,
  fractions: readonly PlannedFraction[],
  portionsOf: readonly PlannedPortion[]
): PlannedExperiment {
  return {
    key: variant,
    title,
    stage: 'extraction',
    medium: 'sample matrix',
    matrix: 'river-intake water',
    subtract: 'native',
    performedOn,
    calibration: 1,
    standardsIn: 'extract',
    masked: variant === 'B',
    sampleVolumeMl,
    injections: 1,
    layout: 'long',
    serves: [variant],
    fractions,
    portions: portionsOf,
    split: (analyte, shifts) => procedureSplit(analyte, variant, shifts),
    scatter: { portion: 0.022, substance: 0.032 }
  };
}

/** Spiked, unspiked and blank portions of one day or several. */
const series = (key: string, spiked: number) => [
  ...portions(key, 'spiked', spiked),
  ...portions(key, 'unspiked', 3),
  ...portions(key, 'method blank', 2)
];

const eluted = (name: string, kind: FractionKind, variant: VariantCode, how = {}) =>
  fraction(
    name,
    kind,
    methodFractions[variant].includes(name) ? 'method' : 'balance',
    // What cold parting leaves in the water is measured as a fraction of its own: it is not lost downstream as well.
    variant === 'D' ? ['concentration'] : ['drying', 'concentration'],
    how
  );

const [first, second] = ['20 October', '22 October'] as const;
const twice = { dilution: 2 };

/** The work of the demo study in the order it was done, from the detector to the sample. */
export const demoExperiments: readonly PlannedExperiment[] = [
  {
    ...inSolvent,
    key: 'I',
    title: 'Response to solvent standards',
    stage: 'instrument',
    performedOn: '2026-10-05',
    injections: 2,
    layout: 'wide',
    serves: variantCodes,
    fractions: [],
    portions: portions('I', 'solvent standard', 6),
    split: () => ({ collected: { '': 1 }, lost: 0 }),
    scatter: { portion: 0.006, substance: 0.008 }
  },
  {
    ...inSolvent,
    key: 'K',
    title: 'Blowing down from 15 mL to 1 mL',
    stage: 'concentration',
    performedOn: '2026-10-07',
    layout: 'wide',
    serves: variantCodes,
    fractions: [fraction('Extract', 'elution', 'method', [])],
    portions: [...portions('K', 'spiked', 6), ...portions('K', 'method blank', 2)],
    split: concentrationSplit,
    scatter: { portion: 0.014, substance: 0.018 }
  },
  dryingExperiment('T', 'Drying over sodium sulphate', 'sulphate', {
    performedOn: '2026-10-12',
    layout: 'long',
    serves: ['A', 'B', 'C'],
    beside: fraction('Drying-agent rinse', 'drying-agent rinse', 'balance', ['concentration'])
  }),
  dryingExperiment('P', 'Parting off the water in the cold', 'cold parting', {
    performedOn: '2026-10-13',
    layout: 'wide',
    serves: ['D'],
    beside: fraction('Aqueous layer', 'aqueous layer', 'balance', [], { finalVolumeMl: 4 })
  }),
  extractionExperiment(
    'A',
    'Intake water shaken with dichloromethane',
    '2026-10-15',
    [
      eluted('Dichloromethane extract', 'elution', 'A'),
      fraction('Left in the water', 'load effluent', 'balance', [], tenth)
    ],
    series('A', 5)
  ),
  extractionExperiment(
    'B',
    'Intake water on the polymer at pH 2',
    '2026-10-16',
    [eluted('Elution', 'elution', 'B'), fraction('Load effluent', 'load effluent', 'balance', [], tenth)],
    // Acids bring humic matter along at pH 2, so what it does to the signal is measured as well.
    [...series('B', 5), ...portions('B', 'post-extraction spike', 4), ...portions('B', 'solvent standard', 4)]
  ),
  extractionExperiment(
    'C',
    'Intake water on the mixed-mode polymer, two elutions',
    '2026-10-19',
    [
      eluted('First elution', 'elution', 'C'),
      eluted('Second elution', 'second elution', 'C'),
      fraction('Load effluent', 'load effluent', 'balance', [], tenth)
    ],
    series('C', 6)
  ),
  extractionExperiment(
    'D',
    'Intake water on mixed-mode polymer and carbon',
    '2026-10-20',
    [
      eluted('First elution', 'elution', 'D', twice),
      eluted('Second elution', 'second elution', 'D', twice),
      eluted('Carbon cartridge', 'second cartridge', 'D', twice),
      fraction('Aqueous layer', 'aqueous layer', 'balance', [], { finalVolumeMl: 4 }),
      fraction('Load effluent', 'load effluent', 'balance', [], tenth)
    ],
    [
      ...portions('D', 'spiked', 4, first),
      ...portions('D', 'unspiked', 2, first),
      ...portions('D', 'method blank', 1, first),
      ...portions('D', 'spiked', 3, second, 5).map((portion) =>
        portion.number === 6
          ? {
              ...portion,
              mishap: { left: 0.61, cause: 'The bed ran dry while loading; part of the sample went past it.' }
            }
          : portion
      ),
      ...portions('D', 'unspiked', 2, second, 3),
      ...portions('D', 'method blank', 1, second, 2)
    ]
  )
];
