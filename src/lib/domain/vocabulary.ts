/** The closed lists of the trade that the database, the forms and the figures share. */

export const panelRoles = [
  'target',
  'surrogate',
  'extraction internal standard',
  'injection internal standard'
] as const;
export type PanelRole = (typeof panelRoles)[number];

export const replicateKinds = [
  'spiked',
  'unspiked',
  'method blank',
  'post-extraction spike',
  'solvent standard'
] as const;
export type ReplicateKind = (typeof replicateKinds)[number];

/** In the one order of the whole application: charts, legends, tables and exports share it. */
export const fractionKinds = [
  'elution',
  'second elution',
  'second cartridge',
  'aqueous layer',
  'wash',
  'load effluent',
  'bottle rinse',
  'drying-agent rinse',
  'pre-filter',
  'evaporator trap',
  'other'
] as const;
export type FractionKind = (typeof fractionKinds)[number];

export const countsAs = ['method', 'balance'] as const;
export type CountsAs = (typeof countsAs)[number];

export const subtractions = ['none', 'native', 'method blank'] as const;
export type Subtraction = (typeof subtractions)[number];

/** What an import declares its numbers to be. */
export const reportedBases = ['area', 'vial', 'ng', 'ng_per_l'] as const;
export type ReportedBasis = (typeof reportedBases)[number];
export const reportedBasisLabels: Readonly<Record<ReportedBasis, string>> = {
  area: 'peak area',
  vial: 'ng/mL in the vial',
  ng: 'ng in the whole fraction',
  ng_per_l: 'ng/L of sample'
};

/** missing: the cell was blank; never the same as not detected. */
export const measurementStates = ['value', 'not detected', 'below', 'above', 'missing'] as const;
export type MeasurementState = (typeof measurementStates)[number];

/**
 * Where an internal standard goes in: into the vial after dilution (a concentration), into the whole
 * final extract before any dilution (an amount), or into the sample before extraction (an amount).
 */
export const additionPoints = ['vial', 'extract', 'sample'] as const;
export type AdditionPoint = (typeof additionPoints)[number];

export const studyStates = ['draft', 'in review', 'returned', 'reviewed', 'signed'] as const;
export type StudyState = (typeof studyStates)[number];
export const editableStudyStates: readonly StudyState[] = ['draft', 'returned'];

export const importStates = ['received', 'stored', 'dropped', 'superseded', 'withdrawn'] as const;
export type ImportState = (typeof importStates)[number];

export const calibrationModels = ['average response factor', 'linear', 'quadratic'] as const;
export type CalibrationModelName = (typeof calibrationModels)[number];
export const calibrationWeightings = ['none', '1/x', '1/x2'] as const;
export type CalibrationWeighting = (typeof calibrationWeightings)[number];

/** What is run to tell whether a calibration still holds; an instrument blank tells whether the instrument is clean. */
export const checkStandardKinds = ['second source', 'continuing', 'instrument blank'] as const;
export type CheckStandardKind = (typeof checkStandardKinds)[number];

export const stepKinds = [
  'condition',
  'load',
  'wash',
  'dry the bed',
  'elute',
  'rinse',
  'partition',
  'combine',
  'clean up',
  'dry the extract',
  'evaporate',
  'exchange solvent',
  'make up to volume',
  'add internal standard',
  'inject'
] as const;
export type StepKind = (typeof stepKinds)[number];

export const verdicts = ['inside', 'watch', 'outside', 'too few'] as const;
export type Verdict = (typeof verdicts)[number];
