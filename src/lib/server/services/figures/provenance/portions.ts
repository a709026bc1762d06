import { figureText, percentText } from '../../../../domain/figure-text';
import type { ProvenanceTable, ProvenanceView } from '../../../../views/provenance';
import type { Portion } from '../../../amounts/portions';
import { addressText, type Link } from '../addresses';
import { intervalText, sentence } from '../figure-parts';
import type { StudyExperiment, StudyPanelEntry } from '../study-data';
import type { StudyFigures } from '../study-figures';
import { matrixFormula, portionFormula, relativeFormula } from './formulas';
import { blankLevel, input, percentFigure } from './parts';
import { setAsideOf } from './recovery';

/** A surrogate over the portions of an experiment. */
export function surrogateProvenance(
  figures: StudyFigures,
  experiment: StudyExperiment,
  entry: StudyPanelEntry,
  link: Link
): ProvenanceView {
  const read = figures.surrogate(experiment.id, entry.id);
  const address = { kind: 'surrogate', experiment: experiment.number, entry: entry.id } as const;
  return {
    ...blankLevel,
    address: addressText(address),
    panelEntryId: entry.id,
    title: `${entry.name}, surrogate`,
    figure: read.description && percentFigure(read.description, read.portions.length),
    missing: read.refusal ?? (read.description ? null : 'No portion has a figure.'),
    ...portionFormula,
    sentences: [
      'In every portion that received it, spiked or not; nothing is subtracted. Summed over the fractions that count for the method.'
    ],
    tables: [
      portionTable(
        'Percent of the amount added',
        read.portions.map((item) => ({ portion: item.portion, percent: item.percent, note: item.reason })),
        experiment,
        entry,
        link
      )
    ],
    setAside: setAsideOf(read.portions.map((item) => item.portion))
  };
}

/** A recovery relative to an extraction internal standard. */
export function relativeProvenance(
  figures: StudyFigures,
  experiment: StudyExperiment,
  entry: StudyPanelEntry,
  link: Link
): ProvenanceView {
  const found = figures.entry(experiment.id, entry.id);
  const relative = found.ready ? null : found.relative;
  const address = { kind: 'relative', experiment: experiment.number, entry: entry.id } as const;
  const base = {
    ...blankLevel,
    address: addressText(address),
    panelEntryId: entry.id,
    title: `${entry.name}, relative recovery`
  };
  if (!relative) return { ...base, missing: `${entry.name} has absolute amounts; see its method recovery.` };
  if (!relative.available) return { ...base, missing: relative.reason };
  const { estimate, description } = relative;
  return {
    ...base,
    figure: percentFigure(
      { mean: estimate.estimate ?? description.mean, n: description.n, ci: estimate.ci },
      relative.portions.length
    ),
    ...relativeFormula,
    sentences: [
      `Relative to ${relative.standardName}, which was extracted along with it: losses that both share do not show here.`,
      'Shown beside the method recovery, never held against its criteria.',
      ...(relative.subtractedPercent === null
        ? []
        : [`${percentText(relative.subtractedPercent)} % of the spike is subtracted.`]),
      ...relative.notes.map(sentence)
    ],
    tables: [
      portionTable(
        'Percent of the spike, relative',
        relative.portions.map((item) => ({ ...item, note: null })),
        experiment,
        entry,
        link
      )
    ],
    setAside: setAsideOf(found.ready ? [] : found.portions)
  };
}

/** Matrix effect of one analyte, with recovery and process efficiency beside it. */
export function matrixProvenance(
  figures: StudyFigures,
  experiment: StudyExperiment,
  entry: StudyPanelEntry
): ProvenanceView {
  const read = figures.matrix(experiment.id, entry.id);
  const address = { kind: 'matrix', experiment: experiment.number, entry: entry.id } as const;
  const base = {
    ...blankLevel,
    address: addressText(address),
    panelEntryId: entry.id,
    title: `${entry.name}, matrix effect`
  };
  if (!read?.available) {
    return {
      ...base,
      missing: read?.reason ?? `Experiment ${experiment.number} has no post-extraction spikes.`
    };
  }
  const { matrixEffect, recovery, processEfficiency } = read.figures;
  const percent = (value: number | null): string | null => (value === null ? null : percentText(value));
  return {
    ...base,
    figure:
      matrixEffect.estimate === null
        ? null
        : {
            value: percentText(matrixEffect.estimate),
            unit: '%, 100 = none',
            halfWidth: null,
            level: null,
            n: null
          },
    ...matrixFormula,
    sentences: [
      ...(matrixEffect.ci ? [`${intervalText(matrixEffect.ci)}.`] : []),
      `In ${read.fraction.name.toLowerCase()}: A ${read.counts.neat} standards, B ${read.counts.postSpiked} post-extraction spikes, C ${read.counts.preSpiked} spiked portions, U ${read.counts.native} unspiked. Matuszewski 2003, from memory.`
    ],
    inputs: [
      input('Recovery, 100 (C − U)/(B − U)', percent(recovery.estimate), '%'),
      input('Process efficiency, 100 (C − U)/A', percent(processEfficiency.estimate), '%')
    ]
  };
}

function portionTable(
  caption: string,
  items: readonly {
    readonly portion: Portion;
    readonly percent: number | null;
    readonly note: string | null;
  }[],
  experiment: StudyExperiment,
  entry: StudyPanelEntry,
  link: Link
): ProvenanceTable {
  const fractions = items[0]?.portion.places.map((place) => place.fraction) ?? [];
  return {
    caption,
    columns: [
      ...fractions.map((fraction) => ({ key: fraction.id, label: fraction.name, unit: 'ng' })),
      { key: 'percent', label: 'In the extract', unit: '%' }
    ],
    rows: items.map(({ portion, percent, note }) => ({
      key: portion.replicate.id,
      label: `${portion.replicate.label}, ${portion.replicate.kind}`,
      cells: [
        ...portion.places.map((place) => ({
          text:
            typeof place.ng === 'number'
              ? figureText(place.ng)
              : place.ng === null
                ? null
                : `<${figureText(place.ng.below)}`,
          href: link({
            kind: 'amount',
            experiment: experiment.number,
            entry: entry.id,
            replicate: portion.replicate.id,
            fraction: place.fraction.id
          }),
          note: null
        })),
        { text: percent === null ? null : percentText(percent), href: null, note }
      ],
      setAside: portion.exclusion?.cause ?? null
    }))
  };
}
