import type { CriterionRule } from '../../domain/criteria';
import { heldTo, ruleOf, standardConcentration } from './check-readings';
import type { CheckStandard, SequenceInjection, StandardArea } from './sequence-types';
import type { CalibrationSet, ExperimentData, PanelEntry, Reported } from './types';

/** Areas of internal standards by injection, then by the standard's panel entry. */
export type AreasByInjection = ReadonlyMap<string, ReadonlyMap<string, number>>;

/** Gathers the areas of internal standards: those that stand beside an analyte, and those reported in rows of their own. */
export function areasOf(
  reported: Iterable<Reported>,
  panel: ReadonlyMap<string, PanelEntry>
): AreasByInjection {
  const standards = new Set([...panel.values()].flatMap((entry) => entry.internalStandardId ?? []));
  const areas = new Map<string, Map<string, number>>();
  const add = (injectionId: string, standardId: string, area: number): void => {
    const own = areas.get(injectionId);
    if (own) own.set(standardId, area);
    else areas.set(injectionId, new Map([[standardId, area]]));
  };
  for (const row of reported) {
    if (row.basis !== 'area') continue;
    if (row.internalEntryId !== null && row.internalArea !== null)
      add(row.injectionId, row.internalEntryId, row.internalArea);
    if (standards.has(row.entryId) && row.state === 'value' && row.value !== null)
      add(row.injectionId, row.entryId, row.value);
  }
  return areas;
}

export interface AreaContext {
  readonly areas: AreasByInjection;
  readonly set: CalibrationSet;
  readonly checks: ReadonlyMap<string, CheckStandard>;
  readonly experiments: ReadonlyMap<string, ExperimentData>;
  readonly rules: readonly CriterionRule[];
}

/**
 * The mean of area over concentration of each internal standard, over the injections of the levels of a set. Where every vial holds as much of the standard,
 * the ratio of two of these is the ratio of the areas; where an addition to the whole extract ends up thinner or stronger, the
 * concentration takes that out.
 *
 * @param injections of the levels of the set, of whatever run
 */
export function calibrationResponses(
  injections: readonly SequenceInjection[],
  context: AreaContext
): ReadonlyMap<string, number> {
  const sums = new Map<string, { sum: number; count: number }>();
  for (const injection of injections) {
    for (const [standardId, area] of context.areas.get(injection.id) ?? []) {
      const concentration = concentrationIn(injection, standardId, context);
      if (concentration === null) continue;
      const known = sums.get(standardId) ?? { sum: 0, count: 0 };
      sums.set(standardId, { sum: known.sum + area / concentration, count: known.count + 1 });
    }
  }
  return new Map([...sums].map(([standardId, { sum, count }]) => [standardId, sum / count]));
}

/**
 * The internal standards of the injections of one run that are read by one set, each as percent of its mean over the levels (8270E, 625.1, 539) and of the
 * latest check before it whose own area holds.
 */
export function standardAreas(
  injections: readonly SequenceInjection[],
  responses: ReadonlyMap<string, number>,
  context: AreaContext
): StandardArea[] {
  const againstCalibration = ruleOf(context.rules, 'internal standard area');
  const againstCheck = ruleOf(context.rules, 'internal standard area against the latest check');
  const latest = new Map<string, number>();
  return injections.flatMap((injection) =>
    [...(context.areas.get(injection.id) ?? [])].flatMap(([standardId, area]): StandardArea[] => {
      const concentration = concentrationIn(injection, standardId, context);
      const response = concentration === null ? null : area / concentration;
      const mean = responses.get(standardId) ?? null;
      const before = latest.get(standardId) ?? null;
      const percentOfCalibration = response === null || mean === null ? null : (100 * response) / mean;
      const percentOfCheck = response === null || before === null ? null : (100 * response) / before;
      const failures = [
        failure(againstCalibration, percentOfCalibration),
        failure(againstCheck, percentOfCheck)
      ].filter((item) => item !== null);
      if (injection.subject.kind === 'check' && response !== null && failures.length === 0) {
        latest.set(standardId, response);
      }
      return [
        { injectionId: injection.id, standardId, area, percentOfCalibration, percentOfCheck, failures }
      ];
    })
  );
}

function failure(
  rule: CriterionRule | null,
  percent: number | null
): { readonly rule: CriterionRule; readonly percent: number } | null {
  return rule && percent !== null && heldTo(rule, percent) === 'fails' ? { rule, percent } : null;
}

/** ng/mL of an internal standard in the vial of an injection; null: it cannot be told, or hangs on a recovery. */
function concentrationIn(
  { subject, dilution }: SequenceInjection,
  standardId: string,
  { set, checks, experiments }: AreaContext
): number | null {
  switch (subject.kind) {
    case 'level':
      return set.levels.find(({ id }) => id === subject.levelId)?.concentrations.get(standardId) ?? null;
    case 'check':
    case 'blank': {
      const check = checks.get(subject.checkStandardId);
      return check ? standardConcentration(check, set, standardId) : null;
    }
    case 'extract': {
      const addition = experiments
        .get(subject.experimentId)
        ?.additions.find(({ entryId }) => entryId === standardId);
      if (addition?.point === 'vial') return addition.concentrationNgPerMl;
      if (addition?.point !== 'extract' || addition.amountNg === null) return null;
      return subject.finalVolumeMl === null ? null : addition.amountNg / (subject.finalVolumeMl * dilution);
    }
  }
}
