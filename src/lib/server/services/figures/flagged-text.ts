import { flagsText, type FlaggedPart } from '../../amounts/figure-flags';
import type { StudyExperiment, StudyPanelEntry } from './study-data';
import type { StudyFigures } from './study-figures';

/** What the method recovery of an entry, or its balance, rests on that the checks of its sequence put in doubt, as a clause; null: nothing. */
export function flaggedText(
  figures: StudyFigures,
  experiment: Pick<StudyExperiment, 'id'>,
  entry: Pick<StudyPanelEntry, 'id'>,
  part: FlaggedPart = 'method'
): string | null {
  const flags = figures.flagged(experiment.id, entry.id, part);
  return flags && flagsText(flags);
}

/** The same of a surrogate, over all portions that received it. */
export function flaggedSurrogateText(
  figures: StudyFigures,
  experiment: Pick<StudyExperiment, 'id'>,
  entry: Pick<StudyPanelEntry, 'id'>
): string | null {
  const flags = figures.flaggedSurrogate(experiment.id, entry.id);
  return flags && flagsText(flags);
}
