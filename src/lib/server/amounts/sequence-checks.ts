import type { CriterionRule } from '../../domain/criteria';
import { calibrationsOf } from './experiment-amounts';
import { blankReading, checkReading, heldTo, ruleOf, type ReadingContext } from './check-readings';
import { flagCollector, type FlagsByInjection } from './flag-collector';
import { injectionNames, type InjectionNames } from './injection-names';
import { secondSourceGap, sequenceGaps } from './sequence-gaps';
import { runsOf, type Run } from './sequence-runs';
import type {
  BlankReading,
  CheckReading,
  CheckReported,
  CheckStandard,
  Flag,
  SequenceGap,
  SequenceInjection,
  SequenceInput,
  StandardArea
} from './sequence-types';
import { areasOf, calibrationResponses, standardAreas, type AreaContext } from './standard-areas';
import type { CalibrationSet, ExperimentData } from './types';

/** How many analytes of one check fail, of those that are held to a rule. */
export interface WholeCheck {
  readonly injectionId: string;
  readonly failed: number;
  readonly of: number;
  /** null: no rule says how many may. */
  readonly rule: CriterionRule | null;
  readonly holds: boolean | null;
}

/** What one run says of one calibration set. */
export interface RunOfSet {
  readonly set: CalibrationSet;
  /** Those that are read by the set, in order. */
  readonly injections: readonly SequenceInjection[];
  readonly readings: readonly CheckReading[];
  readonly wholes: readonly WholeCheck[];
  readonly blanks: readonly BlankReading[];
  readonly areas: readonly StandardArea[];
  readonly gaps: readonly SequenceGap[];
}

export interface RunFindings {
  readonly run: Run;
  readonly names: InjectionNames;
  readonly sets: readonly RunOfSet[];
}

export interface SequenceChecks {
  /** In the order of time. */
  readonly runs: readonly RunFindings[];
  /** What no run of a set shows, by set. */
  readonly setGaps: ReadonlyMap<string, readonly SequenceGap[]>;
  readonly flagsOf: (injectionId: string, entryId: string) => readonly Flag[];
  /** Everything flagged: by injection, then by panel entry. */
  readonly flags: FlagsByInjection;
  readonly injection: (injectionId: string) => SequenceInjection | null;
  /** How sentences name an injection, in its run. */
  readonly nameOf: (injectionId: string) => string;
}

/**
 * Holds the checks of every run against the rules of the study, and flags what lies beside a check that fails.
 *
 * - A continuing check outside its rule flags its analyte in the extracts on both its sides, up to the next check that reads the
 *   analyte or the levels. Where more analytes fail than a rule allows, the check fails as a whole and flags all of them.
 * - The latest second-source check outside its rule flags its analyte in everything that the set reads.
 * - An internal standard outside its window flags what is read against it in that injection; in a check it makes what is read
 *   against it fail.
 * - An instrument blank over its limit flags its analyte in the extracts after it, up to the next blank (common practice, no source).
 *
 * What was not run (a closing check, a check at all) is a gap and flags nothing.
 */
export function sequenceChecks(input: SequenceInput): SequenceChecks {
  const checks = new Map(input.checkStandards.map((check) => [check.id, check]));
  const experiments = new Map(input.experiments.map((experiment) => [experiment.id, experiment]));
  const counting = countingInjections(input);
  const setOf = (injection: SequenceInjection): string | null => setIdOf(injection, checks, experiments);
  const runs = runsOf(input.sequences, counting, setOf);
  const nameOfEntry = (id: string): string =>
    input.panel.get(id)?.name ?? 'an analyte no longer on the panel';

  const collector = flagCollector(entriesByInjection(input.experiments));
  const areas = areasOf(allReported(input), input.panel);
  const reportedOf = byInjectionAndEntry(input.checkReported);
  const latestSecondSource = new Map<string, { reading: CheckReading; name: string }>();
  const responses = new Map<string, ReadonlyMap<string, number>>();

  const findings = runs.map((run): RunFindings => {
    const names = injectionNames(run, input);
    const sets = input.sets.flatMap((set): RunOfSet[] => {
      const injections = run.injections.filter((injection) => setOf(injection) === set.id);
      if (injections.length === 0) return [];
      const lines = calibrationsOf(set, input.panel, nameOfEntry);
      const context: ReadingContext = { panel: input.panel, rules: input.rules, calibrationOf: lines, set };
      const areaContext: AreaContext = { areas, set, checks, experiments, rules: input.rules };
      const known =
        responses.get(set.id) ??
        calibrationResponses(
          counting.filter(({ subject }) => subject.kind === 'level' && subject.calibrationSetId === set.id),
          areaContext
        );
      responses.set(set.id, known);
      const found = standardAreas(injections, known, areaContext);
      const last = injections.findLast(
        ({ subject }) =>
          subject.kind === 'check' && checks.get(subject.checkStandardId)?.kind === 'continuing'
      );
      const readings = injections
        .flatMap((injection) => readingsOf(injection, checks, input, reportedOf, last === injection, context))
        .map((reading) => withStandard(reading, found, input, nameOfEntry));
      for (const reading of readings) {
        if (checks.get(reading.checkStandardId)?.kind !== 'second source' || reading.state === 'unread')
          continue;
        latestSecondSource.set(`${set.id} ${reading.entryId}`, {
          reading,
          name: names.of(reading.injectionId)
        });
      }
      const continuing = readings.filter(
        ({ checkStandardId }) => checks.get(checkStandardId)?.kind === 'continuing'
      );
      const wholes = wholeChecks(readings, ruleOf(input.rules, 'analytes failing a check'));
      const blanks = injections.flatMap((injection) =>
        blanksOf(injection, checks, input, reportedOf, context)
      );
      collector.checks({ injections, readings: continuing, wholes, names, nameOfEntry });
      collector.blanks({ injections, blanks, names, nameOfEntry });
      collector.standards({ injections, areas: found, panel: input.panel, nameOfEntry });
      const gaps = sequenceGaps({
        run,
        set,
        injections,
        checks,
        readings: continuing,
        names,
        nameOfEntry,
        input
      });
      return [{ set, injections, readings, wholes, blanks, areas: found, gaps }];
    });
    return { run, names, sets };
  });

  for (const [key, { reading, name }] of latestSecondSource) {
    if (reading.state !== 'fails') continue;
    const [setId] = key.split(' ');
    const extracts = counting.filter(
      (injection) => injection.subject.kind === 'extract' && setOf(injection) === setId
    );
    collector.secondSource(extracts, reading, name, nameOfEntry);
  }

  const byId = new Map(counting.map((injection) => [injection.id, injection]));
  const namesOf = new Map(
    findings.flatMap(({ run, names }) => run.injections.map(({ id }) => [id, names] as const))
  );
  return {
    runs: findings,
    setGaps: new Map(
      input.sets.map((set) => [set.id, secondSourceGap(set, input, latestSecondSource)] as const)
    ),
    flagsOf: (injectionId, entryId) => collector.flags.get(injectionId)?.get(entryId) ?? [],
    flags: collector.flags,
    injection: (injectionId) => byId.get(injectionId) ?? null,
    nameOf: (injectionId) => namesOf.get(injectionId)?.of(injectionId) ?? 'an injection'
  };
}

function setIdOf(
  { subject }: SequenceInjection,
  checks: ReadonlyMap<string, CheckStandard>,
  experiments: ReadonlyMap<string, ExperimentData>
): string | null {
  switch (subject.kind) {
    case 'extract':
      return experiments.get(subject.experimentId)?.calibrationSetId ?? null;
    case 'level':
      return subject.calibrationSetId;
    default:
      return checks.get(subject.checkStandardId)?.calibrationSetId ?? null;
  }
}

function* allReported(input: SequenceInput) {
  for (const experiment of input.experiments) yield* experiment.reported;
  for (const set of input.sets) yield* set.reported;
  yield* input.checkReported;
}

/** Injections of which at least one number counts: the others were covered by a later import. */
function countingInjections(input: SequenceInput): SequenceInjection[] {
  const counting = new Set<string>();
  for (const { injectionId } of allReported(input)) counting.add(injectionId);
  return input.injections.filter(({ id }) => counting.has(id));
}

function entriesByInjection(
  experiments: readonly ExperimentData[]
): ReadonlyMap<string, ReadonlySet<string>> {
  const entries = new Map<string, Set<string>>();
  for (const { reported } of experiments) {
    for (const { injectionId, entryId } of reported) {
      const own = entries.get(injectionId);
      if (own) own.add(entryId);
      else entries.set(injectionId, new Set([entryId]));
    }
  }
  return entries;
}

type ReportedOf = (injectionId: string, entryId: string) => CheckReported | null;

function byInjectionAndEntry(reported: readonly CheckReported[]): ReportedOf {
  const rows = new Map<string, Map<string, CheckReported>>();
  for (const row of reported) {
    const own = rows.get(row.injectionId);
    if (own) own.set(row.entryId, row);
    else rows.set(row.injectionId, new Map([[row.entryId, row]]));
  }
  return (injectionId, entryId) => rows.get(injectionId)?.get(entryId) ?? null;
}

function readingsOf(
  { id, subject }: SequenceInjection,
  checks: ReadonlyMap<string, CheckStandard>,
  { panel }: SequenceInput,
  reportedOf: ReportedOf,
  isLast: boolean,
  context: ReadingContext
): CheckReading[] {
  const check = subject.kind === 'check' ? checks.get(subject.checkStandardId) : undefined;
  if (!check) return [];
  return [...panel.values()]
    .filter(
      ({ id: entryId, role }) => role !== 'injection internal standard' && check.concentrations.has(entryId)
    )
    .map((entry) => checkReading(id, check, entry, reportedOf(id, entry.id), isLast, context));
}

function blanksOf(
  { id, subject }: SequenceInjection,
  checks: ReadonlyMap<string, CheckStandard>,
  { panel }: SequenceInput,
  reportedOf: ReportedOf,
  context: ReadingContext
): BlankReading[] {
  const check = subject.kind === 'blank' ? checks.get(subject.checkStandardId) : undefined;
  if (!check) return [];
  return [...panel.values()]
    .filter(
      ({ id: entryId, role }) => role !== 'injection internal standard' && !check.concentrations.has(entryId)
    )
    .flatMap((entry) => {
      const reported = reportedOf(id, entry.id);
      return reported ? [blankReading(id, check, entry, reported, context)] : [];
    });
}

/** A concentration that was read against a standard outside its window is no good reading. */
function withStandard(
  reading: CheckReading,
  areas: readonly StandardArea[],
  { panel }: SequenceInput,
  nameOfEntry: (entryId: string) => string
): CheckReading {
  const standardId = panel.get(reading.entryId)?.internalStandardId ?? null;
  if (standardId === null || reading.percent === null || reading.state === 'fails') return reading;
  const area = areas.find(
    (item) => item.injectionId === reading.injectionId && item.standardId === standardId
  );
  const [failed] = area?.failures ?? [];
  if (!failed) return reading;
  return {
    ...reading,
    state: 'fails',
    rule: failed.rule,
    why: `the area of ${nameOfEntry(standardId)} in it is outside its window`
  };
}

function wholeChecks(readings: readonly CheckReading[], rule: CriterionRule | null): WholeCheck[] {
  const counts = new Map<string, { failed: number; of: number }>();
  for (const { injectionId, state } of readings) {
    const known = counts.get(injectionId) ?? { failed: 0, of: 0 };
    if (state === 'fails' || state === 'holds') known.of += 1;
    if (state === 'fails') known.failed += 1;
    counts.set(injectionId, known);
  }
  return [...counts].map(([injectionId, { failed, of }]) => ({
    injectionId,
    failed,
    of,
    rule,
    holds: rule === null || of === 0 ? null : heldTo(rule, (100 * failed) / of) === 'holds'
  }));
}
