import { calibrate, type Calibration } from './calibration';
import { injectionAmount, type AmountContext, type InjectionAmount } from './injection-amount';
import { nothingMeasured, placeAmount, type PlaceAmount } from './place-amount';
import { practiceFor } from './practice';
import type { CalibrationSet, ExperimentData, ExtractReported, PanelEntry } from './types';

/** The amounts of one experiment, formed once. */
export interface ExperimentAmounts {
  readonly experiment: ExperimentData;
  readonly panel: ReadonlyMap<string, PanelEntry>;
  /** @param fractionId null: a standard that was injected as it is */
  readonly at: (entryId: string, replicateId: string, fractionId: string | null) => PlaceAmount;
  /** True when anything was reported of a replicate in a fraction, of whatever analyte. */
  readonly hasPlace: (replicateId: string, fractionId: string | null) => boolean;
  readonly calibrationOf: (entryId: string) => Calibration;
}

/** Turns everything reported in an experiment into amounts (ng), analyte by analyte and place by place. */
export function amountsOf(
  experiment: ExperimentData,
  panel: ReadonlyMap<string, PanelEntry>,
  set: CalibrationSet | null
): ExperimentAmounts {
  const nameOf = (entryId: string): string => panel.get(entryId)?.name ?? 'an analyte no longer on the panel';
  const calibrationOf = calibrationsOf(set, panel, nameOf);
  const replicates = new Map(experiment.replicates.map((replicate) => [replicate.id, replicate]));

  const contexts = new Map<string, AmountContext>();
  const contextOf = (entryId: string, replicateId: string): AmountContext | null => {
    const key = `${entryId} ${replicateId}`;
    const known = contexts.get(key);
    if (known) return known;
    const entry = panel.get(entryId);
    const replicate = replicates.get(replicateId);
    if (!entry || !replicate) return null;
    const practice = practiceFor(experiment, entry, replicate, panel);
    const made: AmountContext = {
      entry,
      replicate,
      practice,
      calibration: () => calibrationOf(entry.id),
      nameOf
    };
    contexts.set(key, made);
    return made;
  };

  const injections: Places<InjectionAmount[]> = new Map();
  const places = new Set<string>();
  for (const reported of experiment.reported) {
    const context = contextOf(reported.entryId, reported.replicateId);
    if (!context) continue;
    const place = placeKey(reported);
    places.add(place);
    const amount = injectionAmount(reported, context);
    const ofEntry = injections.get(reported.entryId);
    const ofPlace = ofEntry?.get(place);
    if (ofPlace) ofPlace.push(amount);
    else if (ofEntry) ofEntry.set(place, [amount]);
    else injections.set(reported.entryId, new Map([[place, [amount]]]));
  }
  const joined: Places<PlaceAmount> = new Map(
    [...injections].map(([entryId, ofEntry]) => [
      entryId,
      new Map([...ofEntry].map(([place, list]) => [place, placeAmount(list)]))
    ])
  );
  return {
    experiment,
    panel,
    at: (entryId, replicateId, fractionId) =>
      joined.get(entryId)?.get(placeKey({ replicateId, fractionId })) ?? nothingMeasured,
    hasPlace: (replicateId, fractionId) => places.has(placeKey({ replicateId, fractionId })),
    calibrationOf
  };
}

/** By entry, then by place. */
type Places<Thing> = Map<string, Map<string, Thing>>;

/** The line of each analyte of one set, fitted when first asked for. */
export function calibrationsOf(
  set: CalibrationSet | null,
  panel: ReadonlyMap<string, PanelEntry>,
  nameOf: (entryId: string) => string
): (entryId: string) => Calibration {
  const fitted = new Map<string, Calibration>();
  return (entryId) => {
    const known = fitted.get(entryId);
    if (known) return known;
    const entry = panel.get(entryId);
    const made: Calibration = entry
      ? calibrate(set, entry, nameOf)
      : { usable: false, set, entryId, reason: 'The analyte is not on the panel.' };
    fitted.set(entryId, made);
    return made;
  };
}

function placeKey(place: Pick<ExtractReported, 'replicateId' | 'fractionId'>): string {
  return `${place.replicateId}/${place.fractionId ?? ''}`;
}
