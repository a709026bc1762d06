import { fractionSlots } from '../../../charts/fraction-slots';
import type {
  MassBalanceFraction,
  MassBalanceRow,
  MassBalanceSegment,
  MassBalanceView
} from '../../../views/mass-balance';
import { balanceOf, type MethodFigures } from '../../amounts/method-figures';
import { fractionsOf } from '../../amounts/portions';
import type { Link } from './addresses';
import { recoveryBand, showsWholeMethod } from './criteria';
import { halfWidth, intervalOf } from './figure-parts';
import type { StudyExperiment, StudyPanelEntry } from './study-data';
import type { EntryFigures, StudyFigures } from './study-figures';
import { flaggedText } from './flagged-text';
import type { Subject } from './subject';

/** The mass balance of one experiment, with what its variant's other stages say of the rest; rows in panel order. */
export function massBalanceOf(figures: StudyFigures, subject: Subject, link: Link): MassBalanceView {
  const { experiment } = subject;
  return {
    criteria:
      experiment && !showsWholeMethod(figures.data, experiment)
        ? null
        : recoveryBand(figures.data.criteriaSet.rules),
    fractions: experiment ? fractionViews(experiment) : [],
    rows: experiment
      ? figures.targets.flatMap((entry) => {
          const found = figures.entry(experiment.id, entry.id);
          return !found.ready && found.kind === 'not spiked'
            ? []
            : [
                {
                  ...rowOf(subject, experiment, entry, found, link),
                  flagged: flaggedText(figures, experiment, entry, 'balance')
                }
              ];
        })
      : []
  };
}

function fractionViews(experiment: StudyExperiment): MassBalanceFraction[] {
  const fractions = fractionsOf(experiment);
  const slots = fractionSlots(fractions.map((fraction) => fraction.kind));
  return fractions
    .map((fraction, index) => ({
      key: fraction.id,
      name: fraction.name,
      countsAs: fraction.countsAs,
      slot: slots[index] ?? index
    }))
    .sort((a, b) => a.slot - b.slot);
}

function rowOf(
  subject: Subject,
  experiment: StudyExperiment,
  entry: StudyPanelEntry,
  found: EntryFigures,
  link: Link
): Omit<MassBalanceRow, 'flagged'> {
  const base = {
    panelEntryId: entry.id,
    name: entry.name,
    role: entry.role,
    class: entry.class ?? '',
    href: link({ kind: 'recovery', experiment: experiment.number, entry: entry.id })
  };
  if (!found.ready) {
    const nothing = {
      method: null,
      segments: [],
      downstream: null,
      open: null,
      openSignificant: false,
      total: null
    };
    return { ...base, ...nothing, verdict: null, reasons: [found.reason], incomplete: null };
  }
  const { method, balance, unaccounted } = found.balance;
  const open = subject.context?.figures.entries.get(entry.id)?.open;
  const split = open?.available ? open : null;
  const loss = split
    ? { downstream: split.downstream.estimate, open: split.open.estimate, openSignificant: split.significant }
    : {
        downstream: null,
        open: unaccounted?.estimate ?? null,
        openSignificant: unaccounted?.significant ?? false
      };
  return {
    ...base,
    ...loss,
    verdict: found.verdict,
    reasons: found.reasons,
    method: method && {
      mean: method.mean,
      n: method.n,
      halfWidth: halfWidth(intervalOf(method)),
      sd: method.sd,
      rsd: method.rsd,
      interval: intervalOf(method)
    },
    segments: segmentsOf(found, experiment, link),
    total: balance?.mean ?? null,
    incomplete: incompleteSentence(found)
  };
}

/** The fractions' means; those of the method alone where no portion is complete in all. */
function segmentsOf(found: MethodFigures, experiment: StudyExperiment, link: Link): MassBalanceSegment[] {
  const { input } = found;
  const method = input.fractions.filter((fraction) => fraction.countsAs === 'method');
  const means =
    found.balance.fractions.length > 0 || method.length === 0
      ? found.balance.fractions
      : balanceOf({ ...input, fractions: method, ...onlyMethod(input, method) }, 'zero').fractions;
  return means.map((figure) => {
    const fraction = input.fractions.find((item) => item.id === figure.name);
    return {
      fractionKey: figure.name,
      name: fraction?.name ?? figure.name,
      countsAs: figure.countsAs,
      mean: figure.mean,
      notDetected: figure.notDetected,
      href: link({
        kind: 'fraction',
        experiment: experiment.number,
        entry: input.entry.id,
        fraction: figure.name
      })
    };
  });
}

type Input = MethodFigures['input'];

function onlyMethod(input: Input, method: Input['fractions']): Pick<Input, 'replicates' | 'subtracted'> {
  const pick = (record: Input['replicates'][number]): Input['replicates'][number] =>
    Object.fromEntries(method.map((fraction) => [fraction.id, record[fraction.id] ?? null]));
  return {
    replicates: input.replicates.map(pick),
    subtracted: input.subtracted && { ...input.subtracted, native: input.subtracted.native.map(pick) }
  };
}

/** "Balance from 5 of 6: S2 lacks Aqueous layer (the cell was left empty)." */
export function incompleteSentence(found: MethodFigures): string | null {
  const lacking = found.incomplete.balance;
  if (lacking.length === 0) return null;
  const total = found.input.counted.length;
  const which = lacking
    .map((item) => `${item.portion.replicate.label} lacks ${item.lacks.join(' and ')}`)
    .join('; ');
  return `balance from ${total - lacking.length} of ${total} portions: ${which}`;
}
