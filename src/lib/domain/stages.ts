/** The stages every study starts with, numbered from the mouth (detector) to the source (sample). */
export const stageKinds = ['signal', 'loss'] as const;
export type StageKind = (typeof stageKinds)[number];

export interface StageDefinition {
  readonly key: string;
  readonly name: string;
  readonly kind: StageKind;
  /** What it means to spike at this stage. */
  readonly spikedAt: string;
}

export const standardStages: readonly StageDefinition[] = [
  { key: 'instrument', name: 'Instrument', kind: 'signal', spikedAt: 'solvent standards on the instrument' },
  { key: 'concentration', name: 'Concentration', kind: 'loss', spikedAt: 'spiked before concentration' },
  { key: 'drying', name: 'Drying', kind: 'loss', spikedAt: 'spiked before drying' },
  { key: 'extraction', name: 'Extraction', kind: 'loss', spikedAt: 'spiked in the sample' }
];

export const media = [
  'solvent',
  'blank extract',
  'matrix extract',
  'reagent water',
  'sample matrix'
] as const;
export type Medium = (typeof media)[number];
