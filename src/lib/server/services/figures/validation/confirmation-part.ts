import type { ValidationPart } from '../../../../views/validation';
import { confirmationPreparations, type Confirmation } from '../../../amounts/validation/confirmation';
import type { Verdict } from '../../../../views/verdict';
import type { Link } from '../addresses';
import { column, count, coverageText, figure, leftOut, none, notesOver, percent, worstFirst } from './cells';
import type { ValidationContext } from './context';
import { partOf } from './part';
import { publishedRules } from './published-rules';
import { representative } from './representative';
import { variantKey } from './variant-key';

const limits = [50, 150];

/** Whether a proposed quantitation limit is one: preparations spiked at it, and where a further one would fall. */
export function confirmationPart(context: ValidationContext, link: Link): ValidationPart {
  const { figures } = context;
  const rows = figures.targets.map((entry) => {
    const found = context.confirmation(entry);
    const { figures: of } = found;
    const level = found.spikeNgPerL ?? found.spikeNg;
    return {
      key: entry.id,
      panelEntryId: entry.id,
      name: entry.name,
      href: link({ kind: 'confirmation', variant: variantKey(context), entry: entry.id }),
      verdict: verdictOf(found),
      why: whyOf(found),
      worst: of && Math.max(50 - of.lower, of.upper - 150),
      cells: [
        count(found.counted.length),
        figure(level),
        ...(of
          ? [
              percent(of.mean),
              percent(of.rsd),
              percent(of.halfRange),
              percent(of.lower, limits),
              percent(of.upper, limits)
            ]
          : [none, none, none, none, none])
      ]
    };
  });
  const shown = representative(figures.targets, (entry) => context.confirmation(entry).counted.length);
  const coverage = shown && context.confirmation(shown).coverage;
  const perLitre = figures.targets.some((entry) => context.confirmation(entry).spikeNgPerL !== null);
  return partOf(context, 'confirmation', {
    meaning: [
      'The lowest level at which an amount may be reported as a number. Preparations are spiked at that level; from their mean and scatter follows where a further result would fall in 99 of 100 cases (mean ± half-range), and all of that has to lie within 50 to 150 % of what was added.',
      'Results count as they were found: nothing is subtracted.'
    ],
    rests: coverage ? [coverageText('spiked preparation', coverage)] : [],
    rules: [publishedRules.confirmation],
    missing: [
      ...(context.evidence('confirmation').experiments.length === 0
        ? ['Seven preparations spiked at the proposed quantitation limit.']
        : coverage && coverage.n < confirmationPreparations
          ? [`${coverage.n} of ${confirmationPreparations} preparations at the proposed limit.`]
          : [])
    ],
    notes: notesOver(
      figures.targets.flatMap((entry) =>
        leftOut(context.confirmation(entry).preparations).map((note) => [entry.name, note] as const)
      ),
      figures.targets.length
    ),
    tables: [
      {
        key: 'confirmation',
        caption: 'Half-range and bounds, percent of what was spiked at the proposed limit',
        judged: true,
        columns: [
          column('n', 'n'),
          column('level', 'Spiked at', perLitre ? 'ng/L' : 'ng'),
          column('mean', 'Mean', '%'),
          column('rsd', 'RSD', '%'),
          column('half', 'Half-range', '%'),
          column('lower', 'Lower', '%'),
          column('upper', 'Upper', '%')
        ],
        rows: worstFirst(rows)
      }
    ]
  });
}

export function verdictOf({ figures, counted, missed }: Confirmation): Verdict {
  if (missed) return 'outside';
  if (!figures || counted.length < confirmationPreparations) return 'too few';
  return figures.holds ? 'inside' : 'outside';
}

export function whyOf(found: Confirmation): string {
  const { figures, counted } = found;
  if (!figures) return found.refusal ?? '';
  const few =
    counted.length < confirmationPreparations ? [`n ${counted.length} < ${confirmationPreparations}`] : [];
  const text = (value: number): string => percent(value, limits).text ?? '';
  const broken = [
    ...(figures.lower < 50 ? [`lower bound ${text(figures.lower)} < 50`] : []),
    ...(figures.upper > 150 ? [`upper bound ${text(figures.upper)} > 150`] : [])
  ];
  return [...few, ...broken].join('; ');
}
