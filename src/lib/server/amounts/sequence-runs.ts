import type { Sequence, SequenceInjection } from './sequence-types';

/** One run of an instrument, in the order it ran. */
export interface Run {
  /** That of its first sequence. */
  readonly id: string;
  readonly sequences: readonly Sequence[];
  readonly injections: readonly SequenceInjection[];
  /** time: by the moments the instrument gave; file: as the rows stand, since some moments are missing. */
  readonly orderedBy: 'time' | 'file';
}

/** The calibration set that an injection is read by; null: none is named. */
export type SetOf = (injection: SequenceInjection) => string | null;

/**
 * Puts sequences into runs, and the injections of each in order.
 *
 * A sequence is what one import brought of one instrument. Where every injection of it has a moment, these order it, else the rows of
 * the file do. Two sequences are one run where their moments overlap and they have a calibration set in common: so a single
 * vial that is read anew and brought by a later file keeps its place between the checks of its day, while another day's
 * checks never bracket it. A sequence without moments always stands alone.
 *
 * @param injections those that count; sequences left without any are no runs
 */
export function runsOf(
  sequences: readonly Sequence[],
  injections: readonly SequenceInjection[],
  setOf: SetOf
): Run[] {
  const bySequence = new Map<string, SequenceInjection[]>();
  for (const injection of injections) {
    const own = bySequence.get(injection.sequenceId);
    if (own) own.push(injection);
    else bySequence.set(injection.sequenceId, [injection]);
  }
  const parts = sequences.flatMap((sequence) => {
    const own = bySequence.get(sequence.id);
    return own ? [partOf(sequence, own, setOf)] : [];
  });
  const runs: Part[][] = [];
  for (const part of parts) {
    const meeting = runs.filter((run) => run.some((other) => meet(part, other)));
    for (const run of meeting) runs.splice(runs.indexOf(run), 1);
    runs.push([...meeting.flat(), part]);
  }
  return runs.map(runOf).sort((a, b) => startOf(a) - startOf(b));
}

interface Part {
  readonly sequence: Sequence;
  readonly injections: readonly SequenceInjection[];
  readonly sets: ReadonlySet<string>;
  /** null: some injection has no moment. */
  readonly span: readonly [number, number] | null;
}

function partOf(sequence: Sequence, injections: readonly SequenceInjection[], setOf: SetOf): Part {
  const moments = injections.map(({ runAt }) => runAt).filter((moment) => moment !== null);
  return {
    sequence,
    injections,
    sets: new Set(injections.map(setOf).filter((set) => set !== null)),
    span: moments.length === injections.length ? [Math.min(...moments), Math.max(...moments)] : null
  };
}

function meet(a: Part, b: Part): boolean {
  if (!a.span || !b.span || a.span[0] > b.span[1] || b.span[0] > a.span[1]) return false;
  return [...a.sets].some((set) => b.sets.has(set));
}

function runOf(parts: readonly Part[]): Run {
  const [first] = parts;
  if (!first) throw new Error('a run has a sequence');
  const timed = parts.every(({ span }) => span !== null);
  const rank = new Map(parts.map(({ sequence }, index) => [sequence.id, index]));
  const injections = parts
    .flatMap((part) => part.injections)
    .sort(
      (a, b) =>
        (timed ? (a.runAt ?? 0) - (b.runAt ?? 0) : 0) ||
        (rank.get(a.sequenceId) ?? 0) - (rank.get(b.sequenceId) ?? 0) ||
        a.position - b.position
    );
  return {
    id: first.sequence.id,
    sequences: parts.map(({ sequence }) => sequence),
    injections,
    orderedBy: timed ? 'time' : 'file'
  };
}

/** By its first moment or, without moments, by its day; what has neither keeps the order it was stored in, last. */
function startOf({ injections, sequences }: Run): number {
  const moment = injections.find(({ runAt }) => runAt !== null)?.runAt ?? null;
  if (moment !== null) return moment;
  const day = sequences[0]?.runOn ?? null;
  return day === null ? Number.MAX_SAFE_INTEGER : Date.parse(day);
}
