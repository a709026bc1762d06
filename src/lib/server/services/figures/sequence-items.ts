import { dayText } from '../../../domain/moment-text';
import type { SequenceItem } from '../../../views/sequences';
import type { RunFindings } from '../../amounts/sequence-checks';
import type { StudyFigures } from './study-figures';

/** "Instrument 1, 16 Oct 2026" */
export function runTitle({ run }: RunFindings): string {
  const [first] = run.sequences;
  const instrument = first?.instrument ?? '';
  const day = first?.runOn ?? null;
  const named = instrument === 'not named' || instrument === 'as reported' ? 'Sequence' : instrument;
  return day === null ? `${named}, without a day` : `${named}, ${dayText(day)}`;
}

export const runHref = (figures: StudyFigures, { run }: RunFindings): string =>
  `/studies/${figures.data.code}/calibration/sequences/${run.id}`;

/** The experiments whose extracts a run holds, by number. */
export function experimentsOf(figures: StudyFigures, { run }: RunFindings): number[] {
  const ids = new Set(
    run.injections.flatMap(({ subject }) => (subject.kind === 'extract' ? [subject.experimentId] : []))
  );
  return figures.data.experiments.filter(({ id }) => ids.has(id)).map(({ number }) => number);
}

/** A run as one line of a list. */
export function sequenceItem(figures: StudyFigures, findings: RunFindings): SequenceItem {
  const { run, sets } = findings;
  const { flags } = figures.checks();
  return {
    id: run.id,
    title: runTitle(findings),
    instrument: run.sequences[0]?.instrument ?? '',
    runOn: run.sequences[0]?.runOn ?? null,
    sets: sets.map(({ set }) => ({ id: set.id, name: set.name })),
    experiments: experimentsOf(figures, findings),
    injections: run.injections.length,
    levels: run.injections.filter(({ subject }) => subject.kind === 'level').length,
    checks: run.injections.filter(({ subject }) => subject.kind === 'check').length,
    flagged: run.injections.filter(({ id }) => flags.has(id)).length,
    gaps: sets.reduce(
      (sum, { gaps }) => sum + gaps.filter(({ kind }) => kind !== 'order of the file').length,
      0
    ),
    importIds: run.sequences.map(({ importId }) => importId),
    href: runHref(figures, findings)
  };
}
