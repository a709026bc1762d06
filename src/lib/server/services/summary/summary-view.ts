import { createHash } from 'node:crypto';
import { cautions } from '../../../domain/cautions';
import { dayText } from '../../../domain/moment-text';
import type { LookAt, SummaryFindings, SummaryView } from '../../../views/summary';
import { canonicalText } from '../../db/audit-chain';
import type { Link } from '../figures/addresses';
import { ruleView } from '../figures/figure-parts';
import { massBalanceOf } from '../figures/mass-balance-view';
import { portionsOf } from '../figures/portions-view';
import { resultsTableOf } from '../figures/results-table-view';
import { stageFindingsOf } from '../figures/stage-findings';
import type { StudyFigures } from '../figures/study-figures';
import { subjectOf, subjectView } from '../figures/subject';
import { usualVariant, validationOf } from '../figures/validation/validation-view';
import { walkBackOf } from '../figures/walk-back-view';
import { lookAtOf } from './look-at';
import { analyteView, stageViews, variantView } from './plan-parts';
import { calibrationView, exclusionView, importViews } from './record-parts';

/** The whole validation summary of a study, in one view that page and workbook share. */
export function summaryOf(figures: StudyFigures, lab: SummaryView['lab'], link: Link): SummaryView {
  const { data } = figures;
  const findings = findingsOf(figures, link);
  const exclusions = data.exclusionRecords.map((record) => exclusionView(figures, record));
  const imports = importViews(figures);
  const stages = stageViews(figures);
  const view: Omit<SummaryView, 'hash'> = {
    study: {
      code: data.code,
      title: data.title,
      matrix: data.matrix,
      objective: data.objective,
      sampleVolumeMl: data.sampleVolumeMl,
      state: data.state,
      revision: data.revision,
      dataVersion: data.dataVersion,
      owner: data.ownerName
    },
    lab,
    lookAt: lookAtOf(findings, exclusions, imports, stages, [
      ...missingEvidence(figures).map((text) => ({ text, href: null })),
      ...sequenceGaps(figures)
    ]),
    criteria: {
      name: data.criteriaSet.name,
      version: data.criteriaSet.version,
      rules: data.criteriaSet.rules.map(ruleView)
    },
    panel: data.panel.map((entry) => analyteView(figures, entry)),
    variants: data.variants.map((variant) => variantView(figures, variant)),
    stages,
    findings,
    validation: validationOf(figures, usualVariant(figures), link),
    calibrations: data.calibrationSets.map((set) => calibrationView(figures, set, link)),
    exclusions,
    imports,
    cautions
  };
  return { ...view, hash: hashOf(view) };
}

/** Links are left out: they differ between the page and a file, what is said does not. */
function hashOf(view: Omit<SummaryView, 'hash'>): string {
  const text = JSON.stringify(view, (key, value: unknown) => (key === 'href' ? undefined : value));
  return createHash('sha256')
    .update(canonicalText(JSON.parse(text)))
    .digest('hex')
    .slice(0, 12);
}

function findingsOf(figures: StudyFigures, link: Link): SummaryFindings[] {
  const { data } = figures;
  const ofVariants = data.variants.flatMap((variant): SummaryFindings[] => {
    const context = figures.variant(variant);
    if (!context.whole) return [];
    const subject = { experiment: context.whole, context };
    return [
      {
        key: variant.code,
        heading: `Variant ${variant.code}, ${variant.name}`,
        findings: stageFindingsOf(figures, context, link),
        results: resultsTableOf(figures, context.whole, link),
        balance: massBalanceOf(figures, subject, link),
        walkBack: walkBackOf(figures, context, link),
        portions: portionsOf(figures, context.whole, link)
      }
    ];
  });
  const shown = new Set(ofVariants.map((item) => item.results.experiment.number));
  const others = subjectView(figures, subjectOf(figures, {})).experiments.filter(
    (item) => !shown.has(item.number)
  );
  return [
    ...ofVariants,
    ...others.map((item): SummaryFindings => {
      const subject = subjectOf(figures, { experiment: item.number });
      const experiment = subject.experiment!; // It was listed a line above.
      return {
        key: `experiment-${item.number}`,
        heading: `Experiment ${item.number}, ${item.title}`,
        findings: null,
        results: resultsTableOf(figures, experiment, link),
        balance: massBalanceOf(figures, subject, link),
        walkBack: null,
        portions: portionsOf(figures, experiment, link)
      };
    })
  ];
}

/** What the sequences do not show, run by run; the second source that a calibration lacks. */
function sequenceGaps(figures: StudyFigures): LookAt['items'] {
  const { runs, setGaps } = figures.checks();
  const base = `/studies/${figures.data.code}/calibration`;
  // A study that keeps no checks at all is told so once, not run by run.
  if (figures.data.checkStandards.length === 0) {
    return runs.length === 0
      ? []
      : [{ text: 'No checks of a calibration and no instrument blanks are on record.', href: base }];
  }
  return [
    ...[...setGaps].flatMap(([setId, gaps]) => gaps.map(({ text }) => ({ text, href: `${base}/${setId}` }))),
    ...runs.flatMap(({ run, sets }) =>
      sets.flatMap(({ gaps }) =>
        gaps
          .filter(({ kind }) => kind !== 'order of the file')
          .map(({ text }) => ({
            text: `Sequence of ${run.sequences[0]?.runOn ? dayText(run.sequences[0].runOn) : 'an unknown day'}: ${text}`,
            href: `${base}/sequences/${run.id}`
          }))
      )
    )
  ];
}

/** "Variant C: nothing stands for drying." */
function missingEvidence(figures: StudyFigures): string[] {
  return figures.data.variants.flatMap((variant) => {
    const without = figures
      .variant(variant)
      .stages.filter((stage) => !stage.evidence)
      .map((stage) => stage.name.toLowerCase());
    return without.length === 0 ? [] : [`Variant ${variant.code}: nothing stands for ${without.join(', ')}.`];
  });
}
