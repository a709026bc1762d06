/**
 * The chemistry that argues for a procedure: charge, distribution, breakthrough, evaporation, solvents, structures and what a
 * panel asks. Pure functions of plain values; each docstring gives formula, units, refusals and source. Everything that is
 * impossible is refused with `ChemistryError`.
 */
export { bedCapacity, bedLoad, bedVolumeMl, bedVolumes, type BedCapacity, type BedLoad } from './bed';
export { bestValue, type BestValue, type PredictedValue, type TypedValue } from './best-value';
export {
  breakthroughLoss,
  breakthroughVolumeRatio,
  lovkvistJonssonRatio,
  werkhovenGoewieRatio
} from './breakthrough';
export {
  chargeShares,
  chargeStates,
  fractionNeutral,
  ionisedAcid,
  ionisedBase,
  meanCharge,
  type ChargeGroups,
  type ChargeShares,
  type ChargeState
} from './charge';
export { drawStructure, type StructureDrawing } from './draw-structure';
export { ChemistryError, type ChemistryErrorCode } from './errors';
export type { Finding, Origin, SourcedRange, Standing } from './evidence';
export type { IonisableGroup } from './ionisable-groups';
export { logD, type LogD } from './log-d';
export type { PanelAnalyte } from './panel-analyte';
export {
  chemistryGroups,
  type ChemistryGroup,
  type ChemistryGroupKey,
  type GroupMember,
  type GroupingOptions
} from './panel-groups';
export { neutralShareOf, readPasses, type Pass, type PassReading } from './passes';
export { mostNeutral, phWindows, type ChargeCondition, type PhRange, type PhWindow } from './ph-windows';
export {
  estimateBreakthrough,
  retentionVolumeMl,
  type BreakthroughEstimate,
  type BreakthroughInput,
  type EstimateRange
} from './retention';
export { sampleFormat, type SampleFormat, type SampleFormatInput } from './sample-format';
export {
  boundWaterG,
  solvent,
  solventPairs,
  solvents,
  waterPolarity,
  type Azeotrope,
  type Solvent,
  type SolventPair,
  type SourcedValue
} from './solvents';
export {
  capacities,
  cartridgePlates,
  holdUpPerMass,
  retentionOverKow,
  reversedPhases,
  sorbentKinds,
  workingRanges,
  type ReversedPhase,
  type SorbentKind
} from './sorbents';
export { predictor, readStructure, type Structure } from './structure';
export { volatility, type VolatileProperties, type Volatility } from './volatility';
