import { givenText } from '../../domain/given-text';
import { bedVolumeMl } from './bed';
import { breakthroughLoss, breakthroughVolumeRatio } from './breakthrough';
import { fractionNeutral, type ChargeGroups } from './charge';
import { documents, fromMemory, type Finding } from './evidence';
import { logKowOf, oneOf, positive, share, within } from './guards';
import {
  cartridgePlates,
  holdUpPerMass,
  retentionOverKow,
  reversedPhases,
  type ReversedPhase
} from './sorbents';
import { shortText } from './text';

/**
 * Retention volume of a bed: V_R = V_M (1 + k).
 * @param holdUpMl V_M in mL
 * @param retentionFactor k, without unit, 0 or above
 * @returns mL
 * @throws ChemistryError for a hold-up that is not above zero or a k below zero
 */
export function retentionVolumeMl(holdUpMl: number, retentionFactor: number): number {
  return (
    positive(holdUpMl, 'The hold-up volume') * (1 + within(retentionFactor, 'The retention factor', 0, 1e40))
  );
}

export interface BreakthroughInput {
  readonly logKow: number;
  readonly groups: ChargeGroups;
  readonly ph: number;
  readonly phase: ReversedPhase;
  readonly bedMassMg: number;
  /** Plates of the bed; where it is not known the middle of what cartridges have. */
  readonly plates?: number;
  /** Share lost that is accepted, 0.05 where it is not given. */
  readonly loss?: number;
  readonly sampleVolumeMl?: number | null;
}

/** What the estimate says with its inputs at their lower, middle and upper values. */
export interface EstimateRange {
  readonly low: number;
  readonly middle: number;
  readonly high: number;
}

export interface BreakthroughEstimate {
  readonly holdUpMl: number;
  readonly neutralFraction: number;
  readonly logKw: EstimateRange;
  readonly retentionMl: EstimateRange;
  /** Volume that can be loaded until the accepted share is lost. */
  readonly breakthroughMl: EstimateRange;
  /** Share lost of the sample volume; `low` is the loss with the inputs at their upper values. Null without a volume. */
  readonly lossOfSample: EstimateRange | null;
  readonly loss: number;
  readonly cautions: readonly Finding[];
}

/** Between the ends of the range by their geometric mean, rounded to a number that can be typed. */
export const usualPlates = 12;

/**
 * An estimate of the volume a reversed phase takes before an analyte breaks through: log k_w from log Kow, k = k_w f_n (the
 * charged share is taken as not held), V_R = V_M (1 + k), and the plate model for the loss.
 *
 * An estimate for thinking and no figure of a method: the source calls log Kow a poor model, and the range given moves only the
 * inputs that are quoted as ranges. The plates of `low` and `high` are the ends of what cartridges have, unless given.
 * @returns volumes in mL
 * @throws ChemistryError for a value that is not finite or not possible
 */
export function estimateBreakthrough(input: BreakthroughInput): BreakthroughEstimate {
  const phase = oneOf(input.phase, reversedPhases, 'The sorbent');
  const loss = share(input.loss ?? 0.05, 'The share lost');
  const sampleMl = input.sampleVolumeMl == null ? null : positive(input.sampleVolumeMl, 'The sample volume');
  const holdUpMl = bedVolumeMl(input.bedMassMg);
  const neutralFraction = fractionNeutral(input.groups, input.ph);
  const over = retentionOverKow[phase];
  const logKow = logKowOf(input.logKow);
  const logKw = {
    low: logKow + over.low,
    middle: logKow + (over.low + over.high) / 2,
    high: logKow + over.high
  };
  const plates = {
    low: input.plates ?? cartridgePlates.low,
    middle: input.plates ?? usualPlates,
    high: input.plates ?? cartridgePlates.high
  };
  const each = (form: (end: keyof EstimateRange) => number): EstimateRange => ({
    low: form('low'),
    middle: form('middle'),
    high: form('high')
  });
  const retentionMl = each((end) => retentionVolumeMl(holdUpMl, neutralFraction * 10 ** logKw[end]));
  const lostAt = (end: keyof EstimateRange, volume: number) =>
    breakthroughLoss(plates[end], volume / retentionMl[end]);
  return {
    holdUpMl,
    neutralFraction,
    logKw,
    retentionMl,
    breakthroughMl: each((end) => retentionMl[end] * breakthroughVolumeRatio(plates[end], loss)),
    lossOfSample:
      sampleMl === null
        ? null
        : {
            low: lostAt('high', sampleMl),
            middle: lostAt('middle', sampleMl),
            high: lostAt('low', sampleMl)
          },
    loss,
    cautions: cautionsOf(phase, neutralFraction)
  };
}

function cautionsOf(phase: ReversedPhase, neutralFraction: number): readonly Finding[] {
  const cautions: Finding[] = [
    {
      text: 'An estimate from log Kow. Would a second cartridge in series, or the load effluent as a fraction, show what really passes?',
      evidence:
        'log Kow and extrapolated retention in water are called poor empirical models for breakthrough.',
      ...documents.poole
    },
    {
      text: 'Retention, hold-up and plates are quoted ranges. What does the sheet of the sorbent say?',
      evidence: `log k in water ${givenText(retentionOverKow[phase].low)} to ${givenText(retentionOverKow[phase].high)} above log Kow, ${holdUpPerMass.low} µL of hold-up per mg${phase === 'polymer' ? ' (known for C18 only)' : ''}, ${cartridgePlates.low} to ${cartridgePlates.high} plates.`,
      ...fromMemory()
    }
  ];
  if (neutralFraction < 0.99) {
    cautions.push({
      text: 'Part of it is charged at this pH and taken as not held at all. Does a secondary interaction or an ion pair hold some of it?',
      evidence: `Neutral share ${neutralFraction < 0.001 ? 'below 0.1' : shortText(100 * neutralFraction)} %.`,
      ...fromMemory('neutral share only')
    });
  }
  return cautions;
}
