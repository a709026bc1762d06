/** Statistics of recovery: pure functions over plain numbers. Everything public is here. */
export * from './types';
export * from './errors';
export { brownForsythe, oneWayAnova, type BrownForsythe, type OneWayAnova, type VarianceLine } from './anova';
export { assess, type Assessable, type Assessment, type Criteria, type Verdict } from './assess';
export {
  cellState,
  columnMoments,
  studyFigures,
  type AnalyteFigures,
  type ExperimentColumns,
  type PortionColumns
} from './bulk';
export {
  fitCalibration,
  type CalibrationFit,
  type CalibrationModel,
  type CalibrationPoint,
  type CalibrationWeighting,
  type FittedPoint
} from './calibration';
export { coefficientTests } from './coefficient-tests';
export { controlLimits, relativePercentDifference, type ControlLimits } from './control';
export { curveBand, readingHalfWidth, runsOneWay, type BandPoint } from './curve-band';
export { describe } from './describe';
export {
  detectionLimits,
  methodDetectionLimit,
  quantitationConfirmation,
  type MethodDetectionLimit,
  type QuantitationConfirmation
} from './detection';
export { factorialAnova, type CellMean, type FactorialAnova, type FactorialTerm } from './factorial';
export type { Observation } from './factorial-design';
export { forecastRecovery, type ForecastStep, type KeyedSample } from './forecast';
export type { FractionRecord } from './fraction-values';
export { horrat, horwitzRsd, thompsonRsd } from './horwitz';
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
export {
  powerTwoSample,
  replicatesForDifference,
  replicatesForHalfWidth,
  replicatesForRsd,
  type Sides
} from './power';
export { precisionComponents, type PrecisionComponents } from './precision';
export { recovery } from './recovery';
export { solveCalibration, type SolvedLevel } from './solve-calibration';
export { stageLosses, type StageLoss, type StageSample } from './stage-losses';
export { oneSampleT, tost, welch, type Equivalence, type MeanTest } from './t-tests';
export { tukeyKramer, type PairwiseDifference } from './tukey';
