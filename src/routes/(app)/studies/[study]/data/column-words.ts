import type { ColumnMeaning, Orientation } from '$lib/schemas/column-map';
import type { LabelView, LineMeaningView } from '$lib/views/imports';

/** What a column can be said to mean, in the order in which they are offered. */
export const columnMeaningWords: Readonly<Record<ColumnMeaning, string>> = {
  sample: 'sample',
  experiment: 'experiment',
  fraction: 'fraction',
  analyte: 'analyte',
  cas: 'CAS number',
  area: 'area',
  'internal standard area': 'area of the internal standard',
  amount: 'amount or concentration',
  limit: 'limit of what was not detected',
  dilution: 'dilution',
  'final volume': 'final volume',
  'aliquot share': 'share of the fraction',
  injection: 'injection',
  'acquired at': 'acquired at',
  'retention time': 'retention time',
  'ion ratio': 'ion ratio',
  'signal to noise': 'signal to noise',
  'manual integration': 'mark of manual integration',
  'manual integration cause': 'cause of manual integration',
  'sample volume': 'sample volume',
  'sample mass': 'sample mass',
  ignored: 'not read, as chosen',
  'not understood': 'not understood'
};

export const orientationWords: Readonly<Record<Orientation, string>> = {
  long: 'a row for each sample and analyte',
  'analytes across': 'a row for each sample, the analytes across',
  'analytes down': 'a column for each sample, the analytes down'
};

export const labelHowWords: Readonly<Record<LabelView['how'], string>> = {
  name: 'by its name',
  pattern: 'by the pattern',
  'run order': 'by the run order',
  assigned: 'as chosen',
  'left out': 'left out, as chosen',
  ambiguous: 'could be several',
  'not found': 'not found'
};

const basisWords = { vial: 'in the vial', ng: 'whole fraction', ng_per_l: 'of sample' } as const;

/** "area of Atrazine", "amount, ng/mL in the vial" */
export function meaningText({ means, analyte, basis, unit }: LineMeaningView): string {
  const unitText = [unit, basis && basisWords[basis]].filter(Boolean).join(' ');
  return [columnMeaningWords[means], analyte && `of ${analyte}`, unitText && `, ${unitText}`]
    .filter(Boolean)
    .join(' ')
    .replace(' ,', ',');
}
