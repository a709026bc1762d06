import { nameKey } from '../../../../domain/name-key';
import type { ValidationPart } from '../../../../views/validation';
import type { Verdict } from '../../../../views/verdict';
import { precisionBatches } from '../../../amounts/validation/precision';
import type { Link } from '../addresses';
import { criteriaFor, ruleOf } from '../criteria';
import { ruleView } from '../figure-parts';
import { dayText } from '../../../../domain/moment-text';
import { column, count, figure, none, notesOver, percent, worstFirst } from './cells';
import type { ValidationContext } from './context';
import { partOf } from './part';
import { representative } from './representative';
import { variantKey } from './variant-key';

/** Scatter within a batch and from batch to batch, analyte by analyte. */
export function precisionPart(context: ValidationContext, link: Link): ValidationPart {
  const { figures } = context;
  const { targets } = figures;
  const rule = ruleOf(figures.data.criteriaSet.rules, 'relative standard deviation');
  const rows = targets.map((entry) => {
    const found = context.precision(entry);
    const { components: of, groups } = found;
    const limit = criteriaFor(figures.data, entry).criteria?.rsdMax ?? null;
    const limits = limit === null ? [] : [limit];
    const rsd = of?.repeatabilityRsd ?? null;
    const broken = limit !== null && rsd !== null && rsd > limit;
    const verdict: Verdict | null =
      of === null
        ? 'too few'
        : limit === null || rsd === null
          ? null
          : broken
            ? 'outside'
            : groups.length < precisionBatches
              ? 'watch'
              : 'inside';
    return {
      key: entry.id,
      panelEntryId: entry.id,
      name: entry.name,
      href: link({ kind: 'precision', variant: variantKey(context), entry: entry.id }),
      verdict,
      why: [
        ...(found.refusal === null ? [] : [found.refusal]),
        ...(broken ? [`repeatability ${percent(rsd, limits).text ?? ''} > ${limit}`] : []),
        ...(of && groups.length < precisionBatches
          ? [`${groups.length} of ${precisionBatches} batches`]
          : []),
        ...(of?.note ? ['between batches negative, counted as zero'] : [])
      ].join('; '),
      worst: of?.intermediateRsd ?? null,
      cells: [
        count(found.n),
        count(groups.length),
        ...(of
          ? [
              percent(of.mean),
              percent(rsd, limits),
              percent(of.mean > 0 ? (100 * of.betweenSd) / of.mean : null),
              percent(of.intermediateRsd),
              figure(found.df),
              figure(of.f),
              figure(of.p, 2)
            ]
          : [none, none, none, none, none, none, none])
      ]
    };
  });
  const shown = representative(targets, (entry) => context.precision(entry).n);
  const of = shown && context.precision(shown);
  const batches = of?.groups ?? [];
  return partOf(context, 'precision', {
    meaning: [
      'How much results scatter within one batch (repeatability) and when batch, day and whatever changes with it are added (intermediate precision), both as percent of the mean recovery. What a laboratory will see from week to week is the second.',
      'From a one-way analysis of variance over batches. The degrees of freedom say how much the intermediate figure rests on: with few batches it is known poorly.'
    ],
    rests: of
      ? [
          `${of.n} spiked preparations in ${batches.length} ${batches.length === 1 ? 'batch' : 'batches'}: ${batches
            .map(
              ({ label, day, recoveries }) =>
                `${label}${day === null ? '' : `, ${dayText(day)}`} (n = ${recoveries.length})`
            )
            .join('; ')}`
        ]
      : [],
    rules: rule ? [{ ...ruleView(rule), what: 'Repeatability, relative standard deviation' }] : [],
    missing: [
      ...(batches.length < precisionBatches
        ? [`${batches.length} of ${precisionBatches} batches at one level in one matrix.`]
        : []),
      ...(rule ? [] : ['A rule for the relative standard deviation in the criteria of the study.'])
    ],
    notes: [
      ...mixedNotes(context),
      ...(rule
        ? [
            'The rule speaks of preparations made together, so intermediate precision is held against nothing.'
          ]
        : []),
      ...notesOver(
        targets.flatMap((entry) => {
          const note = context.precision(entry).components?.note;
          return note ? [[entry.name, note] as const] : [];
        }),
        targets.length
      )
    ],
    tables: [
      {
        key: 'precision',
        caption: 'Scatter within and between batches, percent of the mean recovery',
        judged: rule !== null,
        columns: [
          column('n', 'n'),
          column('batches', 'Batches'),
          column('mean', 'Mean', '%'),
          column('repeatability', 'Repeatability', '%'),
          column('between', 'Between batches', '%'),
          column('intermediate', 'Intermediate', '%'),
          column('df', 'df'),
          column('f', 'F'),
          column('p', 'p')
        ],
        rows: worstFirst(rows)
      }
    ]
  });
}

/** Batches of another level or matrix scatter for reasons of their own. */
function mixedNotes(context: ValidationContext): string[] {
  const { experiments } = context.evidence('precision');
  const distinct = (of: (item: (typeof experiments)[number]) => string): number =>
    new Set(experiments.map(of)).size;
  return [
    ...(distinct(({ levelLabel }) => nameKey(levelLabel)) > 1
      ? [
          'These experiments have different levels: what scatters with the level counts as scatter between batches.'
        ]
      : []),
    ...(distinct(({ matrix, medium }) => nameKey(matrix ?? medium)) > 1
      ? [
          'These experiments have different matrices: what scatters with the matrix counts as scatter between batches.'
        ]
      : [])
  ];
}
