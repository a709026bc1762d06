import * as stats from '../../../src/lib/server/stats/index';

/** A call of a public function with one list of values left open. */
export type ListCall = {
  readonly name: string;
  readonly least: number;
  readonly call: (values: number[]) => unknown;
};

export const sound = [80, 85, 91, 79, 88, 84, 90];
export const options = { model: 'linear', weighting: 'none' } as const;
/** Public functions that take single numbers only. */
export const takeNoList: ReadonlySet<string> = new Set([
  'recovery',
  'assess',
  'powerTwoSample',
  'replicatesForDifference',
  'replicatesForHalfWidth',
  'replicatesForRsd',
  'solveCalibration',
  'readingHalfWidth',
  'detectionLimits',
  'horwitzRsd',
  'thompsonRsd',
  'horrat',
  'relativePercentDifference'
]);

const oneFraction = [{ name: 'elution', countsAs: 'method' as const }];

const fit = stats.fitCalibration(
  sound.map((y, i) => ({ x: i + 1, y })),
  options
);
const described = stats.describe(sound);
const criteria = { low: 70, high: 130, rsdMax: 20, nMin: 3 };

const openLossInput = {
  replicates: sound.map((elution) => ({ elution })),
  fractions: [{ name: 'elution', passed: ['drying'] }],
  stepRecoveries: { drying: { estimate: 0.9, se: 0.02, df: 5, ci: null } }
};

const isNoNumber = (value: unknown): boolean => typeof value !== 'number';

/** Recoveries as p-values; what is no number stays what it is. */
const share = (value: number): number =>
  Number.isFinite(value) ? Math.min(1, Math.abs(value) / 1000) : value;

/** One analyte, one fraction, a portion for each value. */
function experimentOf(values: readonly number[]): stats.ExperimentColumns {
  const cells = values.some(isNoNumber) ? (values as unknown as Float64Array) : Float64Array.from(values);
  return {
    stage: 'drying',
    fractions: oneFraction,
    spiked: {
      portions: values.length,
      values: cells,
      state: Uint8Array.from(values, () => stats.cellState.found)
    }
  };
}

/** Every public function that takes a list of values, with the fewest it accepts. */
export const lists: readonly ListCall[] = [
  { name: 'describe', least: 1, call: (v) => stats.describe(v) },
  { name: 'netMean', least: 1, call: (values) => stats.netMean({ values }) },
  { name: 'netMean, native', least: 1, call: (native) => stats.netMean({ values: sound, native }) },
  {
    name: 'massBalance',
    least: 1,
    call: (v) => stats.massBalance({ replicates: v.map((elution) => ({ elution })), fractions: oneFraction })
  },
  {
    name: 'massBalance, native',
    least: 1,
    call: (v) =>
      stats.massBalance({
        replicates: [{ elution: 80 }],
        native: v.map((elution) => ({ elution })),
        fractions: oneFraction
      })
  },
  {
    name: 'openLoss',
    least: 1,
    call: (v) =>
      stats.openLoss({
        replicates: v.map((elution) => ({ elution })),
        fractions: [{ name: 'elution', passed: [] }],
        stepRecoveries: {}
      })
  },
  { name: 'stageLosses', least: 1, call: (values) => stats.stageLosses([{ stage: 'drying', values }]) },
  {
    name: 'forecastRecovery',
    least: 1,
    call: (values) => stats.forecastRecovery([{ to: { key: 'a', values }, from: null }])
  },
  { name: 'welch, first', least: 2, call: (v) => stats.welch(v, sound) },
  { name: 'welch, second', least: 2, call: (v) => stats.welch(sound, v) },
  { name: 'oneSampleT', least: 2, call: (v) => stats.oneSampleT(v, 100) },
  { name: 'tost', least: 2, call: (v) => stats.tost(v, sound, 10) },
  { name: 'oneWayAnova', least: 1, call: (v) => stats.oneWayAnova([v, sound]) },
  { name: 'tukeyKramer', least: 1, call: (v) => stats.tukeyKramer([v, sound]) },
  { name: 'brownForsythe', least: 2, call: (v) => stats.brownForsythe([v, sound]) },
  { name: 'grubbs', least: 3, call: (v) => stats.grubbs(v) },
  { name: 'cochran', least: 2, call: (v) => stats.cochran([v, sound]) },
  { name: 'precisionComponents', least: 1, call: (v) => stats.precisionComponents([v, sound]) },
  { name: 'controlLimits', least: 2, call: (v) => stats.controlLimits(v) },
  { name: 'methodDetectionLimit', least: 7, call: (spiked) => stats.methodDetectionLimit({ spiked }) },
  {
    name: 'methodDetectionLimit, blanks',
    least: 7,
    call: (blanks) => stats.methodDetectionLimit({ spiked: sound, blanks })
  },
  {
    name: 'quantitationConfirmation',
    least: 2,
    call: (values) => stats.quantitationConfirmation({ values, fortified: 85 })
  },
  {
    name: 'matrixEffect, neat',
    least: 1,
    call: (neat) => stats.matrixEffect({ neat, postSpiked: sound, preSpiked: sound })
  },
  {
    name: 'matrixEffect, native',
    least: 1,
    call: (native) => stats.matrixEffect({ neat: sound, postSpiked: sound, preSpiked: sound, native })
  },
  {
    name: 'fitCalibration',
    least: 3,
    call: (v) =>
      stats.fitCalibration(
        v.map((y, i) => ({ x: i + 1, y })),
        options
      )
  },
  {
    name: 'factorialAnova',
    least: 2,
    call: (v) => stats.factorialAnova(v.map((response, i) => ({ levels: { A: String(i % 2) }, response })))
  },
  {
    name: 'matrixEffect, spiked after extraction',
    least: 1,
    call: (postSpiked) => stats.matrixEffect({ neat: sound, postSpiked, preSpiked: sound })
  },
  {
    name: 'matrixEffect, spiked before extraction',
    least: 1,
    call: (preSpiked) => stats.matrixEffect({ neat: sound, postSpiked: sound, preSpiked })
  },
  {
    name: 'openLoss, native',
    least: 1,
    call: (v) => stats.openLoss({ ...openLossInput, native: v.map((elution) => ({ elution })) })
  },
  {
    name: 'stageLosses, native',
    least: 1,
    call: (native) => stats.stageLosses([{ stage: 'drying', values: sound, native }])
  },
  {
    name: 'forecastRecovery, before',
    least: 1,
    call: (values) =>
      stats.forecastRecovery([{ to: { key: 'a', values: sound }, from: { key: 'b', values } }])
  },
  { name: 'holm', least: 1, call: (v) => stats.holm(v.map(share)) },
  { name: 'benjaminiHochberg', least: 1, call: (v) => stats.benjaminiHochberg(v.map(share)) },
  {
    name: 'columnMoments',
    least: 2,
    call: (v) =>
      stats.columnMoments(
        v.some(isNoNumber) ? (v as unknown as Float64Array) : Float64Array.from(v),
        v.length
      )
  },
  { name: 'curveBand', least: 1, call: (v) => stats.curveBand(fit, v) },
  {
    name: 'coefficientTests',
    least: 1,
    call: (v) => stats.coefficientTests({ ...fit, coefficients: v, standardErrors: v.map(() => 1) })
  },
  {
    name: 'runsOneWay',
    least: 1,
    call: (v) => stats.runsOneWay({ ...fit, coefficients: v })
  },
  { name: 'studyFigures', least: 1, call: (v) => stats.studyFigures([experimentOf(v)], { analytes: 1 }) },
  {
    name: 'studyFigures, native',
    least: 1,
    call: (v) =>
      stats.studyFigures([{ ...experimentOf(sound), native: experimentOf(v).spiked }], { analytes: 1 })
  }
];

/** A call of a public function with one number left open. */
export type NumberCall = { readonly name: string; readonly call: (value: number) => unknown };

/** Every single number a public function takes. */
export const numbers: readonly NumberCall[] = [
  { name: 'describe, level', call: (v) => stats.describe(sound, v) },
  { name: 'recovery, found', call: (found) => stats.recovery({ found, spiked: 1 }) },
  { name: 'recovery, spiked', call: (spiked) => stats.recovery({ found: 1, spiked }) },
  { name: 'recovery, native', call: (native) => stats.recovery({ found: 1, spiked: 1, native }) },
  {
    name: 'assess, low',
    call: (low) => stats.assess(stats.describe(sound), { low, high: 1e9, rsdMax: null, nMin: 1 })
  },
  {
    name: 'assess, high',
    call: (high) => stats.assess(stats.describe(sound), { low: -1e9, high, rsdMax: null, nMin: 1 })
  },
  {
    name: 'assess, rsdMax',
    call: (rsdMax) => stats.assess(stats.describe(sound), { low: 0, high: 1, rsdMax, nMin: 1 })
  },
  {
    name: 'assess, nMin',
    call: (nMin) => stats.assess(stats.describe(sound), { low: 0, high: 1, rsdMax: 1, nMin })
  },
  {
    name: 'netMean, matrix effect',
    call: (estimate) => stats.netMean({ values: sound, matrixEffect: { key: 'm', estimate, se: 1, df: 1 } })
  },
  {
    name: 'massBalance, limit',
    call: (below) => stats.massBalance({ replicates: [{ elution: { below } }], fractions: oneFraction })
  },
  { name: 'oneSampleT, mu', call: (mu) => stats.oneSampleT(sound, mu) },
  { name: 'tost, margin', call: (margin) => stats.tost(sound, sound, margin) },
  { name: 'tost, alpha', call: (alpha) => stats.tost(sound, sound, 1, alpha) },
  { name: 'tukeyKramer, level', call: (level) => stats.tukeyKramer([sound, sound], level) },
  { name: 'holm', call: (p) => stats.holm([p]) },
  { name: 'benjaminiHochberg', call: (p) => stats.benjaminiHochberg([p]) },
  { name: 'grubbs, alpha', call: (alpha) => stats.grubbs(sound, { alpha }) },
  { name: 'cochran, alpha', call: (alpha) => stats.cochran([sound, sound], alpha) },
  {
    name: 'powerTwoSample, difference',
    call: (difference) => stats.powerTwoSample({ difference, sd: 1, n: 3 })
  },
  { name: 'powerTwoSample, sd', call: (sd) => stats.powerTwoSample({ difference: 1, sd, n: 3 }) },
  { name: 'powerTwoSample, n', call: (n) => stats.powerTwoSample({ difference: 1, sd: 1, n }) },
  {
    name: 'replicatesForDifference, power',
    call: (power) => stats.replicatesForDifference({ difference: 1, sd: 1, power })
  },
  { name: 'replicatesForHalfWidth, sd', call: (sd) => stats.replicatesForHalfWidth({ sd, halfWidth: 1 }) },
  {
    name: 'replicatesForHalfWidth, half width',
    call: (halfWidth) => stats.replicatesForHalfWidth({ sd: 1, halfWidth })
  },
  { name: 'replicatesForRsd, rsd', call: (rsd) => stats.replicatesForRsd({ rsd, limit: 20 }) },
  { name: 'replicatesForRsd, limit', call: (limit) => stats.replicatesForRsd({ rsd: 10, limit }) },
  {
    name: 'solveCalibration',
    call: (y) => stats.solveCalibration(fit, y)
  },
  {
    name: 'fitCalibration, level',
    call: (x) =>
      stats.fitCalibration(
        [1, 2, 3, x].map((v) => ({ x: v, y: v })),
        options
      )
  },
  {
    name: 'quantitationConfirmation, fortified',
    call: (fortified) => stats.quantitationConfirmation({ values: sound, fortified })
  },
  { name: 'detectionLimits, sigma', call: (sigma) => stats.detectionLimits({ sigma, slope: 1 }) },
  { name: 'detectionLimits, slope', call: (slope) => stats.detectionLimits({ sigma: 1, slope }) },
  { name: 'horwitzRsd', call: (c) => stats.horwitzRsd(c) },
  { name: 'thompsonRsd', call: (c) => stats.thompsonRsd(c) },
  { name: 'horrat', call: (rsd) => stats.horrat(rsd, 1e-6) },
  { name: 'relativePercentDifference', call: (a) => stats.relativePercentDifference(a, 1) },
  {
    name: 'factorialAnova, order',
    call: (maxOrder) =>
      stats.factorialAnova(
        [1, 2, 3].map((response) => ({ levels: { A: String(response) }, response })),
        { maxOrder }
      )
  },
  { name: 'netMean, level', call: (v) => stats.netMean({ values: sound }, v) },
  {
    name: 'netMean, error of the matrix effect',
    call: (se) => stats.netMean({ values: sound, matrixEffect: { key: 'm', estimate: 90, se, df: 1 } })
  },
  {
    name: 'netMean, error of the matrix effect of one value',
    call: (se) => stats.netMean({ values: [80], matrixEffect: { key: 'm', estimate: 90, se, df: 1 } })
  },
  {
    name: 'netMean, degrees of freedom of the matrix effect',
    call: (df) => stats.netMean({ values: [80], matrixEffect: { key: 'm', estimate: 90, se: 1, df } })
  },
  {
    name: 'massBalance, level',
    call: (level) => stats.massBalance({ replicates: [{ elution: 80 }], fractions: oneFraction, level })
  },
  { name: 'openLoss, level', call: (level) => stats.openLoss({ ...openLossInput, level }) },
  {
    name: 'openLoss, step recovery',
    call: (estimate) =>
      stats.openLoss({ ...openLossInput, stepRecoveries: { drying: { estimate, se: 0.1, df: 3, ci: null } } })
  },
  {
    name: 'openLoss, error of a step recovery',
    call: (se) =>
      stats.openLoss({ ...openLossInput, stepRecoveries: { drying: { estimate: 0.9, se, df: 3, ci: null } } })
  },
  {
    name: 'openLoss, reference',
    call: (estimate) => stats.openLoss({ ...openLossInput, reference: { estimate, se: 1, df: 3, ci: null } })
  },
  { name: 'stageLosses, level', call: (v) => stats.stageLosses([{ stage: 'drying', values: sound }], v) },
  {
    name: 'forecastRecovery, level',
    call: (v) => stats.forecastRecovery([{ to: { key: 'a', values: sound }, from: null }], v)
  },
  { name: 'welch, level', call: (v) => stats.welch(sound, sound, v) },
  { name: 'oneSampleT, level', call: (v) => stats.oneSampleT(sound, 100, v) },
  {
    name: 'matrixEffect, level',
    call: (v) => stats.matrixEffect({ neat: sound, postSpiked: sound, preSpiked: sound }, v)
  },
  { name: 'assess, mean', call: (mean) => stats.assess({ ...described, mean }, criteria) },
  { name: 'assess, n', call: (n) => stats.assess({ ...described, n }, criteria) },
  { name: 'assess, RSD', call: (rsd) => stats.assess({ ...described, rsd }, criteria) },
  {
    name: 'assess, interval',
    call: (lower) => stats.assess({ ...described, ci: { lower, upper: 1e99, level: 0.95 } }, criteria)
  },
  { name: 'assess, error', call: (se) => stats.assess({ ...described, se }, criteria) },
  {
    name: 'powerTwoSample, alpha',
    call: (alpha) => stats.powerTwoSample({ difference: 1, sd: 1, n: 3, alpha })
  },
  {
    name: 'replicatesForDifference, difference',
    call: (difference) => stats.replicatesForDifference({ difference, sd: 1 })
  },
  { name: 'replicatesForDifference, sd', call: (sd) => stats.replicatesForDifference({ difference: 1, sd }) },
  {
    name: 'replicatesForDifference, alpha',
    call: (alpha) => stats.replicatesForDifference({ difference: 1, sd: 1, alpha })
  },
  {
    name: 'replicatesForHalfWidth, level',
    call: (level) => stats.replicatesForHalfWidth({ sd: 1, halfWidth: 1, level })
  },
  { name: 'replicatesForRsd, power', call: (power) => stats.replicatesForRsd({ rsd: 10, limit: 20, power }) },
  { name: 'replicatesForRsd, alpha', call: (alpha) => stats.replicatesForRsd({ rsd: 10, limit: 20, alpha }) },
  {
    name: 'solveCalibration, replicates',
    call: (replicates) => stats.solveCalibration(fit, 85, { replicates })
  },
  { name: 'readingHalfWidth', call: (x) => stats.readingHalfWidth(fit, x) },
  { name: 'readingHalfWidth, level', call: (level) => stats.readingHalfWidth(fit, 3, level) },
  { name: 'curveBand, level', call: (level) => stats.curveBand(fit, [3], level) },
  {
    name: 'coefficientTests, degrees of freedom',
    call: (df) => stats.coefficientTests({ ...fit, df })
  },
  { name: 'runsOneWay, range', call: (top) => stats.runsOneWay({ ...fit, range: [0, top] }) },
  { name: 'horrat, mass fraction', call: (c) => stats.horrat(8, c) },
  { name: 'relativePercentDifference, second', call: (b) => stats.relativePercentDifference(1, b) },
  {
    name: 'studyFigures, level',
    call: (level) => stats.studyFigures([experimentOf(sound)], { analytes: 1, level })
  },
  {
    name: 'studyFigures, analytes',
    call: (analytes) => stats.studyFigures([experimentOf(sound)], { analytes })
  },
  { name: 'columnMoments, size', call: (size) => stats.columnMoments(Float64Array.from(sound), size) }
];
