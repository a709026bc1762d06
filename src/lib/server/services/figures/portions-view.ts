import { figureText } from '../../../domain/figure-text';
import type { PortionsView } from '../../../views/findings';
import { portionOf } from '../../amounts/portions';
import { spikeOf } from '../../amounts/spikes';
import type { Value } from '../../stats';
import type { Link } from './addresses';
import { ruleOf } from './criteria';
import { ruleView } from './figure-parts';
import { flaggedSurrogateText } from './flagged-text';
import type { StudyExperiment, StudyPanelEntry } from './study-data';
import type { StudyFigures } from './study-figures';
import { experimentChoice } from './subject';

/** Surrogates in every portion, what blanks hold, and matrix effects: what speaks for or against an experiment's portions. */
export function portionsOf(figures: StudyFigures, experiment: StudyExperiment, link: Link): PortionsView {
  const rule = ruleOf(figures.data.criteriaSet.rules, 'surrogate recovery');
  const surrogates = figures.surrogates
    .map((entry) => ({ entry, read: figures.surrogate(experiment.id, entry.id) }))
    .filter(({ read }) => read.portions.length > 0 || read.refusal !== null);
  const shown = experiment.replicates.filter((replicate) =>
    surrogates.some(({ read }) => read.portions.some((item) => item.portion.replicate.id === replicate.id))
  );
  const blanks = blanksOf(figures, experiment);
  const matrix = matrixOf(figures, experiment, link);
  return {
    experiment: experimentChoice(figures, experiment),
    rule: rule && ruleView(rule),
    portions: shown.map(({ id, label, kind }) => ({ id, label, kind })),
    surrogates: surrogates.map(({ entry, read }) => ({
      panelEntryId: entry.id,
      name: entry.name,
      cells: shown.map((replicate) => {
        const item = read.portions.find((candidate) => candidate.portion.replicate.id === replicate.id);
        return {
          percent: item?.percent ?? null,
          holds: item?.holds ?? null,
          setAside: item !== undefined && item.portion.exclusion !== null,
          reason: item ? (item.portion.exclusion?.cause ?? item.reason) : 'not added'
        };
      }),
      n: read.description?.n ?? null,
      mean: read.description?.mean ?? null,
      rsd: read.description?.rsd ?? null,
      refusal: read.refusal,
      flagged: flaggedSurrogateText(figures, experiment, entry),
      href: link({ kind: 'surrogate', experiment: experiment.number, entry: entry.id })
    })),
    ...blanks,
    ...matrix
  };
}

function blanksOf(
  figures: StudyFigures,
  experiment: StudyExperiment
): Pick<PortionsView, 'blanks' | 'blankLabels'> {
  const replicates = experiment.replicates.filter(({ kind }) => kind === 'method blank');
  const amounts = figures.amounts(experiment.id);
  const spiked = experiment.replicates.find(({ kind }) => kind === 'spiked');
  const rows = figures.targets.map((entry) => {
    const sums = replicates.map((replicate) => {
      const portion = portionOf(amounts, entry.id, replicate);
      return portion.exclusion ? null : sumOf(portion.places.map((place) => place.ng));
    });
    const found = sums.filter((sum) => sum !== null);
    const spike = spiked ? spikeOf(experiment, spiked, entry.id) : null;
    const mean = found.length > 0 ? found.reduce((total, sum) => total + sum.low, 0) / found.length : 0;
    return {
      panelEntryId: entry.id,
      name: entry.name,
      cells: replicates.map((replicate, index) => ({
        label: replicate.label,
        text: sumText(sums[index] ?? null)
      })),
      percentOfSpike: spike !== null && mean > 0 ? (100 * mean) / spike : null,
      found: mean > 0
    };
  });
  return {
    blanks: rows.filter((row) => row.found).map(({ found: _found, ...row }) => row),
    blankLabels: replicates.map(({ label }) => label)
  };
}

interface Sum {
  readonly low: number;
  readonly high: number;
  /** A fraction has no figure, so that the sum is a lower bound. */
  readonly partial: boolean;
}

/** Sum with not-detected as zero and at its limit; null when nothing is known. */
function sumOf(values: readonly Value[]): Sum | null {
  const known = values.filter((value) => value !== null);
  if (known.length === 0) return null;
  return {
    low: known.reduce<number>((sum, value) => sum + (typeof value === 'number' ? value : 0), 0),
    high: known.reduce<number>((sum, value) => sum + (typeof value === 'number' ? value : value.below), 0),
    partial: known.length < values.length
  };
}

/** "0.52", "<0.1"; "≥0.52" where a fraction is missing, "<0.1, incomplete" where nothing was found in the others. */
function sumText(sum: Sum | null): string {
  if (!sum) return '';
  if (sum.low > 0) return `${sum.partial ? '≥' : ''}${figureText(sum.low)}`;
  return `<${figureText(sum.high)}${sum.partial ? ', incomplete' : ''}`;
}

function matrixOf(
  figures: StudyFigures,
  experiment: StudyExperiment,
  link: Link
): Pick<PortionsView, 'matrix' | 'matrixNote'> {
  const found = figures.targets.map((entry: StudyPanelEntry) => ({
    entry,
    read: figures.matrix(experiment.id, entry.id)
  }));
  if (found.every(({ read }) => read === null)) return { matrix: [], matrixNote: null };
  const refused = found.flatMap(({ read }) => (read && !read.available ? [read.reason] : []));
  return {
    matrix: found.flatMap(({ entry, read }) =>
      read?.available
        ? [
            {
              panelEntryId: entry.id,
              name: entry.name,
              fraction: read.fraction.name,
              effect: read.figures.matrixEffect.estimate,
              effectInterval: read.figures.matrixEffect.ci,
              recovery: read.figures.recovery.estimate,
              efficiency: read.figures.processEfficiency.estimate,
              href: link({ kind: 'matrix', experiment: experiment.number, entry: entry.id })
            }
          ]
        : []
    ),
    matrixNote: refused.length > 0 ? [...new Set(refused)].join(' ') : null
  };
}
