import type { CriterionRule, RuleType } from '../../domain/criteria';
import { solveCalibration } from '../stats';
import { lowestConcentration, namedStandard, panelNow, wrongStandard, type Calibration } from './calibration';
import type { BlankReading, CheckReading, CheckReported, CheckStandard } from './sequence-types';
import type { CalibrationSet, PanelEntry } from './types';

export interface ReadingContext {
  readonly panel: ReadonlyMap<string, PanelEntry>;
  readonly rules: readonly CriterionRule[];
  /** The line of an entry in the set of the check. */
  readonly calibrationOf: (entryId: string) => Calibration;
  readonly set: CalibrationSet;
}

/** What a blank is held to where the criteria set has no rule for it. */
export const practiceBlankRule: CriterionRule = {
  type: 'instrument blank',
  low: null,
  high: 50,
  unit: '%',
  citation: 'common practice, no source',
  year: null,
  standing: 'own',
  note: 'Half of the lowest level; the criteria set has no rule for instrument blanks.'
};

/**
 * One analyte in one injection of a check: 100 found/nominal, found by the line that the set has now. For an average response factor this is
 * 100 RF/RF_mean as well, so that the difference of response factors and the drift of a concentration (8000D) are one figure less
 * 100.
 *
 * @param isLast the last continuing check of its run, which may have a rule of its own
 * @param reported null: the check holds the analyte, but the file has no number for it
 */
export function checkReading(
  injectionId: string,
  check: CheckStandard,
  entry: PanelEntry,
  reported: CheckReported | null,
  isLast: boolean,
  context: ReadingContext
): CheckReading {
  const nominal = check.concentrations.get(entry.id) ?? 0;
  const base = { injectionId, checkStandardId: check.id, entryId: entry.id, nominal };
  const rule = ruleFor(check, entry.id, nominal, isLast, context);
  const unread = (why: string): CheckReading => ({
    ...base,
    found: null,
    percent: null,
    state: 'unread',
    rule,
    why
  });
  if (!reported || reported.state === 'missing') return unread('no number came with it');
  if (reported.state === 'above' && reported.limit === null) {
    return unread(`reported as "${reported.rawText}", without a number`);
  }
  if (reported.state === 'not detected' || reported.state === 'below') {
    // It is in the check, so that not finding it is a reading, of nothing.
    const state = rule ? 'fails' : 'unheld';
    return { ...base, found: 0, percent: 0, state, rule, why: 'not detected' };
  }
  const found = concentrationOf(reported, entry, check, context);
  if (typeof found === 'string') return unread(found);
  const percent = (100 * found) / nominal;
  return { ...base, found, percent, state: rule ? heldTo(rule, percent) : 'unheld', rule, why: null };
}

/** One analyte in one injection of an instrument blank, as percent of the lowest level of its line. */
export function blankReading(
  injectionId: string,
  check: CheckStandard,
  entry: PanelEntry,
  reported: CheckReported,
  context: ReadingContext
): BlankReading {
  const rule = ruleOf(context.rules, 'instrument blank') ?? practiceBlankRule;
  const base = { injectionId, checkStandardId: check.id, entryId: entry.id, rule };
  const unread = (why: string): BlankReading => ({
    ...base,
    percentOfLowest: null,
    detected: false,
    state: 'unread',
    why
  });
  if (reported.state === 'missing') return unread('no number came with it');
  if (reported.state === 'not detected' || reported.state === 'below') {
    return { ...base, percentOfLowest: 0, detected: false, state: 'holds', why: null };
  }
  const lowest = lowestConcentration(context.calibrationOf(entry.id));
  if (lowest === null) return unread('the set has no lowest level of it');
  if (reported.state === 'above' && reported.limit === null) {
    return unread(`reported as "${reported.rawText}", without a number`);
  }
  const found = concentrationOf(reported, entry, check, context);
  if (typeof found === 'string') return unread(found);
  const percent = (100 * found) / lowest;
  return { ...base, percentOfLowest: percent, detected: true, state: heldTo(rule, percent), why: null };
}

/**
 * ng/mL of an internal standard in a check or blank: as recorded, else that of the levels where all hold the same, as they do where every vial gets
 * the same addition; null: it cannot be told.
 */
export function standardConcentration(
  check: CheckStandard,
  set: CalibrationSet,
  standardId: string
): number | null {
  const own = check.concentrations.get(standardId);
  if (own !== undefined) return own;
  const inLevels = set.levels.map(({ concentrations }) => concentrations.get(standardId));
  const [first] = inLevels;
  return first !== undefined && inLevels.every((concentration) => concentration === first) ? first : null;
}

export function ruleOf(rules: readonly CriterionRule[], type: RuleType): CriterionRule | null {
  return rules.find((rule) => rule.type === type) ?? null;
}

export function heldTo({ low, high }: CriterionRule, percent: number): 'holds' | 'fails' {
  return (low === null || percent >= low) && (high === null || percent <= high) ? 'holds' : 'fails';
}

function ruleFor(
  check: CheckStandard,
  entryId: string,
  nominal: number,
  isLast: boolean,
  { rules, calibrationOf }: ReadingContext
): CriterionRule | null {
  if (check.kind === 'second source') return ruleOf(rules, 'second-source check');
  const closing = isLast ? ruleOf(rules, 'closing check') : null;
  if (closing) return closing;
  const lowest = lowestConcentration(calibrationOf(entryId));
  const atLowest = lowest !== null && nominal <= lowest * (1 + 1e-9);
  return (
    (atLowest ? ruleOf(rules, 'continuing check at the lowest level') : null) ??
    ruleOf(rules, 'continuing check')
  );
}

/** ng/mL in the vial, or the reason why there is none. */
function concentrationOf(
  reported: CheckReported,
  entry: PanelEntry,
  check: CheckStandard,
  { calibrationOf, panel, set }: ReadingContext
): number | string {
  const value = reported.state === 'value' ? reported.value : reported.limit;
  if (value === null) return 'no number came with it';
  if (reported.basis === 'vial') return value;
  if (reported.basis !== 'area') {
    return 'reported as an amount of a fraction or a content of the sample, which a check has not';
  }
  const nameOf = (id: string): string => panel.get(id)?.name ?? 'an analyte no longer on the panel';
  const standardId = entry.internalStandardId;
  if (wrongStandard(reported, standardId)) {
    return `recorded against ${namedStandard(reported.internalEntryId, nameOf)}, but ${panelNow(entry.name, standardId, nameOf)}`;
  }
  const line = calibrationOf(entry.id);
  if (!line.usable) return line.reason;
  let response = value;
  let perRatio = 1;
  if (standardId !== null) {
    if (reported.internalArea === null || reported.internalArea <= 0)
      return `no area of ${nameOf(standardId)}`;
    response = value / reported.internalArea;
    const concentration = standardConcentration(check, set, standardId);
    if (concentration === null) {
      return `the concentration of ${nameOf(standardId)} in ${check.label} is not recorded, and the levels differ in it`;
    }
    perRatio = concentration;
  }
  const { x } = solveCalibration(line.fit, response);
  return x === null ? 'its response lies where the line has no solution' : x * perRatio;
}
