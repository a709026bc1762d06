import { spikeOf } from './spikes';
import type { ExperimentData, PanelEntry, Replicate } from './types';

/** How an analyte's response becomes an amount, by where its internal standard goes in. */
export type Practice =
  | { readonly kind: 'external' }
  | { readonly kind: 'vial'; readonly standardId: string; readonly concentration: number }
  | { readonly kind: 'extract'; readonly standardId: string; readonly amountNg: number }
  /** Added before extraction: it corrects for losses, so the amount is no absolute one. */
  | { readonly kind: 'sample'; readonly standardId: string; readonly amountNg: number | null }
  | { readonly kind: 'undeclared'; readonly standardId: string; readonly reason: string };

/** True when the entry is corrected by a standard that went through the extraction with it. */
export function isCorrectedForLosses(
  experiment: ExperimentData,
  entry: PanelEntry,
  panel: ReadonlyMap<string, PanelEntry>
): boolean {
  if (!entry.internalStandardId) return false;
  const standard = panel.get(entry.internalStandardId);
  const addition = experiment.additions.find((item) => item.entryId === entry.internalStandardId);
  return standard?.role === 'extraction internal standard' || addition?.point === 'sample';
}

/** Why an entry has no absolute amounts, in a sentence, or null when it has them. */
export function absoluteRefusal(
  experiment: ExperimentData,
  entry: PanelEntry,
  panel: ReadonlyMap<string, PanelEntry>
): string | null {
  if (!isCorrectedForLosses(experiment, entry, panel)) return null;
  const standard = panel.get(entry.internalStandardId ?? '')?.name ?? 'its standard';
  return (
    `${entry.name} is read against ${standard}, which was added before extraction and is lost along with it. That corrects ` +
    `for losses and so hides them: only a relative recovery can be given, no absolute amount, stage loss, mass balance or forecast.`
  );
}

/** The practice that applies to one entry in one replicate. */
export function practiceFor(
  experiment: ExperimentData,
  entry: PanelEntry,
  replicate: Replicate,
  panel: ReadonlyMap<string, PanelEntry>
): Practice {
  const standardId = entry.internalStandardId;
  if (!standardId) return { kind: 'external' };
  const addition = experiment.additions.find((item) => item.entryId === standardId);
  if (isCorrectedForLosses(experiment, entry, panel)) {
    const amountNg = spikeOf(experiment, replicate, standardId) ?? addition?.amountNg ?? null;
    return { kind: 'sample', standardId, amountNg };
  }
  if (addition?.point === 'vial' && addition.concentrationNgPerMl !== null) {
    return { kind: 'vial', standardId, concentration: addition.concentrationNgPerMl };
  }
  if (addition?.point === 'extract' && addition.amountNg !== null) {
    return { kind: 'extract', standardId, amountNg: addition.amountNg };
  }
  return {
    kind: 'undeclared',
    standardId,
    reason:
      `Experiment ${experiment.number} does not say how much ${panel.get(standardId)?.name ?? 'internal standard'} was added, ` +
      `nor whether to the vial or to the whole extract.`
  };
}
