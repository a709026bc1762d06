import type { CriterionRule } from '../../../domain/criteria';
import { limitsText } from '../../../domain/rule-limits';
import type {
  CheckInjectionView,
  CheckReadingView,
  FlagView,
  InjectionKind,
  SequenceInjectionView,
  SequenceSetView,
  SequenceView,
  TraceView
} from '../../../views/sequences';
import { ruleOf } from '../../amounts/check-readings';
import type { RunFindings, RunOfSet } from '../../amounts/sequence-checks';
import type { Flag, SequenceInjection } from '../../amounts/sequence-types';
import { listed, ruleView, sentence } from './figure-parts';
import { runTitle } from './sequence-items';
import type { StudyFigures } from './study-figures';

/** One run as its page shows it: the strip of injections, both traces, each check with its readings, flags and gaps in words. */
export function sequenceView(figures: StudyFigures, findings: RunFindings): SequenceView {
  const { data } = figures;
  const { run, sets } = findings;
  const places = new Map(run.injections.map(({ id }, index) => [id, index + 1]));
  const checks = run.injections.flatMap((injection) => checkInjection(figures, findings, injection, places));
  const flags = flagViews(figures, findings, places);
  return {
    id: run.id,
    title: runTitle(findings),
    instrument: run.sequences[0]?.instrument ?? '',
    runOn: run.sequences[0]?.runOn ?? null,
    orderedBy: run.orderedBy,
    lead: leadOf(figures, findings, checks),
    files: run.sequences.flatMap(({ importId }) => {
      const file = data.imports.find(({ id }) => id === importId);
      return file ? [{ name: file.fileName, href: `/studies/${data.code}/data/${importId}` }] : [];
    }),
    injections: run.injections.map((injection, index) =>
      injectionView(figures, findings, injection, index + 1, checks)
    ),
    sets: sets.map((ofSet) => setView(figures, ofSet, places)),
    checks,
    flags,
    gaps: sets.flatMap(({ set, gaps }) =>
      [...gaps, ...(figures.checks().setGaps.get(set.id) ?? [])].map(({ text, rule }) => ({
        text,
        rule: rule && ruleView(rule)
      }))
    )
  };
}

function kindOf(figures: StudyFigures, { subject }: SequenceInjection): InjectionKind {
  if (subject.kind !== 'check') return subject.kind;
  const check = figures.data.checkStandards.find(({ id }) => id === subject.checkStandardId);
  return check?.kind === 'second source' ? 'second source' : 'continuing';
}

/** "14:20", in the instrument's own time. */
const clockText = (moment: number): string => new Date(moment).toISOString().slice(11, 16);

function injectionView(
  figures: StudyFigures,
  { names }: RunFindings,
  injection: SequenceInjection,
  place: number,
  checks: readonly CheckInjectionView[]
): SequenceInjectionView {
  const { data } = figures;
  const { id, subject, runAt } = injection;
  const experiment =
    subject.kind === 'extract'
      ? data.experiments.find((item) => item.id === subject.experimentId)
      : undefined;
  const readings = checks.find(({ injectionId }) => injectionId === id)?.readings ?? [];
  const measured = new Set(
    experiment?.reported.filter(({ injectionId }) => injectionId === id).map(({ entryId }) => entryId)
  );
  return {
    id,
    place,
    kind: kindOf(figures, injection),
    label: names.label(id),
    time: runAt === null ? null : clockText(runAt),
    experiment: experiment
      ? { number: experiment.number, href: `/studies/${data.code}/experiments/${experiment.number}` }
      : null,
    flagged: figures.checks().flags.get(id)?.size ?? 0,
    measured: measured.size,
    failed: readings.filter(({ state }) => state === 'fails').length,
    held: readings.filter(({ state }) => state === 'fails' || state === 'holds').length
  };
}

function setView(
  figures: StudyFigures,
  { set, readings, areas }: RunOfSet,
  places: ReadonlyMap<string, number>
): SequenceSetView {
  const { rules } = figures.data.criteriaSet;
  const nameOf = (id: string): string => figures.entries.get(id)?.name ?? 'an analyte no longer on the panel';
  const standardRule = ruleOf(rules, 'internal standard area');
  const driftRule = ruleOf(rules, 'continuing check');
  const standards = grouped(areas, ({ standardId }) => standardId).map(([id, own]): TraceView => ({
    id,
    name: nameOf(id),
    points: own.map(({ injectionId, percentOfCalibration, failures }) => ({
      place: places.get(injectionId) ?? 0,
      percent: percentOfCalibration,
      fails: failures.length > 0
    }))
  }));
  // A second source is another solution: what it reads is no step on the way from one continuing check to the next.
  const kindOfCheck = new Map(figures.data.checkStandards.map(({ id, kind }) => [id, kind]));
  const drift = grouped(
    readings,
    ({ entryId, checkStandardId }) => `${entryId} ${kindOfCheck.get(checkStandardId) ?? ''}`
  ).map(([id, own]): TraceView => ({
    id,
    name: nameOf(own[0]?.entryId ?? ''),
    points: own.map(({ injectionId, percent, state }) => ({
      place: places.get(injectionId) ?? 0,
      percent,
      fails: state === 'fails'
    }))
  }));
  return {
    id: set.id,
    name: set.name,
    href: `/studies/${figures.data.code}/calibration/${set.id}`,
    standards,
    standardRule: standardRule && ruleView(standardRule),
    standardLimits: [standardRule?.low ?? null, standardRule?.high ?? null],
    drift,
    driftRule: driftRule && ruleView(driftRule),
    driftLimits: [driftRule?.low ?? null, driftRule?.high ?? null]
  };
}

function grouped<Item>(items: readonly Item[], keyOf: (item: Item) => string): [string, Item[]][] {
  const groups = new Map<string, Item[]>();
  for (const item of items) {
    const own = groups.get(keyOf(item));
    if (own) own.push(item);
    else groups.set(keyOf(item), [item]);
  }
  return [...groups];
}

function checkInjection(
  figures: StudyFigures,
  { sets, names }: RunFindings,
  injection: SequenceInjection,
  places: ReadonlyMap<string, number>
): CheckInjectionView[] {
  const kind = kindOf(figures, injection);
  if (kind === 'level' || kind === 'extract') return [];
  const nameOf = (id: string): string => figures.entries.get(id)?.name ?? '';
  const readings = sets.flatMap((ofSet): CheckReadingView[] => [
    ...ofSet.readings
      .filter(({ injectionId }) => injectionId === injection.id)
      .map(({ entryId, nominal, found, percent, state, rule, why }) => ({
        entryId,
        name: nameOf(entryId),
        nominal,
        found,
        percent,
        state,
        ...askedOf(rule),
        why
      })),
    ...ofSet.blanks
      .filter(({ injectionId }) => injectionId === injection.id)
      .map(({ entryId, percentOfLowest, detected, state, rule, why }) => ({
        entryId,
        name: nameOf(entryId),
        nominal: null,
        found: null,
        percent: percentOfLowest,
        state,
        ...askedOf(rule),
        why: why ?? (detected || percentOfLowest === null ? null : 'not detected')
      }))
  ]);
  const whole = sets.flatMap(({ wholes }) => wholes).find(({ injectionId }) => injectionId === injection.id);
  const failed = readings.filter(({ state }) => state === 'fails').length;
  const held = readings.filter(({ state }) => state === 'fails' || state === 'holds').length;
  const asAWhole =
    whole?.holds === false && whole.rule && kind === 'continuing'
      ? `; ${limitsText(whole.rule)} may, so that it fails as a whole`
      : '';
  const says =
    readings.length === 0
      ? 'no readings'
      : held === 0
        ? 'no rule to hold it against'
        : failed === 0
          ? `all ${held} hold`
          : `${failed} of ${held} fail${asAWhole}`;
  return [
    {
      injectionId: injection.id,
      place: places.get(injection.id) ?? 0,
      name: names.of(injection.id),
      kind,
      says,
      fails: failed > 0,
      readings
    }
  ];
}

function askedOf(rule: CriterionRule | null): Pick<CheckReadingView, 'asked' | 'limits'> {
  return {
    asked: rule ? limitsText(rule) : 'no rule',
    limits: rule ? [rule.low, rule.high].filter((limit) => limit !== null) : []
  };
}

/** Each reason once, with every injection of the run that it flags. */
function flagViews(
  figures: StudyFigures,
  { run, names }: RunFindings,
  places: ReadonlyMap<string, number>
): FlagView[] {
  const { flags } = figures.checks();
  const reasons = new Map<string, { flag: Flag; ids: Set<string> }>();
  for (const { id } of run.injections) {
    for (const own of flags.get(id)?.values() ?? []) {
      for (const flag of own) {
        const key = `${flag.cause} ${flag.injectionId} ${flag.cause === 'internal standard' ? flag.text : flag.entryId}`;
        const known = reasons.get(key) ?? { flag, ids: new Set<string>() };
        reasons.set(key, known);
        known.ids.add(id);
      }
    }
  }
  return [...reasons.values()].map(({ flag, ids }) => ({
    // Which side it lies on is told by the places.
    text: sentence(flag.text.replace(/ (?:before|after) it, ([^,]+),/, ' $1')),
    rule: ruleView(flag.rule),
    places: [...ids].map((id) => places.get(id) ?? 0),
    labels: [...ids].map((id) => names.of(id))
  }));
}

function leadOf(
  figures: StudyFigures,
  { run, sets }: RunFindings,
  checks: readonly CheckInjectionView[]
): string {
  const { flags } = figures.checks();
  const extracts = run.injections.filter(({ subject }) => subject.kind === 'extract');
  const flagged = extracts.filter(({ id }) => flags.has(id)).length;
  const failing = checks.filter(({ fails }) => fails);
  if (checks.length === 0) {
    return extracts.length === 0
      ? 'This run brought levels only.'
      : `No check was run with these ${extracts.length} extracts, so nothing tells whether the calibration held.`;
  }
  const open = sets.some(({ gaps }) => gaps.some(({ kind }) => kind !== 'order of the file'));
  const gapped = open ? ' What the run does not show is listed below.' : '';
  if (failing.length === 0 && flagged === 0) {
    return `Every check holds, and none of the ${extracts.length} extracts is flagged.${gapped}`;
  }
  const who =
    failing.length === 0
      ? ''
      : ` ${listed(failing.map(({ name }) => name))} ${failing.length === 1 ? 'fails' : 'fail'} for some analytes.`;
  return `${flagged} of ${extracts.length} extracts ${flagged === 1 ? 'is' : 'are'} flagged for at least one analyte.${who}${gapped}`;
}
