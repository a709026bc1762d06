import type { StepKind } from '../../src/lib/domain/vocabulary';
import type { VariantCode } from './truth';

export type StageKey = 'instrument' | 'concentration' | 'drying' | 'extraction';

export interface PlannedStep {
  readonly stage: StageKey;
  readonly kind: StepKind;
  readonly instruction: string;
  readonly parameters: {
    readonly ph?: number;
    readonly solvent?: string;
    readonly volumeMl?: number;
    readonly minutes?: number;
    readonly temperatureC?: number;
  };
}

export interface PlannedVariant {
  readonly code: VariantCode;
  readonly name: string;
  readonly description: string;
  readonly steps: readonly PlannedStep[];
}

function step(
  stage: StageKey,
  kind: StepKind,
  instruction: string,
  parameters: PlannedStep['parameters'] = {}
): PlannedStep {
  return { stage, kind, instruction, parameters };
}

const sulphate: readonly PlannedStep[] = [
  step(
    'drying',
    'dry the extract',
    'Pass the extract through 10 g of baked sodium sulphate and rinse with dichloromethane.',
    {
      solvent: 'dichloromethane',
      volumeMl: 10,
      minutes: 10
    }
  )
];
const coldParting: readonly PlannedStep[] = [
  step(
    'drying',
    'dry the extract',
    'Stand the eluates in the cold until the water parts off; draw the organic layer and keep the water layer.',
    {
      minutes: 90,
      temperatureC: -18
    }
  )
];
const finish: readonly PlannedStep[] = [
  step('concentration', 'evaporate', 'Blow down under a gentle stream of nitrogen, never below 1 mL.', {
    minutes: 40,
    temperatureC: 30
  }),
  step('concentration', 'make up to volume', 'Make up to 1 mL with methanol and read the volume.', {
    solvent: 'methanol',
    volumeMl: 1
  }),
  step(
    'instrument',
    'add internal standard',
    'Add 50 ng of each injection internal standard to the whole extract.'
  ),
  step('instrument', 'inject', 'Inject on both columns; read the two runs as one table.', { minutes: 45 })
];

const load = (ph: number) =>
  step(
    'extraction',
    'load',
    `Bring 500 mL of water to pH ${ph}, add the surrogates, load at 8 mL a minute.`,
    {
      ph,
      volumeMl: 500,
      minutes: 65
    }
  );
const condition = (what: string) =>
  step('extraction', 'condition', `Condition ${what} with methanol, then with water; keep it wet.`, {
    solvent: 'methanol',
    volumeMl: 10,
    minutes: 10
  });
const dryBed = step('extraction', 'dry the bed', 'Draw air through the bed.', { minutes: 8 });
const twoElutions: readonly PlannedStep[] = [
  step('extraction', 'elute', 'First elution: methanol and dichloromethane, one to one.', {
    solvent: 'methanol and dichloromethane',
    volumeMl: 10,
    minutes: 10
  }),
  step(
    'extraction',
    'elute',
    'Second elution, into a flask of its own: methanol with 5 % of ammonia, which releases the ions.',
    {
      solvent: 'methanol with ammonia',
      volumeMl: 8,
      minutes: 10
    }
  )
];

/** Four candidate procedures that differ in what matters. Invented for the demo, not a method to follow. */
export const demoVariants: readonly PlannedVariant[] = [
  {
    code: 'A',
    name: 'Liquid–liquid, dichloromethane at pH 2',
    description: 'The way it was done before: two portions of dichloromethane, dried over sodium sulphate.',
    steps: [
      step(
        'extraction',
        'partition',
        'Bring 500 mL of water to pH 2, add the surrogates, shake twice with dichloromethane.',
        {
          ph: 2,
          solvent: 'dichloromethane',
          volumeMl: 120,
          minutes: 40
        }
      ),
      step('extraction', 'combine', 'Combine the two portions.', { minutes: 5 }),
      ...sulphate,
      ...finish
    ]
  },
  {
    code: 'B',
    name: 'Polymer at pH 2, one elution',
    description: 'A polymeric reversed phase in place of the shaking; acids are neutral, bases are charged.',
    steps: [
      condition('the polymer cartridge'),
      load(2),
      dryBed,
      step('extraction', 'elute', 'Elute with methanol and dichloromethane, one to one.', {
        ph: 2,
        solvent: 'methanol and dichloromethane',
        volumeMl: 10,
        minutes: 10
      }),
      ...sulphate,
      ...finish
    ]
  },
  {
    code: 'C',
    name: 'Mixed-mode polymer at pH 7, two elutions',
    description:
      'A polymer with cation exchange holds charged bases; a second elution with ammonia releases them.',
    steps: [condition('the mixed-mode cartridge'), load(7), dryBed, ...twoElutions, ...sulphate, ...finish]
  },
  {
    code: 'D',
    name: 'Mixed-mode polymer and carbon, cold parting',
    description:
      'As C, with a carbon cartridge behind it for what passes, and the water parted off in the cold and measured.',
    steps: [
      condition('the mixed-mode cartridge, and the carbon cartridge behind it,'),
      load(7),
      dryBed,
      ...twoElutions,
      step(
        'extraction',
        'elute',
        'Turn the carbon cartridge round and elute it by itself with dichloromethane.',
        {
          solvent: 'dichloromethane',
          volumeMl: 12,
          minutes: 15
        }
      ),
      ...coldParting,
      ...finish
    ]
  }
];
