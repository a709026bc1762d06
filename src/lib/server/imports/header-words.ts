/**
 * What a column can be called. Letter case, spaces, hyphens, brackets and units do not matter. To teach the reader
 * another word, add it here.
 */
export const headerWords = {
  sample: [
    'sample',
    'samples',
    'sample name',
    'sample label',
    'sample id',
    'sample or level',
    'label',
    'replicate',
    'replicate label',
    'preparation',
    'portion',
    'level',
    'calibration level',
    'injected sample',
    'injection name'
  ],
  experiment: ['experiment', 'experiment title', 'experiment name'],
  fraction: ['fraction', 'fraction name', 'fractions', 'part of the sample'],
  analyte: [
    'analyte',
    'analytes',
    'analyte name',
    'compound',
    'compound name',
    'substance',
    'component',
    'component name',
    'peak',
    'peak name',
    'parameter'
  ],
  cas: ['cas', 'cas number', 'cas no', 'cas no.', 'cas rn'],
  area: ['area', 'areas', 'peak area', 'peak areas', 'area counts', 'analyte area', 'response', 'signal'],
  internalArea: [
    'internal standard area',
    'area of internal standard',
    'area of the internal standard',
    'internal standard peak area',
    'internal standard response',
    'internal area',
    'is area',
    'is peak area',
    'is response',
    'istd area',
    'istd response',
    'area is',
    'area istd'
  ],
  /** A figure of which the unit, or the person, has to say more. */
  result: [
    'result',
    'results',
    'value',
    'values',
    'amount',
    'amounts',
    'mass',
    'quantity',
    'concentration',
    'concentrations',
    'conc',
    'conc.',
    'calculated concentration',
    'calculated amount',
    'reported value'
  ],
  finalVolume: [
    'final volume',
    'final extract volume',
    'extract volume',
    'volume of extract',
    'volume of the extract',
    'final vol',
    'final vol.'
  ],
  dilution: ['dilution', 'dilution factor', 'df', 'dilution df', 'dil', 'dil.', 'dil. factor'],
  aliquotShare: [
    'aliquot share',
    'share',
    'aliquot',
    'aliquot fraction',
    'share of the fraction',
    'share of fraction'
  ],
  injection: [
    'injection',
    'injection number',
    'injection no',
    'injection no.',
    'inj',
    'inj.',
    'inj no',
    'inj no.'
  ],
  acquiredAt: [
    'acquired at',
    'acquired',
    'acquisition time',
    'acquisition date',
    'acquisition date and time',
    'injected at',
    'injected on',
    'injection date',
    'acquired on',
    'date acquired',
    'time of acquisition',
    'injection time',
    'date and time',
    'run at'
  ],
  limit: [
    'limit',
    'detection limit',
    'limit of detection',
    'reporting limit',
    'quantification limit',
    'limit of quantification',
    'lod',
    'loq'
  ],
  retentionTime: ['retention time', 'rt', 'ret time', 'ret. time', 'tr', 'retention'],
  ionRatio: ['ion ratio', 'qualifier ratio', 'qualifier ion ratio', 'qual ratio', 'ion ratio qualifier'],
  signalToNoise: [
    'signal to noise',
    'signal-to-noise',
    's/n',
    'sn',
    's to n',
    'signal/noise',
    'signal to noise ratio'
  ],
  manualIntegration: [
    'manual integration',
    'manually integrated',
    'integrated by hand',
    'integrated manually',
    'manual'
  ],
  manualCause: [
    'manual integration cause',
    'cause of manual integration',
    'manual integration reason',
    'reason for manual integration',
    'integration cause',
    'integration remark',
    'integration comment',
    'cause'
  ],
  sampleVolume: ['sample volume', 'volume of sample', 'volume of the sample', 'sample vol', 'sample vol.'],
  sampleMass: ['sample mass', 'sample weight', 'mass of sample', 'mass of the sample', 'weight of sample'],
  /** Seen often, of no use here; mentioned as not used. */
  ignored: [
    'internal standard',
    'internal standard name',
    'calibrated with',
    'comment',
    'comments',
    'remark',
    'remarks',
    'note',
    'notes',
    'vial',
    'vial position',
    'position',
    'rack',
    'method',
    'operator',
    'analyst',
    'instrument',
    'height',
    'peak height',
    'area ratio',
    'response ratio',
    'file',
    'file name',
    'data file',
    'sequence',
    'row',
    'no',
    'no.',
    '#',
    'type',
    'sample type',
    'date'
  ]
} as const;

/** Words in a concentration's header that tell of what it is. */
export const vialWords = ['vial', 'extract', 'injected', 'in solution'] as const;
export const sampleWords = ['sample', 'water', 'original'] as const;

export type HeaderWord = keyof typeof headerWords;
