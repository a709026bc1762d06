import { dayText } from '../../../domain/moment-text';
import type { StageExperiment, StageLadderView, StagePoint, StageReach } from '../../../views/stage-ladder';
import { checkCalibration } from '../../amounts/calibration-check';
import type { EntryInVariant } from '../../amounts/variant-figures';
import type { Link } from './addresses';
import { recoveryBand } from './criteria';
import { countsText, listed } from './figure-parts';
import type { StudyExperiment, StudyStageData } from './study-data';
import type { StudyFigures, VariantContext } from './study-figures';

/** The stages of a variant as reaches of a stream, from the sample down to the detector. */
export function stageLadderOf(
  figures: StudyFigures,
  context: VariantContext | null,
  link: Link
): StageLadderView {
  const base = `/studies/${figures.data.code}`;
  const variant = context?.variant;
  return {
    criteria: recoveryBand(figures.data.criteriaSet.rules),
    wholeMethod: {
      note: [
        context?.top && !context.whole ? 'nothing was spiked in the sample yet' : 'what the extract holds',
        ...(variant ? [`variant ${variant.code}`] : [])
      ].join(', '),
      href: variant ? `${base}/balance?variant=${variant.code}` : `${base}/balance`,
      points: wholeMethodPoints(figures, context, link)
    },
    reaches: [...figures.data.stages].reverse().map((stage) => reachOf(figures, context, stage, link, base))
  };
}

function wholeMethodPoints(figures: StudyFigures, context: VariantContext | null, link: Link): StagePoint[] {
  const top = context?.whole;
  if (!top) return [];
  return figures.targets.flatMap((entry) => {
    const found = figures.entry(top.id, entry.id);
    if (!found.ready || !found.balance.method) return [];
    return [
      {
        panelEntryId: entry.id,
        name: entry.name,
        value: found.balance.method.mean,
        verdict: found.verdict,
        href: link({ kind: 'recovery', experiment: top.number, entry: entry.id })
      }
    ];
  });
}

function reachOf(
  figures: StudyFigures,
  context: VariantContext | null,
  stage: StudyStageData,
  link: Link,
  base: string
): StageReach {
  const found = context?.stages.find((item) => item.key === stage.key);
  const evidence = found?.evidence?.amounts.experiment.id ?? null;
  const here = figures.data.experiments.filter((item) => item.stageKey === stage.key);
  const standing = here.filter((item) => item.id === evidence);
  const others = here.filter((item) => item.id !== evidence && !standsElsewhere(figures, context, item));
  const href = standing[0] ? `${base}/experiments/${standing[0].number}` : `${base}/experiments`;
  const points = context ? pointsOf(figures, context, stage, link) : [];
  return {
    key: stage.key,
    name: stage.name,
    number: stage.position,
    kind: stage.kind,
    href,
    experiments: [...standing, ...others].map((item) => experimentView(item, base, item.id === evidence)),
    remaining: context ? remainingBelow(context, stage) : null,
    points,
    status: stage.kind === 'signal' && standing[0] ? calibrationStatus(figures, standing[0]) : null,
    gap: gapOf(figures, context, stage, points.length, base)
  };
}

/** True for an experiment that stands for the same stage of another variant: it belongs on that variant's ladder. */
function standsElsewhere(
  figures: StudyFigures,
  context: VariantContext | null,
  experiment: StudyExperiment
): boolean {
  return figures.data.variants.some(
    (variant) =>
      variant.id !== context?.variant.id &&
      variant.evidence.some((item) => item.experimentId === experiment.id)
  );
}

function experimentView(experiment: StudyExperiment, base: string, stands: boolean): StageExperiment {
  const parts = [
    countsText(experiment.replicates),
    experiment.medium,
    ...(experiment.performedOn ? [dayText(experiment.performedOn)] : []),
    ...(stands ? [] : ['shown beside, not pooled'])
  ];
  return {
    title: experiment.title,
    href: `${base}/experiments/${experiment.number}`,
    detail: parts.filter((part) => part !== '').join(', ')
  };
}

function pointsOf(
  figures: StudyFigures,
  context: VariantContext,
  stage: StudyStageData,
  link: Link
): StagePoint[] {
  return figures.targets.flatMap((entry) => {
    const row = context.figures.entries.get(entry.id)?.rows.find((item) => item.stage === stage.key);
    const recovered = row?.recovered.estimate ?? null;
    const value =
      stage.kind === 'signal' ? (recovered === null ? null : recovered - 100) : (row?.lost?.estimate ?? null);
    if (value === null) return [];
    const address = {
      kind: 'loss',
      variant: context.variant.code,
      stage: stage.key,
      entry: entry.id
    } as const;
    return [{ panelEntryId: entry.id, name: entry.name, value, verdict: null, href: link(address) }];
  });
}

/** Median over the analytes of what is left of 100 after a stage: 100 times the step recoveries from the sample down to it. */
function remainingBelow(context: VariantContext, stage: StudyStageData): number | null {
  const values = [...context.figures.entries.values()]
    .map((item) => remainingOf(item, stage.key))
    .filter((value) => value !== null)
    .sort((a, b) => a - b);
  const middle = values.length / 2;
  if (values.length === 0) return null;
  return Number.isInteger(middle)
    ? ((values[middle - 1] ?? 0) + (values[middle] ?? 0)) / 2
    : (values[Math.floor(middle)] ?? null);
}

function remainingOf(item: EntryInVariant, key: string): number | null {
  const index = item.rows.findIndex((row) => row.stage === key);
  if (index < 0) return null;
  const top = item.rows.at(-1)?.recovered.estimate ?? null;
  // The signal stage loses nothing: what reaches it is what the stage before it left.
  const before =
    index === 0
      ? item.rows[0]?.lost === null
        ? item.rows[0].recovered.estimate
        : 100
      : item.rows[index - 1]?.recovered.estimate;
  if (top === null || !before || before <= 0) return null;
  return Math.max(0, (100 * top) / before);
}

function calibrationStatus(figures: StudyFigures, experiment: StudyExperiment): StageReach['status'] {
  const amounts = figures.amounts(experiment.id);
  const set = figures.data.calibrationSets.find((item) => item.id === experiment.calibrationSetId);
  if (!set) return null;
  let checked = 0;
  const broken: string[] = [];
  for (const entry of figures.targets) {
    const calibration = amounts.calibrationOf(entry.id);
    if (!calibration.usable) continue;
    const checks = checkCalibration(calibration, figures.data.criteriaSet.rules);
    if (checks.length > 0) checked += 1;
    if (checks.some((check) => !check.holds)) broken.push(entry.name);
  }
  if (checked === 0)
    return { verdict: null, text: `${set.name}: ${set.levels.length} levels, no rule to hold it against` };
  if (broken.length === 0)
    return { verdict: 'inside', text: `calibration holds its rules for ${checked} analytes` };
  const some =
    broken.length > 3 ? `${broken.slice(0, 3).join(', ')} and ${broken.length - 3} more` : listed(broken);
  return { verdict: 'outside', text: `calibration breaks a rule for ${some}` };
}

function gapOf(
  figures: StudyFigures,
  context: VariantContext | null,
  stage: StudyStageData,
  shown: number,
  base: string
): StageReach['gap'] {
  if (!context) {
    return { text: 'No variant is described yet.', href: `${base}/variants`, action: 'Describe a variant' };
  }
  const found = context.stages.find((item) => item.key === stage.key);
  if (!found?.evidence) {
    const above = figures.data.stages
      .find((item) => item.position === stage.position + 1)
      ?.name.toLowerCase();
    const text =
      stage.kind === 'signal'
        ? 'No standards have been measured on the instrument yet, so every recovery is held against exactly 100.'
        : above
          ? `Nothing has been spiked before ${stage.name.toLowerCase()} yet, so a loss there cannot be told from one in ${above}.`
          : `Nothing has been spiked in the sample yet, so nothing is known of the whole method.`;
    return { text, href: `${base}/experiments/new?stage=${stage.key}`, action: 'Add an experiment' };
  }
  const lacking = [...context.figures.entries.values()].flatMap((item) => {
    const gap = item.gaps.find((candidate) => candidate.key === stage.key);
    if (item.refusal) return [{ name: item.entry.name, reason: item.refusal }];
    if (gap) return [{ name: item.entry.name, reason: gap.reason }];
    const row = item.rows.find((candidate) => candidate.stage === stage.key);
    // Said once, at the stage where it shows, and not again at every stage below.
    const isTop = item.rows.at(-1) === row;
    return isTop && stage.kind === 'loss' && (row?.lost?.estimate ?? null) === null
      ? [{ name: item.entry.name, reason: 'nothing of it came back, so the losses cannot be told apart' }]
      : [];
  });
  const covers = new Set(
    [...context.figures.entries.values()].flatMap(
      (item) => item.rows.find((row) => row.stage === stage.key)?.covers ?? []
    )
  );
  const nameOf = (key: string): string =>
    context.stages.find((item) => item.key === key)?.name.toLowerCase() ?? key;
  const shared =
    covers.size > 0
      ? `Includes what ${listed([...covers].map(nameOf))} ${covers.size > 1 ? 'take' : 'takes'}. `
      : '';
  if (lacking.length === 0) return shared === '' ? null : { text: shared.trim(), href: null, action: null };
  const [first] = lacking;
  const text =
    shown === 0
      ? `No analyte has a figure here yet: ${first?.reason ?? ''}`
      : `Without a figure here: ${listed(lacking.map((item) => item.name))}${lacking.length === 1 ? ` (${first?.reason ?? ''})` : ''}.`;
  return { text: shared + text, href: null, action: null };
}
