import type { Estimate } from '../../../stats';
import type { ValidationCell, ValidationPart } from '../../../../views/validation';
import type { Link } from '../addresses';
import { column, count, none, notesOver, percent, textColumn, words, worstFirst } from './cells';
import type { ValidationContext } from './context';
import { partOf } from './part';
import { publishedRules } from './published-rules';

const interval = ({ ci }: Estimate): ValidationCell =>
  ci ? words(`${percent(ci.lower).text ?? ''} to ${percent(ci.upper).text ?? ''}`) : none;

/** What the matrix does to the signal, what the extraction recovers and both together. */
export function matrixPart(context: ValidationContext, link: Link): ValidationPart {
  const { figures } = context;
  const { experiments } = context.evidence('matrix');
  const read = experiments.flatMap((experiment) =>
    figures.targets.map((entry) => ({ experiment, entry, read: figures.matrix(experiment.id, entry.id) }))
  );
  const several = experiments.length > 1;
  const rows = read.flatMap(({ experiment, entry, read: found }) => {
    if (!found?.available) return [];
    const { matrixEffect, recovery, processEfficiency } = found.figures;
    const clear = matrixEffect.ci !== null && (matrixEffect.ci.lower > 100 || matrixEffect.ci.upper < 100);
    return [
      {
        key: `${experiment.number} ${entry.id}`,
        panelEntryId: entry.id,
        name: entry.name,
        href: link({ kind: 'matrix', experiment: experiment.number, entry: entry.id }),
        verdict: null,
        why: clear
          ? (matrixEffect.estimate ?? 100) < 100
            ? 'the signal is masked'
            : 'the signal is raised'
          : matrixEffect.ci
            ? 'cannot be told from none'
            : 'no interval',
        worst: matrixEffect.estimate === null ? null : Math.abs(matrixEffect.estimate - 100),
        cells: [
          ...(several ? [count(experiment.number)] : []),
          percent(matrixEffect.estimate),
          interval(matrixEffect),
          percent(recovery.estimate),
          interval(recovery),
          percent(processEfficiency.estimate),
          interval(processEfficiency)
        ]
      }
    ];
  });
  return partOf(context, 'matrix', {
    meaning: [
      'What the rest of the extract does to the signal (matrix effect, 100 % = nothing), what the extraction itself recovers, and both together (process efficiency). Without it a masked signal looks like a loss.',
      'From solvent standards, extracts spiked after the extraction and portions spiked before it, at one amount.'
    ],
    rests: experiments.map(
      (experiment) =>
        `Experiment ${experiment.number}: ${[
          'solvent standard',
          'post-extraction spike',
          'spiked',
          'unspiked'
        ]
          .map((kind) => `${experiment.replicates.filter((item) => item.kind === kind).length} ${kind}`)
          .join(', ')}`
    ),
    beside: [publishedRules.matrix],
    missing:
      experiments.length === 0
        ? ['Extracts spiked after the extraction and solvent standards beside spiked portions of the matrix.']
        : [],
    notes: [
      'The criteria of the study have no rule for a matrix effect, so none is applied.',
      ...notesOver(
        read.flatMap(({ entry, read: found }) =>
          found && !found.available ? [[entry.name, found.reason] as const] : []
        ),
        figures.targets.length
      )
    ],
    tables: [
      {
        key: 'matrix',
        caption: 'Matrix effect, recovery and process efficiency, percent',
        judged: false,
        columns: [
          ...(several ? [column('experiment', 'Experiment')] : []),
          column('effect', 'Matrix effect', '%'),
          textColumn('effect-ci', '95 % interval, %'),
          column('recovery', 'Recovery', '%'),
          textColumn('recovery-ci', '95 % interval, %'),
          column('efficiency', 'Process efficiency', '%'),
          textColumn('efficiency-ci', '95 % interval, %')
        ],
        rows: worstFirst(rows)
      }
    ]
  });
}
