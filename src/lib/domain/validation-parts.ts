/** The parts of a study's validation that rest on experiments of their own, in the order they are read. */
export const validationParts = [
  'demonstration',
  'confirmation',
  'detection',
  'precision',
  'matrix',
  'blanks',
  'control',
  'duplicates'
] as const;
export type ValidationPartKey = (typeof validationParts)[number];

export const validationPartTitles: Readonly<Record<ValidationPartKey, string>> = {
  demonstration: 'Initial demonstration',
  confirmation: 'Quantitation limit',
  detection: 'Detection limits',
  precision: 'Repeatability and intermediate precision',
  matrix: 'Matrix effect',
  blanks: 'Blanks and native levels',
  control: 'Surrogates and internal standards over time',
  duplicates: 'Duplicates and single recoveries'
};
