import type { Setting } from '../../../amounts/validation/preparations';
import type { StudyExperiment } from '../study-data';
import type { StudyFigures } from '../study-figures';

/** The experiment as a validation reads it; a preparation without a day of its own has that of its experiment. */
export function settingOf(figures: StudyFigures, experiment: StudyExperiment): Setting {
  return {
    amounts: figures.amounts(experiment.id),
    dayOf: (replicateId) => experiment.replicateDays.get(replicateId)?.extractedOn ?? experiment.performedOn
  };
}

export function settingsOf(figures: StudyFigures, experiments: readonly StudyExperiment[]): Setting[] {
  return experiments.map((experiment) => settingOf(figures, experiment));
}
