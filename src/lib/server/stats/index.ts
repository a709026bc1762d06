/** Statistics of recovery: pure functions over plain numbers. Everything public is here. */
export * from './types';
export * from './errors';
export { assess, type Assessable, type Assessment, type Criteria, type Verdict } from './assess';
export {
  fitCalibration,
  type CalibrationFit,
  type CalibrationModel,
  type CalibrationPoint,
  type CalibrationWeighting,
  type FittedPoint
} from './calibration';
export { controlLimits, relativePercentDifference, type ControlLimits } from './control';
export { describe } from './describe';
export type { FractionRecord } from './fraction-values';
export {
  massBalance,
  type CountsAs,
  type FractionFigure,
  type MassBalance,
  type MassBalanceInput,
  type Total
} from './mass-balance';
export { matrixEffect, type MatrixEffect, type MatrixEffectInput } from './matrix-effect';
export { benjaminiHochberg, holm } from './multiplicity';
export { netMean } from './net-mean';
export { openLoss, type OpenLoss, type OpenLossInput } from './open-loss';
export { cochran, grubbs, type CochranResult, type GrubbsResult } from './outliers';
export { recovery } from './recovery';
export { solveCalibration, type SolvedLevel } from './solve-calibration';
export { stageLosses, type StageLoss, type StageSample } from './stage-losses';
export { oneSampleT, tost, welch, type Equivalence, type MeanTest } from './t-tests';
