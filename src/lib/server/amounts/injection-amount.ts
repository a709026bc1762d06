import { solveCalibration } from '../stats';
import { lowestConcentration, namedStandard, panelNow, wrongStandard, type Calibration } from './calibration';
import type { Practice } from './practice';
import type { ExtractReported, PanelEntry, Replicate } from './types';

/** Which equation made an amount. The first four start from an area. */
export type FormulaId =
  | 'external'
  | 'standard in the vial'
  | 'standard in the extract'
  | 'standard in the sample'
  | 'reported in the vial'
  | 'reported amount'
  | 'reported per litre';

/** Where a limit of detection came from: the cell, or the lowest level of the calibration. */
export type LimitSource = 'reported' | 'lowest level';

/** Everything an amount was made of, so that it can be opened and worked again by hand. */
export interface AmountTrace {
  readonly formula: FormulaId;
  readonly reported: ExtractReported;
  /** Present when the amount went through a line. */
  readonly calibration: Extract<Calibration, { usable: true }> | null;
  readonly practice: Practice;
  /** Area or area ratio that was put into the line; null where none was. */
  readonly response: number | null;
  /** ng/mL in the vial (external, reported in the vial) or the ratio q; null for reported amounts. */
  readonly x: number | null;
  readonly limitSource: LimitSource | null;
  readonly finalVolumeMl: number | null;
  readonly dilution: number | null;
  readonly aliquotShare: number | null;
  readonly sampleVolumeMl: number | null;
  /** Read below the lowest level of its line, outside the range that was calibrated. */
  readonly extrapolated: boolean;
}

/** What one injection says of one analyte, in ng of the whole fraction. */
export type InjectionAmount =
  | { readonly state: 'amount'; readonly ng: number; readonly trace: AmountTrace }
  | { readonly state: 'not detected'; readonly belowNg: number; readonly trace: AmountTrace }
  | { readonly state: 'missing'; readonly reported: ExtractReported }
  | { readonly state: 'above range'; readonly reason: string; readonly reported: ExtractReported }
  | { readonly state: 'refused'; readonly reason: string; readonly reported: ExtractReported };

export interface AmountContext {
  readonly entry: PanelEntry;
  readonly replicate: Replicate;
  readonly practice: Practice;
  /** Asked for only when a line is needed. */
  readonly calibration: () => Calibration;
  readonly nameOf: (entryId: string) => string;
}

/**
 * One reported number as an amount (ng) in the whole fraction, with A the area, A_is that of the internal standard, V the
 * final volume (mL), DF the dilution of the vial and a the share of the fraction that the extract holds:
 *
 * - external: x from A by the line, m = x DF V/a;
 * - standard in the vial at c_is (ng/mL), after dilution: q from A/A_is, m = q c_is DF V/a;
 * - standard m_is (ng) in the whole final extract, before dilution: m = q m_is/a, volume and dilution cancel;
 * - standard m_added (ng) in the sample: q m_added, relative to that standard and no absolute amount;
 * - ng/mL in the vial: m = x DF V/a; ng: m as reported; ng/L: m = c V_sample/1000.
 *
 * Not detected gives its limit as an amount by the same equation; without a limit of its own it takes the lowest level of
 * the line (reported in the vial: the lowest concentration among the levels of the set). Above range gives no amount. Never throws: a refusal carries its reason.
 */
export function injectionAmount(reported: ExtractReported, context: AmountContext): InjectionAmount {
  if (reported.state === 'missing') return { state: 'missing', reported };
  if (reported.state === 'above') {
    return {
      state: 'above range',
      reason: `reported above range ("${reported.rawText}"), to be injected again diluted`,
      reported
    };
  }
  const signal = reported.basis === 'area' ? fromArea(reported, context) : fromReported(reported, context);
  if ('state' in signal) return signal;
  const amount = toAmount(signal, reported, context);
  if (typeof amount === 'string') return { state: 'refused', reason: amount, reported };
  const { ng, trace } = amount;
  return reported.state === 'value'
    ? { state: 'amount', ng, trace }
    : { state: 'not detected', belowNg: ng, trace };
}

/** A number on its way: what the line (or the file) says, before volumes and shares. */
interface Signal {
  readonly formula: FormulaId;
  readonly calibration: AmountTrace['calibration'];
  readonly response: number | null;
  readonly x: number;
  readonly limitSource: LimitSource | null;
  readonly extrapolated: boolean;
}

const formulaOfPractice = {
  external: 'external',
  vial: 'standard in the vial',
  extract: 'standard in the extract',
  sample: 'standard in the sample'
} as const;

function fromArea(reported: ExtractReported, context: AmountContext): Signal | InjectionAmount {
  const refuse = (reason: string): InjectionAmount => ({ state: 'refused', reason, reported });
  const { practice, entry, nameOf } = context;
  if (practice.kind === 'undeclared') return refuse(practice.reason);
  const standardId = practice.kind === 'external' ? null : practice.standardId;
  if (wrongStandard(reported, standardId)) {
    return refuse(
      `the area was recorded against ${namedStandard(reported.internalEntryId, nameOf)}, but ${panelNow(entry.name, standardId, nameOf)}`
    );
  }
  const calibration = context.calibration();
  if (!calibration.usable) return refuse(calibration.reason);
  const formula = formulaOfPractice[practice.kind];
  const lowest = calibration.fit.range[0];

  const area = reported.state === 'value' ? reported.value : reported.limit;
  if (area === null) {
    // Nothing found and no limit given: less than the lowest level that was calibrated.
    return {
      formula,
      calibration,
      response: null,
      x: lowest,
      limitSource: 'lowest level',
      extrapolated: false
    };
  }
  let response = area;
  if (standardId) {
    if (reported.internalArea === null || reported.internalArea <= 0) {
      return refuse(`no area of its internal standard ${nameOf(standardId)} came with it`);
    }
    response = area / reported.internalArea;
  }
  const solved = solveCalibration(calibration.fit, response);
  if (solved.x === null)
    return refuse(`its response ${figure(response)} lies where the line has no solution`);
  if (reported.state !== 'value') {
    // A limit that the line puts at or below zero would be no limit: the lowest level is.
    return solved.x > 0
      ? { formula, calibration, response, x: solved.x, limitSource: 'reported', extrapolated: false }
      : { formula, calibration, response, x: lowest, limitSource: 'lowest level', extrapolated: false };
  }
  if (solved.outside === 'above') {
    const unit = calibration.scale === 'concentration' ? ' ng/mL' : ' (ratio)';
    return {
      state: 'above range',
      reason:
        `reads ${figure(solved.x)}${unit}, above the highest level ${figure(calibration.fit.range[1])}${unit}, ` +
        'to be injected again diluted',
      reported
    };
  }
  return {
    formula,
    calibration,
    response,
    x: solved.x,
    limitSource: null,
    extrapolated: solved.outside === 'below'
  };
}

const formulaOfBasis = {
  vial: 'reported in the vial',
  ng: 'reported amount',
  ng_per_l: 'reported per litre'
} as const;

function fromReported(reported: ExtractReported, context: AmountContext): Signal | InjectionAmount {
  if (reported.basis === 'area') throw new Error('an area goes through its line');
  const formula = formulaOfBasis[reported.basis];
  const plain = { formula, response: null, extrapolated: false };
  const stated = reported.state === 'value' ? reported.value : reported.limit;
  if (stated !== null) {
    const limitSource = reported.state === 'value' ? null : 'reported';
    return { ...plain, calibration: null, x: stated, limitSource };
  }
  if (reported.basis === 'vial') {
    const lowest = lowestConcentration(context.calibration());
    if (lowest !== null) return { ...plain, calibration: null, x: lowest, limitSource: 'lowest level' };
  }
  return {
    state: 'refused',
    reason: `"${reported.rawText}" gives no limit, and a lowest level to stand for it is not known`,
    reported
  };
}

function toAmount(
  signal: Signal,
  reported: ExtractReported,
  context: AmountContext
): { readonly ng: number; readonly trace: AmountTrace } | string {
  const { practice, replicate } = context;
  const { x, formula } = signal;
  const share = reported.aliquotShare;
  switch (formula) {
    case 'reported amount':
      return { ng: x, trace: traceOf(signal, reported, practice, null, null, null, null) };
    case 'reported per litre': {
      const sample = replicate.sampleVolumeMl;
      if (sample === null) return `${replicate.label} has no sample volume, which ng/L needs to become ng`;
      return {
        ng: (x * sample) / 1000,
        trace: traceOf(signal, reported, practice, null, null, null, sample)
      };
    }
    case 'standard in the extract': {
      if (practice.kind !== 'extract') throw new Error('the practice and its equation disagree');
      return {
        ng: (x * practice.amountNg) / share,
        trace: traceOf(signal, reported, practice, null, null, share, null)
      };
    }
    case 'standard in the sample': {
      if (practice.kind !== 'sample') throw new Error('the practice and its equation disagree');
      if (practice.amountNg === null) {
        return `it is not recorded how much ${context.nameOf(practice.standardId)} was added to ${replicate.label}`;
      }
      return {
        ng: x * practice.amountNg,
        trace: traceOf(signal, reported, practice, null, null, null, null)
      };
    }
    default: {
      const volume = reported.finalVolumeMl;
      if (volume === null) return 'no final volume was given, which an amount needs';
      const inVial =
        formula === 'standard in the vial' && practice.kind === 'vial' ? practice.concentration : 1;
      return {
        ng: (x * inVial * reported.dilution * volume) / share,
        trace: traceOf(signal, reported, practice, volume, reported.dilution, share, null)
      };
    }
  }
}

/** Field by field: there is one for every number of a study. */
function traceOf(
  signal: Signal,
  reported: ExtractReported,
  practice: Practice,
  finalVolumeMl: number | null,
  dilution: number | null,
  aliquotShare: number | null,
  sampleVolumeMl: number | null
): AmountTrace {
  return {
    formula: signal.formula,
    reported,
    calibration: signal.calibration,
    practice,
    response: signal.response,
    x: signal.x,
    limitSource: signal.limitSource,
    finalVolumeMl,
    dilution,
    aliquotShare,
    sampleVolumeMl,
    extrapolated: signal.extrapolated
  };
}

function figure(value: number): string {
  return String(Number(value.toPrecision(4)));
}
