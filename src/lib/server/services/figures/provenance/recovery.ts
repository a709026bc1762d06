import { figureText, percentText } from '../../../../domain/figure-text';
import { dayText } from '../../../../domain/moment-text';
import type { ProvenanceTable, ProvenanceView } from '../../../../views/provenance';
import type { Portion } from '../../../amounts/portions';
import type { Value } from '../../../stats';
import { addressText, type Link } from '../addresses';
import { criteriaFor, showsWholeMethod } from '../criteria';
import { flaggedText } from '../flagged-text';
import { criteriaText, intervalOf, intervalText, plainEnd, sentence } from '../figure-parts';
import type { StudyExperiment, StudyPanelEntry } from '../study-data';
import type { EntryFigures, StudyFigures } from '../study-figures';
import { recoveryFormula } from './formulas';
import { blankLevel, input, percentFigure } from './parts';

type Ready = Extract<EntryFigures, { ready: true }>;

/** Method recovery of one analyte: the replicates it was averaged from, fraction by fraction, each leading to its amount. */
export function recoveryProvenance(
  figures: StudyFigures,
  experiment: StudyExperiment,
  entry: StudyPanelEntry,
  link: Link
): ProvenanceView {
  const address = { kind: 'recovery', experiment: experiment.number, entry: entry.id } as const;
  const base = {
    ...blankLevel,
    address: addressText(address),
    panelEntryId: entry.id,
    title: `${entry.name}, method recovery`,
    up: null
  };
  const found = figures.entry(experiment.id, entry.id);
  if (!found.ready) {
    const relative = found.relative?.available ? link({ ...address, kind: 'relative' }) : null;
    return {
      ...base,
      missing: found.reason,
      inputs: relative ? [input('Relative recovery', 'open', '', { href: relative })] : [],
      setAside: setAsideOf(found.portions)
    };
  }
  const { criteria, overrideReason } = criteriaFor(figures.data, entry);
  const judged = showsWholeMethod(figures.data, experiment);
  const limits = criteria ? [criteria.low, criteria.high] : [];
  const { method } = found.balance;
  const several = found.input.fractions.filter((fraction) => fraction.countsAs === 'method').length > 1;
  return {
    ...base,
    figure:
      method && percentFigure({ ...method, ci: intervalOf(method) }, found.input.portions.length, limits),
    missing: method ? null : found.reasons.join('; '),
    verdict: { verdict: found.verdict, detail: found.reasons.join('; ') },
    ...recoveryFormula(found.input.subtracted !== null, several),
    sentences: [
      `Experiment ${experiment.number}, ${experiment.title}. Summed over the fractions that end in the extract, per replicate, then averaged.`,
      ...spreadSentences(found),
      ...subtractedSentences(found),
      ...endsSentences(found),
      ...flaggedSentences(figures, experiment, entry),
      judged
        ? `Held against ${criteriaText(criteria)}${overrideReason ? `, of its own: ${overrideReason}` : `, ${figures.data.criteriaSet.name}`}.`
        : 'Held against nothing: the criteria are for the whole method, spiked in the sample.'
    ],
    inputs: [
      input('Amount spiked', found.input.spikeNg, 'ng', { note: spikeNote(found) }),
      ...(found.input.subtracted
        ? [
            input(
              `Subtracted, ${found.input.subtracted.kind}`,
              percentText(found.input.subtracted.meanPercent),
              '% of the spike, all fractions'
            )
          ]
        : [])
    ],
    tables: [replicateTable(found, experiment, link), ...nativeTables(found, experiment, link)],
    setAside: setAsideOf([...found.input.portions, ...(found.input.subtracted?.portions ?? [])])
  };
}

function flaggedSentences(
  figures: StudyFigures,
  experiment: StudyExperiment,
  entry: StudyPanelEntry
): string[] {
  const flagged = flaggedText(figures, experiment, entry);
  return flagged === null ? [] : [sentence(`it ${flagged}`)];
}

/** One fraction of a method recovery or balance. */
export function fractionProvenance(
  figures: StudyFigures,
  experiment: StudyExperiment,
  entry: StudyPanelEntry,
  fractionId: string,
  link: Link
): ProvenanceView | null {
  const found = figures.entry(experiment.id, entry.id);
  const up = {
    label: 'Method recovery',
    href: link({ kind: 'recovery', experiment: experiment.number, entry: entry.id })
  };
  const address = {
    kind: 'fraction',
    experiment: experiment.number,
    entry: entry.id,
    fraction: fractionId
  } as const;
  const base = { ...blankLevel, address: addressText(address), panelEntryId: entry.id, up };
  if (!found.ready) return { ...base, title: entry.name, missing: found.reason };
  const fraction = found.input.fractions.find((item) => item.id === fractionId);
  if (!fraction) return null;
  const figure = found.balance.fractions.find((item) => item.name === fractionId);
  return {
    ...base,
    title: `${entry.name}, ${fraction.name.toLowerCase()}`,
    figure: figure ? percentFigure(figure, found.input.portions.length) : null,
    missing: figure ? null : 'No portion is complete in every fraction.',
    ...recoveryFormula(found.input.subtracted !== null, false),
    sentences: [
      fraction.countsAs === 'method'
        ? 'Counts for the method: it ends in the final extract.'
        : 'Counts for the balance only: it was measured to find out where things went.',
      'Over the portions that are complete in every fraction.',
      ...(figure && figure.notDetected > 0
        ? [`Not detected in ${figure.notDetected} of ${figure.n}; counted as zero, so it has no interval.`]
        : []),
      ...subtractedSentences(found)
    ],
    tables: [
      replicateTable(found, experiment, link, fractionId),
      ...nativeTables(found, experiment, link, fractionId)
    ],
    setAside: setAsideOf(found.input.portions)
  };
}

export function setAsideOf(portions: readonly Portion[]): ProvenanceView['setAside'] {
  return portions.flatMap((portion) => {
    const whole = portion.exclusion ? [{ what: portion.replicate.label, exclusion: portion.exclusion }] : [];
    const parts = portion.places.flatMap((place) =>
      place.exclusion
        ? [{ what: `${portion.replicate.label}, ${place.fraction.name}`, exclusion: place.exclusion }]
        : []
    );
    return [...whole, ...parts].map(({ what, exclusion }) => ({
      text: `${what} is set aside: ${plainEnd(exclusion.cause)}. ${exclusion.by}, ${dayText(exclusion.at)}.`
    }));
  });
}

function replicateTable(
  found: Ready,
  experiment: StudyExperiment,
  link: Link,
  only?: string
): ProvenanceTable {
  const { input: of } = found;
  const fractions = of.fractions.filter((fraction) => only === undefined || fraction.id === only);
  const sum = only === undefined;
  return {
    caption: of.subtracted
      ? 'Found, percent of the spike, before anything is subtracted'
      : 'Percent of the spike',
    columns: [
      ...fractions.map((fraction) => ({ key: fraction.id, label: fraction.name, unit: null })),
      ...(sum ? [{ key: 'sum', label: 'In the extract', unit: null }] : [])
    ],
    rows: of.portions
      .filter((portion) => portion.spikeNg !== null)
      .map((portion) => ({
        key: portion.replicate.id,
        label: portion.replicate.label,
        cells: [
          ...fractions.map((fraction) =>
            placeCell(portion, fraction.id, 100 / (portion.spikeNg ?? 1), experiment, of.entry.id, link)
          ),
          ...(sum ? [{ text: methodSum(portion), href: null, note: null }] : [])
        ],
        setAside: portion.exclusion?.cause ?? null
      }))
  };
}

function nativeTables(
  found: Ready,
  experiment: StudyExperiment,
  link: Link,
  only?: string
): ProvenanceTable[] {
  const { subtracted, fractions, entry } = found.input;
  if (!subtracted) return [];
  const shown = fractions.filter((fraction) => only === undefined || fraction.id === only);
  return [
    {
      caption: subtracted.kind === 'native' ? 'Unspiked portions, ng' : 'Method blanks, ng',
      columns: shown.map((fraction) => ({ key: fraction.id, label: fraction.name, unit: null })),
      rows: subtracted.portions.map((portion) => ({
        key: portion.replicate.id,
        label: portion.replicate.batch
          ? `${portion.replicate.label}, ${portion.replicate.batch}`
          : portion.replicate.label,
        cells: shown.map((fraction) => placeCell(portion, fraction.id, 1, experiment, entry.id, link)),
        setAside: portion.exclusion?.cause ?? null
      }))
    }
  ];
}

function placeCell(
  portion: Portion,
  fractionId: string,
  factor: number,
  experiment: StudyExperiment,
  entryId: string,
  link: Link
): ProvenanceTable['rows'][number]['cells'][number] {
  const place = portion.places.find((item) => item.fraction.id === fractionId);
  if (!place) return { text: null, href: null, note: null };
  const { amount } = place.found;
  const value: Value =
    amount.state === 'amount'
      ? amount.ng
      : amount.state === 'not detected'
        ? { below: amount.belowNg }
        : null;
  const note = place.exclusion
    ? `set aside: ${place.exclusion.cause}`
    : 'reason' in amount
      ? amount.reason
      : null;
  const measured = place.found.used.length + place.found.unused.length > 0;
  return {
    text: valueText(value, factor),
    href: measured
      ? link({
          kind: 'amount',
          experiment: experiment.number,
          entry: entryId,
          replicate: portion.replicate.id,
          fraction: place.fraction.id
        })
      : null,
    note
  };
}

function valueText(value: Value, factor: number): string | null {
  if (value === null) return null;
  return typeof value === 'number' ? figureText(value * factor) : `<${figureText(value.below * factor)}`;
}

function methodSum(portion: Portion): string | null {
  const method = portion.places.filter((place) => place.fraction.countsAs === 'method');
  if (method.length === 0 || method.some((place) => place.ng === null)) return null;
  const ng = method.reduce((sum, place) => sum + (typeof place.ng === 'number' ? place.ng : 0), 0);
  return figureText((100 * ng) / (portion.spikeNg ?? 1));
}

function spreadSentences(found: Ready): string[] {
  const { method } = found.balance;
  if (!method) return [];
  const spread =
    method.sd === null
      ? []
      : [`SD ${figureText(method.sd)}${method.rsd === null ? '' : `, RSD ${figureText(method.rsd)} %`}.`];
  const ci = intervalOf(method);
  const interval = ci ? [`Mean, ${intervalText(ci)}.`] : ['The mean has no interval.'];
  const lacking = found.incomplete.method.map(
    (item) => `${item.portion.replicate.label} is incomplete and not counted: ${item.lacks.join('; ')}.`
  );
  return [...spread, ...interval, ...lacking];
}

function subtractedSentences(found: Ready): string[] {
  const { subtracted } = found.input;
  if (!subtracted) return [];
  const what =
    subtracted.kind === 'native'
      ? 'The native amount, the mean of the unspiked portions,'
      : 'The method blank';
  return [
    `${what} is subtracted fraction by fraction; its scatter is part of the interval.`,
    ...subtracted.notes.map(sentence)
  ];
}

function endsSentences(found: Ready): string[] {
  const { ends } = found;
  if (!ends) return [];
  const parts = [
    ...(ends.low === null ? [] : [`${percentText(ends.low)} % with what is subtracted at its limit`]),
    ...(ends.high === null ? [] : [`${percentText(ends.high)} % with what was not detected at its limit`])
  ];
  return [`Something was not detected: counted as zero here; ${parts.join(', ')}.`];
}

function spikeNote(found: Ready): string | null {
  const spikes = new Set(found.input.counted.map((portion) => portion.spikeNg));
  return spikes.size > 1 ? 'mean; portions received different amounts, each is held against its own' : null;
}
