import type { ExperimentAmounts } from '../amounts/experiment-amounts';
import type { InjectionAmount } from '../amounts/injection-amount';

/** One injection that was read on a line: where, and on which side of the range. */
export interface ReadInjection {
  /** Of the measurement, so that the same one can be found again. */
  readonly id: string;
  /** Null where it lies above the range or on no line: it has no amount. */
  readonly x: number | null;
  readonly side: 'inside' | 'below' | 'above' | 'unreadable';
}

/** The injections of one analyte in one experiment whose areas go through a line. */
export function injectionsRead(amounts: ExperimentAmounts, entryId: string): readonly ReadInjection[] {
  const places = new Map(
    amounts.experiment.reported
      .filter((item) => item.entryId === entryId)
      .map(({ replicateId, fractionId }) => [
        `${replicateId} ${fractionId ?? ''}`,
        { replicateId, fractionId }
      ])
  );
  return [...places.values()].flatMap(({ replicateId, fractionId }) => {
    const { used, unused } = amounts.at(entryId, replicateId, fractionId);
    return [...used, ...unused].flatMap(readInjection);
  });
}

function readInjection(item: InjectionAmount): ReadInjection[] {
  if (item.state === 'missing') return [];
  if (item.state === 'above range') {
    // Reported as above by the instrument: no line has read it.
    return item.reported.state === 'above' ? [] : [{ id: item.reported.id, x: null, side: 'above' }];
  }
  if (item.state === 'refused') {
    return item.reported.basis === 'area' ? [{ id: item.reported.id, x: null, side: 'unreadable' }] : [];
  }
  if (item.state !== 'amount' || item.trace.calibration === null) return [];
  return [
    { id: item.trace.reported.id, x: item.trace.x, side: item.trace.extrapolated ? 'below' : 'inside' }
  ];
}
