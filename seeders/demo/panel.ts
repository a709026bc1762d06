import type { PanelRole } from '../../src/lib/domain/vocabulary';

/** One substance of the demo study, with what only the generator knows of it. Every figure is invented. */
export interface DemoAnalyte {
  readonly name: string;
  readonly role: PanelRole;
  /** Injection standard its area is divided by; null: calibrated externally. */
  readonly internalStandard: string | null;
  /** In the water of the intake, ng/L. */
  readonly nativeNgPerL: number;
  /** What the laboratory itself adds to every portion, ng. */
  readonly contaminationNg: number;
  /** Area for 1 ng/mL in the vial. */
  readonly response: number;
  /** How much more than its neighbours it scatters. */
  readonly unrest: number;
  /** True strength of the spiking solution over its label. */
  readonly strength: number;
  /** The unlabelled compound whose chemistry it has. */
  readonly behavesAs: string;
  /** Log units by which the polymer holds it better than its log D says. */
  readonly polymerExtra: number;
  /** Log units by which dichloromethane takes it up better than octanol does. */
  readonly dichloromethaneExtra: number;
  /** Share that the carbon cartridge holds of what reaches it. */
  readonly carbonHeld: number;
  /** What humic matter in an extract made at pH 2 leaves of its signal: below 1 masked, above 1 raised. */
  readonly masking: number;
}

const bases = 'Carbamazepine-d10';
const phenols = '2,4-Dichlorophenol-d3';
const volatiles = 'Phenanthrene-d10';

type Own = Partial<Omit<DemoAnalyte, 'name' | 'role' | 'internalStandard' | 'response' | 'strength'>>;

function entry(
  role: PanelRole,
  name: string,
  internalStandard: string | null,
  response: number,
  strength: number,
  own: Own = {}
): DemoAnalyte {
  return {
    name,
    role,
    internalStandard,
    response,
    strength,
    nativeNgPerL: 0,
    contaminationNg: 0,
    unrest: 1,
    behavesAs: name,
    polymerExtra: 0,
    dichloromethaneExtra: 0,
    carbonHeld: 0.96,
    masking: 1,
    ...own
  };
}

const target = (name: string, standard: string | null, response: number, strength: number, own: Own = {}) =>
  entry('target', name, standard, response, strength, own);
const surrogate = (name: string, standard: string, response: number, strength: number, behavesAs: string) =>
  entry('surrogate', name, standard, response, strength, { behavesAs });
const injected = (name: string, response: number, behavesAs: string) =>
  entry('injection internal standard', name, null, response, 1, { behavesAs });

export const demoPanel: readonly DemoAnalyte[] = [
  target('Metformin', null, 2140, 0.994, { nativeNgPerL: 150, carbonHeld: 0.45 }),
  target('Gabapentin', null, 1780, 1.011, { nativeNgPerL: 64, carbonHeld: 0 }),
  target('Atenolol', bases, 3920, 1.006, { nativeNgPerL: 22, polymerExtra: 0.9, dichloromethaneExtra: 0.4 }),
  target('Metoprolol', bases, 5260, 0.991, { nativeNgPerL: 58, polymerExtra: 0.3 }),
  target('Propranolol', bases, 6810, 1.004, { nativeNgPerL: 9 }),
  target('Trimethoprim', bases, 4470, 1.009, {
    nativeNgPerL: 18,
    polymerExtra: 0.9,
    dichloromethaneExtra: 0.5
  }),
  target('Pyridine', volatiles, 960, 0.987, { unrest: 1.4, carbonHeld: 0.9 }),
  target('Aniline', bases, 1520, 1.013, { unrest: 1.2, polymerExtra: 0.3 }),
  target('4-Chloroaniline', bases, 2280, 0.996, { unrest: 1.1, polymerExtra: 0.2 }),
  target('1H-Benzotriazole', bases, 2650, 1.002, { nativeNgPerL: 465, polymerExtra: 0.9, masking: 0.92 }),
  target('Caffeine', bases, 3310, 0.998, { nativeNgPerL: 118, polymerExtra: 1.1, dichloromethaneExtra: 1.3 }),
  target('Carbamazepine', bases, 7150, 1.005, { nativeNgPerL: 73 }),
  target('Atrazine', bases, 5880, 0.993, { nativeNgPerL: 12, masking: 1.06 }),
  target('Diuron', bases, 4940, 1.008, { nativeNgPerL: 16 }),
  target('Dimethoate', bases, 3080, 0.99, { polymerExtra: 0.9, dichloromethaneExtra: 0.7 }),
  target('Metolachlor', bases, 6340, 1.003, { nativeNgPerL: 21 }),
  target('Sulfamethoxazole', bases, 3760, 1.01, { nativeNgPerL: 34, polymerExtra: 0.8, masking: 0.81 }),
  target('Mecoprop', phenols, 2970, 0.997, { nativeNgPerL: 27, masking: 0.88 }),
  target('2,4-D', phenols, 2520, 1.001, { nativeNgPerL: 8, masking: 0.86 }),
  target('Ibuprofen', phenols, 1890, 0.995, { nativeNgPerL: 44 }),
  target('Diclofenac', phenols, 3450, 1.007, { nativeNgPerL: 81, masking: 0.84 }),
  target('Phenol', phenols, 1260, 1.012, { contaminationNg: 1.6, polymerExtra: 0.3 }),
  target('4-Nitrophenol', phenols, 2060, 0.992, { nativeNgPerL: 6, polymerExtra: 0.5, masking: 0.73 }),
  target('Bisphenol A', phenols, 1640, 1.0, { nativeNgPerL: 31, contaminationNg: 4.5, unrest: 4.6 }),
  target('Naphthalene', volatiles, 4120, 0.999, { nativeNgPerL: 5, unrest: 1.2 }),
  target('N-Nitrosodimethylamine', null, 880, 1.006, { unrest: 1.2, carbonHeld: 0.93 }),
  surrogate('Propranolol-d7', bases, 6620, 0.998, 'Propranolol'),
  surrogate('Ibuprofen-d3', phenols, 1930, 1.004, 'Ibuprofen'),
  surrogate('Atrazine-d5', bases, 5790, 1.002, 'Atrazine'),
  injected('Carbamazepine-d10', 7020, 'Carbamazepine'),
  injected('2,4-Dichlorophenol-d3', 2410, '2,4-Dichlorophenol'),
  injected('Phenanthrene-d10', 4580, 'Phenanthrene')
];

/** What has a recovery: targets and surrogates. */
export const demoRecovered: readonly DemoAnalyte[] = demoPanel.filter(
  ({ role }) => role === 'target' || role === 'surrogate'
);

/** @throws RangeError for a name that the demo's panel does not have */
export function demoAnalyte(name: string): DemoAnalyte {
  const found = demoPanel.find((analyte) => analyte.name === name);
  if (!found) throw new RangeError(`the demo's panel has no ${name}`);
  return found;
}
