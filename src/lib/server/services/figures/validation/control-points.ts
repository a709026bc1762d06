import { dayText } from '../../../../domain/moment-text';
import type { CriterionRule } from '../../../../domain/criteria';
import {
  areasOf,
  calibrationResponses,
  standardAreas,
  type AreaContext
} from '../../../amounts/standard-areas';
import type { SequenceInjection } from '../../../amounts/sequence-types';
import { control, type Control, type ControlPoint } from '../../../amounts/validation/control';
import { replicateExclusion } from '../../../amounts/exclusions';
import { ruleOf } from '../criteria';
import type { StudyExperiment, StudyPanelEntry } from '../study-data';
import type { StudyFigures } from '../study-figures';
import type { ValidationContext } from './context';

/** A point with where it leads and when it was measured. */
export interface TimedPoint extends ControlPoint {
  readonly replicateId: string;
  readonly fractionId: string | null;
  /** The entry whose amount opens at this point: the surrogate, or one that was read against the standard. */
  readonly opensEntry: string | null;
}

export interface ControlSeries {
  readonly entry: StudyPanelEntry;
  readonly points: readonly TimedPoint[];
  readonly control: Control;
  readonly rule: CriterionRule | null;
  readonly refusal: string | null;
}

/** Surrogates and injection internal standards of a study, each in the order in which it was measured. */
export function controlSeries(context: ValidationContext): readonly ControlSeries[] {
  const { figures } = context;
  const { experiments } = context.evidence('control');
  const { rules } = figures.data.criteriaSet;
  const surrogates = figures.surrogates.map((entry) =>
    seriesOf(
      entry,
      experiments.flatMap((experiment) => surrogatePoints(figures, experiment, entry)),
      ruleOf(rules, 'surrogate recovery'),
      experiments
        .map(({ id }) => figures.surrogate(id, entry.id).refusal)
        .find((refusal) => refusal !== null) ?? null
    )
  );
  const standards = figures.data.panel.filter(({ role }) => role === 'injection internal standard');
  const areas = experiments.map((experiment) => areaPoints(figures, experiment));
  return [
    ...surrogates,
    ...standards.map((entry) =>
      seriesOf(
        entry,
        areas.flatMap((of) => of.get(entry.id) ?? []),
        ruleOf(rules, 'internal standard area'),
        null
      )
    )
  ];
}

interface Ordered extends TimedPoint {
  readonly order: readonly [day: string, file: number, row: number];
}

function seriesOf(
  entry: StudyPanelEntry,
  points: readonly Ordered[],
  rule: CriterionRule | null,
  refusal: string | null
): ControlSeries {
  // Without a day a point stands at the end: nobody can tell where it belongs.
  const sorted = [...points].sort((a, b) =>
    a.order[0] < b.order[0]
      ? -1
      : a.order[0] > b.order[0]
        ? 1
        : a.order[1] - b.order[1] || a.order[2] - b.order[2]
  );
  return { entry, points: sorted, control: control(sorted, rule), rule, refusal };
}

function surrogatePoints(
  figures: StudyFigures,
  experiment: StudyExperiment,
  entry: StudyPanelEntry
): Ordered[] {
  return figures.surrogate(experiment.id, entry.id).portions.map(({ portion, percent, reason }) => {
    const { replicate } = portion;
    const place = portion.places.find(({ fraction }) => fraction.countsAs === 'method') ?? portion.places[0];
    const first = place?.found.used[0] ?? place?.found.unused[0];
    const reported = first && ('trace' in first ? first.trace.reported : first.reported);
    return {
      key: `${experiment.number} ${replicate.id}`,
      label: replicate.label,
      experiment: experiment.number,
      ...timed(figures, experiment, replicate.id, reported ?? null),
      value: percent,
      counted: portion.exclusion === null && percent !== null,
      reason: portion.exclusion ? `set aside: ${portion.exclusion.cause}` : reason,
      replicateId: replicate.id,
      fractionId: place?.fraction.id ?? null,
      opensEntry: entry.id
    };
  });
}

/** Areas of internal standards, percent of what the levels of the calibration make of the same concentration. */
function areaPoints(
  figures: StudyFigures,
  experiment: StudyExperiment
): ReadonlyMap<string, readonly Ordered[]> {
  const set = figures.data.calibrationSets.find(({ id }) => id === experiment.calibrationSetId);
  if (!set) return new Map();
  const injections = new Map<string, SequenceInjection>();
  const level = (of: (typeof set.reported)[number]): void =>
    void injections.set(of.injectionId, {
      ...bare(of.injectionId, of.injection, of.dilution),
      subject: { kind: 'level', calibrationSetId: set.id, levelId: of.levelId }
    });
  set.reported.forEach(level);
  const levels = [...injections.values()];
  const first = new Map<string, (typeof experiment.reported)[number]>();
  for (const of of experiment.reported) if (!first.has(of.injectionId)) first.set(of.injectionId, of);
  const vials = [...first.values()].map((of): SequenceInjection => ({
    ...bare(of.injectionId, of.injection, of.dilution),
    subject: {
      kind: 'extract',
      experimentId: experiment.id,
      replicateId: of.replicateId,
      fractionId: of.fractionId,
      finalVolumeMl: of.finalVolumeMl
    }
  }));
  const context: AreaContext = {
    areas: areasOf([...set.reported, ...experiment.reported], figures.entries),
    set,
    checks: new Map(),
    experiments: new Map([[experiment.id, experiment]]),
    rules: []
  };
  const readAgainst = new Map(
    figures.data.panel.flatMap((entry) =>
      entry.internalStandardId === null ? [] : [[entry.internalStandardId, entry.id] as const]
    )
  );
  const points = new Map<string, Ordered[]>();
  for (const { injectionId, standardId, percentOfCalibration } of standardAreas(
    vials,
    calibrationResponses(levels, context),
    context
  )) {
    const reported = first.get(injectionId);
    if (!reported) continue;
    const replicate = experiment.replicates.find(({ id }) => id === reported.replicateId);
    const exclusion = replicateExclusion(experiment.exclusions, reported.replicateId, standardId);
    const fraction = experiment.fractions.find(({ id }) => id === reported.fractionId);
    const of = points.get(standardId) ?? [];
    points.set(standardId, of);
    of.push({
      key: `${experiment.number} ${injectionId}`,
      label: `${replicate?.label ?? ''}${experiment.fractions.length > 1 && fraction ? `, ${fraction.name.toLowerCase()}` : ''}${reported.injection > 1 ? `, injection ${reported.injection}` : ''}`,
      experiment: experiment.number,
      ...timed(figures, experiment, reported.replicateId, reported),
      value: percentOfCalibration,
      counted: exclusion === null && percentOfCalibration !== null,
      reason: exclusion
        ? `set aside: ${exclusion.cause}`
        : percentOfCalibration === null
          ? 'its concentration in the vial, or its area in the levels, is not known'
          : null,
      replicateId: reported.replicateId,
      fractionId: reported.fractionId ?? 'whole',
      opensEntry: readAgainst.get(standardId) ?? null
    });
  }
  return points;
}

const bare = (
  id: string,
  number: number,
  dilution: number
): Pick<SequenceInjection, 'id' | 'sequenceId' | 'position' | 'number' | 'dilution' | 'runAt'> => ({
  id,
  sequenceId: '',
  position: 1,
  number,
  dilution,
  runAt: null
});

function timed(
  figures: StudyFigures,
  experiment: StudyExperiment,
  replicateId: string,
  reported: { readonly importId: string; readonly row: number } | null
): Pick<Ordered, 'day' | 'order'> {
  const days = experiment.replicateDays.get(replicateId);
  const day = days?.analysedOn ?? days?.extractedOn ?? experiment.performedOn;
  const file = figures.data.imports.findIndex(({ id }) => id === reported?.importId);
  return { day, order: [day ?? '9999', file, reported?.row ?? 0] };
}

/** "experiment 3, 26 Oct 2026" */
export function placeText({ experiment, day }: Pick<ControlPoint, 'experiment' | 'day'>): string {
  return `experiment ${experiment}, ${day === null ? 'no date' : dayText(day)}`;
}
