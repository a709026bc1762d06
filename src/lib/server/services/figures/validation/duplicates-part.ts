import type { ValidationPart, ValidationTable } from '../../../../views/validation';
import type { Verdict } from '../../../../views/verdict';
import type { CriterionRule } from '../../../../domain/criteria';
import { duplicates, type Duplicates } from '../../../amounts/validation/duplicates';
import { netRecoveries } from '../../../amounts/validation/net-recoveries';
import { preparationOf } from '../../../amounts/validation/preparations';
import { portionOf } from '../../../amounts/portions';
import type { Link } from '../addresses';
import { ruleOf } from '../criteria';
import { ruleView } from '../figure-parts';
import type { DuplicateChoice, StudyPanelEntry } from '../study-data';
import type { StudyFigures } from '../study-figures';
import { column, count, figure, none, percent, textColumn, words, worstFirst } from './cells';
import type { ValidationContext } from './context';
import { partOf } from './part';
import { publishedRules } from './published-rules';
import { settingOf } from './settings';

/** Preparations declared duplicates, and single recoveries against the rule for them. */
export function duplicatesPart(context: ValidationContext, link: Link): ValidationPart {
  const { figures } = context;
  const { data } = figures;
  const { experiments } = context.evidence('duplicates');
  const rpdRule = ruleOf(data.criteriaSet.rules, 'duplicate difference');
  const singleRule = ruleOf(data.criteriaSet.rules, 'individual recovery');
  const pairs = data.duplicatePairs.filter(({ experimentId }) =>
    experiments.some(({ id }) => id === experimentId)
  );
  const declared = pairs.flatMap((pair) => {
    const experiment = experiments.find(({ id }) => id === pair.experimentId);
    const labelOf = (id: string): string | undefined =>
      experiment?.replicates.find((item) => item.id === id)?.label;
    const [first, second] = [labelOf(pair.firstId), labelOf(pair.secondId)];
    return experiment && first !== undefined && second !== undefined
      ? [{ pair, experiment, labels: [first, second] as const }]
      : [];
  });
  const tables: ValidationTable[] = [
    ...(declared.length > 0 ? [pairTable(context, pairs, rpdRule, link)] : []),
    ...(singleRule ? [singleTable(context, singleRule, link)] : [])
  ];
  return partOf(context, 'duplicates', {
    meaning: [
      'How far two preparations made as duplicates of each other lie apart (RPD), on what was found, nothing subtracted. Only preparations that a person declared to be duplicates are compared: two portions of one series are not that by themselves.',
      ...(singleRule
        ? [
            'And every single recovery against the rule for single ones: a mean can keep a limit that one of its portions breaks.'
          ]
        : [])
    ],
    rests: [
      `${declared.length} declared ${declared.length === 1 ? 'pair' : 'pairs'}`,
      ...(singleRule ? [`single recoveries of ${experiments.length} experiments`] : [])
    ],
    rules: [rpdRule, singleRule].filter((rule) => rule !== null).map(ruleView),
    beside: [publishedRules.duplicates],
    missing: [
      ...(declared.length === 0 ? ['A pair of preparations declared duplicates of each other.'] : []),
      ...(rpdRule ? [] : ['A rule for the difference of duplicates in the criteria of the study.']),
      ...(singleRule ? [] : ['A rule for single recoveries in the criteria of the study.'])
    ],
    tables,
    pairs: declared.map(({ pair, experiment, labels }) => ({
      id: pair.id,
      experiment: experiment.number,
      labels,
      reason: pair.reason,
      by: pair.by,
      at: pair.at
    })),
    pairChoices: experiments.map((experiment) => ({
      experiment: experiment.number,
      title: experiment.title,
      preparations: experiment.replicates
        .filter(({ kind }) => kind === 'spiked' || kind === 'unspiked')
        .filter(
          ({ id }) => !data.duplicatePairs.some(({ firstId, secondId }) => firstId === id || secondId === id)
        )
        .map(({ id, label, kind }) => ({ id, label, kind }))
    }))
  });
}

/** Two declared preparations of one analyte; null where they are no longer there. */
export function duplicatesOf(
  figures: StudyFigures,
  pair: DuplicateChoice,
  entry: StudyPanelEntry
): Duplicates | null {
  const experiment = figures.data.experiments.find(({ id }) => id === pair.experimentId);
  if (!experiment) return null;
  const setting = settingOf(figures, experiment);
  const [first, second] = [pair.firstId, pair.secondId].map((id) => {
    const replicate = experiment.replicates.find((item) => item.id === id);
    return replicate && preparationOf(setting, portionOf(setting.amounts, entry.id, replicate));
  });
  return first && second ? duplicates(first, second) : null;
}

export function rpdVerdict(found: Duplicates, rule: CriterionRule | null): Verdict | null {
  if (found.rpd === null || rule?.high == null) return null;
  return found.rpd > rule.high ? 'outside' : 'inside';
}

function pairTable(
  context: ValidationContext,
  pairs: readonly DuplicateChoice[],
  rule: CriterionRule | null,
  link: Link
): ValidationTable {
  const { figures } = context;
  const limits = rule?.high == null ? [] : [rule.high];
  const all = pairs.flatMap((pair) =>
    figures.targets.flatMap((entry) => {
      const found = duplicatesOf(figures, pair, entry);
      return found &&
        found.first.portion.places.some(({ found: place }) => place.used.length + place.unused.length > 0)
        ? [{ pair, entry, found }]
        : [];
    })
  );
  const perLitre = all.every(({ found }) => found.unit === 'ng/L');
  const rows = all.map(({ pair, entry, found }) => ({
    key: `${pair.id} ${entry.id}`,
    panelEntryId: entry.id,
    name: entry.name,
    href: link({ kind: 'duplicate', pair: pair.id, entry: entry.id }),
    verdict: rpdVerdict(found, rule),
    why: found.refusal ?? (rule ? '' : 'no rule'),
    worst: found.rpd,
    cells: [
      words(`${found.first.portion.replicate.label}, ${found.second.portion.replicate.label}`),
      ...found.values.map((value) =>
        figure(value === null || perLitre || found.unit === 'ng' ? value : null)
      ),
      percent(found.rpd, limits)
    ]
  }));
  return {
    key: 'duplicates',
    caption: 'Relative percent difference of declared duplicates',
    judged: rule !== null,
    columns: [
      textColumn('pair', 'Pair'),
      column('first', 'First', perLitre ? 'ng/L' : 'ng'),
      column('second', 'Second', perLitre ? 'ng/L' : 'ng'),
      column('rpd', 'RPD', '%')
    ],
    rows: worstFirst(rows)
  };
}

function singleTable(context: ValidationContext, rule: CriterionRule, link: Link): ValidationTable {
  const { figures } = context;
  const limits = [rule.low, rule.high].filter((value) => value !== null);
  const rows = context.evidence('duplicates').experiments.flatMap((experiment) =>
    figures.targets.flatMap((entry) => {
      const found = figures.entry(experiment.id, entry.id);
      if (!found.ready) return [];
      const recoveries = netRecoveries(found.input);
      const values = recoveries.map(({ percent: value }) => value);
      const broken = recoveries.filter(
        ({ percent: value }) =>
          (rule.low !== null && value < rule.low) || (rule.high !== null && value > rule.high)
      );
      const verdict: Verdict | null =
        values.length === 0 ? 'too few' : broken.length > 0 ? 'outside' : 'inside';
      return [
        {
          key: `${experiment.number} ${entry.id}`,
          panelEntryId: entry.id,
          name: entry.name,
          href: link({ kind: 'recovery', experiment: experiment.number, entry: entry.id }),
          verdict,
          why: broken.map(({ portion }) => portion.replicate.label).join(', '),
          worst: broken.length,
          cells: [
            count(experiment.number),
            count(values.length),
            values.length > 0 ? percent(Math.min(...values), limits) : none,
            values.length > 0 ? percent(Math.max(...values), limits) : none,
            count(broken.length)
          ]
        }
      ];
    })
  );
  return {
    key: 'single',
    caption: 'Single recoveries, percent of the spike, against the rule for single ones',
    judged: true,
    columns: [
      column('experiment', 'Experiment'),
      column('n', 'n'),
      column('lowest', 'Lowest', '%'),
      column('highest', 'Highest', '%'),
      column('outside', 'Outside')
    ],
    rows: worstFirst(rows)
  };
}
