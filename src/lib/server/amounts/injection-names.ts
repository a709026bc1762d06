import type { Run } from './sequence-runs';
import type { InjectionSubject, SequenceInput } from './sequence-types';

/** How the injections of a run are named in sentences and lists. */
export interface InjectionNames {
  /** The label of the sample column: "S4, Elution 1", "L3", "CCV". */
  readonly label: (injectionId: string) => string;
  /** The label, and where it was run more than once when or which of them: "CCV at 14:20", "CCV, injection 2". */
  readonly of: (injectionId: string) => string;
}

export function injectionNames(run: Run, input: SequenceInput): InjectionNames {
  const labels = new Map(run.injections.map(({ id, subject }) => [id, labelOf(subject, input)]));
  const times = new Map<string, number>();
  for (const label of labels.values()) times.set(label, (times.get(label) ?? 0) + 1);
  const counted = new Map<string, number>();
  const names = new Map<string, string>();
  for (const { id, runAt, subject } of run.injections) {
    const label = labels.get(id) ?? '';
    const number = (counted.get(label) ?? 0) + 1;
    counted.set(label, number);
    const isAlone = (times.get(label) ?? 0) === 1;
    const isCheck = subject.kind === 'check' || subject.kind === 'blank';
    if (run.orderedBy === 'time' && runAt !== null && isCheck) names.set(id, `${label} at ${clock(runAt)}`);
    else names.set(id, isAlone ? label : `${label}, injection ${number}`);
  }
  return {
    label: (id) => labels.get(id) ?? 'an injection',
    of: (id) => names.get(id) ?? 'an injection'
  };
}

function labelOf(subject: InjectionSubject, input: SequenceInput): string {
  switch (subject.kind) {
    case 'extract': {
      const experiment = input.experiments.find(({ id }) => id === subject.experimentId);
      const portion =
        experiment?.replicates.find(({ id }) => id === subject.replicateId)?.label ?? 'a portion';
      const fraction = experiment?.fractions.find(({ id }) => id === subject.fractionId)?.name;
      return fraction && (experiment?.fractions.length ?? 0) > 1 ? `${portion}, ${fraction}` : portion;
    }
    case 'level':
      return (
        input.sets
          .find(({ id }) => id === subject.calibrationSetId)
          ?.levels.find(({ id }) => id === subject.levelId)?.label ?? 'a level'
      );
    default:
      return input.checkStandards.find(({ id }) => id === subject.checkStandardId)?.label ?? 'a check';
  }
}

/** "14:20", in the instrument's own time. */
function clock(moment: number): string {
  const at = new Date(moment);
  const two = (value: number): string => String(value).padStart(2, '0');
  return `${two(at.getUTCHours())}:${two(at.getUTCMinutes())}`;
}
