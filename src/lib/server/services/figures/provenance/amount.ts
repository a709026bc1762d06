import { figureText } from '../../../../domain/figure-text';
import type { ProvenanceInput, ProvenanceView } from '../../../../views/provenance';
import type { AmountTrace, InjectionAmount } from '../../../amounts/injection-amount';
import { portionOf } from '../../../amounts/portions';
import { addressText, type Link } from '../addresses';
import { sentence } from '../figure-parts';
import { injectionInput, injectionSentences } from './injections';
import type { StudyExperiment, StudyPanelEntry } from '../study-data';
import type { StudyFigures } from '../study-figures';
import { amountFormulas } from './formulas';
import { blankLevel, choiceText, input, sourceCell } from './parts';
import { setAsideOf } from './recovery';

interface Place {
  readonly replicate: string;
  readonly fraction: string;
}

/** One amount: equation, factors, the line and the cells of the injections it was formed from. */
export function amountProvenance(
  figures: StudyFigures,
  experiment: StudyExperiment,
  entry: StudyPanelEntry,
  { replicate: replicateId, fraction: fractionId }: Place,
  link: Link
): ProvenanceView | null {
  const replicate = experiment.replicates.find((item) => item.id === replicateId);
  if (!replicate) return null;
  const portion = portionOf(figures.amounts(experiment.id), entry.id, replicate);
  const place = portion.places.find((item) => item.fraction.id === fractionId);
  if (!place) return null;
  const { amount, used, unused, notes } = place.found;
  const [first] = used;
  const trace = first && 'trace' in first ? first.trace : null;
  const relative = trace?.formula === 'standard in the sample';
  const address = {
    kind: 'amount',
    experiment: experiment.number,
    entry: entry.id,
    replicate: replicateId,
    fraction: fractionId
  } as const;
  const value =
    amount.state === 'amount'
      ? figureText(amount.ng, 4)
      : amount.state === 'not detected'
        ? `<${figureText(amount.belowNg, 4)}`
        : null;
  const share =
    portion.spikeNg !== null && amount.state === 'amount'
      ? `${figureText((100 * amount.ng) / portion.spikeNg, 4)} % of the ${figureText(portion.spikeNg)} ng that ${replicate.label} received.`
      : null;
  return {
    ...blankLevel,
    address: addressText(address),
    panelEntryId: entry.id,
    title: `${entry.name} in ${replicate.label}, ${place.fraction.name.toLowerCase()}`,
    figure:
      value === null
        ? null
        : { value, unit: relative ? 'ng, relative' : 'ng', halfWidth: null, level: null, n: null },
    missing: 'reason' in amount ? amount.reason : null,
    ...(trace ? amountFormulas[trace.formula] : {}),
    sentences: [
      ...(share ? [share] : []),
      ...(amount.state === 'not detected' ? ['Not detected: counted as zero, and at this limit.'] : []),
      ...notes.map(sentence),
      ...injectionSentences(figures, entry, used)
    ],
    inputs: used.flatMap((item) => inputsOf(figures, experiment, entry, item, used.length > 1, link)),
    cells: [...used, ...unused].map((item) =>
      sourceCell(figures, 'trace' in item ? item.trace.reported : item.reported)
    ),
    setAside: setAsideOf([portion]),
    up: {
      label: entry.role === 'surrogate' ? 'Surrogate' : 'Method recovery',
      href: link({
        kind: entry.role === 'surrogate' ? 'surrogate' : relative ? 'relative' : 'recovery',
        experiment: experiment.number,
        entry: entry.id
      })
    }
  };
}

function inputsOf(
  figures: StudyFigures,
  experiment: StudyExperiment,
  entry: StudyPanelEntry,
  item: InjectionAmount,
  several: boolean,
  link: Link
): ProvenanceInput[] {
  if (!('trace' in item)) return [];
  const { trace } = item;
  const nameOf = (id: string): string => figures.entries.get(id)?.name ?? 'internal standard';
  const { reported, practice } = trace;
  const inputs: ProvenanceInput[] = [];
  const add = (...given: Parameters<typeof input>): void => void inputs.push(input(...given));
  if (several)
    add('Injection', String(reported.injection), '', {
      note: item.state === 'amount' ? `${figureText(item.ng, 5)} ng` : null
    });
  if (reported.basis === 'area') {
    add('Area', reported.value ?? reported.limit ?? reported.rawText, '', {
      note: trace.limitSource === 'reported' ? 'the limit given' : null
    });
    if (reported.internalArea !== null && practice.kind !== 'external') {
      add('Area of its internal standard', reported.internalArea, '', { note: nameOf(practice.standardId) });
    }
    if (practice.kind !== 'external' && trace.response !== null) add('Area ratio', trace.response, '');
    const line = trace.calibration;
    add(
      practice.kind === 'external' ? 'Concentration in the vial, x' : 'Ratio of concentrations, q',
      trace.x,
      practice.kind === 'external' ? 'ng/mL' : '',
      {
        note: line
          ? `${line.set.name}: ${choiceText(line.choice)}${trace.limitSource === 'lowest level' ? '; lowest level' : ''}`
          : null,
        href: line ? link({ kind: 'calibration', experiment: experiment.number, entry: entry.id }) : null
      }
    );
  } else {
    const unit = { vial: 'ng/mL in the vial', ng: 'ng', ng_per_l: 'ng/L of sample' }[reported.basis];
    if (trace.limitSource === 'lowest level') add('Lowest calibration level', trace.x, unit);
    else add('As reported', trace.x, unit);
  }
  factorsOf(trace).forEach((given) => add(...given));
  return [...inputs, ...injectionInput(figures, reported)];
}

function factorsOf(trace: AmountTrace): Parameters<typeof input>[] {
  const { practice } = trace;
  return [
    ...(trace.formula === 'standard in the vial' && practice.kind === 'vial'
      ? [['Internal standard in the vial, c_is', practice.concentration, 'ng/mL'] as Parameters<typeof input>]
      : []),
    ...(trace.formula === 'standard in the extract' && practice.kind === 'extract'
      ? [
          ['Internal standard in the whole extract, m_is', practice.amountNg, 'ng'] as Parameters<
            typeof input
          >
        ]
      : []),
    ...(trace.formula === 'standard in the sample' && practice.kind === 'sample'
      ? [['Extraction standard added, m_added', practice.amountNg, 'ng'] as Parameters<typeof input>]
      : []),
    ...factor('Dilution of the vial, DF', trace.dilution, ''),
    ...factor('Final volume, V', trace.finalVolumeMl, 'mL'),
    ...factor('Share of the fraction in the extract, a', trace.aliquotShare, ''),
    ...factor('Sample volume', trace.sampleVolumeMl, 'mL')
  ];
}

function factor(label: string, value: number | null, unit: string): Parameters<typeof input>[] {
  return value === null ? [] : [[label, value, unit]];
}
