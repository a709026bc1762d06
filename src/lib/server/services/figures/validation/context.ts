import type { ValidationPartKey } from '../../../../domain/validation-parts';
import { blankLevel, type BlankLevel } from '../../../amounts/validation/blank-levels';
import { calibrationLimit, type CalibrationLimit } from '../../../amounts/validation/calibration-limit';
import { confirmation, type Confirmation } from '../../../amounts/validation/confirmation';
import { demonstration, type Demonstration } from '../../../amounts/validation/demonstration';
import { detection, type Detection } from '../../../amounts/validation/detection';
import { netRecoveries } from '../../../amounts/validation/net-recoveries';
import { precision, type Precision, type PrecisionGroup } from '../../../amounts/validation/precision';
import { preparationOf, preparationsOf, type Setting } from '../../../amounts/validation/preparations';
import { criteriaFor } from '../criteria';
import type { StudyExperiment, StudyPanelEntry, StudyVariant } from '../study-data';
import type { StudyFigures } from '../study-figures';
import { evidenceOf, type ChosenEvidence } from './evidence';
import { settingsOf } from './settings';

/** What the blanks and unspiked portions of one experiment hold of an analyte, beside its spike. */
export interface BlanksOfExperiment {
  readonly experiment: StudyExperiment;
  readonly blanks: BlankLevel;
  readonly native: BlankLevel;
  /** Mean of what its spiked preparations received, ng; null: none did. */
  readonly spikeNg: number | null;
}

/** The validation figures of a study for one variant (or all), each formed when it is first asked for and kept. */
export interface ValidationContext {
  readonly figures: StudyFigures;
  readonly variant: StudyVariant | null;
  readonly evidence: (part: ValidationPartKey) => ChosenEvidence;
  readonly settings: (part: ValidationPartKey) => readonly Setting[];
  readonly demonstration: (entry: StudyPanelEntry) => Demonstration & { readonly refusal: string | null };
  readonly confirmation: (entry: StudyPanelEntry) => Confirmation;
  readonly detection: (entry: StudyPanelEntry) => Detection;
  readonly calibrationLimit: (entry: StudyPanelEntry) => CalibrationLimit;
  readonly precision: (entry: StudyPanelEntry) => Precision;
  readonly blanks: (entry: StudyPanelEntry) => readonly BlanksOfExperiment[];
}

const contexts = new WeakMap<StudyFigures, Map<string, ValidationContext>>();

export function validationContext(figures: StudyFigures, variant: StudyVariant | null): ValidationContext {
  const known = contexts.get(figures) ?? new Map<string, ValidationContext>();
  contexts.set(figures, known);
  const key = variant?.id ?? '';
  const context = known.get(key) ?? makeContext(figures, variant);
  known.set(key, context);
  return context;
}

function makeContext(figures: StudyFigures, variant: StudyVariant | null): ValidationContext {
  const { data } = figures;
  const evidence = remembered((part: ValidationPartKey) => evidenceOf(data, part, variant));
  const settings = remembered((part: ValidationPartKey) => settingsOf(figures, evidence(part).experiments));
  const perEntry = <Made>(make: (entry: StudyPanelEntry) => Made): ((entry: StudyPanelEntry) => Made) => {
    const made = remembered((id: string) => make(figures.entries.get(id)!)); // Only entries of this study are asked for.
    return (entry) => made(entry.id);
  };
  return {
    figures,
    variant,
    evidence,
    settings,
    demonstration: perEntry((entry) => {
      const found = evidence('demonstration').experiments.map(({ id }) => figures.entry(id, entry.id));
      const ready = found.filter((item) => item.ready).map((item) => item.input);
      const refused = found.find((item) => !item.ready);
      return {
        ...demonstration(ready, criteriaFor(data, entry).criteria),
        refusal:
          ready.length > 0 ? null : refused && !refused.ready ? refused.reason : 'no experiment stands for it'
      };
    }),
    confirmation: perEntry((entry) =>
      confirmation(preparationsOf(settings('confirmation'), entry.id, ['spiked']))
    ),
    detection: perEntry((entry) =>
      detection(
        preparationsOf(settings('detection'), entry.id, ['spiked']),
        preparationsOf(settings('detection'), entry.id, ['method blank'])
      )
    ),
    calibrationLimit: perEntry((entry) => {
      // The line of the first experiment; preparations of others may have been read by another.
      const [first] = settings('detection');
      if (!first) return { available: false, reason: 'no experiment stands for the detection limit' };
      return calibrationLimit(
        first.amounts.calibrationOf(entry.id),
        preparationsOf([first], entry.id, ['spiked'])
      );
    }),
    precision: perEntry((entry) => precision(groupsOf(figures, entry, settings('precision')))),
    blanks: perEntry((entry) =>
      evidence('blanks').experiments.map((experiment, index) => {
        const of = settings('blanks').slice(index, index + 1);
        const spikes = preparationsOf(of, entry.id, ['spiked']).flatMap(({ portion }) =>
          portion.spikeNg === null ? [] : [portion.spikeNg]
        );
        return {
          experiment,
          blanks: blankLevel(preparationsOf(of, entry.id, ['method blank'])),
          native: blankLevel(preparationsOf(of, entry.id, ['unspiked'])),
          spikeNg: spikes.length === 0 ? null : spikes.reduce((sum, ng) => sum + ng, 0) / spikes.length
        };
      })
    )
  };
}

/** Net recoveries by batch. */
function groupsOf(
  figures: StudyFigures,
  entry: StudyPanelEntry,
  settings: readonly Setting[]
): PrecisionGroup[] {
  const groups = new Map<string, PrecisionGroup>();
  for (const setting of settings) {
    const found = figures.entry(setting.amounts.experiment.id, entry.id);
    if (!found.ready) continue;
    for (const recovery of netRecoveries(found.input)) {
      const { batch, day } = preparationOf(setting, recovery.portion);
      const known = groups.get(batch.key);
      groups.set(batch.key, {
        ...batch,
        day: known?.day ?? day,
        recoveries: [...(known?.recoveries ?? []), recovery]
      });
    }
  }
  return [...groups.values()];
}

function remembered<Key, Made>(make: (key: Key) => Made): (key: Key) => Made {
  const made = new Map<Key, Made>();
  return (key) => {
    if (!made.has(key)) made.set(key, make(key));
    return made.get(key) as Made;
  };
}
