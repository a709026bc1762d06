import { figureText, percentText } from '../../../../domain/figure-text';
import { dayText } from '../../../../domain/moment-text';
import type { ProvenanceTable, ProvenanceView } from '../../../../views/provenance';
import { methodPlaces, preparationOf, type Preparation } from '../../../amounts/validation/preparations';
import type { Setting } from '../../../amounts/validation/preparations';
import { addressText, type FigureAddress, type Link } from '../addresses';
import { criteriaFor, ruleOf } from '../criteria';
import { criteriaText, sentence } from '../figure-parts';
import type { StudyPanelEntry } from '../study-data';
import type { StudyFigures } from '../study-figures';
import { variantByCode } from '../subject';
import { blankSummary, partialNotes } from '../validation/blanks-part';
import { verdictOf, whyOf } from '../validation/confirmation-part';
import { validationContext, type ValidationContext } from '../validation/context';
import { controlSeries, placeText } from '../validation/control-points';
import { detectionNotes, detectionVerdict, detectionWhy } from '../validation/detection-part';
import { duplicatesOf, rpdVerdict } from '../validation/duplicates-part';
import { recoveryFormula } from './formulas';
import { blankLevel, input, percentFigure } from './parts';
import { setAsideOf } from './recovery';
import {
  confirmationFormula,
  controlFormula,
  detectionFormula,
  duplicateFormula,
  precisionFormula
} from './validation-formulas';

type ValidationAddress = Extract<FigureAddress, { readonly variant: string; readonly entry: string }> & {
  readonly kind: 'demonstration' | 'confirmation' | 'detection' | 'precision' | 'blanks' | 'control';
};

/**
 * Where a figure of the validation comes from: its preparations, batch by batch, each leading to its amounts and so to the cells.
 * @throws NotFound for a variant that the study does not have
 */
export function validationProvenance(
  figures: StudyFigures,
  address: ValidationAddress,
  entry: StudyPanelEntry,
  link: Link
): ProvenanceView {
  const variant = address.variant === '-' ? null : variantByCode(figures, address.variant);
  const context = validationContext(figures, variant);
  const base = {
    ...blankLevel,
    address: addressText(address),
    panelEntryId: entry.id
  };
  return { ...base, ...viewOf(context, address.kind, entry, link) };
}

type Own = Omit<Partial<ProvenanceView>, 'address' | 'panelEntryId'> & Pick<ProvenanceView, 'title'>;

function viewOf(
  context: ValidationContext,
  kind: ValidationAddress['kind'],
  entry: StudyPanelEntry,
  link: Link
): Own {
  switch (kind) {
    case 'demonstration':
      return demonstrationView(context, entry, link);
    case 'confirmation':
      return confirmationView(context, entry, link);
    case 'detection':
      return detectionView(context, entry, link);
    case 'precision':
      return precisionView(context, entry, link);
    case 'blanks':
      return blanksView(context, entry, link);
    case 'control':
      return controlView(context, entry, link);
  }
}

function evidenceSentence(
  context: ValidationContext,
  part: Parameters<ValidationContext['evidence']>[0]
): string {
  const { state, sentence: said } = context.evidence(part).view;
  return state === 'suggested' ? `Suggested, not chosen. ${said}` : said;
}

function demonstrationView(context: ValidationContext, entry: StudyPanelEntry, link: Link): Own {
  const { figures } = context;
  const found = context.demonstration(entry);
  const { criteria } = criteriaFor(figures.data, entry);
  const settings = context.settings('demonstration');
  const inputs = context
    .evidence('demonstration')
    .experiments.map(({ id }) => figures.entry(id, entry.id))
    .filter((of) => of.ready)
    .map((of) => of.input);
  const subtracts = inputs.some(({ subtracted }) => subtracted !== null);
  const several = inputs.some(
    ({ fractions }) => fractions.filter(({ countsAs }) => countsAs === 'method').length > 1
  );
  const items = found.recoveries.flatMap(({ portion, percent }) => {
    const setting = settingWith(settings, portion.replicate.id);
    return setting ? [{ preparation: preparationOf(setting, portion), value: percentText(percent) }] : [];
  });
  return {
    title: `${entry.name}, initial demonstration`,
    figure:
      found.figures &&
      percentFigure(found.figures, found.recoveries.length, criteria ? [criteria.low, criteria.high] : []),
    missing: found.figures ? null : (found.refusal ?? found.reasons.join('; ')),
    verdict: { verdict: found.verdict, detail: found.reasons.join('; ') },
    ...recoveryFormula(subtracts, several),
    sentences: [
      evidenceSentence(context, 'demonstration'),
      `Held against ${criteriaText(criteria)}.`,
      ...(found.figures?.rsd == null ? [] : [`RSD ${figureText(found.figures.rsd)} %.`])
    ],
    inputs: context.evidence('demonstration').experiments.map(({ number, title }) =>
      input(`Method recovery in experiment ${number}`, title, '', {
        href: link({ kind: 'recovery', experiment: number, entry: entry.id })
      })
    ),
    tables: [preparationTable('Net recoveries, preparation by preparation', '%', items, entry, link)]
  };
}

function confirmationView(context: ValidationContext, entry: StudyPanelEntry, link: Link): Own {
  const found = context.confirmation(entry);
  const { figures: of } = found;
  const spike = found.spikeNg;
  return {
    title: `${entry.name}, quantitation limit`,
    figure: of && {
      value: `${percentText(of.lower, [50])} to ${percentText(of.upper, [150])}`,
      unit: '% of the spike',
      halfWidth: null,
      level: null,
      n: String(found.counted.length)
    },
    missing: found.refusal,
    verdict: { verdict: verdictOf(found), detail: whyOf(found) },
    ...confirmationFormula,
    sentences: [
      evidenceSentence(context, 'confirmation'),
      'Nothing is subtracted. The bounds are mean ± HR in percent of what was spiked, to lie within 50 to 150 % (EPA Method 539, Table 11).'
    ],
    inputs: [
      input('Spiked at', spike, 'ng'),
      ...(found.spikeNgPerL === null ? [] : [input('Spiked at', found.spikeNgPerL, 'ng/L')]),
      ...(of
        ? [
            input('Mean', percentText(of.mean), '%'),
            input('RSD', of.rsd, '%'),
            input('Half-range, HR', percentText(of.halfRange), '% of the spike')
          ]
        : [])
    ],
    tables: [
      preparationTable(
        'Preparations at the proposed limit',
        '% of the spike',
        found.preparations.map((preparation) => ({
          preparation,
          value:
            preparation.found.state === 'amount' && preparation.portion.spikeNg
              ? percentText((100 * preparation.found.ng) / preparation.portion.spikeNg)
              : foundText(preparation)
        })),
        entry,
        link
      )
    ],
    setAside: setAsideOf(found.preparations.map(({ portion }) => portion))
  };
}

function detectionView(context: ValidationContext, entry: StudyPanelEntry, link: Link): Own {
  const found = context.detection(entry);
  const line = context.calibrationLimit(entry);
  const inUnit = (preparation: Preparation): string | null => {
    const { found: sum, portion } = preparation;
    const volume = portion.replicate.sampleVolumeMl;
    if (sum.state !== 'amount') return foundText(preparation);
    return figureText(found.unit === 'ng/L' && volume !== null ? (1000 * sum.ng) / volume : sum.ng, 4);
  };
  const table = (caption: string, preparations: readonly Preparation[]): ProvenanceTable =>
    preparationTable(
      caption,
      found.unit,
      preparations.map((preparation) => ({ preparation, value: inUnit(preparation) })),
      entry,
      link
    );
  const experiment = context.evidence('detection').experiments[0];
  return {
    title: `${entry.name}, method detection limit`,
    figure:
      found.mdl === null
        ? null
        : {
            value: figureText(found.mdl),
            unit: found.unit,
            halfWidth: null,
            level: null,
            n: `${found.countedSpiked.length} spiked, ${found.countedBlanks.length} blanks`
          },
    missing: found.refusal,
    verdict: { verdict: detectionVerdict(found), detail: detectionWhy(found) },
    ...detectionFormula,
    sentences: [
      evidenceSentence(context, 'detection'),
      ...(found.rule === '' ? [] : [sentence(found.rule)]),
      'Some blanks without a number: MDLb is the highest of the others. None with a number: MDLb does not apply. 40 CFR 136, Appendix B, revision 2.',
      ...found.conditions.map(({ what, found: how, holds }) =>
        sentence(`${what}: ${how}${holds ? '' : ', not met'}`)
      ),
      ...detectionNotes(context, entry).map(sentence)
    ],
    inputs: [
      input('MDLs, from the spiked', found.fromSpiked, found.unit),
      input('MDLb, from the blanks', found.fromBlanks, found.unit, {
        note: `${found.numericBlanks} of ${found.countedBlanks.length} blanks gave a number`
      }),
      input('Spike', found.spike, found.unit),
      ...(found.mdl === null || found.ngPerUnit === null || found.unit === 'ng'
        ? []
        : [input('MDL in the preparation', found.mdl * found.ngPerUnit, 'ng')]),
      ...(line.available
        ? [
            input(
              'From the calibration line, 3.3 σ/b',
              line.lodNgPerL ?? line.lodNg ?? line.lod,
              lineUnit(line),
              {
                note: `σ ${figureText(line.sigma)} at the lowest level ${figureText(line.lowest)}, slope ${figureText(line.slope)}; the instrument alone`,
                href: experiment
                  ? link({ kind: 'calibration', experiment: experiment.number, entry: entry.id })
                  : null
              }
            )
          ]
        : [input('From the calibration line', null, '', { note: line.reason })])
    ],
    tables: [table('Spiked preparations', found.spiked), table('Method blanks', found.blanks)],
    setAside: setAsideOf([...found.spiked, ...found.blanks].map(({ portion }) => portion))
  };
}

function lineUnit(line: { readonly lodNgPerL: number | null; readonly lodNg: number | null }): string {
  if (line.lodNgPerL !== null) return 'ng/L';
  return line.lodNg === null ? 'on the scale of the line' : 'ng';
}

function precisionView(context: ValidationContext, entry: StudyPanelEntry, link: Link): Own {
  const found = context.precision(entry);
  const { components: of } = found;
  const settings = context.settings('precision');
  const items = found.groups.flatMap(({ recoveries }) =>
    recoveries.flatMap(({ portion, percent }) => {
      const setting = settingWith(settings, portion.replicate.id);
      return setting ? [{ preparation: preparationOf(setting, portion), value: percentText(percent) }] : [];
    })
  );
  const rule = ruleOf(context.figures.data.criteriaSet.rules, 'relative standard deviation');
  return {
    title: `${entry.name}, precision over batches`,
    figure:
      of?.intermediateRsd == null
        ? null
        : {
            value: percentText(of.intermediateRsd),
            unit: '% of the mean',
            halfWidth: null,
            level: null,
            n: String(found.n)
          },
    missing: found.refusal,
    ...precisionFormula,
    sentences: [
      evidenceSentence(context, 'precision'),
      'One-way analysis of variance over batches; ISO 5725-2 and 5725-3, from memory.',
      ...(of?.note ? [of.note] : []),
      rule?.high == null
        ? 'The study has no rule for the relative standard deviation.'
        : `Repeatability is held against at most ${rule.high} %, ${rule.citation}; intermediate precision against nothing.`
    ],
    inputs: of
      ? [
          input('Mean', percentText(of.mean), '%'),
          input('Repeatability SD, s_r', of.repeatabilitySd, 'points'),
          input('SD between batches, s_b', of.betweenSd, 'points'),
          input('Intermediate SD, s_I', of.intermediateSd, 'points'),
          input('Degrees of freedom of s_I (Satterthwaite)', found.df, ''),
          input('F', of.f, ''),
          input('p', of.p, '')
        ]
      : [],
    tables: [preparationTable('Net recoveries, batch by batch', '%', items, entry, link)]
  };
}

function blanksView(context: ValidationContext, entry: StudyPanelEntry, link: Link): Own {
  const found = context.blanks(entry);
  const summary = blankSummary(context, entry);
  const all = found.flatMap(({ blanks, native }) => [...blanks.preparations, ...native.preparations]);
  const table = (caption: string, preparations: readonly Preparation[]): ProvenanceTable[] =>
    preparations.length === 0
      ? []
      : [
          preparationTable(
            caption,
            'ng',
            preparations.map((preparation) => ({
              preparation,
              value:
                preparation.found.state === 'amount'
                  ? figureText(preparation.found.ng)
                  : foundText(preparation)
            })),
            entry,
            link
          )
        ];
  return {
    title: `${entry.name}, blanks and native level`,
    figure:
      summary.percentOfSpike === null
        ? null
        : {
            value: percentText(summary.percentOfSpike),
            unit: '% of the spike, mean blank',
            halfWidth: null,
            level: null,
            n: String(summary.blanks)
          },
    missing: summary.percentOfSpike === null ? 'No method blank beside a spike counts.' : null,
    verdict: { verdict: summary.verdict, detail: summary.why },
    sentences: [
      evidenceSentence(context, 'blanks'),
      'Summed over the fractions that count for the method, not detected as zero; the least favourable of the experiments stands.',
      ...partialNotes(found).map(sentence)
    ],
    inputs: [
      input('Blanks that gave a number', `${summary.foundIn} of ${summary.blanks}`, ''),
      input('Highest blank', summary.highestNg, 'ng'),
      input('Mean blank over the method detection limit', summary.overLimit, '', {
        href: link({ kind: 'detection', variant: context.variant?.code ?? '-', entry: entry.id })
      }),
      input('Native amount over the spike', summary.nativeRatio, '')
    ],
    tables: [
      ...table(
        'Method blanks',
        found.flatMap(({ blanks }) => blanks.preparations)
      ),
      ...table(
        'Unspiked portions',
        found.flatMap(({ native }) => native.preparations)
      )
    ],
    setAside: setAsideOf(all.map(({ portion }) => portion))
  };
}

function controlView(context: ValidationContext, entry: StudyPanelEntry, link: Link): Own {
  const series = controlSeries(context).find((item) => item.entry.id === entry.id);
  if (!series) {
    return { title: `${entry.name}, over time`, missing: 'Nothing of it was followed over time.' };
  }
  const { control } = series;
  const { limits } = control;
  return {
    title: `${entry.name}, over time`,
    figure: limits && {
      value: percentText(limits.centre),
      unit: '%, mean',
      halfWidth: null,
      level: null,
      n: String(control.n)
    },
    missing: series.refusal ?? (control.n === 0 ? 'No point has a figure.' : null),
    ...controlFormula,
    sentences: [
      evidenceSentence(context, 'control'),
      entry.role === 'surrogate'
        ? 'Percent of the amount added, nothing subtracted.'
        : 'Area over the concentration in the vial, in percent of the mean of the same over the levels of the calibration.',
      ...(control.enough ? [] : [`${control.n} points: too few to use limits of one's own.`])
    ],
    inputs: limits
      ? [
          input('s', control.sd, 'points'),
          input(
            'Mean ± 2 s',
            `${percentText(limits.warning.lower)} to ${percentText(limits.warning.upper)}`,
            '%'
          ),
          input(
            'Mean ± 3 s',
            `${percentText(limits.action.lower)} to ${percentText(limits.action.upper)}`,
            '%'
          )
        ]
      : [],
    tables: [
      {
        caption: 'Points in the order they were measured',
        columns: [
          { key: 'place', label: 'Where', unit: null },
          { key: 'value', label: 'Value', unit: '%' }
        ],
        rows: series.points.map((point) => ({
          key: point.key,
          label: point.label,
          cells: [
            { text: placeText(point), href: null, note: null },
            {
              text: point.value === null ? null : percentText(point.value),
              href:
                point.opensEntry === null || point.fractionId === null
                  ? null
                  : link({
                      kind: 'amount',
                      experiment: point.experiment,
                      entry: point.opensEntry,
                      replicate: point.replicateId,
                      fraction: point.fractionId
                    }),
              note: point.value === null ? point.reason : null
            }
          ],
          setAside: point.counted || point.value === null ? null : (point.reason ?? 'not counted')
        }))
      }
    ]
  };
}

/** Two preparations declared duplicates; null for a pair that the study does not have. */
export function duplicateProvenance(
  figures: StudyFigures,
  pairId: string,
  entry: StudyPanelEntry,
  link: Link
): ProvenanceView | null {
  const pair = figures.data.duplicatePairs.find(({ id }) => id === pairId);
  const found = pair && duplicatesOf(figures, pair, entry);
  if (!pair || !found) return null;
  const rule = ruleOf(figures.data.criteriaSet.rules, 'duplicate difference');
  const limits = rule?.high == null ? [] : [rule.high];
  return {
    ...blankLevel,
    address: addressText({ kind: 'duplicate', pair: pairId, entry: entry.id }),
    panelEntryId: entry.id,
    title: `${entry.name}, duplicates`,
    figure:
      found.rpd === null
        ? null
        : { value: percentText(found.rpd, limits), unit: '%', halfWidth: null, level: null, n: null },
    missing: found.refusal,
    verdict: { verdict: rpdVerdict(found, rule), detail: '' },
    ...duplicateFormula,
    sentences: [
      `Declared duplicates by ${pair.by}, ${dayText(pair.at)}: ${sentence(pair.reason)}`,
      'On what was found, nothing subtracted. EPA Method 625.1, 8.3.',
      rule?.high == null
        ? 'The study has no rule for the difference of duplicates.'
        : `Held against at most ${rule.high} %, ${rule.citation}.`
    ],
    tables: [
      preparationTable(
        'The two preparations',
        found.unit,
        [found.first, found.second].map((preparation, index) => {
          const value = found.values[index] ?? null;
          return { preparation, value: value === null ? foundText(preparation) : figureText(value, 4) };
        }),
        entry,
        link
      )
    ],
    setAside: setAsideOf([found.first.portion, found.second.portion])
  };
}

function settingWith(settings: readonly Setting[], replicateId: string): Setting | null {
  return (
    settings.find(({ amounts }) => amounts.experiment.replicates.some(({ id }) => id === replicateId)) ?? null
  );
}

function foundText({ found }: Preparation): string | null {
  return found.state === 'not detected' ? `<${figureText(found.belowNg)} ng` : null;
}

/** Preparations with batch and day, what each fraction of the method holds (leading to its cells), and the value that counts. */
function preparationTable(
  caption: string,
  unit: string,
  items: readonly { readonly preparation: Preparation; readonly value: string | null }[],
  entry: StudyPanelEntry,
  link: Link
): ProvenanceTable {
  const fractions = [
    ...new Set(
      items.flatMap(({ preparation }) =>
        methodPlaces(preparation.portion).map(({ fraction }) => fraction.name)
      )
    )
  ];
  return {
    caption,
    columns: [
      { key: 'batch', label: 'Batch', unit: null },
      { key: 'day', label: 'Date', unit: null },
      ...fractions.map((name) => ({ key: name, label: name, unit: 'ng' })),
      { key: 'value', label: 'Counts as', unit }
    ],
    rows: items.map(({ preparation, value }) => {
      const { portion, found, setting } = preparation;
      const { experiment } = setting.amounts;
      return {
        key: portion.replicate.id,
        label: portion.replicate.label,
        cells: [
          { text: preparation.batch.label, href: null, note: null },
          { text: preparation.day === null ? null : dayText(preparation.day), href: null, note: null },
          ...fractions.map((name) => {
            const place = methodPlaces(portion).find(({ fraction }) => fraction.name === name);
            if (!place) return { text: null, href: null, note: null };
            const { amount } = place.found;
            return {
              text:
                amount.state === 'amount'
                  ? figureText(amount.ng)
                  : amount.state === 'not detected'
                    ? `<${figureText(amount.belowNg)}`
                    : null,
              href:
                place.found.used.length + place.found.unused.length > 0
                  ? link({
                      kind: 'amount',
                      experiment: experiment.number,
                      entry: entry.id,
                      replicate: portion.replicate.id,
                      fraction: place.fraction.id
                    })
                  : null,
              note: null
            };
          }),
          { text: value, href: null, note: found.state === 'incomplete' ? found.reason : null }
        ],
        setAside: portion.exclusion?.cause ?? null
      };
    })
  };
}
