import type { ValidationPart } from '../../../../views/validation';
import { coverageOf, preparationsOf } from '../../../amounts/validation/preparations';
import type { Link } from '../addresses';
import { criteriaFor, limitsOf, ruleOf } from '../criteria';
import { ruleView } from '../figure-parts';
import {
  column,
  count,
  coverageText,
  leftOut,
  none,
  notesOver,
  percent,
  textColumn,
  words,
  worstFirst
} from './cells';
import type { ValidationContext } from './context';
import { partOf } from './part';
import { publishedRules } from './published-rules';
import { variantKey } from './variant-key';

/** Mean and RSD of a few preparations at a middle level, analyte by analyte. */
export function demonstrationPart(context: ValidationContext, link: Link): ValidationPart {
  const { figures } = context;
  const { rules } = figures.data.criteriaSet;
  const applied = (['mean recovery', 'relative standard deviation', 'minimum preparations'] as const)
    .map((type) => ruleOf(rules, type))
    .filter((rule) => rule !== null);
  const preparations = context
    .settings('demonstration')
    .flatMap((setting) => preparationsOf([setting], figures.targets[0]?.id ?? '', ['spiked']));
  const counted = preparations.filter(({ portion }) => portion.exclusion === null);
  const rows = figures.targets.map((entry) => {
    const found = context.demonstration(entry);
    const { criteria } = criteriaFor(figures.data, entry);
    const limits = limitsOf(criteria);
    const { figures: of } = found;
    return {
      key: entry.id,
      panelEntryId: entry.id,
      name: entry.name,
      href: link({ kind: 'demonstration', variant: variantKey(context), entry: entry.id }),
      verdict: found.refusal === null ? found.verdict : null,
      why: found.refusal ?? found.reasons.join('; '),
      worst: of && criteria ? Math.max(criteria.low - of.mean, of.mean - criteria.high) : null,
      cells: of
        ? [
            count(of.n),
            percent(of.mean, limits.mean),
            of.ci
              ? words(
                  `${percent(of.ci.lower, limits.mean).text ?? ''} to ${percent(of.ci.upper, limits.mean).text ?? ''}`
                )
              : none,
            percent(of.rsd, limits.rsd)
          ]
        : [none, none, none, none]
    };
  });
  const missing = missingOf(context, counted.length);
  return partOf(context, 'demonstration', {
    meaning: [
      'Whether the laboratory, with its people and instruments, gets back what it adds, with little scatter, before anything else is claimed: mean recovery and RSD of a few preparations at a middle level.'
    ],
    rests: preparations.length > 0 ? [coverageText('spiked preparation', coverageOf(counted))] : [],
    rules: applied.map(ruleView),
    beside: publishedRules.demonstration,
    missing,
    notes: notesOver(
      figures.targets.flatMap((entry) =>
        leftOut(preparationsOf(context.settings('demonstration'), entry.id, ['spiked'])).map(
          (note) => [entry.name, note] as const
        )
      ),
      figures.targets.length
    ),
    tables: [
      {
        key: 'demonstration',
        caption: 'Mean recovery and scatter, percent of the spike',
        judged: applied.length > 0,
        columns: [
          column('n', 'n'),
          column('mean', 'Mean', '%'),
          textColumn('ci', '95 % interval, %'),
          column('rsd', 'RSD', '%')
        ],
        rows: worstFirst(rows)
      }
    ]
  });
}

function missingOf(context: ValidationContext, n: number): string[] {
  const { experiments } = context.evidence('demonstration');
  if (experiments.length === 0)
    return ['An experiment with 4 to 7 preparations spiked at a middle level, in reagent water.'];
  const { rules } = context.figures.data.criteriaSet;
  const asked = ruleOf(rules, 'minimum preparations')?.low ?? 4;
  return [
    ...(n < asked ? [`${n} of ${asked} preparations at a middle level.`] : []),
    ...(ruleOf(rules, 'mean recovery') ? [] : ['A rule for mean recovery in the criteria of the study.']),
    ...(experiments.some(({ medium }) => medium !== 'reagent water')
      ? [
          'Preparations in reagent water: these were made in another medium, where the published procedures ask for reagent water first.'
        ]
      : [])
  ];
}
